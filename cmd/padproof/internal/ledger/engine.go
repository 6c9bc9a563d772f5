package ledger

import (
	"context"
	"database/sql"
	"strings"
)

// An engine is what SQLite and PostgreSQL do not have in common.
type engine interface {
	// name is the path or the address, without password.
	name() string
	// open opens the database and looks whether it can be one of ours.
	open(ctx context.Context, o Options) (*sql.DB, error)
	// version is the ledger's schema version, 0 for a database with no ledger.
	version(ctx context.Context, tx *sql.Tx) (int, error)
	// stamp notes the schema version.
	stamp(ctx context.Context, tx *sql.Tx, version int) error
	// lockSchema keeps others from migrating until tx ends.
	lockSchema(ctx context.Context, tx *sql.Tx) error
	// lockStation keeps others from writing records of a station until tx ends.
	lockStation(ctx context.Context, tx *sql.Tx, station string) error
	// text turns a statement of this package into one of the engine.
	text(statement string) string
	// migrations says which files of the migration folder are the engine's own.
	suffix() string
	// explain turns what the database said into an [*Error]; others stay.
	explain(err error) error
	// retry reports whether a transaction that failed so was undone and may be tried
	// again at once.
	retry(err error) bool
}

// engineFor picks the engine by the form of the place.
func engineFor(where string) engine {
	if IsServer(where) {
		return &postgres{where: where}
	}
	return &sqlite{path: where}
}

// IsServer reports whether a place is the address of a PostgreSQL database rather
// than a file.
func IsServer(where string) bool {
	return strings.HasPrefix(where, "postgres://") || strings.HasPrefix(where, "postgresql://")
}
