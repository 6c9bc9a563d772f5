package proof

import (
	"math"
	"strings"
	"sync"

	"padproof/analysis"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/unit"
	"padproof/compare"
)

// Options are what the caller settles beside the unit's files.
type Options struct {
	Channel int   // the channel that holds the tone, from 1; 0: find it
	Mark    *Mark // no drawing: what is marked on the pad
}

// Check judges one unit. A take that shows nothing is a problem in the answer;
// an error is a file that cannot be read, a sheet that is wrong, or a channel
// that cannot be told.
func Check(u *unit.Unit, o Options) (*result.Answer, error) {
	d, err := drawingOf(u, o.Mark)
	if err != nil {
		return nil, err
	}
	before, after, err := openPair(u)
	if err != nil {
		return nil, err
	}
	defer before.file.Close()
	defer after.file.Close()
	if err := measurePair(before, after, o.Channel, d.Sheet.Calibration.ChannelMatchDB); err != nil {
		return nil, err
	}
	a := newAnswer(u, d, o.Mark)
	if err := a.judge(d, before, after, o.Mark); err != nil {
		return nil, err
	}
	return a.finish(u, o.Mark, before, after), nil
}

func openPair(u *unit.Unit) (before, after *take, err error) {
	for _, role := range []string{"before", "after"} {
		if u.Files[role] == "" {
			return nil, nil, &result.Error{
				File: u.Folder, Text: "there is no " + role + ".wav",
				Hint: "record the tone straight through as before.wav and through the pad as after.wav; both.wav is not judged by this version",
			}
		}
	}
	if before, err = openTake("before", u.Files["before"]); err != nil {
		return nil, nil, err
	}
	if after, err = openTake("after", u.Files["after"]); err != nil {
		before.file.Close()
		return nil, nil, err
	}
	return before, after, nil
}

// measurePair finds the tone in before, and in after what before's tells to look
// for: under a strong pad the strongest line may be hum. Then both takes are
// read at once.
func measurePair(before, after *take, channel int, matchDB float64) error {
	if err := before.pickChannel(channel, nil, matchDB); err != nil {
		return err
	}
	if err := before.find(nil); err != nil {
		return err
	}
	atHz := frequencies(before.found)
	if err := after.followChannel(before, channel, atHz, matchDB); err != nil {
		return err
	}
	var wait sync.WaitGroup
	var errBefore, errAfter error
	wait.Go(func() { errBefore = before.measure() })
	if len(atHz) > 0 {
		errAfter = after.find(atHz)
	}
	if errAfter == nil {
		errAfter = after.measure()
	}
	wait.Wait()
	if errBefore != nil {
		return errBefore
	}
	return errAfter
}

// An answer is a result being filled in.
type answer struct{ *result.Answer }

func newAnswer(u *unit.Unit, d *Drawing, mark *Mark) answer {
	a := answer{&result.Answer{
		Schema: result.CheckSchema, Unit: u.Serial, Pad: d.Name, Rig: d.Sheet.Name,
		Checks: []result.Check{}, Suspects: []result.Suspect{}, Unseen: []result.Unseen{},
		Budget: []result.Term{}, Captures: []result.Capture{},
		Assumed: d.assumed(), Notes: []string{}, Warnings: append([]string{}, u.Warnings...),
		BenchEnds: endsOf(d.Rig.Ends),
	}}
	if d.Service != d.Rig.Ends {
		a.ServiceEnds = endsOf(d.Service)
	}
	if d.Sheet.File == "" {
		a.Warnings = append(a.Warnings, "there is no rig.toml: source and load count as ±50 %")
	}
	return a
}

// judge makes the checks of the loss and of every other limit that is set.
func (a answer) judge(d *Drawing, before, after *take, mark *Mark) error {
	check, err := a.lossCheck(d, before, after, mark)
	if err != nil {
		return err
	}
	a.Checks = append(a.Checks, check)
	a.Checks = append(a.Checks, pendingChecks(d.Limits)...)
	return nil
}

// lossCheck judges the loss at the tone nearest 1 kHz that both takes hold.
func (a answer) lossCheck(d *Drawing, before, after *take, mark *Mark) (result.Check, error) {
	b, t, found, ok := compare.PairTones(before.measured.Tones, after.measured.Tones)
	after.problems = append(after.problems, found...)
	if !ok {
		return noLoss(d, before, after), nil
	}
	before.judged, after.judged = &b, &t
	reading := compare.ReadLoss(b, t, d.Gains)
	after.problems = append(after.problems, compare.PairProblems(side(before, b), side(after, t), reading, d.designedDB)...)
	judge := a.drawnCheck
	switch {
	case d.Circuit == nil:
		judge = a.benchCheck
	case d.Alternative != nil:
		judge = a.eitherCheck
	}
	check, err := judge(d, reading, mark)
	check.AtHz = result.NumberOf(reading.FreqHz)
	void(&check, before, after)
	if err == nil && d.Circuit != nil {
		err = a.otherTones(d, before, after)
	}
	return check, err
}

// designedDB is the bench loss of the drawing by frequency; without one it is
// the same everywhere.
func (d *Drawing) designedDB(freqHz float64) float64 {
	if d.Circuit == nil {
		return 0
	}
	return d.Circuit.LossDB(d.Rig.Ends, freqHz)
}

// drawnCheck holds the reading against the drawing.
func (a answer) drawnCheck(d *Drawing, reading compare.LossReading, mark *Mark) (result.Check, error) {
	k := compare.LossCase{Circuit: d.Circuit, Rig: d.Rig, Service: d.Service, Reading: reading}
	loss, err := compare.JudgeLoss(k)
	if err != nil {
		return result.Check{}, err
	}
	check := checkOf(loss)
	a.Budget = append(a.Budget, termsOf("loss", loss.Budget)...)
	limit, set := d.lossLimit(loss.ServiceExpectedDB)
	if !set {
		if mark == nil {
			spread := spreadOf(compare.SoundSpread(d.Circuit, d.Service, reading.FreqHz))
			check.Spread = &spread
		}
		return check, nil
	}
	verdict, reason, unseen := d.judgeLoss(k, loss, limit)
	a.Unseen = append(a.Unseen, unseenOf(unseen)...)
	decide(&check, verdict, reason, limit, loss.ServiceExpectedDB)
	d.needTestSignal(&check)
	return check, nil
}

// needTestSignal holds back what a plain tone cannot prove, where the drawing
// asks for the test signal.
func (d *Drawing) needTestSignal(check *result.Check) {
	if d.Limits.RequireTestSignal && check.Verdict == string(compare.Pass) {
		check.Verdict = string(compare.Unproven)
		check.Reason = "the drawing asks for the test signal (require_test_signal), and this version reads the plain tone in it alone: automatic gain is not excluded"
	}
}

// lossOf is a check of the loss with nothing in it yet.
func lossOf() result.Check {
	none := result.Missing
	return result.Check{Name: "loss", Unit: "dB", Measured: none, Expected: none, Low: none, High: none, Uncertainty: none, Ratio: none}
}

func checkOf(l compare.Loss) result.Check {
	check := lossOf()
	check.Measured, check.Expected, check.Uncertainty = result.Number(l.ServiceDB), result.Number(l.ServiceExpectedDB), result.Number(l.UDB)
	check.Bench = &result.Figure{Measured: result.Number(l.BenchDB), Expected: result.Number(l.BenchExpectedDB), Uncertainty: result.Number(l.BenchUDB)}
	return check
}

// decide enters a verdict and what it rests on.
func decide(check *result.Check, verdict compare.Verdict, reason string, limit compare.Limit, expected float64) {
	check.Verdict, check.Reason = string(verdict), reason
	check.Low, check.High = result.Number(limit.Low), result.Number(limit.High)
	if ratio, ok := compare.ToleranceRatio(limit, expected, float64(check.Uncertainty)); ok {
		check.Ratio = result.Number(ratio)
	}
}

// noLoss is the check where one of the takes holds no tone to compare.
func noLoss(d *Drawing, before, after *take) result.Check {
	const toneHz = analysis.ToneHz
	check := lossOf()
	expected := math.NaN()
	if d.Circuit != nil {
		expected = d.Circuit.LossDB(d.Service, toneHz)
		check.Expected = result.Number(expected)
		check.Bench = &result.Figure{Measured: result.Missing, Expected: result.Number(d.designedDB(toneHz)), Uncertainty: result.Missing}
	}
	if limit, set := d.lossLimit(expected); set {
		decide(&check, compare.Unproven, "before and after hold no tone of one frequency", limit, expected)
		void(&check, before, after)
	}
	return check
}

// void takes the ground from a check that a problem of a take touches.
func void(check *result.Check, takes ...*take) {
	var names []string
	for _, t := range takes {
		for _, p := range t.problems {
			if compare.Voids(p.Name, check.Name) {
				names = append(names, t.role+" is "+p.Name)
			}
		}
	}
	if len(names) == 0 || check.Verdict == string(compare.None) {
		return
	}
	check.Verdict = string(compare.Unproven)
	check.Reason = strings.Join(names, ", ") + ": see Problems for what to do"
}

// otherTones adds the bench loss at each tone where several were played.
func (a answer) otherTones(d *Drawing, before, after *take) error {
	var tones []result.Tone
	for rest := before.measured.Tones; len(rest) > 0; {
		of := func(t analysis.Tone) bool { return compare.SameFrequency(t.FreqHz, rest[0].FreqHz) }
		b, t, _, ok := compare.PairTones(only(before.measured.Tones, of), only(after.measured.Tones, of))
		rest = only(rest, func(t analysis.Tone) bool { return !of(t) })
		if !ok {
			continue
		}
		k := compare.LossCase{Circuit: d.Circuit, Rig: d.Rig, Service: d.Rig.Ends, Reading: compare.ReadLoss(b, t, d.Gains)}
		loss, err := compare.JudgeLoss(k)
		if err != nil {
			return err
		}
		tones = append(tones, result.Tone{
			FreqHz: result.Number(t.FreqHz), Measured: result.Number(loss.BenchDB),
			Expected: result.Number(loss.BenchExpectedDB), Uncertainty: result.Number(loss.BenchUDB),
		})
	}
	if len(tones) > 1 {
		a.Tones = tones
	}
	return nil
}

func only(tones []analysis.Tone, wanted func(analysis.Tone) bool) []analysis.Tone {
	var some []analysis.Tone
	for _, t := range tones {
		if wanted(t) {
			some = append(some, t)
		}
	}
	return some
}

func side(t *take, tone analysis.Tone) compare.Side {
	return compare.Side{SHA256: t.sha256, Frames: t.facts.Frames, Tone: tone}
}

// finish adds the takes, the notes and the unit's verdict.
func (a answer) finish(u *unit.Unit, mark *Mark, takes ...*take) *result.Answer {
	for _, t := range takes {
		a.Captures = append(a.Captures, t.capture(u.Folder))
		for _, comment := range t.facts.Comments {
			a.Simulated = a.Simulated || strings.HasPrefix(comment, "SIMULATED")
		}
	}
	for _, role := range unit.Roles() {
		if role != unit.Before && role != unit.After && u.Files[role] != "" {
			a.Notes = append(a.Notes, role+".wav is there and is not judged by this version")
		}
	}
	a.Notes = append(a.Notes, "automatic gain not excluded: a plain tone cannot show it; switch it off in the recorder")
	var verdicts []compare.Verdict
	for _, c := range a.Checks {
		verdicts = append(verdicts, compare.Verdict(c.Verdict))
	}
	verdict, reason := compare.Combine(verdicts...)
	a.Verdict = string(verdict)
	switch {
	case reason == "":
	case mark != nil:
		a.Reason = reason + ": say with --within-db how far off the mark is still good"
	default:
		a.Reason = reason + ": set one in pad.toml, [limits] loss_plus_minus_db; the spread of sound units below is a guide"
	}
	return a.Answer
}
