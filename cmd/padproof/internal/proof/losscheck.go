package proof

import (
	"math"

	"padproof/analysis"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/unit"
	"padproof/compare"
)

// pairUp settles at which stretches of the tone the takes are judged, and names
// what only two takes together show.
func (c *check) pairUp() {
	straight, through := c.takes.pair()
	b, t, problems, ok := compare.PairTones(straight.measured.Tones, through.measured.Tones)
	through.problems = append(through.problems, problems...)
	if !ok {
		return
	}
	straight.judged, through.judged = &b, &t
	if straight.role == unit.Both {
		through.problems = append(through.problems, compare.BothProblems(b, t, c.reading())...)
	} else {
		// Before and after alone: a repeat averages away what these show.
		through.problems = append(through.problems, compare.PairProblems(side(straight, b), side(through, t), compare.ReadLoss(b, t, c.Gains), c.designedDB)...)
	}
	if again, ok := c.takes.tone(unit.BeforeAgain); ok && straight.role == unit.Before {
		repeat := c.takes.by[unit.BeforeAgain]
		repeat.problems = append(repeat.problems, compare.AgainProblems(side(straight, b), side(repeat, again))...)
	}
}

func side(t *take, tone analysis.Tone) compare.Side {
	return compare.Side{SHA256: t.sha256, Frames: t.facts.Frames, Tone: tone}
}

// judgedPair reports whether both takes of the pair hold the tone.
func (c *check) judgedPair() bool {
	straight, through := c.takes.pair()
	return straight.judged != nil && through.judged != nil
}

// reading is the bench loss of the pair, repeated takes and all.
func (c *check) reading() compare.LossReading {
	straight, through := c.takes.pair()
	if straight.role == unit.Both {
		return compare.ReadLossBoth(*straight.judged, *through.judged, c.Sheet.Calibration.ChannelMatchDB, c.Gains)
	}
	return compare.ReadLossTwice(c.before(), compare.Twice{First: *through.judged, Again: c.takes.again(unit.AfterAgain)}, c.Gains)
}

// before is the level straight through, with its repeat.
func (c *check) before() compare.Twice {
	straight, _ := c.takes.pair()
	return compare.Twice{First: *straight.judged, Again: c.takes.again(unit.BeforeAgain)}
}

// lossTakes are those that the loss stands on.
func (c *check) lossTakes() []*take {
	straight, through := c.takes.pair()
	return []*take{straight, through, c.takes.by[unit.BeforeAgain], c.takes.by[unit.AfterAgain]}
}

// loss judges the loss at the tone nearest 1 kHz that both takes hold.
func (c *check) loss() error {
	if !c.judgedPair() {
		c.add(c.noLoss(), nil, c.lossTakes()...)
		return nil
	}
	judge := c.drawnCheck
	switch {
	case c.Circuit == nil:
		judge = c.benchCheck
	case c.Alternative != nil:
		judge = c.eitherCheck
	}
	reading := c.reading()
	c.findings.loss = &reading
	one, terms, err := judge(reading)
	if err != nil {
		return err
	}
	one.AtHz = result.NumberOf(reading.FreqHz)
	c.add(one, terms, c.lossTakes()...)
	if c.Circuit == nil {
		return nil
	}
	return c.otherTones()
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
func (c *check) drawnCheck(reading compare.LossReading) (result.Check, []result.Term, error) {
	k := compare.LossCase{Circuit: c.Circuit, Rig: c.Rig, Service: c.Service, Reading: reading, Ohms: c.ohms}
	loss, err := compare.JudgeLoss(k)
	if err != nil {
		return result.Check{}, nil, err
	}
	one := lossCheck(loss)
	terms := termsOf("loss", loss.Budget)
	limit, set := c.lossLimit(loss.ServiceExpectedDB)
	if !set {
		if c.mark == nil {
			spread := spreadOf(compare.SoundSpread(c.Circuit, c.Service, reading.FreqHz))
			one.Spread = &spread
		}
		return one, terms, nil
	}
	c.judged = &judgedLoss{k, loss, limit}
	verdict, reason, unseen := c.judgeLoss(k, loss, limit)
	c.answer.Unseen = append(c.answer.Unseen, unseenOf(unseen)...)
	decide(&one, verdict, reason, limit, loss.ServiceExpectedDB)
	c.needTestSignal(&one)
	return one, terms, nil
}

// needTestSignal holds back what a plain tone cannot prove, where the drawing
// asks for the test signal.
func (c *check) needTestSignal(one *result.Check) {
	straight, through := c.takes.pair()
	if c.Limits.RequireTestSignal && one.Verdict == string(compare.Pass) && !(straight.stepped && through.stepped) {
		one.Verdict = string(compare.Unproven)
		one.Reason = "the drawing asks for the test signal (require_test_signal): a plain tone does not exclude automatic gain; play what padproof signal writes"
	}
}

func lossCheck(l compare.Loss) result.Check {
	one := emptyCheck("loss", "dB")
	one.Measured, one.Expected, one.Uncertainty = result.Number(l.ServiceDB), result.Number(l.ServiceExpectedDB), result.Number(l.UDB)
	one.Bench = &result.Figure{Measured: result.Number(l.BenchDB), Expected: result.Number(l.BenchExpectedDB), Uncertainty: result.Number(l.BenchUDB)}
	return one
}

// noLoss is the check where one of the takes holds no tone to compare.
func (c *check) noLoss() result.Check {
	one := emptyCheck("loss", "dB")
	expected := math.NaN()
	if c.Circuit != nil {
		expected = c.Circuit.LossDB(c.Service, analysis.ToneHz)
		one.Expected = result.Number(expected)
		one.Bench = &result.Figure{Measured: result.Missing, Expected: result.Number(c.designedDB(analysis.ToneHz)), Uncertainty: result.Missing}
	}
	if limit, set := c.lossLimit(expected); set {
		decide(&one, compare.Unproven, "before and after hold no tone of one frequency", limit, expected)
	}
	return one
}

// otherTones adds the bench loss at each tone where several were played.
func (c *check) otherTones() error {
	straight, through := c.takes.pair()
	var tones []result.Tone
	for rest := straight.measured.Tones; len(rest) > 0; {
		of := func(t analysis.Tone) bool { return compare.SameFrequency(t.FreqHz, rest[0].FreqHz) }
		b, t, _, ok := compare.PairTones(only(straight.measured.Tones, of), only(through.measured.Tones, of))
		rest = only(rest, func(t analysis.Tone) bool { return !of(t) })
		if !ok {
			continue
		}
		k := compare.LossCase{Circuit: c.Circuit, Rig: c.Rig, Service: c.Rig.Ends, Reading: compare.ReadLoss(b, t, c.Gains)}
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
		c.answer.Tones = tones
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
