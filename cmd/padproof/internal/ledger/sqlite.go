package ledger

import (
	"context"
	"database/sql"
	"errors"
	"io/fs"
	"net/url"
	"os"
	"path/filepath"
	"strconv"
	"strings"

	"github.com/ncruces/go-sqlite3"
	_ "github.com/ncruces/go-sqlite3/driver" // the SQLite driver
)

// applicationID marks an SQLite file as a ledger: "PPLG" in its header.
const applicationID = 0x50504c47

// sqlite is the engine of a ledger in one file.
type sqlite struct {
	path string
}

func (s *sqlite) name() string   { return s.path }
func (s *sqlite) suffix() string { return "sqlite" }

func (s *sqlite) text(statement string) string {
	return strings.NewReplacer("$", "?", "@BYTES@", "BLOB", "@TEXT@", "TEXT", "@ONLY@", "+").Replace(statement)
}

// open opens the file with full sync in write-ahead mode. A file that is only to be
// read is opened as far as rights allow: so that nothing is left beside it, else
// with what others left there, else as a file that nobody writes.
func (s *sqlite) open(ctx context.Context, o Options) (*sql.DB, error) {
	if err := s.look(o); err != nil {
		return nil, err
	}
	modes := []string{"rwc"}
	switch {
	case o.ReadOnly && s.quiet():
		modes = []string{"rw", "ro", "ro&immutable=1"}
	case o.ReadOnly:
		modes = []string{"rw", "ro"}
	case o.MustExist:
		modes = []string{"rw"}
	}
	var first error
	for _, mode := range modes {
		db, err := s.openAs(ctx, mode, o)
		if err == nil {
			return db, nil
		}
		if first == nil {
			first = err
		}
		if !noRights(err) {
			break
		}
	}
	return nil, first
}

func (s *sqlite) openAs(ctx context.Context, mode string, o Options) (*sql.DB, error) {
	db, err := sql.Open("sqlite3", s.source(mode, o))
	if err != nil {
		return nil, err
	}
	db.SetMaxOpenConns(4)
	if err := s.settle(ctx, db, o); err != nil {
		_ = db.Close()
		return nil, err
	}
	return db, nil
}

// quiet reports whether nothing waits in the write-ahead log.
func (s *sqlite) quiet() bool {
	info, err := os.Stat(s.path + "-wal")
	return err != nil || info.Size() == 0
}

// noRights reports whether opening with fewer rights may help.
func noRights(err error) bool {
	return errors.Is(err, sqlite3.READONLY) || errors.Is(err, sqlite3.CANTOPEN) || errors.Is(err, sqlite3.PERM) ||
		errors.Is(err, fs.ErrPermission)
}

// look says clearly what SQLite would say darkly: no file, a folder, no rights.
func (s *sqlite) look(o Options) error {
	if s.path == "" {
		return &Error{Reason: Refused, Text: "no ledger is named", Hint: "give a path or a postgres:// address"}
	}
	info, err := os.Stat(s.path)
	switch {
	case err == nil && info.IsDir():
		return &Error{Where: s.path, Reason: Foreign, Text: "is a folder, not a ledger", Hint: "name a file in it: " + filepath.Join(s.path, "ledger.db")}
	case err == nil || !errors.Is(err, fs.ErrNotExist):
		return err
	case o.MustExist:
		return &Error{Where: s.path, Reason: Missing, Text: "there is no ledger",
			Hint: "look at the spelling of the path; the first check with --ledger makes one"}
	}
	return nil
}

// source is the data source name. Settings stand in it because each connection of
// the pool needs them.
func (s *sqlite) source(mode string, o Options) string {
	v := url.Values{"_txlock": {"immediate"}}
	v.Add("_pragma", "busy_timeout("+strconv.FormatInt(o.Wait.Milliseconds(), 10)+")")
	v.Add("_pragma", "synchronous(FULL)")
	v.Add("_pragma", "fullfsync(ON)")      // macOS: through the disk's own cache
	v.Add("_pragma", "cache_size(-16384)") // KiB: the upper pages of every index
	v.Add("_pragma", "temp_store(MEMORY)") // what undoes one statement need not touch the disk
	v.Add("_pragma", "trusted_schema(OFF)")
	if o.ReadOnly {
		v.Add("_pragma", "query_only(ON)")
	}
	path := filepath.ToSlash(s.path)
	if full, err := filepath.Abs(s.path); err == nil {
		path = filepath.ToSlash(full)
	}
	if !strings.HasPrefix(path, "/") { // C:/…
		path = "/" + path
	}
	return (&url.URL{Scheme: "file", Path: path, RawQuery: "mode=" + mode + "&" + v.Encode(), OmitHost: true}).String()
}

// settle looks whether the file is a ledger or empty, and turns the write-ahead
// log on.
func (s *sqlite) settle(ctx context.Context, db *sql.DB, o Options) error {
	var id, tables int64
	if err := db.QueryRowContext(ctx, sqliteIdentity).Scan(&id, &tables); err != nil {
		return err
	}
	if id != applicationID && (id != 0 || tables > 0) {
		return &Error{Where: s.path, Reason: Foreign, Text: "is an SQLite database of something else, not a ledger", Hint: "name another file"}
	}
	if o.ReadOnly {
		return nil
	}
	var mode string
	if err := db.QueryRowContext(ctx, "PRAGMA journal_mode=WAL").Scan(&mode); err != nil {
		return err
	}
	if mode != "wal" {
		return &Error{Where: s.path, Reason: Other, Text: "the write-ahead log cannot be turned on (" + mode + ")",
			Hint: "keep the ledger on a local disk, or on a PostgreSQL server"}
	}
	return nil
}

func (s *sqlite) version(ctx context.Context, tx *sql.Tx) (int, error) {
	var v int
	err := tx.QueryRowContext(ctx, "PRAGMA user_version").Scan(&v)
	return v, err
}

func (s *sqlite) stamp(ctx context.Context, tx *sql.Tx, version int) error {
	if _, err := tx.ExecContext(ctx, "PRAGMA application_id = "+strconv.Itoa(applicationID)); err != nil {
		return err
	}
	_, err := tx.ExecContext(ctx, "PRAGMA user_version = "+strconv.Itoa(version))
	return err
}

// lockSchema has nothing to do: a transaction begins with the file's one write lock.
func (s *sqlite) lockSchema(context.Context, *sql.Tx) error { return nil }

// lockStation has nothing to do for the same reason.
func (s *sqlite) lockStation(context.Context, *sql.Tx, string) error { return nil }

func (s *sqlite) retry(error) bool { return false } // the driver has waited already
