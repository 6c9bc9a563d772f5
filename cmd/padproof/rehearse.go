package main

import (
	"errors"
	"fmt"
	"strings"

	"github.com/spf13/cobra"

	"padproof/cmd/padproof/internal/proof"
	"padproof/cmd/padproof/internal/rehearsal"
	"padproof/cmd/padproof/internal/result"
	"padproof/compare/network"
)

// rehearseFlags are those of rehearse.
type rehearseFlags struct {
	pad, rig, out string
	signal        string
	faults        []string
	vary          bool
	plan          rehearsal.Plan // what the flags say of it
}

func newRehearse() *cobra.Command {
	var f rehearseFlags
	cmd := &cobra.Command{
		Use:   "rehearse --pad PAD.toml --rig RIG.toml --out FOLDER",
		Short: "Write simulated recordings of a drawing on a rig",
		Long: `Write the recordings that a person would make of this drawing on this rig, sound or with
a fault, to see what the rig could prove. FOLDER gets before.wav, after.wav and copies of
the sheets, so that padproof check FOLDER works at once; nothing there is overwritten. The
recordings are marked SIMULATED inside, and so is every answer made from them.

A --fault is written R3 open, R3 short, R3 x10, R3 /10, R3 is 360, R3 drifted +12 % or
R1 and R3 swapped, and may be given more than once. Without --vary every part and figure
is exactly as stated; the same command gives the same files.`,
		Example: `  padproof rehearse --pad pad.toml --rig rig.toml --out 0417
  padproof rehearse --pad pad.toml --rig rig.toml --out 0418 --fault "R3 open" --signal test --vary --seed 7`,
		Args: func(cmd *cobra.Command, args []string) error {
			if len(args) > 0 {
				return usageError(cmd, "name the folder with --out; %q is one word too many", args[0])
			}
			return nil
		},
		RunE: func(cmd *cobra.Command, args []string) error { return runRehearse(cmd, f) },
	}
	flags, p := cmd.Flags(), &f.plan
	flags.SortFlags = false
	flags.StringVar(&f.pad, "pad", "", "the drawing, pad.toml")
	flags.StringVar(&f.rig, "rig", "", "the bench, rig.toml")
	flags.StringVar(&f.out, "out", "", "the folder to write to; made if it is not there")
	flags.StringVar(&f.signal, "signal", "tone", "what is played: tone (steady) or test (the test signal)")
	flags.Float64Var(&p.Signal.ToneHz, "tone-hz", 997, "the steady tone in hertz")
	flags.Float64Var(&p.Signal.Sec, "seconds", 4, "how long the steady tone lasts, half a second of silence on either side")
	flags.Float64Var(&p.LevelDBFS, "level-dbfs", -6, "level of the tone in before")
	flags.Float64Var(&p.NoiseDBFS, "noise-dbfs", -100, "white noise in every take, RMS from 20 Hz to 20 kHz; -inf for none")
	flags.StringArrayVar(&f.faults, "fault", nil, "what is wrong with the unit, such as \"R3 open\"; repeatable")
	flags.BoolVar(&f.vary, "vary", false, "draw parts, source, load, cable and gains from their tolerances")
	flags.Uint64Var(&p.Seed, "seed", 1, "seed of the noise and of --vary")
	flags.IntVar(&p.RateHz, "rate", 48000, "sample rate in hertz, 8000 to 384000")
	flags.IntVar(&p.Bits, "bits", 24, "bits a sample: 16, 24 or 32")
	flags.BoolVar(&p.Float, "float", false, "samples as floats, of 32 bits")
	_ = cmd.MarkFlagFilename("pad", "toml")
	_ = cmd.MarkFlagFilename("rig", "toml")
	_ = cmd.MarkFlagDirname("out")
	_ = cmd.RegisterFlagCompletionFunc("signal", cobra.FixedCompletions([]string{"tone", "test"}, cobra.ShellCompDirectiveNoFileComp))
	return cmd
}

func runRehearse(cmd *cobra.Command, f rehearseFlags) error {
	if err := f.settle(cmd); err != nil {
		return err
	}
	drawing, err := proof.Load(f.pad, f.rig)
	if err != nil {
		return err
	}
	faults, err := parseFaults(drawing.Circuit, f.faults)
	if err != nil {
		return err
	}
	plan := f.build(drawing, faults)
	if err := plan.Check(); err != nil {
		return usageError(cmd, "%v", err)
	}
	ctx, stop := untilInterrupted(cmd)
	defer stop()
	takes, err := plan.Record(ctx, f.out, rehearsal.Sheets{Pad: f.pad, Rig: f.rig})
	if err != nil {
		return afterInterrupt(err)
	}
	r := f.rehearsed(drawing, faults, plan, takes)
	if wantsJSON(cmd) {
		return writeJSON(cmd.OutOrStdout(), r)
	}
	return rehearsalText(cmd.OutOrStdout(), r)
}

// settle checks the flags against one another and puts into the plan what follows.
func (f *rehearseFlags) settle(cmd *cobra.Command) error {
	given := cmd.Flags().Changed
	switch {
	case f.pad == "":
		return usageError(cmd, "which drawing? name it with --pad")
	case f.rig == "":
		return usageError(cmd, "on which bench? name its sheet with --rig")
	case f.out == "":
		return usageError(cmd, "where to? name a folder with --out")
	case f.signal != "tone" && f.signal != "test":
		return usageError(cmd, "--signal is tone or test, not %q", f.signal)
	case f.signal == "test" && (given("tone-hz") || given("seconds")):
		return usageError(cmd, "--tone-hz and --seconds are for a steady tone, not for --signal test")
	}
	f.plan.Signal.Test = f.signal == "test"
	if f.plan.Float && !given("bits") {
		f.plan.Bits = 32
	}
	return nil
}

func parseFaults(c *network.Circuit, texts []string) ([]network.Fault, error) {
	var faults []network.Fault
	for _, text := range texts {
		fault, err := network.ParseFault(c, text)
		var bad *network.Error
		if errors.As(err, &bad) {
			return nil, &result.Error{Text: "--fault: " + bad.Text, Hint: bad.Hint}
		}
		if err != nil {
			return nil, err
		}
		faults = append(faults, fault)
	}
	return faults, nil
}

// build makes the unit and the bench.
func (f *rehearseFlags) build(d *proof.Drawing, faults []network.Fault) rehearsal.Plan {
	p := f.plan
	p.Pad = d.Circuit
	notes := []string{fmt.Sprintf("seed %d", p.Seed)}
	for _, fault := range faults {
		p.Pad = fault.Apply(p.Pad)
		notes = append(notes, fault.String())
	}
	p.Bench = rehearsal.Bench{Ends: d.Rig.Ends, AfterGainDB: d.Gains.AfterDB}
	if f.vary {
		notes = append(notes, "varied")
		p.Pad, p.Bench = rehearsal.Draw(p.Pad, p.Bench, rehearsal.Doubts{
			SourceFrac: d.Rig.SourceTolFrac, LoadFrac: d.Rig.LoadTolFrac, CableFarads: d.Rig.CableTolFarads,
			DriftDB: d.Gains.DriftDB, LinearityDB: d.Gains.LinearityDB, AfterGainDB: d.Gains.AfterDoubtDB,
		}, p.Seed)
	}
	p.Note = strings.Join(notes, ", ")
	return p
}
