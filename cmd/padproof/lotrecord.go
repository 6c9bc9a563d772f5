package main

import (
	"context"
	"fmt"

	"padproof/cmd/padproof/internal/ledger"
	"padproof/cmd/padproof/internal/result"
)

// A lotRecorder writes the units of a lot into the ledger that is named, each
// before it is shown. The zero value records nothing.
type lotRecorder struct {
	flags  *recordFlags
	ledger *ledger.Ledger
	head   *result.Recorded // the last record made
	lost   int              // units that could not be recorded
	first  *result.Error    // why the first of them could not
}

// lotRecorder opens the ledger where one is named. Records go under the lot's name
// unless --lot gives another.
func (f *recordFlags) lotRecorder(ctx context.Context, lot string) (*lotRecorder, error) {
	place := f.place()
	if place == "" {
		return &lotRecorder{}, nil
	}
	if f.lot == "" {
		f.lot = lot
	}
	l, err := f.open(ctx, place)
	if err != nil {
		return nil, err
	}
	return &lotRecorder{flags: f, ledger: l}, nil
}

// record writes one answer. What goes wrong stands in the answer, and the lot goes
// on.
func (r *lotRecorder) record(ctx context.Context, a *result.Answer) {
	if r.ledger == nil || a == nil {
		return
	}
	one, err := r.flags.recordOf(a, nil)
	if err == nil {
		var receipt ledger.Receipt
		if receipt, err = r.ledger.Append(context.WithoutCancel(ctx), one); err == nil {
			a.Recorded = recordedOf(receipt)
			r.head = a.Recorded
			return
		}
	}
	a.RecordError = describe(err)
	if r.lost++; r.first == nil {
		r.first = a.RecordError
	}
}

// failure is what is said where units could not be recorded; nil where all were.
func (r *lotRecorder) failure() *result.Error {
	if r.lost == 0 {
		return nil
	}
	return &result.Error{File: r.first.File, Text: fmt.Sprintf("%d units not recorded: %s", r.lost, r.first.Text), Hint: r.first.Hint}
}

func (r *lotRecorder) close() {
	if r.ledger != nil {
		_ = r.ledger.Close()
	}
}
