package main

import (
	"time"

	"github.com/spf13/cobra"

	"padproof/cmd/padproof/internal/ledger"
	"padproof/cmd/padproof/internal/report"
	"padproof/cmd/padproof/internal/rigcheck"
	"padproof/cmd/padproof/internal/unit"
)

func newRigChart() *cobra.Command {
	var f rigCheckFlags
	cmd := &cobra.Command{
		Use:   "chart [FOLDER]",
		Short: "Show whether the bench is in order, and its reference pad's last readings",
		Long: `Show whether the bench is in order as it stands, until when, and the last readings of its
reference pad, without measuring anything: what to look at when a shift begins. rig.toml is that
of FOLDER, or of the folder you are in, or one above.

Exit status: 0 in order, 1 out, 2 no rig check, too old, or it proves nothing, 3 could not look.`,
		Example: "  padproof rigcheck chart --rig rig.toml",
		Args: func(cmd *cobra.Command, args []string) error {
			if len(args) > 1 {
				return usageError(cmd, "one folder at a time; %q is one too many", args[1])
			}
			return nil
		},
		RunE: func(cmd *cobra.Command, args []string) error {
			folder := "."
			if len(args) == 1 {
				folder = args[0]
			}
			return runRigChart(cmd, folder, f)
		},
	}
	flags := cmd.Flags()
	flags.SortFlags = false
	flags.StringVar(&f.rig, "rig", "", "the bench, rig.toml")
	flags.StringVar(&f.recording.ledger, "ledger", "", "the ledger, a file or postgres://USER@HOST/DATABASE; "+ledgerVariable+", else this machine's own, if left out")
	flags.StringVar(&f.recording.station, "station", "", "the bench's name in the ledger; "+stationVariable+", else this machine's name, if left out")
	flags.BoolVar(&f.recording.simulated, "simulated", false, "show the chart of simulated readings")
	flags.BoolVarP(&f.verbose, "verbose", "v", false, "show all readings")
	_ = cmd.MarkFlagFilename("rig", "toml")
	_ = cmd.MarkFlagFilename("ledger", "db")
	return cmd
}

func runRigChart(cmd *cobra.Command, folder string, f rigCheckFlags) error {
	path := f.rig
	if path == "" {
		var err error
		if path, err = unit.RigSheet(folder); err != nil {
			return err
		}
	}
	rig, err := readReference(path)
	if err != nil {
		return err
	}
	known, err := rigcheck.KnownOf(rig)
	if err != nil {
		return err
	}
	place, station, err := f.where()
	if err != nil {
		return err
	}
	ctx, stop := untilInterrupted(cmd)
	defer stop()
	var readings []rigcheck.Reading
	l, err := openToLook(ctx, place)
	missing := ledger.ReasonOf(err) == ledger.Missing
	switch {
	case missing:
	case err != nil:
		return err
	default:
		defer func() { _ = l.Close() }()
		if readings, err = rigcheck.Readings(ctx, l, station, rig, f.recording.simulated, time.Time{}); err != nil {
			return err
		}
	}
	chart, err := rigcheck.ChartOf(rig, known, readings, time.Now())
	if err != nil {
		return err
	}
	chart.Station, chart.Ledger, chart.Simulated = station, shownPlace(l, place), f.recording.simulated
	if missing {
		chart.Notes = append(chart.Notes, "there is no ledger at "+chart.Ledger+" yet")
	}
	if wantsJSON(cmd) {
		err = writeJSON(cmd.OutOrStdout(), chart)
	} else {
		err = report.RigCheckText(cmd.OutOrStdout(), chart, f.verbose)
	}
	if err != nil {
		return err
	}
	return statusOf(chart.Verdict)
}
