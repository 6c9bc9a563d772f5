package main

import (
	"context"
	"time"

	"github.com/spf13/cobra"

	"padproof/cmd/padproof/internal/ledger"
	"padproof/cmd/padproof/internal/report"
)

func newLedgerList() *cobra.Command {
	var read readFlags
	var filter filterFlags
	var limit int
	var past string
	cmd := &cobra.Command{
		Use:     "list",
		Short:   "List records, newest first",
		Example: "  padproof ledger list --drawing \"Saltmarsh 14 line pad\" --verdict FAIL --from 2026-11-01",
		Args:    noWords,
		RunE: func(cmd *cobra.Command, args []string) error {
			f, err := filter.read(cmd)
			if err != nil {
				return err
			}
			if limit < 1 || limit > 100000 {
				return usageError(cmd, "--limit wants 1 to 100000, not %d", limit)
			}
			return runLedgerList(cmd, read, f, past, limit)
		},
	}
	read.addTo(cmd)
	filter.addTo(cmd)
	cmd.Flags().IntVar(&limit, "limit", 50, "how many at most")
	cmd.Flags().StringVar(&past, "past", "", "go on behind this record, STATION/SEQUENCE")
	return cmd
}

func runLedgerList(cmd *cobra.Command, read readFlags, f ledger.Filter, past string, limit int) error {
	ctx, stop := untilInterrupted(cmd)
	defer stop()
	l, err := read.open(ctx)
	if err != nil {
		return err
	}
	defer func() { _ = l.Close() }()
	from, err := placeOf(ctx, cmd, l, past)
	if err != nil {
		return err
	}
	page, err := l.List(ctx, f, from, limit)
	if err != nil {
		return err
	}
	if !wantsJSON(cmd) {
		return report.RecordsText(cmd.OutOrStdout(), page)
	}
	return writeJSON(cmd.OutOrStdout(), listed{ledgerSchema, l.Where(), rowsOf(page), page.More, page.AtLeast})
}

func placeOf(ctx context.Context, cmd *cobra.Command, l *ledger.Ledger, record string) (ledger.Place, error) {
	if record == "" {
		return ledger.Place{}, nil
	}
	station, sequence, ok := readRecord(record)
	if !ok {
		return ledger.Place{}, usageError(cmd, "--past wants STATION/SEQUENCE, not %q", record)
	}
	return l.PlaceOf(ctx, station, sequence)
}

// listed is a list as JSON.
type listed struct {
	Schema  string      `json:"schema"`
	Ledger  string      `json:"ledger"`
	Records []listedRow `json:"records"`
	More    int64       `json:"more"`
	AtLeast bool        `json:"more_at_least"` // there are that many more, or still more
}

type listedRow struct {
	ledger.Receipt
	Time      string         `json:"time"`
	Kind      string         `json:"kind"`
	Verdict   string         `json:"verdict"`
	Unit      string         `json:"unit"`
	Lot       string         `json:"lot"`
	Drawing   ledger.Drawing `json:"drawing"`
	Operator  string         `json:"operator"`
	Simulated bool           `json:"simulated"`
}

func rowsOf(page *ledger.Page) []listedRow {
	rows := make([]listedRow, 0, len(page.Rows))
	for _, r := range page.Rows {
		rows = append(rows, listedRow{r.Receipt, r.Time.Format(time.RFC3339Nano), r.Kind, r.Verdict, r.Unit, r.Lot, r.Drawing, r.Operator, r.Simulated})
	}
	return rows
}

// noWords is for commands that take flags alone.
func noWords(cmd *cobra.Command, args []string) error {
	if len(args) > 0 {
		return usageError(cmd, "%q is one word too many", args[0])
	}
	return nil
}
