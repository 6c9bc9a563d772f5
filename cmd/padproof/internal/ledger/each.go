package ledger

import "context"

// eachAtOnce is how many records are read at a time.
const eachAtOnce = 500

// Each calls visit with every record that the filter picks, oldest first, and ends
// at its first error. It does not look whether a record was altered: [Ledger.Verify]
// does. Memory does not grow with the ledger, and writers do not wait for it.
func (l *Ledger) Each(ctx context.Context, f Filter, visit func(Row, []byte) error) error {
	var from Place
	for {
		n, next, err := l.some(ctx, queryOf(f, from, newer), visit)
		if err != nil || n < eachAtOnce {
			return err
		}
		from = next
	}
}

// some visits the next few records.
func (l *Ledger) some(ctx context.Context, q query, visit func(Row, []byte) error) (n int, last Place, err error) {
	rows, err := l.db.QueryContext(ctx, l.engine.text(q.oldest(eachAtOnce)), q.values...)
	if err != nil {
		return 0, last, l.engine.explain(err)
	}
	defer func() { _ = rows.Close() }()
	for rows.Next() {
		var r Row
		var text []byte
		if err := rows.Scan(append(r.fields(), &text)...); err != nil {
			return n, last, l.engine.explain(err)
		}
		if err := visit(r, text); err != nil {
			return n, last, err
		}
		n++
		last = Place{r.Time.UnixMicro(), r.Station, r.Sequence}
	}
	return n, last, l.engine.explain(rows.Err())
}
