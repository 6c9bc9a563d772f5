package ledger

// Every statement stands here or in the migration folder. They are written for
// PostgreSQL; [engine.text] turns $1 into ?1 for SQLite.
const (
	sqlHead = `SELECT sequence, hash FROM padproof_record
		WHERE station = $1 ORDER BY sequence DESC LIMIT 1`

	sqlInsert = `INSERT INTO padproof_record
		(station, sequence, hash, at_us, kind, verdict, unit, lot, drawing, sheet, operator, simulated, takes, body)
		VALUES ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11, $12, $13, $14)`

	// sqlNextStation walks from station to station without reading their records.
	sqlNextStation = `SELECT min(station) FROM padproof_record WHERE station > $1`

	sqlShow = `SELECT hash, body FROM padproof_record WHERE station = $1 AND sequence = $2`

	sqlWasWritten = `SELECT count(*) FROM padproof_record WHERE station = $1 AND sequence = $2 AND hash = $3`

	// sqlChain reads one station's records in the order of their chain.
	sqlChain = `SELECT ` + rowColumns + `, body FROM padproof_record
		WHERE station = $1 ORDER BY sequence`

	rowColumns = `station, sequence, hash, at_us, kind, verdict, unit, lot, drawing, sheet, operator, simulated, takes`
)

// Of SQLite alone.
const sqliteIdentity = `SELECT application_id, (SELECT count(*) FROM sqlite_schema) FROM pragma_application_id`

// Of PostgreSQL alone.
const (
	// postgresSession bounds the wait for another's lock and makes a commit wait
	// for the disk where the server's own setting would not.
	postgresSession = `SELECT set_config('lock_timeout', $1::bigint::text, false),
		CASE WHEN current_setting('synchronous_commit') = 'off' THEN set_config('synchronous_commit', 'on', false) END`

	// postgresThere reads pg_class itself: to_regclass may answer from what the
	// session knew before it waited for another that was making the tables.
	postgresThere = `SELECT EXISTS (SELECT 1 FROM pg_catalog.pg_class
		WHERE relname = 'padproof_ledger' AND pg_catalog.pg_table_is_visible(oid))`

	postgresVersions = `CREATE TABLE IF NOT EXISTS padproof_ledger
		(version BIGINT PRIMARY KEY, applied TIMESTAMPTZ NOT NULL DEFAULT now())`

	postgresLockSchema  = `SELECT pg_advisory_xact_lock(hashtextextended('padproof schema', 0))`
	postgresLockStation = `SELECT pg_advisory_xact_lock(hashtextextended('padproof station ' || $1, 0))`
)
