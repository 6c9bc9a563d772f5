package ledger

import (
	"context"
	"errors"
	"io/fs"
	"path/filepath"
	"syscall"

	"github.com/ncruces/go-sqlite3"
)

// explain turns what SQLite or the file system said into words and a way out.
func (s *sqlite) explain(err error) error {
	var known *Error
	if err == nil || errors.As(err, &known) || errors.Is(err, context.Canceled) {
		return err
	}
	e := &Error{Where: s.path, Reason: Other, Text: "the ledger cannot be used: " + plainCause(err), Err: err}
	var code *sqlite3.Error
	switch {
	case errors.Is(err, syscall.ENOSPC), errors.Is(err, syscall.EDQUOT), errors.Is(err, syscall.EFBIG), errors.Is(err, sqlite3.FULL):
		e.Reason, e.Text = Full, "no room left for the ledger"
		e.Hint = "make room on its disk; what was written before is safe"
	case errors.Is(err, fs.ErrPermission):
		e.Reason, e.Text = Denied, "the ledger may not be opened"
		e.Hint = "make the file and its folder readable and writable for you"
	case errors.Is(err, context.DeadlineExceeded):
		e.Reason, e.Text, e.Hint = Busy, "the ledger did not answer in time", "try again"
	case errors.As(err, &code):
		s.explainCode(e, code)
	}
	return e
}

func (s *sqlite) explainCode(e *Error, code *sqlite3.Error) {
	folder := filepath.Dir(s.path)
	switch code.Code() {
	case sqlite3.BUSY, sqlite3.LOCKED:
		e.Reason, e.Text = Busy, "the ledger is locked by another program"
		e.Hint = "end what holds it, a database browser say, and try again"
	case sqlite3.READONLY:
		e.Reason, e.Text = ReadOnly, "the ledger may not be written"
		e.Hint = "make the file and its folder " + folder + " writable for you, or name another ledger"
	case sqlite3.CORRUPT:
		e.Reason, e.Text = Corrupt, "the ledger is damaged"
		e.Hint = "keep the file as it is, copy it, and go on with a new one; padproof ledger export saves what can be read"
	case sqlite3.NOTADB:
		e.Reason, e.Text = Foreign, "is no ledger: not an SQLite file, or damaged at its beginning"
		e.Hint = "look at the path; if it was a ledger, keep the file as it is and go back to a copy"
	case sqlite3.CANTOPEN, sqlite3.PERM, sqlite3.AUTH:
		e.Reason, e.Text = Denied, "the ledger cannot be opened"
		e.Hint = "is the folder " + folder + " there, and may you write in it?"
	case sqlite3.IOERR:
		e.Reason, e.Text = Away, "the ledger's disk does not answer as it should: "+plainCause(code)
		e.Hint = "look at the disk or the share that it lies on"
	}
}

// plainCause is the innermost text of an error.
func plainCause(err error) string {
	for {
		inner := errors.Unwrap(err)
		if inner == nil {
			return err.Error()
		}
		err = inner
	}
}
