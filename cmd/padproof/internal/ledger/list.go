package ledger

import (
	"context"
	"database/sql"
	"errors"
	"fmt"
	"time"
)

// A Row is what a list shows of a record.
type Row struct {
	Receipt
	Time      time.Time
	Kind      string
	Verdict   string
	Unit      string
	Lot       string
	Drawing   Drawing
	Operator  string
	Simulated bool
	takes     string
}

// A Place is where in time a list goes on. The zero Place is the beginning.
type Place struct {
	AtMicros int64
	Station  string
	Sequence int64
}

// A Page is a part of a list, newest first.
type Page struct {
	Rows    []Row
	More    int64 // how many older ones follow
	AtLeast bool  // there are More or more: they were not all counted
	Next    Place // where the following page begins
}

// countedUpTo bounds how many records a list counts, so that it stays quick.
const countedUpTo = 10000

// List returns up to limit records, newest first, from a place on.
func (l *Ledger) List(ctx context.Context, f Filter, from Place, limit int) (*Page, error) {
	if limit < 1 {
		return nil, refused("a list shows at least 1 record, not %d", limit)
	}
	p := &Page{}
	q := queryOf(f, from, older)
	err := l.rows(ctx, q.newest(limit+1), q.values, &p.Rows)
	if err != nil {
		return nil, l.engine.explain(err)
	}
	if len(p.Rows) <= limit {
		return p, nil
	}
	p.Rows = p.Rows[:limit]
	last := p.Rows[limit-1]
	p.Next = Place{last.Time.UnixMicro(), last.Station, last.Sequence}
	return p, l.countMore(ctx, f, from, p)
}

// countMore counts what follows a page, up to a bound.
func (l *Ledger) countMore(ctx context.Context, f Filter, from Place, p *Page) error {
	q := queryOf(f, from, older)
	bound := countedUpTo + len(p.Rows)
	var n int64
	err := l.db.QueryRowContext(ctx, l.engine.text(q.count(bound)), q.values...).Scan(&n)
	if err != nil {
		return l.engine.explain(err)
	}
	p.More, p.AtLeast = n-int64(len(p.Rows)), n == int64(bound)
	return nil
}

func (l *Ledger) rows(ctx context.Context, query string, values []any, into *[]Row) error {
	rows, err := l.db.QueryContext(ctx, l.engine.text(query), values...)
	if err != nil {
		return err
	}
	defer func() { _ = rows.Close() }()
	for rows.Next() {
		var r Row
		if err := rows.Scan(r.fields()...); err != nil {
			return err
		}
		*into = append(*into, r)
	}
	return rows.Err()
}

// fields are where the columns of rowColumns go.
func (r *Row) fields() []any {
	return []any{&r.Station, &r.Sequence, &r.Hash, (*micros)(&r.Time), &r.Kind, &r.Verdict, &r.Unit, &r.Lot,
		&r.Drawing.Name, &r.Drawing.SHA256, &r.Operator, &r.Simulated, &r.takes}
}

// micros reads a time from microseconds since 1970.
type micros time.Time

// Scan takes what the database driver read.
func (m *micros) Scan(v any) error {
	n, ok := v.(int64)
	if !ok {
		return fmt.Errorf("a time is %T", v)
	}
	*m = micros(time.UnixMicro(n).UTC())
	return nil
}

// Show returns one record.
func (l *Ledger) Show(ctx context.Context, station string, sequence int64) (*Entry, error) {
	var hash string
	var text []byte
	err := l.db.QueryRowContext(ctx, l.engine.text(sqlShow), station, sequence).Scan(&hash, &text)
	if errors.Is(err, sql.ErrNoRows) {
		return nil, &Error{Where: l.where, Reason: Missing, Text: fmt.Sprintf("there is no record %s/%d", station, sequence),
			Hint: "padproof ledger list shows those there are"}
	}
	if err != nil {
		return nil, l.engine.explain(err)
	}
	e, err := decode(text)
	if err != nil || e.Hash != hash {
		return nil, &Error{Where: l.where, Reason: Corrupt, Text: fmt.Sprintf("record %s/%d was altered: it does not have its hash any more", station, sequence),
			Hint: "padproof ledger verify tells what else was"}
	}
	return &e, nil
}

// Head returns the newest record of a station; its sequence is 0 where there is
// none.
func (l *Ledger) Head(ctx context.Context, station string) (Receipt, error) {
	r, err := l.head(ctx, l.db, station)
	return r, l.engine.explain(err)
}

// Heads returns the head of every station, by name.
func (l *Ledger) Heads(ctx context.Context) ([]Receipt, error) {
	var heads []Receipt
	station := sql.NullString{}
	for {
		err := l.db.QueryRowContext(ctx, l.engine.text(sqlNextStation), station.String).Scan(&station)
		if err != nil || !station.Valid {
			return heads, l.engine.explain(err)
		}
		head, err := l.Head(ctx, station.String)
		if err != nil {
			return nil, err
		}
		heads = append(heads, head)
	}
}

// PlaceOf is where a list goes on behind a record.
func (l *Ledger) PlaceOf(ctx context.Context, station string, sequence int64) (Place, error) {
	e, err := l.Show(ctx, station, sequence)
	if err != nil {
		return Place{}, err
	}
	return Place{e.Record.Time.UnixMicro(), station, sequence}, nil
}
