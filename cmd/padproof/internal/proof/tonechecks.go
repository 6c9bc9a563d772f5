package proof

import (
	"math"
	"math/cmplx"

	"padproof/analysis"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/unit"
	"padproof/compare"
)

// polarity compares the markers of the test signal in the two takes.
func (c *check) polarity() error {
	straight, through := c.takes.pair()
	if !c.Limits.SamePolarity && (straight.placed == nil || through.placed == nil) {
		return nil
	}
	one := emptyCheck("polarity", "")
	expected := 1.0
	if c.Circuit != nil && math.Abs(cmplx.Phase(c.Circuit.Transfer(c.Rig.Ends, analysis.ToneHz))) > math.Pi/2 {
		expected = -1
	}
	one.Expected = result.Number(expected)
	sign := 0
	if straight.placed != nil && through.placed != nil {
		sign = straight.placed.Polarity * through.placed.Polarity
	}
	if sign != 0 {
		one.Measured = result.Number(sign)
	}
	c.findings.polarity = sign
	if c.Limits.SamePolarity {
		one.Low, one.High = 1, 1
		switch {
		case sign == 0:
			one.Verdict = string(compare.Unproven)
			one.Reason = "polarity shows in the markers of the test signal alone; play what padproof signal writes and record both takes whole"
		case sign == 1:
			one.Verdict = string(compare.Pass)
		default:
			one.Verdict, one.Reason = string(compare.Fail), "the signal comes out turned over: hot and cold are crossed in the pad or in a cable of after"
		}
	}
	c.add(one, nil, straight, through)
	return nil
}

// distortion judges what the pad adds to the harmonics of the rig.
func (c *check) distortion() error {
	limit := atMost(c.Limits.DistortionMaxDB)
	straight, through := c.takes.pair()
	if !c.judgedPair() {
		c.lacksTone("distortion", limit)
		return nil
	}
	f, err := compare.JudgeDistortion(*straight.judged, *through.judged, c.Gains.LinearityDB, limit, c.Rule)
	if err != nil {
		return err
	}
	one, terms := checkOf("distortion", "dB", f.Finding)
	if !one.Measured.OK() {
		one.Uncertainty, one.Ratio = result.Missing, result.Missing
	}
	one.RigDB, one.Bound = result.NumberOf(f.RigDB), result.NumberOf(f.MostDB)
	c.add(one, terms, straight, through)
	return nil
}

// lacksTone is a check whose limit is set while the pair holds no tone.
func (c *check) lacksTone(name string, limit compare.Limit) {
	if !limit.IsSet() {
		return
	}
	straight, through := c.takes.pair()
	one := emptyCheck(name, "dB")
	decide(&one, compare.Unproven, "before and after hold no tone of one frequency", limit, math.NaN())
	c.add(one, nil, straight, through)
}

// steadiness judges the level track of after, and of flex.
func (c *check) steadiness() error {
	limit := atMost(c.Limits.SteadyWithinDB)
	if !c.judgedPair() {
		c.lacksTone("steadiness", limit)
		return nil
	}
	straight, through := c.takes.pair()
	k := compare.SteadyCase{Before: &straight.steady, After: &through.steady, Limit: limit, Rule: c.Rule}
	flex := c.takes.by[unit.Flex]
	if flex != nil {
		k.Flex = &flex.steady
	}
	f, err := compare.JudgeSteadiness(k)
	if err != nil {
		return err
	}
	one, terms := checkOf("steadiness", "dB", f.Finding)
	one.From, one.AtSec = f.From, result.NumberOf(f.AtSec)
	for _, e := range f.Events {
		one.Events = append(one.Events, result.Event{AtSec: result.Number(e.AtSec), DB: result.Number(e.DB), What: e.What})
	}
	c.add(one, terms, through, flex)
	return nil
}

// bypass judges the loss with the pad switched out.
func (c *check) bypass() error {
	limit := plusMinus(c.Limits.BypassWithinDB)
	take := c.takes.by[unit.Bypass]
	if take == nil && !limit.IsSet() {
		return nil
	}
	straight, through := c.takes.pair()
	tone, ok := c.takes.tone(unit.Bypass)
	f := compare.NoBypass(limit)
	switch {
	case ok && c.judgedPair():
		g := c.Gains
		if straight.role == unit.Both { // other channels, out and in
			g.AfterDoubtDB += 2 * c.Sheet.Calibration.ChannelMatchDB
		}
		var err error
		if f, err = compare.JudgeBypass(c.before(), tone, g, limit, c.Rule); err != nil {
			return err
		}
	case take != nil && limit.IsSet():
		f.Reason = "bypass.wav or before.wav holds no tone to compare: see Problems"
	}
	one, terms := checkOf("bypass", "dB", f)
	c.add(one, terms, straight, take, c.takes.by[unit.BeforeAgain], riding(through))
	return nil
}

// legs judges hot against cold beyond what the drawing gives.
func (c *check) legs() error {
	limit := plusMinus(c.Limits.LegMatchDB)
	hot, cold := c.takes.by[unit.Legs], c.takes.by[second(unit.Legs)]
	if c.Circuit == nil || hot == nil && !limit.IsSet() {
		return nil
	}
	if hot == nil {
		one := emptyCheck("legs", "dB")
		decide(&one, compare.Unproven, "there is no take of the legs; record legs.wav, hot to screen and cold to screen in two channels, and legs-before.wav straight through", limit, 0)
		c.add(one, nil)
		return nil
	}
	hotTone, coldTone := legsOf(hot, cold)
	hot.problems = append(hot.problems, compare.LegsProblems(hot.facts.Channels, hotTone.Tone, coldTone.Tone, silent(hot), silent(cold))...)
	f, err := compare.JudgeLegs(c.legsCase(hotTone, coldTone, limit))
	if err != nil {
		return err
	}
	c.findings.legs, c.findings.deadLegs, c.findings.legsHz = &f, [2]bool{hotTone.NoTone, coldTone.NoTone}, hotTone.Tone.FreqHz
	if hotTone.NoTone {
		c.findings.legsHz = coldTone.Tone.FreqHz
	}
	one, terms := checkOf("legs", "dB", f.Finding)
	one.Expected = 0
	if !math.IsNaN(f.PhaseDeg) {
		one.PhaseDeg = result.NumberOf(f.PhaseDeg)
	}
	before := c.takes.by[unit.LegsBefore]
	if before != nil {
		b, d := legsOf(before, c.takes.by[second(unit.LegsBefore)])
		before.problems = append(before.problems, compare.LegsProblems(before.facts.Channels, b.Tone, d.Tone, silent(before), silent(c.takes.by[second(unit.LegsBefore)]))...)
	}
	straight, through := c.takes.pair()
	c.add(one, terms, hot, before, riding(straight), riding(through))
	return nil
}

func (c *check) legsCase(hot, cold compare.Leg, limit compare.Limit) compare.LegsCase {
	return compare.LegsCase{
		Circuit: c.Circuit, Rig: c.Rig, LegsLoadOhms: c.Sheet.LegsLoadOhms(c.Circuit.Unbalanced()),
		Hot: hot, Cold: cold,
		StraightHot: c.takes.again(unit.LegsBefore), StraightCold: c.takes.again(second(unit.LegsBefore)),
		ChannelMatchDB: c.Sheet.Calibration.ChannelMatchDB, LinearityDB: c.Gains.LinearityDB, Limit: limit, Rule: c.Rule,
	}
}

// legsOf are the two channels of a take of legs, at one tone: the hot leg's, or
// the cold one's where the hot leg is dead.
func legsOf(hot, cold *take) (h, c compare.Leg) {
	h = legOf(hot, 0)
	if h.NoTone {
		return h, legOf(cold, 0)
	}
	return h, legOf(cold, h.Tone.FreqHz)
}

// legOf is one channel of a take of legs, at a frequency where that is not 0.
func legOf(t *take, freqHz float64) compare.Leg {
	if t == nil || t.measured == nil {
		return compare.Leg{NoTone: true, MostDBFS: analysis.FloorDBFS}
	}
	leg := compare.Leg{NoTone: true, MostDBFS: t.measured.PeakDBFS}
	for _, tone := range t.measured.Tones {
		if freqHz == 0 {
			tone, _ = t.mainTone()
		}
		if freqHz == 0 || compare.SameFrequency(tone.FreqHz, freqHz) {
			return compare.Leg{Tone: tone, MostDBFS: leg.MostDBFS}
		}
	}
	return leg
}

// silent reports digital silence in a channel.
func silent(t *take) bool {
	return t != nil && t.measured != nil && t.measured.PeakDBFS <= analysis.FloorDBFS
}
