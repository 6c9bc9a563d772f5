package ledger

import (
	"context"
	"database/sql"
	"time"
)

// A Ledger is open for reading and writing. Its methods may be called from several
// goroutines at once.
type Ledger struct {
	db      *sql.DB
	engine  engine
	where   string // for messages: without password
	options Options
}

// Options are settings that few callers need.
type Options struct {
	// AllowSimulated lets results of simulated takes in.
	AllowSimulated bool
	// MustExist makes it an error that there is no ledger yet.
	MustExist bool
	// ReadOnly opens a ledger to look at it: one on a disk that may not be written,
	// too. It implies MustExist.
	ReadOnly bool
	// Wait is how long to wait for another writer; 10 s if left out.
	Wait time.Duration
	// Now gives the time of records that have none; time.Now if left out.
	Now func() time.Time
}

// Open opens the ledger at where, a file's path or a postgres:// address, and makes
// it where there is none. An error is an [*Error].
func Open(ctx context.Context, where string) (*Ledger, error) {
	return OpenWith(ctx, where, Options{})
}

// OpenWith is [Open] with options.
func OpenWith(ctx context.Context, where string, o Options) (*Ledger, error) {
	if o.Wait <= 0 {
		o.Wait = 10 * time.Second
	}
	if o.Now == nil {
		o.Now = time.Now
	}
	o.MustExist = o.MustExist || o.ReadOnly
	e := engineFor(where)
	db, err := e.open(ctx, o)
	if err != nil {
		return nil, e.explain(err)
	}
	l := &Ledger{db: db, engine: e, where: e.name(), options: o}
	if err := l.settle(ctx); err != nil {
		_ = db.Close()
		return nil, e.explain(err)
	}
	return l, nil
}

// Where is the file's path, or the address without its password.
func (l *Ledger) Where() string { return l.where }

// Close ends the use of the ledger.
func (l *Ledger) Close() error {
	if err := l.db.Close(); err != nil {
		return l.engine.explain(err)
	}
	return nil
}
