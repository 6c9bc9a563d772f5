package ledger

import (
	"context"
	"database/sql"
	"errors"
	"slices"
)

var readOnly = &sql.TxOptions{ReadOnly: true}

// Append writes one record behind the last one of its station and returns when it
// is on the disk.
func (l *Ledger) Append(ctx context.Context, r Record) (Receipt, error) {
	receipts, err := l.AppendAll(ctx, []Record{r})
	if err != nil {
		return Receipt{}, err
	}
	return receipts[0], nil
}

// AppendAll writes records in one transaction: all of them, in their order, or
// none. A few hundred at a time are many times faster than as many calls of
// [Ledger.Append].
func (l *Ledger) AppendAll(ctx context.Context, records []Record) ([]Receipt, error) {
	ready := make([]Record, len(records))
	for i, r := range records {
		if r.Simulated && !l.options.AllowSimulated {
			return nil, &Error{Where: l.where, Reason: Simulated, Text: "simulated results do not go into the ledger",
				Hint: "--record-simulated lets them in, for a trial"}
		}
		var err error
		if ready[i], err = r.ready(l.options.Now()); err != nil {
			return nil, err
		}
	}
	if len(ready) == 0 {
		return nil, nil
	}
	const tries = 5
	for try := 1; ; try++ {
		receipts, err := l.write(ctx, ready)
		if err == nil {
			return receipts, nil
		}
		if try == tries || !l.engine.retry(err) {
			return nil, l.engine.explain(err)
		}
	}
}

func (l *Ledger) write(ctx context.Context, records []Record) ([]Receipt, error) {
	tx, err := l.db.BeginTx(ctx, nil)
	if err != nil {
		return nil, err
	}
	defer func() { _ = tx.Rollback() }()
	heads, err := l.lockHeads(ctx, tx, records)
	if err != nil {
		return nil, err
	}
	insert, done, err := l.inserter(ctx, tx, len(records))
	if err != nil {
		return nil, err
	}
	defer done()
	receipts := make([]Receipt, 0, len(records))
	for _, r := range records {
		text, receipt, err := encode(r, heads[r.Station])
		if err != nil {
			return nil, err
		}
		if err := insert(columns(r, receipt, text)); err != nil {
			return nil, err
		}
		heads[r.Station] = receipt
		receipts = append(receipts, receipt)
	}
	if err := tx.Commit(); err != nil {
		return l.afterCommit(ctx, receipts, err)
	}
	return receipts, nil
}

// inserter returns what inserts one record; for many the statement is prepared.
func (l *Ledger) inserter(ctx context.Context, tx *sql.Tx, count int) (insert func([]any) error, done func(), err error) {
	text := l.engine.text(sqlInsert)
	if count == 1 {
		return func(values []any) error { _, err := tx.ExecContext(ctx, text, values...); return err }, func() {}, nil
	}
	prepared, err := tx.PrepareContext(ctx, text)
	if err != nil {
		return nil, nil, err
	}
	return func(values []any) error { _, err := prepared.ExecContext(ctx, values...); return err }, func() { _ = prepared.Close() }, nil
}

// lockHeads keeps others from the stations of the records, taken in order so that
// two writers never wait for each other, and returns their heads.
func (l *Ledger) lockHeads(ctx context.Context, tx *sql.Tx, records []Record) (map[string]Receipt, error) {
	var stations []string
	for _, r := range records {
		stations = append(stations, r.Station)
	}
	slices.Sort(stations)
	heads := map[string]Receipt{}
	for _, station := range slices.Compact(stations) {
		if err := l.engine.lockStation(ctx, tx, station); err != nil {
			return nil, err
		}
		head, err := l.head(ctx, tx, station)
		if err != nil {
			return nil, err
		}
		heads[station] = head
	}
	return heads, nil
}

// querier is a database or a transaction.
type querier interface {
	QueryRowContext(ctx context.Context, query string, args ...any) *sql.Row
}

func (l *Ledger) head(ctx context.Context, q querier, station string) (Receipt, error) {
	r := Receipt{Station: station}
	err := q.QueryRowContext(ctx, l.engine.text(sqlHead), station).Scan(&r.Sequence, &r.Hash)
	if errors.Is(err, sql.ErrNoRows) {
		return r, nil
	}
	return r, err
}

// columns are the values of sqlInsert.
func columns(r Record, at Receipt, text []byte) []any {
	simulated := 0
	if r.Simulated {
		simulated = 1
	}
	return []any{at.Station, at.Sequence, at.Hash, r.Time.UnixMicro(), r.Kind, r.Verdict, r.Unit, r.Lot,
		r.Drawing.Name, r.Drawing.SHA256, r.Operator, simulated, TakesOf(r.Answer), text}
}
