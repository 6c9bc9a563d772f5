package main

import (
	"strings"

	"github.com/spf13/cobra"

	"padproof/cmd/padproof/internal/proof"
	"padproof/cmd/padproof/internal/report"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/rigcheck"
	"padproof/cmd/padproof/internal/sheet"
	"padproof/cmd/padproof/internal/unit"
)

// rigCheckFlags are those of rigcheck.
type rigCheckFlags struct {
	rig       string
	channel   int
	trial     bool
	verbose   bool
	recording recordFlags
}

func newRigCheck() *cobra.Command {
	var f rigCheckFlags
	cmd := &cobra.Command{
		Use:   "rigcheck FOLDER",
		Short: "Check the bench itself by a reference pad; its chart; the repeatability study",
		Long: `Check the bench itself: measure a reference pad of known loss, hold the reading against what
is known and against the readings before, and record it in the ledger as a rig check.

FOLDER holds before.wav and after.wav of the reference pad, recorded just now; it bears the
pad's name, or lies in a folder that does (REF-14, or REF-14/monday). rig.toml says what is known:

  [reference]
  serial         = "REF-14"
  loss_db        = 13.57     # as this bench reads it in order; or pad = "ref14.toml", its drawing
  uncertainty_db = 0.03      # of loss_db, k = 2
  within_db      = 0.1       # how far off is still good, U included
  every_hours    = 8         # how long a rig check holds
  required       = true      # lot and watch let no unit pass without one
  chart_from     = 2026-11-30  # after a mend that moved the bench for good

The record goes into the ledger that --ledger or ` + ledgerVariable + ` names, else into this machine's own.

Before you connect anything:
  ` + strings.Join(result.Cautions, "\n  ") + `

Exit status: 0 the bench is in order, 1 it is out, 2 the reading proves nothing, 3 could not
check, or not record.`,
		Example: `  padproof rigcheck REF-14 --operator anna
  padproof rigcheck chart        the bench as it stands, at the start of a shift
  padproof rigcheck study gauge  how well operators repeat`,
		Args: func(cmd *cobra.Command, args []string) error {
			switch {
			case len(args) == 0:
				return usageError(cmd, "which takes? name the folder of the reference pad, or one of chart and study")
			case len(args) > 1:
				return usageError(cmd, "one folder at a time; %q is one too many", args[1])
			}
			return nil
		},
		RunE: func(cmd *cobra.Command, args []string) error { return runRigCheck(cmd, args[0], f) },
	}
	flags := cmd.Flags()
	flags.SortFlags = false
	flags.StringVar(&f.rig, "rig", "", "the bench, rig.toml; found in FOLDER or above if left out")
	flags.IntVar(&f.channel, "channel", 0, "the channel that holds the tone, from 1; found if left out")
	flags.BoolVar(&f.trial, "trial", false, "measure and judge, but record nothing")
	flags.StringVar(&f.recording.ledger, "ledger", "", "the ledger, a file or postgres://USER@HOST/DATABASE; "+ledgerVariable+", else this machine's own, if left out")
	flags.StringVar(&f.recording.station, "station", "", "the bench's name in the ledger; "+stationVariable+", else this machine's name, if left out")
	flags.StringVar(&f.recording.operator, "operator", "", "who checks, for the ledger")
	flags.BoolVar(&f.recording.simulated, "record-simulated", false, "let a simulated reading into the ledger, for a trial")
	flags.BoolVarP(&f.verbose, "verbose", "v", false, "show all readings, the takes and the uncertainty budget")
	_ = cmd.MarkFlagFilename("rig", "toml")
	_ = cmd.MarkFlagFilename("ledger", "db")
	cmd.SetUsageTemplate(strings.Replace(usageTemplate, "{{if .HasAvailableSubCommands}}{{.CommandPath}} COMMAND [flags]{{else}}{{.UseLine}}{{end}}", "{{.UseLine}}", 1))
	cmd.AddCommand(newRigChart(), newRigStudy())
	return cmd
}

// referenceUnit finds the takes of the reference pad, and the sheet of its bench.
func (f rigCheckFlags) referenceUnit(folder string) (*unit.Unit, *sheet.Rig, error) {
	u, err := unit.Open(folder)
	if err != nil {
		return nil, nil, err
	}
	switch {
	case f.rig != "":
		u.RigFile = f.rig
	case u.RigFile == "":
		if u.RigFile, err = unit.RigSheet(folder); err != nil {
			return nil, nil, err
		}
	}
	rig, err := readReference(u.RigFile)
	if err != nil {
		return nil, nil, err
	}
	u.PadFile = rig.Reference.PadFile
	return u, rig, rigcheck.Belongs(u, rig)
}

// readReference reads a sheet that must have a reference pad.
func readReference(path string) (*sheet.Rig, error) {
	rig, err := sheet.ReadRig(path)
	if err != nil {
		return nil, err
	}
	if rig.Reference == nil {
		return nil, &result.Error{File: path, Text: "names no reference pad", Hint: "add a [reference] section: padproof rigcheck --help shows one"}
	}
	return rig, nil
}

func runRigCheck(cmd *cobra.Command, folder string, f rigCheckFlags) error {
	if cmd.Flags().Changed("channel") && f.channel < 1 {
		return usageError(cmd, "--channel counts from 1, not %d", f.channel)
	}
	u, rig, err := f.referenceUnit(folder)
	if err != nil {
		return err
	}
	known, err := rigcheck.KnownOf(rig)
	if err != nil {
		return err
	}
	answer, err := rigcheck.Measure(u, rig, known, proof.Options{Channel: f.channel})
	if err != nil {
		return err
	}
	ctx, stop := untilInterrupted(cmd)
	defer stop()
	chart, failed := f.enter(ctx, u, rig, known, answer)
	if failed != nil && chart == nil {
		return failed
	}
	if failed != nil {
		answer.RecordError = describe(failed)
	}
	if wantsJSON(cmd) {
		err = writeJSON(cmd.OutOrStdout(), chart)
	} else {
		err = report.RigCheckText(cmd.OutOrStdout(), chart, f.verbose)
		if err == nil && answer.Recorded != nil {
			err = report.RecordedText(cmd.OutOrStdout(), answer.Recorded)
		}
	}
	if err != nil {
		return err
	}
	if failed != nil {
		return notRecorded(cmd, answer.RecordError)
	}
	return statusOf(chart.Verdict)
}
