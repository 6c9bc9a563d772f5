package ledger

import (
	"context"
	"database/sql/driver"
	"errors"
	"io"
	"net"
	"strings"
	"syscall"

	"github.com/jackc/pgx/v5/pgconn"
)

// explain turns what the server or the network said into words and a way out.
func (p *postgres) explain(err error) error {
	var known *Error
	if err == nil || errors.As(err, &known) || errors.Is(err, context.Canceled) {
		return err
	}
	e := &Error{Where: p.name(), Reason: Other, Text: "the ledger cannot be used: " + p.hide(plainCause(err)), Err: err}
	var said *pgconn.PgError
	switch {
	case errors.As(err, &said):
		p.explainCode(e, said)
	case isAway(err):
		e.Reason, e.Text = Away, "the server cannot be reached: "+p.hide(plainCause(err))
		e.Hint = "is it running, and are host and port right?"
	}
	e.Err = nil // it may hold the whole address
	return e
}

func isAway(err error) bool {
	var connect *pgconn.ConnectError
	var network net.Error
	return errors.As(err, &connect) || errors.As(err, &network) || errors.Is(err, io.EOF) || errors.Is(err, driver.ErrBadConn) ||
		errors.Is(err, io.ErrUnexpectedEOF) || errors.Is(err, net.ErrClosed) || errors.Is(err, context.DeadlineExceeded) ||
		errors.Is(err, syscall.ECONNRESET) || errors.Is(err, syscall.EPIPE) || strings.Contains(err.Error(), "conn closed")
}

func (p *postgres) explainCode(e *Error, said *pgconn.PgError) {
	switch code := said.Code; {
	case strings.HasPrefix(code, "28"):
		e.Reason, e.Text = Denied, "user or password is wrong"
		e.Hint = "look at the user, and give the password in PGPASSWORD or in a .pgpass file"
	case code == "3D000":
		e.Reason, e.Text, e.Hint = Missing, "there is no such database", "make it first: createdb NAME"
	case code == "42501":
		e.Reason, e.Text, e.Hint = Denied, "this user may not do that: "+said.Message, "give it the right to create and to write tables in the database"
	case code == "25006":
		e.Reason, e.Text, e.Hint = ReadOnly, "the database takes no records: it is read-only", "name the main server, not its copy"
	case code == "55P03":
		e.Reason, e.Text, e.Hint = Busy, "another holds the ledger for too long", "try again; look for a transaction left open on the server"
	case strings.HasPrefix(code, "53"):
		e.Reason, e.Text = Full, "the server has run out of something: "+said.Message
		e.Hint = "make room on the server; what was written before is safe"
	case strings.HasPrefix(code, "57P"), strings.HasPrefix(code, "08"):
		e.Reason, e.Text, e.Hint = Away, "the server is going down or coming up: "+said.Message, "try again when it runs"
	case strings.HasPrefix(code, "XX"):
		e.Reason, e.Text, e.Hint = Corrupt, "the server reports damage: "+said.Message, "ask who runs it; keep its files as they are"
	case code == "42P01", code == "42703":
		e.Reason, e.Text, e.Hint = Foreign, "the database has a table of our name that is not ours", "name another database"
	case code == "42P07", code == "42723":
		e.Reason, e.Text, e.Hint = Foreign, "the database has something of our name that is not ours: "+said.Message, "name another database"
	default:
		e.Text = "the ledger cannot be used: " + said.Message
	}
}

// hide takes the password out of a text.
func (p *postgres) hide(text string) string {
	for _, secret := range p.secrets() {
		text = strings.ReplaceAll(text, secret, "…")
	}
	return text
}
