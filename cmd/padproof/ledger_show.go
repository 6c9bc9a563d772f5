package main

import (
	"context"
	"encoding/json"

	"github.com/spf13/cobra"

	"padproof/cmd/padproof/internal/ledger"
	"padproof/cmd/padproof/internal/report"
	"padproof/cmd/padproof/internal/result"
)

// shownHistory is how many records of a unit are shown.
const shownHistory = 50

func newLedgerShow() *cobra.Command {
	var read readFlags
	var verbose bool
	cmd := &cobra.Command{
		Use:   "show UNIT | STATION/SEQUENCE",
		Short: "Show a unit's history over its retests, or one record",
		Long: `Show a unit's records, newest first, with the newest one whole; or one record by its
station and sequence.`,
		Example: "  padproof ledger show 0417",
		Args: func(cmd *cobra.Command, args []string) error {
			if len(args) != 1 || args[0] == "" {
				return usageError(cmd, "show what? name one unit, or one record as STATION/SEQUENCE")
			}
			return nil
		},
		RunE: func(cmd *cobra.Command, args []string) error { return runLedgerShow(cmd, read, args[0], verbose) },
	}
	read.addTo(cmd)
	cmd.Flags().BoolVarP(&verbose, "verbose", "v", false, "add the takes and the uncertainty budget")
	return cmd
}

func runLedgerShow(cmd *cobra.Command, read readFlags, name string, verbose bool) error {
	ctx, stop := untilInterrupted(cmd)
	defer stop()
	l, err := read.open(ctx)
	if err != nil {
		return err
	}
	defer func() { _ = l.Close() }()
	if station, sequence, ok := readRecord(name); ok {
		e, err := l.Show(ctx, station, sequence)
		if err != nil {
			return err
		}
		if wantsJSON(cmd) {
			return writeJSON(cmd.OutOrStdout(), shown{Schema: ledgerSchema, Ledger: l.Where(), Unit: e.Record.Unit, Hash: e.Hash, Record: e.Body})
		}
		return report.EntryText(cmd.OutOrStdout(), e, verbose)
	}
	return showUnit(ctx, cmd, l, name, verbose)
}

// showUnit shows a unit's history and its newest record.
func showUnit(ctx context.Context, cmd *cobra.Command, l *ledger.Ledger, unit string, verbose bool) error {
	page, err := l.List(ctx, ledger.Filter{Unit: unit}, ledger.Place{}, shownHistory)
	if err != nil {
		return err
	}
	if len(page.Rows) == 0 {
		return inUnit(unit, &result.Error{File: l.Where(), Text: "there is no record of unit " + unit, Hint: "padproof ledger list shows the records there are"})
	}
	var entries []*ledger.Entry
	for _, row := range page.Rows {
		e, err := l.Show(ctx, row.Station, row.Sequence)
		if err != nil {
			return err
		}
		entries = append(entries, e)
	}
	if wantsJSON(cmd) {
		return writeJSON(cmd.OutOrStdout(), shown{Schema: ledgerSchema, Ledger: l.Where(), Unit: unit, History: rowsOf(page), More: page.More,
			Hash: entries[0].Hash, Record: entries[0].Body})
	}
	if err := report.HistoryText(cmd.OutOrStdout(), unit, entries, page); err != nil {
		return err
	}
	return report.EntryText(cmd.OutOrStdout(), entries[0], verbose)
}

// shown is a record, or a unit's history with its newest record, as JSON.
type shown struct {
	Schema  string          `json:"schema"`
	Ledger  string          `json:"ledger"`
	Unit    string          `json:"unit"`
	History []listedRow     `json:"history,omitempty"`
	More    int64           `json:"more,omitempty"`
	Hash    string          `json:"hash"`
	Record  json.RawMessage `json:"record"`
}
