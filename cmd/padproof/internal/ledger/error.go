package ledger

import (
	"errors"
	"fmt"
)

// A Reason tells a caller what may be done about an [Error].
type Reason string

// Reasons.
const (
	Refused   Reason = "refused"   // the record, or the way it was asked for, is wrong
	Simulated Reason = "simulated" // simulated results are refused unless asked for
	Missing   Reason = "missing"   // there is no such ledger, or no such record
	Busy      Reason = "busy"      // locked by another for longer than we wait
	Full      Reason = "full"      // no room on the disk
	ReadOnly  Reason = "read-only" // may not be written
	Denied    Reason = "denied"    // may not be opened: rights, or user and password
	Away      Reason = "away"      // the server or the share cannot be reached
	Newer     Reason = "newer"     // written by a later padproof
	Corrupt   Reason = "corrupt"   // damaged
	Foreign   Reason = "foreign"   // a database, or a file, that is no ledger
	Unknown   Reason = "unknown"   // it is not known whether the record was written
	Other     Reason = "other"
)

// An Error says what went wrong with a ledger and what to do. Passwords never
// stand in it.
type Error struct {
	Where  string // the file, or the address without password; "" where it is none
	Reason Reason
	Text   string // lower case, no full stop
	Hint   string
	Err    error // what the database said; may be nil
}

// Error gives place and text, without the hint.
func (e *Error) Error() string {
	if e.Where == "" {
		return e.Text
	}
	return e.Where + ": " + e.Text
}

func (e *Error) Unwrap() error { return e.Err }

// Temporary reports whether the same call may go through later with nothing
// changed by hand but room, locks or the network.
func (e *Error) Temporary() bool {
	return e.Reason == Busy || e.Reason == Full || e.Reason == Away
}

// ReasonOf returns the reason of an error of this package, "" of others.
func ReasonOf(err error) Reason {
	var e *Error
	if errors.As(err, &e) {
		return e.Reason
	}
	return ""
}

func refused(format string, args ...any) error {
	return &Error{Reason: Refused, Text: fmt.Sprintf(format, args...)}
}
