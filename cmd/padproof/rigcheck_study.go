package main

import (
	"context"
	"os"
	"runtime"
	"strings"

	"github.com/spf13/cobra"

	"padproof/cmd/padproof/internal/report"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/study"
	"padproof/compare"
)

// studyFlags are those of rigcheck study.
type studyFlags struct {
	sheets    study.Sheets
	low, high float64
	workers   int
}

func newRigStudy() *cobra.Command {
	var f studyFlags
	cmd := &cobra.Command{
		Use:   "study FOLDER | FILE.csv",
		Short: "Work out repeatability and reproducibility from readings by several operators",
		Long: `Work out how well this bench repeats, and operators agree, from n operators who measured the
same n units n times each (two-way analysis of variance, AIAG MSA 4th ed.): where the spread of
the readings comes from, and how much of the tolerance the bench takes.

FOLDER holds a folder for each operator, with a folder for each round inside that is laid out as
any lot may be; sheets in FOLDER serve all:

  gauge/pad.toml  gauge/rig.toml
  gauge/anna/1/before.wav  gauge/anna/1/0417.after.wav  gauge/anna/1/0418.after.wav
  gauge/anna/2/…           gauge/berta/1/…

Unplug everything between rounds: what stays plugged is not tried. Ten units, three operators,
three rounds are usual.

FILE.csv names its columns in the first line: operator, unit, repeat, value.

Before anything is connected:
  ` + strings.Join(result.Cautions, "\n  "),
		Example: `  padproof rigcheck study gauge
  padproof rigcheck study readings.csv --low 13.7 --high 14.3`,
		Args: func(cmd *cobra.Command, args []string) error {
			switch {
			case len(args) == 0:
				return usageError(cmd, "which study? name its folder, or a table of readings")
			case len(args) > 1:
				return usageError(cmd, "one study at a time; %q is one too many", args[1])
			}
			return nil
		},
		RunE: func(cmd *cobra.Command, args []string) error { return runRigStudy(cmd, args[0], f) },
	}
	flags := cmd.Flags()
	flags.SortFlags = false
	flags.Float64Var(&f.low, "low", 0, "the lower limit of the tolerance; that of the drawing's loss if left out")
	flags.Float64Var(&f.high, "high", 0, "the upper limit")
	flags.StringVar(&f.sheets.Pad, "pad", "", "the drawing of all units, in place of what lies in FOLDER")
	flags.StringVar(&f.sheets.Rig, "rig", "", "the bench of all units, in place of what lies in FOLDER")
	flags.IntVar(&f.workers, "workers", runtime.NumCPU(), "units measured at a time")
	_ = cmd.MarkFlagFilename("pad", "toml")
	_ = cmd.MarkFlagFilename("rig", "toml")
	return cmd
}

func runRigStudy(cmd *cobra.Command, path string, f studyFlags) error {
	limited := cmd.Flags().Changed("low")
	switch {
	case limited != cmd.Flags().Changed("high"):
		return usageError(cmd, "--low and --high go together: a share of the tolerance needs both")
	case limited && !(f.low < f.high && f.high-f.low < 1e12):
		return usageError(cmd, "--low %v and --high %v are no range", f.low, f.high)
	case f.workers < 1:
		return usageError(cmd, "--workers counts from 1, not %d", f.workers)
	}
	ctx, stop := untilInterrupted(cmd)
	defer stop()
	data, err := f.read(ctx, cmd, path)
	if err != nil {
		return afterInterrupt(err)
	}
	if limited {
		data.Limit = compare.Limit{Low: f.low, High: f.high}
	}
	done, err := study.Of(data)
	if err != nil {
		return err
	}
	if wantsJSON(cmd) {
		return writeJSON(cmd.OutOrStdout(), done)
	}
	return report.StudyText(cmd.OutOrStdout(), done)
}

// read measures a folder, or reads a table.
func (f studyFlags) read(ctx context.Context, cmd *cobra.Command, path string) (*study.Data, error) {
	info, err := os.Stat(path)
	if err != nil {
		return nil, err
	}
	if info.IsDir() {
		return study.Folder(ctx, path, f.sheets, f.workers)
	}
	if f.sheets != (study.Sheets{}) {
		return nil, usageError(cmd, "--pad and --rig are for a folder of takes, not for a table: give its limits with --low and --high")
	}
	file, err := os.Open(path)
	if err != nil {
		return nil, err
	}
	defer func() { _ = file.Close() }()
	return study.ReadCSV(path, file)
}
