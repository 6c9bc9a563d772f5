// Package ledger keeps a record of every check, in one SQLite file or in one
// PostgreSQL database that many benches share. A record cannot be changed: a
// retest is a new one, and each record carries the hash of the one before it
// from the same station, so that a record altered, taken out, moved or put in
// twice is found.
//
// The usual order of calls:
//
//  1. [Open] opens a ledger and makes it where there is none.
//  2. [FromAnswer] turns an answer into a [Record]; the caller adds station, lot,
//     operator and the sheets that were used.
//  3. [Ledger.Append] writes it and says under which sequence and hash; where many
//     are at hand, [Ledger.AppendAll] writes them in one transaction.
//  4. [Ledger.List], [Ledger.Show] and [Ledger.Each] read, [Ledger.Verify] proves.
//  5. [Ledger.Close].
//
// # What is written, and when
//
// Append returns once the record is on the disk (SQLite: write-ahead log with full
// sync; PostgreSQL: synchronous commit). A record whose [Receipt] was returned
// outlives the end of the process and of the power. Where Append returns an error
// the record is not in the ledger, but for an error that says it is not known.
//
// # The record and its hash
//
// A record is stored as the bytes of one JSON object, the body, with no white
// space between its tokens and its fields in this order:
//
//	schema    "padproof.record.1"
//	station   the station's name
//	sequence  1 for a station's first record, then one more each time
//	previous  the hash of the record before, "" for the first
//	time      UTC, as 2026-11-30T14:05:09.123456Z
//	kind      "check" or "rigcheck"
//	verdict   PASS, FAIL or UNPROVEN
//	unit      the serial number, "" where not known
//	lot       "" where none was given
//	drawing   {"name": the pad's name, "sha256": of the drawing's sheet}, "" each where none
//	operator  "" where none was given
//	tool      the version of padproof
//	simulated true where a take says that it is
//	options   {"name":"value"}: what the command line added to the sheets, names sorted
//	files     [{"role","file","sha256","text"}]: the sheets, word for word
//	answer    the answer as "check --json" prints it, without white space:
//	          figures, limits, takes with their SHA-256, problems
//
// The hash is the SHA-256 of exactly the bytes of the body, in lower-case
// hexadecimal. Fields are only ever added, before answer. To verify a ledger by
// other means: for each station, by rising sequence, hash the body, compare with
// the stored hash, and compare the body's previous with the hash before. Beside
// the body stand columns by which records are found (time, unit, verdict and so
// on); they repeat the body, and [Ledger.Verify] holds them against it.
//
// A chain shows that what is there was not changed since it was written. It cannot
// show that its last records were cut off; for that keep a station's head, the
// hash of its newest record, elsewhere: every export prints it.
//
// # Limits
//
// One ledger holds up to 2^63 records a station. Times are kept to the microsecond.
// Records are listed newest first by their time; a clock that was set back shows.
// Whoever may write the whole database may also write a new chain: heads kept
// elsewhere are the guard against that.
package ledger
