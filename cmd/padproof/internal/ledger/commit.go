package ledger

import (
	"context"
	"time"
)

// afterCommit finds out what became of records whose commit ended in an error: the
// answer may have been lost on its way after the database had written them.
func (l *Ledger) afterCommit(ctx context.Context, receipts []Receipt, failed error) ([]Receipt, error) {
	last := receipts[len(receipts)-1]
	ctx, cancel := context.WithTimeout(context.WithoutCancel(ctx), l.options.Wait+5*time.Second)
	defer cancel()
	written, err := l.wasWritten(ctx, last)
	switch {
	case err != nil:
		return nil, &Error{Where: l.where, Reason: Unknown, Err: failed,
			Text: "it is not known whether the record was written as " + last.String() + ": " + plainCause(failed),
			Hint: "look with: padproof ledger show " + last.String() + ", before the check is recorded again"}
	case written:
		return receipts, nil
	}
	return nil, failed
}

// wasWritten waits until no other writes to the station, then looks.
func (l *Ledger) wasWritten(ctx context.Context, r Receipt) (bool, error) {
	tx, err := l.db.BeginTx(ctx, nil)
	if err != nil {
		return false, err
	}
	defer func() { _ = tx.Rollback() }()
	if err := l.engine.lockStation(ctx, tx, r.Station); err != nil {
		return false, err
	}
	var there int
	err = tx.QueryRowContext(ctx, l.engine.text(sqlWasWritten), r.Station, r.Sequence, r.Hash).Scan(&there)
	return there > 0, err
}
