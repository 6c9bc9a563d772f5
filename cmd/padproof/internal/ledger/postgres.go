package ledger

import (
	"context"
	"database/sql"
	"errors"
	"net/url"
	"strings"

	"github.com/jackc/pgx/v5"
	"github.com/jackc/pgx/v5/pgconn"
	"github.com/jackc/pgx/v5/stdlib"
)

// postgres is the engine of a ledger that many benches share.
type postgres struct {
	where string
}

func (p *postgres) suffix() string { return "postgres" }

// name is the address without its password.
func (p *postgres) name() string {
	u, err := url.Parse(p.where)
	if err != nil {
		return "postgres://…"
	}
	if u.User != nil {
		u.User = url.User(u.User.Username())
	}
	q := u.Query()
	for _, secret := range []string{"password", "sslpassword"} {
		if q.Has(secret) {
			q.Del(secret)
		}
	}
	u.RawQuery = q.Encode()
	return u.String()
}

func (p *postgres) text(statement string) string {
	return strings.NewReplacer("@BYTES@", "BYTEA", "@TEXT@", `TEXT COLLATE "C"`, "@ONLY@", "").Replace(statement)
}

// open connects. A server that does not wait for the disk by default is told to.
func (p *postgres) open(ctx context.Context, o Options) (*sql.DB, error) {
	config, err := pgx.ParseConfig(p.where)
	if err != nil {
		return nil, &Error{Where: p.name(), Reason: Refused, Text: "is no address of a PostgreSQL database",
			Hint: "write it as postgres://USER@HOST:PORT/DATABASE"}
	}
	if config.ConnectTimeout == 0 {
		config.ConnectTimeout = o.Wait
	}
	if config.RuntimeParams["application_name"] == "" {
		config.RuntimeParams["application_name"] = "padproof"
	}
	db := stdlib.OpenDB(*config, stdlib.OptionAfterConnect(func(ctx context.Context, c *pgx.Conn) error {
		_, err := c.Exec(ctx, postgresSession, o.Wait.Milliseconds())
		return err
	}))
	db.SetMaxOpenConns(8)
	if err := db.PingContext(ctx); err != nil {
		_ = db.Close()
		return nil, err
	}
	return db, nil
}

func (p *postgres) version(ctx context.Context, tx *sql.Tx) (int, error) {
	var there bool
	if err := tx.QueryRowContext(ctx, postgresThere).Scan(&there); err != nil || !there {
		return 0, err
	}
	var v int
	err := tx.QueryRowContext(ctx, "SELECT coalesce(max(version), 0) FROM padproof_ledger").Scan(&v)
	return v, err
}

func (p *postgres) stamp(ctx context.Context, tx *sql.Tx, version int) error {
	if _, err := tx.ExecContext(ctx, postgresVersions); err != nil {
		return err
	}
	_, err := tx.ExecContext(ctx, "INSERT INTO padproof_ledger (version) VALUES ($1)", version)
	return err
}

func (p *postgres) lockSchema(ctx context.Context, tx *sql.Tx) error {
	_, err := tx.ExecContext(ctx, postgresLockSchema)
	return err
}

func (p *postgres) lockStation(ctx context.Context, tx *sql.Tx, station string) error {
	_, err := tx.ExecContext(ctx, postgresLockStation, station)
	return err
}

// retry: two writers that met all the same, or a deadlock that the server ended.
func (p *postgres) retry(err error) bool {
	var e *pgconn.PgError
	if !errors.As(err, &e) {
		return false
	}
	switch e.Code {
	case "23505", "40001", "40P01":
		return true
	}
	return false
}

// secrets are the passwords in the address, as written and as read.
func (p *postgres) secrets() []string {
	var all []string
	u, err := url.Parse(p.where)
	if err != nil {
		return []string{p.where}
	}
	if u.User != nil {
		if password, given := u.User.Password(); given && password != "" {
			all = append(all, password, url.QueryEscape(password), url.PathEscape(password))
		}
	}
	for _, key := range []string{"password", "sslpassword"} {
		if v := u.Query().Get(key); v != "" {
			all = append(all, v)
		}
	}
	return all
}
