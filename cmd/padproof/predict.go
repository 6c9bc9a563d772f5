package main

import (
	"github.com/spf13/cobra"

	"padproof/cmd/padproof/internal/draw"
	"padproof/cmd/padproof/internal/proof"
	"padproof/cmd/padproof/internal/report"
)

// predictFlags are those of predict.
type predictFlags struct {
	pad, rig string
	verbose  bool
	plots    string
	options  proof.PredictOptions
}

func newPredict() *cobra.Command {
	f := predictFlags{options: proof.DefaultPredict}
	cmd := &cobra.Command{
		Use:   "predict --pad PAD.toml [--rig RIG.toml]",
		Short: "Say what a drawing should measure, before anything is built or recorded",
		Long: `Say what a drawing should measure on this rig and in service: loss, its spread by the
tolerances, response, impedances, ohmmeter readings, dissipation, phantom voltage lost;
whether this bench could prove its limits, which parts it could not see, and which
recordings to make.`,
		Example: "  padproof predict --pad testdata/saltmarsh/pad.toml --rig testdata/saltmarsh/rig.toml",
		Args: func(cmd *cobra.Command, args []string) error {
			if len(args) > 0 {
				return usageError(cmd, "name the drawing with --pad; %q is one word too many", args[0])
			}
			return nil
		},
		RunE: func(cmd *cobra.Command, args []string) error { return runPredict(cmd, f) },
	}
	flags := cmd.Flags()
	flags.SortFlags = false
	flags.StringVar(&f.pad, "pad", "", "the drawing, pad.toml")
	flags.StringVar(&f.rig, "rig", "", "the bench, rig.toml; cautious figures if left out")
	flags.Float64Var(&f.options.ToneHz, "tone-hz", f.options.ToneHz, "the tone the loss is for")
	flags.Float64Var(&f.options.InputDBu, "input-dbu", f.options.InputDBu, "level into the pad, for what the parts dissipate")
	flags.Float64Var(&f.options.PhantomMA, "phantom-ma", f.options.PhantomMA, "current drawn from phantom power, both legs together")
	flags.BoolVarP(&f.verbose, "verbose", "v", false, "add the uncertainty budget")
	addPlots(cmd, &f.plots)
	_ = cmd.MarkFlagFilename("pad", "toml")
	_ = cmd.MarkFlagFilename("rig", "toml")
	return cmd
}

func runPredict(cmd *cobra.Command, f predictFlags) error {
	switch o := f.options; {
	case f.pad == "":
		return usageError(cmd, "which drawing? name it with --pad")
	case !(o.ToneHz >= 1 && o.ToneHz <= 200e3):
		return usageError(cmd, "--tone-hz wants 1 to 200000, not %v", o.ToneHz)
	case !(o.InputDBu >= -200 && o.InputDBu <= 80):
		return usageError(cmd, "--input-dbu wants -200 to 80, not %v", o.InputDBu)
	case !(o.PhantomMA >= 0 && o.PhantomMA <= 100):
		return usageError(cmd, "--phantom-ma wants 0 to 100, not %v", o.PhantomMA)
	}
	drawing, err := proof.Load(f.pad, f.rig)
	if err != nil {
		return err
	}
	f.options.Curves = f.plots != ""
	prediction, err := proof.Predict(drawing, f.options)
	if err != nil {
		return err
	}
	if err := writePlots(cmd, f.plots, func() []*draw.Picture { return draw.OfPrediction(prediction) }); err != nil {
		return err
	}
	if wantsJSON(cmd) {
		return writeJSON(cmd.OutOrStdout(), prediction)
	}
	return report.PredictionText(cmd.OutOrStdout(), prediction, f.verbose)
}
