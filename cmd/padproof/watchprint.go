package main

import (
	"fmt"

	"padproof/cmd/padproof/internal/lot"
	"padproof/cmd/padproof/internal/report"
	"padproof/cmd/padproof/internal/result"
)

// print prints one unit as lot does.
func (w *watching) print(o lot.Outcome) error {
	w.status.clear()
	if w.asJSON && o.Answer != nil {
		return writeLine(w.out, o.Answer)
	}
	row := lot.NewTally("").Add(o, describe)
	if w.asJSON {
		return writeLine(w.out, result.Failure{Schema: result.CheckSchema, Unit: row.Unit, Error: *row.Error})
	}
	if w.rows == nil {
		const usual = "00000000"
		w.rows = report.LotRows(w.out, []string{usual, row.Unit})
	}
	return w.rows(row)
}

// say prints a line for the person at the bench; "" is none.
func (w *watching) say(line string) {
	if line != "" {
		w.status.clear()
		fmt.Fprintln(w.err, line)
	}
}
