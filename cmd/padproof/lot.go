package main

import (
	"context"
	"encoding/json"
	"io"
	"path/filepath"
	"runtime"
	"time"

	"github.com/spf13/cobra"

	"padproof/cmd/padproof/internal/draw"
	"padproof/cmd/padproof/internal/lot"
	"padproof/cmd/padproof/internal/proof"
	"padproof/cmd/padproof/internal/report"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/unit"
	"padproof/cmd/padproof/internal/whole"
)

// lotFlags are those of lot.
type lotFlags struct {
	pad, rig string
	csv      string
	report   string
	reports  string
	plots    string
	workers  int
	now      func() time.Time

	recording recordFlags
}

func newLot() *cobra.Command {
	f := lotFlags{now: time.Now}
	cmd := &cobra.Command{
		Use:   "lot FOLDER",
		Short: "Check every unit in a folder",
		Long: `Check every unit in a folder, several at a time, and say what they show together: yield,
spread, capability, a chart, and what is likely behind it.

FOLDER holds a folder for each unit, or takes named SERIAL.ROLE.wav; sheets, and takes of
the rig alone, serve every unit there. Where one set of takes holds a unit in each channel,
lot.toml names them:

  name = "Saltmarsh lot 12"
  [channels]
  1 = "0417"
  2 = "0418"

With --ledger each unit is recorded before its line is printed. Where rig.toml asks for rig
checks (required under [reference]), no unit passes without one in order in that ledger:
padproof rigcheck --help says how.

Units stand in the order of their serials, figures in them taken as numbers (SM-9 before
SM-10), and that counts as the order of making: chart, trend, step and the capability within
rest on it; yield, mean and spread do not. Where serials do not follow the making, read those
with care.

A unit that cannot be checked is named, and the rest go on. With --json there is a line for
each unit, as check prints it, and a last one for the lot. --report writes a page for whoever
must know how the lot went, --reports one for each unit besides, to which the lot's page leads.

Exit status: 3 if a unit could not be checked, else 1 if one fails, else 2 if one is
unproven, else 0.`,
		Example: `  padproof lot testdata/saltmarsh
  padproof lot lot12 --csv lot12.csv
  padproof lot lot12 --report lot12.html --reports lot12-units`,
		Args: func(cmd *cobra.Command, args []string) error {
			switch {
			case len(args) == 0:
				return usageError(cmd, "which lot? name its folder")
			case len(args) > 1:
				return usageError(cmd, "one folder at a time; %q is one too many", args[1])
			}
			return nil
		},
		RunE: func(cmd *cobra.Command, args []string) error { return runLot(cmd, args[0], f) },
	}
	flags := cmd.Flags()
	flags.SortFlags = false
	flags.StringVar(&f.csv, "csv", "", "write a table of all units to this file")
	flags.StringVar(&f.report, "report", "", "write the lot as a page to keep and to send, FILE.html")
	flags.StringVar(&f.reports, "reports", "", "write each unit's page into this folder, SERIAL.html")
	addPlots(cmd, &f.plots)
	flags.StringVar(&f.pad, "pad", "", "the drawing of all units, in place of their own")
	flags.StringVar(&f.rig, "rig", "", "the bench of all units, in place of their own")
	flags.IntVar(&f.workers, "workers", runtime.NumCPU(), "units checked at a time")
	f.recording.addTo(cmd)
	_ = cmd.MarkFlagFilename("csv", "csv")
	_ = cmd.MarkFlagFilename("report", "html", "htm")
	_ = cmd.MarkFlagDirname("reports")
	_ = cmd.MarkFlagFilename("pad", "toml")
	_ = cmd.MarkFlagFilename("rig", "toml")
	return cmd
}

func runLot(cmd *cobra.Command, folder string, f lotFlags) error {
	if f.workers < 1 {
		return usageError(cmd, "--workers counts from 1, not %d", f.workers)
	}
	if cmd.Flags().Changed("report") {
		if err := checkReportPath(cmd, f.report); err != nil {
			return err
		}
	}
	if dir := filepath.Dir(f.csv); f.csv != "" && !isFolder(dir) {
		return &result.Error{File: f.csv, Text: "there is no folder " + dir, Hint: "make it first, or name another"}
	}
	if f.csv != "" {
		if err := checkTablePath(f.csv); err != nil {
			return err
		}
	}
	units, tally, err := f.open(folder)
	if err != nil {
		return err
	}
	pages, err := f.unitPages(cmd, units)
	if err != nil {
		return err
	}
	ctx, stop := untilInterrupted(cmd)
	defer stop()
	gate, done := f.recording.rigGate()
	defer done()
	recorder, err := f.recording.lotRecorder(ctx, tally.Name())
	if err != nil {
		return err
	}
	defer recorder.close()
	settle := func(o lot.Outcome) {
		_ = gate.Hold(ctx, o.Unit, o.Answer, time.Now()) // what it met stands in the answer
		recorder.record(ctx, o.Answer)
	}
	if err := f.check(ctx, cmd, units, tally, pages, settle); err != nil {
		return pages.afterInterrupt(err)
	}
	tally.Warn(gate.Notes()...)
	checked, err := tally.Lot()
	if err != nil {
		return err
	}
	checked.Recorded = recorder.head
	unwritten := f.write(ctx, cmd, checked)
	if wantsJSON(cmd) {
		err = writeLine(cmd.OutOrStdout(), checked)
	} else {
		err = report.LotText(coloured(cmd.OutOrStdout()), checked)
	}
	if err != nil {
		return err
	}
	return endLot(cmd, checked, pages.afterInterrupt(unwritten), recorder.failure())
}

// endLot is the exit status of a lot that was printed.
func endLot(cmd *cobra.Command, l *result.Lot, unwritten error, lost *result.Error) error {
	switch {
	case unwritten != nil:
		printError(cmd.ErrOrStderr(), describe(unwritten))
	case lost != nil:
		printError(cmd.ErrOrStderr(), lost)
	default:
		return lotStatus(l)
	}
	return exitStatus(exitNoCheck)
}

// check checks all units, settles what becomes of each, and shows it.
func (f lotFlags) check(ctx context.Context, cmd *cobra.Command, units []*unit.Unit, tally *lot.Tally, pages *unitPages, settle func(lot.Outcome)) error {
	out := cmd.OutOrStdout()
	show := lotLines(coloured(out), wantsJSON(cmd), units)
	var shown *progress
	if !isTerminal(out) { // there the lines themselves show how far it is
		shown = progressOn(cmd.ErrOrStderr(), "checking units")
	}
	defer shown.clear()
	done := int64(0)
	o := proof.Options{Err: ctx.Err, Curves: pages != nil}
	return lot.Run(ctx, units, f.workers, o, func(o lot.Outcome) error {
		settle(o)
		row := tally.Add(o, describe)
		if o.Answer != nil && pages != nil {
			path, err := pages.write(ctx, o.Unit, o.Answer)
			if err != nil {
				return err
			}
			row.Report, o.Answer.Curves = path, nil
		}
		done++
		shown.tell(done, int64(len(units)))
		return show(o, row)
	})
}

// write writes the files that were asked for.
func (f lotFlags) write(ctx context.Context, cmd *cobra.Command, l *result.Lot) error {
	if f.csv != "" {
		if err := whole.Write(ctx, f.csv, func(w io.Writer) error { return report.LotCSV(w, l) }); err != nil {
			return err
		}
	}
	if f.report != "" {
		if err := writeLotReport(ctx, f.report, l, f.now()); err != nil {
			return err
		}
	}
	return writePlots(cmd, f.plots, func() []*draw.Picture { return lotPictures(l) })
}

// open finds the units of a folder and begins the tally.
func (f lotFlags) open(folder string) ([]*unit.Unit, *lot.Tally, error) {
	found, name, err := lot.Open(folder)
	if err != nil {
		return nil, nil, err
	}
	for _, u := range found.Units {
		if f.pad != "" {
			u.PadFile = f.pad
		}
		if f.rig != "" {
			u.RigFile = f.rig
		}
	}
	tally := lot.NewTally(name)
	tally.Warn(found.Warnings...)
	return found.Units, tally, nil
}

// lotLines shows each unit as it is done.
func lotLines(w io.Writer, asJSON bool, units []*unit.Unit) func(lot.Outcome, *result.LotRow) error {
	if asJSON {
		return func(o lot.Outcome, row *result.LotRow) error {
			if o.Answer != nil {
				o.Answer.Curves = nil // they are for pictures; check does not print them either
				return writeLine(w, o.Answer)
			}
			return writeLine(w, result.Failure{Schema: result.CheckSchema, Unit: row.Unit, Error: *row.Error})
		}
	}
	var serials []string
	for _, u := range units {
		serials = append(serials, u.Serial)
	}
	rows := report.LotRows(w, serials)
	return func(_ lot.Outcome, row *result.LotRow) error { return rows(row) }
}

// writeLine prints one object on one line.
func writeLine(w io.Writer, v any) error {
	encoder := json.NewEncoder(w)
	encoder.SetEscapeHTML(false)
	return encoder.Encode(v)
}

// lotStatus is the exit status of a lot.
func lotStatus(l *result.Lot) error {
	if l.Verdict == "" {
		return exitStatus(exitNoCheck)
	}
	return statusOf(l.Verdict)
}
