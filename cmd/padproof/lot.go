package main

import (
	"encoding/json"
	"io"
	"runtime"
	"time"

	"github.com/spf13/cobra"

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
	workers  int

	recording recordFlags
}

func newLot() *cobra.Command {
	var f lotFlags
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

A unit that cannot be checked is named, and the rest go on. With --json there is a line for
each unit, as check prints it, and a last one for the lot.

Exit status: 3 if a unit could not be checked, else 1 if one fails, else 2 if one is
unproven, else 0.`,
		Example: `  padproof lot testdata/saltmarsh
  padproof lot lot12 --csv lot12.csv`,
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
	flags.StringVar(&f.pad, "pad", "", "the drawing of all units, in place of their own")
	flags.StringVar(&f.rig, "rig", "", "the bench of all units, in place of their own")
	flags.IntVar(&f.workers, "workers", runtime.NumCPU(), "units checked at a time")
	f.recording.addTo(cmd)
	_ = cmd.MarkFlagFilename("csv", "csv")
	_ = cmd.MarkFlagFilename("pad", "toml")
	_ = cmd.MarkFlagFilename("rig", "toml")
	return cmd
}

func runLot(cmd *cobra.Command, folder string, f lotFlags) error {
	if f.workers < 1 {
		return usageError(cmd, "--workers counts from 1, not %d", f.workers)
	}
	units, tally, err := f.open(folder)
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
	out := coloured(cmd.OutOrStdout())
	show := lotLines(out, wantsJSON(cmd), units)
	err = lot.Run(ctx, units, f.workers, proof.Options{}, func(o lot.Outcome) error {
		_ = gate.Hold(ctx, o.Unit, o.Answer, time.Now()) // what it met stands in the answer
		recorder.record(ctx, o.Answer)
		return show(o, tally.Add(o, describe))
	})
	if err != nil {
		return afterInterrupt(err)
	}
	tally.Warn(gate.Notes()...)
	together, err := tally.Lot()
	if err != nil {
		return err
	}
	together.Recorded = recorder.head
	if f.csv != "" {
		if err := whole.Write(ctx, f.csv, func(w io.Writer) error { return report.LotCSV(w, together) }); err != nil {
			return err
		}
	}
	if wantsJSON(cmd) {
		err = writeLine(out, together)
	} else {
		err = report.LotText(out, together)
	}
	if err != nil {
		return err
	}
	if lost := recorder.failure(); lost != nil {
		printError(cmd.ErrOrStderr(), lost)
		return exitStatus(exitNoCheck)
	}
	return lotStatus(together)
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
