package ledger

import "context"

// Each calls visit with every record that the filter picks, oldest first, and ends
// at its first error. It does not look whether a record was altered: [Ledger.Verify]
// does.
func (l *Ledger) Each(ctx context.Context, f Filter, visit func(Row, []byte) error) error {
	q := queryOf(f, Place{})
	rows, err := l.db.QueryContext(ctx, l.engine.text(q.union(rowColumns+", body")+" ORDER BY at_us, station, sequence"), q.values...)
	if err != nil {
		return l.engine.explain(err)
	}
	defer func() { _ = rows.Close() }()
	for rows.Next() {
		var r Row
		var text []byte
		if err := rows.Scan(append(r.fields(), &text)...); err != nil {
			return l.engine.explain(err)
		}
		if err := visit(r, text); err != nil {
			return err
		}
	}
	return l.engine.explain(rows.Err())
}
