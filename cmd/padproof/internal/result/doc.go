// Package result holds the types of what padproof answers, as JSON and as the
// one value that every text, page and record is made from. The proof room fills
// them; all others only read them.
//
// # Numbers
//
// A [Number] is a float64 that JSON always shows as a finite number or null: an
// infinite or missing figure is null, never a word and never a made-up value.
// Fields are added, never renamed or given another meaning; the schema name
// changes if that must happen.
//
// # Units
//
// Names carry the unit: _db, _hz, _ohms, _dbfs (RMS relative to the RMS of a
// full-scale sine, AES17), _s (seconds). A loss is positive where the output is
// lower. Channels count from 1.
package result
