package main

import (
	"github.com/spf13/cobra"

	"padproof/cmd/padproof/internal/proof"
	"padproof/cmd/padproof/internal/report"
	"padproof/cmd/padproof/internal/unit"
)

// checkFlags are those of check.
type checkFlags struct {
	files       map[string]*string // a path for each role, and for the sheets
	channel     int
	verbose     bool
	markedLoss  float64
	within      float64
	markedOhms  float64
	onThisBench bool
	played      string
	recording   recordFlags
}

func newCheck() *cobra.Command {
	var f checkFlags
	cmd := &cobra.Command{
		Use:   "check [FOLDER]",
		Short: "Check one unit from its recordings",
		Long: `Check one unit: PASS, FAIL or UNPROVEN, with figures and uncertainty.

FOLDER holds the unit's takes, before.wav and after.wav at least, and the sheets pad.toml
and rig.toml; sheets, and takes of the rig alone, may lie one folder up and then serve every
unit there.
Or name the files by role. With no drawing, say what is marked on the pad: the mark is
judged as a symmetrical matched pad of --marked-ohms, or with --on-this-bench as what
this bench should read. Where the reading does not agree with it, the answer says what pads of
that mark would read with something wrong: likelihoods with what to measure, no findings.

Where the loss is out of its limits and a resistor would bring it in, the answer says which
(IEC 60063), where, and what should then be measured.`,
		Example: `  padproof check testdata/saltmarsh/0417
  padproof check --pad pad.toml --rig rig.toml --before in.wav --after out.wav
  padproof check --before in.wav --after out.wav --marked-loss-db 10 --within-db 0.5 --marked-ohms 600`,
		RunE: func(cmd *cobra.Command, args []string) error { return runCheck(cmd, args, f) },
	}
	f.files = map[string]*string{}
	flags := cmd.Flags()
	flags.SortFlags = false
	path := func(name, what string, extensions ...string) {
		f.files[name] = flags.String(name, "", what)
		_ = cmd.MarkFlagFilename(name, extensions...)
	}
	path("pad", "the drawing, pad.toml", "toml")
	path("rig", "the bench, rig.toml", "toml")
	path("before", "the take straight through, no pad", "wav")
	path("after", "the take through the pad", "wav")
	for _, role := range []struct{ name, what string }{
		{"before-again", "straight through once more, afterwards: catches a moved knob"},
		{"after-again", "the pad unplugged and plugged again: catches a connector"},
		{"before-loaded", "straight through with a known resistor across the input"},
		{"calibration", "a tone of which a meter read the volts"},
		{"bypass", "through the unit with its pad switched out"},
		{"rig-noise", "the input closed by the noise plug"},
		{"pad-noise", "the pad's output to the input, its own input closed by the pad plug"},
		{"flex", "through the pad while it is flexed and tapped"},
		{"legs", "two channels, hot to screen and cold to screen, pad in circuit"},
		{"legs-before", "the same two channels straight through"},
		{"both", "instead of before and after: channel 1 straight, channel 2 through the pad"},
	} {
		path(role.name, role.what, "wav")
	}
	flags.StringVar(&f.played, "signal", "", "the WAV that was played, where it is not the test signal: gives the response")
	_ = cmd.MarkFlagFilename("signal", "wav")
	flags.IntVar(&f.channel, "channel", 0, "the channel that holds the tone, from 1; found if left out")
	flags.Float64Var(&f.markedLoss, "marked-loss-db", 0, "no drawing: the loss marked on the pad")
	flags.Float64Var(&f.within, "within-db", 0, "no drawing: how far off the mark is still good")
	flags.Float64Var(&f.markedOhms, "marked-ohms", 0, "no drawing: the impedance marked on the pad")
	flags.BoolVar(&f.onThisBench, "on-this-bench", false, "no drawing: the mark is what this bench should read")
	f.recording.addTo(cmd)
	flags.BoolVarP(&f.verbose, "verbose", "v", false, "add the takes and the uncertainty budget")
	return cmd
}

func runCheck(cmd *cobra.Command, args []string, f checkFlags) error {
	u, err := f.unit(cmd, args)
	if err != nil {
		return err
	}
	options, err := f.options(cmd)
	if err != nil {
		return inUnit(u.Serial, err)
	}
	sheets := f.recording.sheetsUsed(u)
	answer, err := proof.Check(u, options)
	if err != nil {
		return inUnit(u.Serial, err)
	}
	f.record(cmd, u, sheets, answer)
	if wantsJSON(cmd) {
		err = writeJSON(cmd.OutOrStdout(), answer)
	} else {
		err = report.AnswerText(cmd.OutOrStdout(), answer, f.verbose)
		if err == nil && answer.Recorded != nil {
			err = report.RecordedText(cmd.OutOrStdout(), answer.Recorded)
		}
	}
	if err != nil {
		return err
	}
	if answer.RecordError != nil {
		return notRecorded(cmd, answer.RecordError)
	}
	return statusOf(answer.Verdict)
}

// statusOf is the exit status of a verdict.
func statusOf(verdict string) error {
	switch verdict {
	case "PASS":
		return nil
	case "FAIL":
		return exitStatus(exitFail)
	}
	return exitStatus(exitUnproven)
}

// unit finds the files to work on: those of a folder, those named, or a folder
// with some of its files replaced by those named.
func (f checkFlags) unit(cmd *cobra.Command, args []string) (*unit.Unit, error) {
	named := map[string]string{}
	for role, path := range f.files {
		if *path != "" {
			named[role] = *path
		}
	}
	pad, rig := named["pad"], named["rig"]
	delete(named, "pad")
	delete(named, "rig")
	switch {
	case len(args) > 1:
		return nil, usageError(cmd, "one folder at a time; %q is one too many", args[1])
	case len(args) == 1 && len(named) > 0:
		return nil, usageError(cmd, "name a folder or the takes by role, not both")
	case len(args) == 0 && len(named) == 0:
		return nil, usageError(cmd, "nothing to check: name a unit's folder, or --before and --after")
	}
	if len(args) == 0 {
		return unit.FromFiles(named, pad, rig)
	}
	u, err := unit.Open(args[0])
	if err != nil {
		return nil, err
	}
	if pad != "" {
		u.PadFile = pad
	}
	if rig != "" {
		u.RigFile = rig
	}
	return u, nil
}

func (f checkFlags) options(cmd *cobra.Command) (proof.Options, error) {
	o := proof.Options{Channel: f.channel, Played: f.played}
	given := cmd.Flags().Changed
	if given("channel") && f.channel < 1 {
		return o, usageError(cmd, "--channel counts from 1, not %d", f.channel)
	}
	for _, name := range []string{"within-db", "marked-ohms", "on-this-bench"} {
		if given(name) && !given("marked-loss-db") {
			return o, usageError(cmd, "--%s goes with --marked-loss-db", name)
		}
	}
	if !given("marked-loss-db") {
		return o, nil
	}
	if given("pad") {
		return o, usageError(cmd, "--marked-loss-db is for a pad with no drawing; leave out --pad")
	}
	if given("marked-ohms") && f.onThisBench {
		return o, usageError(cmd, "--marked-ohms and --on-this-bench are two readings of the mark; choose one")
	}
	for _, figure := range []struct {
		name     string
		v        float64
		from, to float64
	}{
		{"marked-loss-db", f.markedLoss, 0.01, 200},
		{"within-db", f.within, 0.001, 100},
		{"marked-ohms", f.markedOhms, 0.1, 1e6},
	} {
		if given(figure.name) && !(figure.v >= figure.from && figure.v <= figure.to) {
			return o, usageError(cmd, "--%s wants %v to %v, not %v", figure.name, figure.from, figure.to, figure.v)
		}
	}
	o.Mark = &proof.Mark{LossDB: f.markedLoss, WithinDB: f.within, Ohms: f.markedOhms, OnThisBench: f.onThisBench}
	return o, nil
}
