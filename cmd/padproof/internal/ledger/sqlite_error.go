package ledger

import (
	"context"
	"errors"
	"io/fs"
	"os"
	"path/filepath"
	"runtime"
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
	var code sqlite3.ErrorCode
	switch {
	case isFull(err):
		e.full()
	case errors.Is(err, fs.ErrPermission), errors.Is(err, syscall.ENOTDIR):
		e.Reason, e.Text = Denied, "the ledger cannot be opened: "+plainCause(err)
		e.Hint = "is the path right, and may you read and write there?"
	case errors.Is(err, context.DeadlineExceeded):
		e.Reason, e.Text, e.Hint = Busy, "the ledger did not answer in time", "try again"
	case errors.As(err, &code):
		s.explainCode(e, code)
	}
	return e
}

func (e *Error) full() {
	e.Reason, e.Text = Full, "no room is left for the ledger"
	e.Hint = "make room on its disk; what was recorded before is safe"
}

func (e *Error) readOnly(folder string) {
	e.Reason, e.Text = ReadOnly, "the ledger may not be written"
	e.Hint = "make the file and its folder " + folder + " writable for you, or name another ledger"
}

func (s *sqlite) explainCode(e *Error, code sqlite3.ErrorCode) {
	folder := filepath.Dir(s.path)
	switch code {
	case sqlite3.BUSY, sqlite3.LOCKED:
		e.Reason, e.Text = Busy, "the ledger is locked by another program"
		e.Hint = "end what holds it, a database browser say, and try again"
	case sqlite3.READONLY:
		e.readOnly(folder)
	case sqlite3.CORRUPT:
		e.Reason, e.Text = Corrupt, "the ledger is damaged"
		e.Hint = "keep the file as it is, copy it, and go on with a new one; padproof ledger export saves what can be read"
	case sqlite3.NOTADB:
		e.Reason, e.Text = Foreign, "is no ledger: not an SQLite file, or damaged at its beginning"
		e.Hint = "look at the path; if it was a ledger, keep the file as it is and go back to a copy"
	case sqlite3.CANTOPEN, sqlite3.PERM, sqlite3.AUTH, sqlite3.IOERR:
		s.explainDisk(e, code, probe(folder))
	}
}

// explainDisk tells by a trial what the disk has against us: SQLite's own word for
// it is often no more than that it does not work.
func (s *sqlite) explainDisk(e *Error, code sqlite3.ErrorCode, trial error) {
	folder := filepath.Dir(s.path)
	switch {
	case isFull(trial):
		e.full()
	case errors.Is(trial, syscall.EROFS), errors.Is(trial, fs.ErrPermission):
		e.readOnly(folder)
	case code != sqlite3.IOERR:
		e.Reason, e.Text = Denied, "the ledger cannot be opened"
		e.Hint = "is the folder " + folder + " there, and may you read and write the file?"
	default:
		e.Reason, e.Text = Away, "the ledger's disk does not answer as it should"
		e.Hint = "look at the disk or the share that it lies on"
	}
}

// probe writes a little beside the ledger and takes it away again.
func probe(folder string) error {
	f, err := os.CreateTemp(folder, ".padproof-*")
	if err != nil {
		return err
	}
	_, err = f.Write(make([]byte, 64<<10))
	err = errors.Join(err, f.Sync(), f.Close())
	return errors.Join(err, os.Remove(f.Name()))
}

// isFull knows a full disk, a used-up quota and a file that may not grow.
func isFull(err error) bool {
	for _, known := range []error{sqlite3.FULL, syscall.ENOSPC, syscall.EDQUOT, syscall.EFBIG} {
		if errors.Is(err, known) {
			return true
		}
	}
	var number syscall.Errno
	return runtime.GOOS == "windows" && errors.As(err, &number) && (number == 39 || number == 112) // ERROR_HANDLE_DISK_FULL, ERROR_DISK_FULL
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
