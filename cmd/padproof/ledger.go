package main

import (
	"context"
	"strconv"
	"strings"
	"time"

	"github.com/spf13/cobra"

	"padproof/cmd/padproof/internal/ledger"
)

// ledgerSchema names the form of what the ledger commands print as JSON.
const ledgerSchema = "padproof.ledger.1"

func newLedger() *cobra.Command {
	cmd := &cobra.Command{
		Use:   "ledger COMMAND",
		Short: "Look at the records of checks, export them, and verify that none was changed",
		Long: `Look at the records of checks. The ledger is the one that --ledger names, a file or
postgres://USER@HOST/DATABASE, else the one in ` + ledgerVariable + `, else this machine's own.

A record can't be changed: a retest is a new one. Each carries the hash of the one before
it from the same station, so that verify finds what was altered or taken out.`,
		Example: "  padproof ledger list --verdict FAIL",
		RunE:    func(cmd *cobra.Command, args []string) error { return cmd.Help() },
		Args: func(cmd *cobra.Command, args []string) error {
			if len(args) > 0 {
				return usageError(cmd, "there is no command %q", args[0])
			}
			return nil
		},
	}
	cmd.AddCommand(newLedgerList(), newLedgerShow(), newLedgerExport(), newLedgerVerify())
	return cmd
}

// readFlags are those of every ledger command.
type readFlags struct {
	ledger string
}

func (f *readFlags) addTo(cmd *cobra.Command) {
	cmd.Flags().SortFlags = false
	cmd.Flags().StringVar(&f.ledger, "ledger", "", "the ledger: a file or postgres://USER@HOST/DATABASE; "+ledgerVariable+", else this machine's own, if left out")
	_ = cmd.MarkFlagFilename("ledger", "db")
}

// open opens the ledger to read it.
func (f *readFlags) open(ctx context.Context) (*ledger.Ledger, error) {
	place, err := (&recordFlags{ledger: f.ledger}).placeOrDefault()
	if err != nil {
		return nil, err
	}
	return ledger.OpenWith(ctx, place, ledger.Options{ReadOnly: true})
}

// filterFlags pick records.
type filterFlags struct {
	filter   ledger.Filter
	from, to string
}

func (f *filterFlags) addTo(cmd *cobra.Command) {
	flags := cmd.Flags()
	flags.StringVar(&f.filter.Unit, "unit", "", "only this unit")
	flags.StringVar(&f.filter.Lot, "lot", "", "only this lot")
	flags.StringVar(&f.filter.Drawing, "drawing", "", "only this drawing, by the name in pad.toml")
	flags.StringVar(&f.filter.Verdict, "verdict", "", "only PASS, FAIL or UNPROVEN")
	flags.StringVar(&f.filter.Station, "station", "", "only this station")
	flags.StringVar(&f.filter.Kind, "kind", "", "only check (of a unit) or rigcheck")
	flags.StringVar(&f.from, "from", "", "from this date or time on, UTC: 2026-11-30 or 2026-11-30T14:05")
	flags.StringVar(&f.to, "to", "", "up to this date, the whole day, or up to this time, UTC")
}

// read puts the dates in and looks whether the words are ones there are.
func (f *filterFlags) read(cmd *cobra.Command) (ledger.Filter, error) {
	filter := f.filter
	filter.Verdict = strings.ToUpper(filter.Verdict)
	switch filter.Verdict {
	case "", "PASS", "FAIL", "UNPROVEN":
	default:
		return filter, usageError(cmd, "--verdict wants PASS, FAIL or UNPROVEN, not %q", f.filter.Verdict)
	}
	switch filter.Kind {
	case "", ledger.UnitCheck, ledger.RigCheck:
	default:
		return filter, usageError(cmd, "--kind wants %s or %s, not %q", ledger.UnitCheck, ledger.RigCheck, filter.Kind)
	}
	var err error
	if filter.From, _, err = readTime(cmd, "from", f.from); err != nil {
		return filter, err
	}
	to, wholeDay, err := readTime(cmd, "to", f.to)
	if wholeDay {
		to = to.AddDate(0, 0, 1)
	}
	filter.To = to
	return filter, err
}

// readTime reads a date or a time in UTC; "" is the zero time.
func readTime(cmd *cobra.Command, flag, text string) (at time.Time, wholeDay bool, err error) {
	if text == "" {
		return at, false, nil
	}
	for _, form := range []string{time.DateOnly, "2006-01-02T15:04", "2006-01-02T15:04:05", time.RFC3339Nano} {
		if at, err = time.Parse(form, text); err == nil {
			return at, form == time.DateOnly, nil
		}
	}
	return at, false, usageError(cmd, "--%s wants a date as 2026-11-30 or a time as 2026-11-30T14:05, not %q", flag, text)
}

// readRecord reads STATION/SEQUENCE.
func readRecord(text string) (station string, sequence int64, ok bool) {
	slash := strings.LastIndexByte(text, '/')
	if slash < 1 {
		return "", 0, false
	}
	n, err := strconv.ParseInt(text[slash+1:], 10, 64)
	return text[:slash], n, err == nil && n > 0
}
