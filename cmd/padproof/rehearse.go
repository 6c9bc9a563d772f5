package main

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"padproof/cmd/padproof/internal/proof"
	"padproof/cmd/padproof/internal/rehearsal"
)

// rehearseFlags are those of rehearse.
type rehearseFlags struct {
	pad, rig, out string
	signal        string
	faults        []string
	takes         []string
	vary          bool
	ohms          bool
	plan          rehearsal.Plan // what the flags say of it
}

func newRehearse() *cobra.Command {
	var f rehearseFlags
	cmd := &cobra.Command{
		Use:   "rehearse --pad PAD.toml --rig RIG.toml --out FOLDER",
		Short: "Write simulated recordings of a drawing on a rig",
		Long:  rehearseLong(),
		Example: `  padproof rehearse --pad pad.toml --rig rig.toml --out 0417
  padproof rehearse --pad pad.toml --rig rig.toml --out 0418 --fault "R3 open" --signal test --vary --seed 7
  padproof rehearse --pad pad.toml --rig rig.toml --out 0419 --takes all --hum-dbfs -80 --drift-ppm 120
  padproof rehearse --pad pad.toml --rig rig.toml --out 0420 --takes before,after,before-again --lie gain-moved`,
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
	flags.StringSliceVar(&f.takes, "takes", []string{"before", "after"}, "which recordings, parted by commas, or all")
	flags.StringVar(&f.signal, "signal", "tone", "what is played: tone (steady) or test (the test signal)")
	flags.Float64Var(&p.Signal.ToneHz, "tone-hz", 997, "the steady tone in hertz")
	flags.Float64Var(&p.Signal.Sec, "seconds", 4, "how long the steady tone lasts, half a second of silence on either side")
	flags.Float64Var(&p.LevelDBFS, "level-dbfs", -6, "level of the tone in before")
	flags.Float64Var(&p.NoiseDBFS, "noise-dbfs", -100, "white noise in every take, RMS from 20 Hz to 20 kHz; -inf for none")
	flags.Float64Var(&p.HumDBFS, "hum-dbfs", math.Inf(-1), "mains hum in every take: level of the mains line; harmonic n lies 20 lg n² lower")
	flags.Float64Var(&p.DriftPPM, "drift-ppm", 0, "how much faster the recorder's clock runs than the player's")
	flags.Float64Var(&p.NoiseSec, "noise-seconds", 60, "how long rig-noise and pad-noise last")
	flags.Float64Var(&p.Bench.Noise.InputDBu, "input-noise-dbu", -128, "noise voltage of the input in the noise takes, RMS from 20 Hz to 20 kHz; -inf for none")
	flags.BoolVar(&p.Bench.Noise.QuietLoad, "quiet-load", false, "the input's load is no real resistor and makes no thermal noise")
	flags.Float64Var(&p.Bench.Noise.OverThermalDB, "over-thermal-db", 0, "how far the unit's noise lies above thermal")
	flags.Float64Var(&p.Bench.BypassOhms, "bypass-ohms", 0, "contact resistance of each leg in bypass")
	flags.StringSliceVar(&p.Flex, "flex", nil, "what happens in flex, in order: "+strings.Join(rehearsal.FlexEvents(), ", ")+"; repeatable")
	flags.StringSliceVar(&p.Lies, "lie", nil, "what is wrong with the recordings, such as \"clipped\"; repeatable")
	flags.StringArrayVar(&f.faults, "fault", nil, "what is wrong with the unit, such as \"R3 open\"; repeatable")
	flags.BoolVar(&f.ohms, "ohms", false, "write ohms.toml too: what an ohmmeter reads on this unit")
	flags.BoolVar(&f.vary, "vary", false, "draw parts, source, load, cable, gains and meter from their tolerances")
	flags.Uint64Var(&p.Seed, "seed", 1, "seed of the noise and of --vary")
	flags.IntVar(&p.RateHz, "rate", 48000, "sample rate in hertz, 8000 to 384000")
	flags.IntVar(&p.Bits, "bits", 24, "bits a sample: 16, 24 or 32")
	flags.BoolVar(&p.Float, "float", false, "samples as floats, of 32 bits")
	_ = cmd.MarkFlagFilename("pad", "toml")
	_ = cmd.MarkFlagFilename("rig", "toml")
	_ = cmd.MarkFlagDirname("out")
	_ = cmd.RegisterFlagCompletionFunc("signal", cobra.FixedCompletions([]string{"tone", "test"}, cobra.ShellCompDirectiveNoFileComp))
	lies, _ := rehearsal.Lies()
	for flag, words := range map[string][]string{"takes": append(rehearsal.Takes(), "all"), "flex": rehearsal.FlexEvents(), "lie": lies} {
		_ = cmd.RegisterFlagCompletionFunc(flag, cobra.FixedCompletions(words, cobra.ShellCompDirectiveNoFileComp))
	}
	return cmd
}

// rehearseLong is the help, with the lies as they are known.
func rehearseLong() string {
	var lies strings.Builder
	words, abouts := rehearsal.Lies()
	for i, word := range words {
		fmt.Fprintf(&lies, "\n  %-17s  %s", word, abouts[i])
	}
	return `Write the recordings that a person would make of this drawing on this rig, sound or with
a fault, to see what the rig could prove. FOLDER gets before.wav, after.wav and copies of
the sheets, so that padproof check FOLDER works at once; nothing there is overwritten. The
recordings are marked SIMULATED inside, and so is every answer made from them. With --ohms
an ohms.toml too, with what an ohmmeter reads on this unit; it is marked likewise.

--takes names other recordings:

  ` + strings.Join(rehearsal.Takes()[:7], ", ") + `,
  ` + strings.Join(rehearsal.Takes()[7:], ", ") + `

With all, every one that the sheets have figures for, but both, which stands in place of
before and after.

A --fault is written R3 open, R3 short, R3 x10, R3 /10, R3 is 360, R3 drifted +12 %,
R1 and R3 swapped, hot leg open at in, cold leg to screen at out (and so on), legs crossed
or in and out swapped; or, of the bench, source not as stated (twice what rig.toml says),
load not as stated (half of it), source is 300 or load is 600. It may be given more than
once. Without --vary every part and figure is exactly as stated; the same command gives the
same files.

A --lie makes the recordings tell what is not so:
` + lies.String()
}

func runRehearse(cmd *cobra.Command, f rehearseFlags) error {
	if err := f.settle(cmd); err != nil {
		return err
	}
	drawing, err := proof.Load(f.pad, f.rig)
	if err != nil {
		return err
	}
	faults, err := parseFaults(drawing, f.faults)
	if err != nil {
		return err
	}
	plan, leftOut := f.build(drawing, faults)
	if err := plan.Check(); err != nil {
		return usageError(cmd, "%v", err)
	}
	ctx, stop := untilInterrupted(cmd)
	defer stop()
	sheets := rehearsal.Sheets{Pad: f.pad, Rig: f.rig}
	if f.ohms {
		sheets.Ohms = f.ohmsText(plan)
	}
	shown := progressOn(cmd.ErrOrStderr(), "writing takes")
	plan.Progress = shown.tell
	takes, err := plan.Record(ctx, f.out, sheets)
	shown.clear()
	if err != nil {
		return afterInterrupt(err)
	}
	r := f.rehearsed(drawing, faults, plan, takes)
	r.Warnings = append(r.Warnings, leftOut...)
	shown = progressOn(cmd.ErrOrStderr(), "reading them again")
	r.Proven, err = provenBy(f.out, proof.Options{Progress: shown.tell})
	shown.clear()
	if err != nil {
		r.Warnings = append(r.Warnings, "padproof check cannot judge these takes: "+describe(err).Error())
	}
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

// build makes the unit and the bench. What was left out of all takes is said.
func (f *rehearseFlags) build(d *proof.Drawing, faults []fault) (p rehearsal.Plan, leftOut []string) {
	p = f.plan
	p.Pad = d.Circuit
	p.Bench = f.bench(d)
	notes := []string{fmt.Sprintf("seed %d", p.Seed)}
	for _, one := range faults {
		p.Pad, p.Bench.Ends = one.apply(p.Pad, p.Bench.Ends)
		notes = append(notes, one.text)
	}
	if f.vary {
		notes = append(notes, "varied")
		p.Pad, p.Bench = rehearsal.Draw(p.Pad, p.Bench, doubts(d), p.Seed)
	}
	for _, lie := range p.Lies {
		notes = append(notes, "lie "+lie)
	}
	p.Note = strings.Join(notes, ", ")
	p.Takes = f.takes
	if slices.Equal(f.takes, []string{"all"}) {
		p.Takes, leftOut = p.AllTakes()
	}
	return p, leftOut
}

// bench is the rig as its sheet states it, with what the flags say of the noise takes.
func (f *rehearseFlags) bench(d *proof.Drawing) rehearsal.Bench {
	c := d.Sheet.Calibration
	orUnknown := func(x *float64, unknown float64) float64 {
		if x == nil {
			return unknown
		}
		return *x
	}
	b := f.plan.Bench
	b.Ends, b.AfterGainDB, b.MainsHz = d.Rig.Ends, d.Gains.AfterDB, d.Sheet.MainsHz
	b.LegsLoadOhms = d.Sheet.LegsLoadOhms(d.Circuit.Unbalanced())
	b.LoadedOhms, b.CalibrationVolts = orUnknown(c.LoadedOhms, 0), orUnknown(c.CalibrationVolts, 0)
	b.FullScaleDBu = orUnknown(c.FullScaleDBu, math.NaN())
	b.Noise.FullScaleDBu = orUnknown(c.NoiseFullScaleDBu, math.NaN())
	b.Noise.CurrentAmps = c.NoiseCurrentPA * picoampere
	b.Noise.TempC = d.Sheet.TemperatureC
	b.Noise.PlugOhms, b.Noise.PadPlugOhms = c.NoisePlugOhms, c.PadPlugOhms
	return b
}

const picoampere = 1e-12

// doubts are those that the sheet states.
func doubts(d *proof.Drawing) rehearsal.Doubts {
	c := d.Sheet.Calibration
	return rehearsal.Doubts{
		SourceFrac: d.Rig.SourceTolFrac, LoadFrac: d.Rig.LoadTolFrac, CableFarads: d.Rig.CableTolFarads,
		DriftDB: d.Gains.DriftDB, LinearityDB: d.Gains.LinearityDB, AfterGainDB: d.Gains.AfterDoubtDB,
		ChannelDB: c.ChannelMatchDB, NoiseDriftDB: c.NoiseGainDriftDB,
		CurrentAmps: c.NoiseCurrentHalfPA * picoampere, TempC: d.Sheet.TemperatureHalfC,
		ScaleDB: c.UncertaintyDB / 2, // stated with k = 2
	}
}
