package compare

import (
	"fmt"
	"math"

	"padproof/analysis"
	"padproof/compare/uncertainty"
)

// Thresholds of what one take shows, or a take against its repeat.
const (
	mostMovedDB    = 0.1  // gain-moved, beyond U
	mostStepOffDB  = 0.05 // gain-riding, beyond U
	sameFreqWithin = mostFreqShift
	loudBurstDB    = -20.0 // of a burst beside the tone, as loud as only the tone itself, cut up, can be
)

// ClippedProblem names cut peaks in the tone; ok is false where there are none.
func ClippedProblem(c analysis.CutPeaks, peakDBFS float64) (p Problem, ok bool) {
	if !c.Cut() {
		return Problem{}, false
	}
	p = Problem{Name: Clipped, AtSec: c.FirstSec}
	if c.Peaks > 0 {
		p.Text = fmt.Sprintf("%s of the tone are cut off, the highest sample at %.1f dBFS; lower the level or the gain by a few dB and record again", peaksText(c.Peaks), peakDBFS)
	} else {
		p.Text = fmt.Sprintf("the peaks of the tone are flat: they reach %.2f dB less far than its level says; something before the recorder clips: lower the level there and record again", c.FlatDB)
	}
	return p, true
}

func peaksText(n int) string {
	switch {
	case n == 1:
		return "a peak"
	case n > 1000:
		return "more than 1000 peaks"
	}
	return fmt.Sprintf("%d peaks", n)
}

// DropoutProblems names lost buffers and gaps in the tone of a take. In a take of a unit that was
// moved meanwhile (flex), a gap after which the phase goes on is the unit's own and no problem of
// the take: there only jumps of the phase count.
func DropoutProblems(s analysis.Steadiness, moved bool) []Problem {
	var found []Problem
	for _, e := range s.Events {
		switch {
		case e.What == analysis.Crackle && e.DB > loudBurstDB && !moved:
			found = append(found, Problem{Name: Dropout, AtSec: e.AtSec, Text: fmt.Sprintf(
				"the tone is broken for a moment at %.2f s (%.0f dB of it): a lost buffer or a loose contact; use a larger buffer, look at the plugs, and record again", e.AtSec, e.DB)})
		case e.What != analysis.Dropout:
		case e.JumpDeg != 0:
			found = append(found, Problem{Name: Dropout, AtSec: e.AtSec, Text: fmt.Sprintf(
				"samples were lost or repeated at %.2f s: the phase of the tone jumps by %.1f°; use a larger buffer, close other programs, and record again", e.AtSec, e.JumpDeg)})
		case !moved:
			found = append(found, Problem{Name: Dropout, AtSec: e.AtSec, Text: fmt.Sprintf(
				"the tone drops by %.1f dB at %.2f s: a lost buffer or a loose contact; record again, and if it comes back, look at plugs and solder joints", -e.DB, e.AtSec)})
		}
	}
	return found
}

// SteppedProblems names steps of level within a tone that stay: which level is the take's cannot be
// told.
func SteppedProblems(s analysis.Steadiness) []Problem {
	var found []Problem
	for _, e := range s.Events {
		if e.What == analysis.LevelStep && e.Stays && math.Abs(e.DB) > mostMovedDB {
			found = append(found, Problem{Name: GainMoved, AtSec: e.AtSec, Text: fmt.Sprintf(
				"the level steps by %+.2f dB at %.2f s and stays: a knob was moved, or a contact changed; record again, nothing touched", e.DB, e.AtSec)})
		}
	}
	return found
}

// ToneStep is the step between the two levels of the test signal's tone.
type ToneStep struct {
	DB     float64
	UDB    float64
	Budget uncertainty.Budget
}

// ReadStep reads the step from the levels of the last half second of each, as
// [analysis.LevelBetween] gives them with their standard errors. The rig may read a difference of
// levels wrong by linearityDB, a half-width.
func ReadStep(loudDBFS, loudStdErrDB, lowDBFS, lowStdErrDB, linearityDB float64) (ToneStep, error) {
	s := ToneStep{DB: loudDBFS - lowDBFS}
	s.Budget.Terms = []uncertainty.Term{
		uncertainty.FromNormal("noise in the louder half second", loudStdErrDB, 1),
		uncertainty.FromNormal("noise in the lower half second", lowStdErrDB, 1),
	}
	if linearityDB > 0 {
		s.Budget.Terms = append(s.Budget.Terms, uncertainty.FromRectangle(linearitySrc, linearityDB, 1))
	}
	var err error
	s.UDB, err = s.Budget.ExpandedU(Coverage)
	return s, err
}

// GainRidingProblem names automatic gain: the step is off by more than 0.05 dB + U.
func GainRidingProblem(s ToneStep) (p Problem, ok bool) {
	off := s.DB - analysis.SignalStepDB
	if !(math.Abs(off) > mostStepOffDB+s.UDB) {
		return Problem{}, false
	}
	return Problem{Name: GainRiding, AtSec: math.NaN(), Text: fmt.Sprintf(
		"the 10 dB step of the test signal reads %.2f dB: automatic gain, a limiter or a compressor is at work; switch it off in player and recorder and record again", s.DB)}, true
}

// MovedU is the expanded uncertainty of the difference of two takes that should be alike.
func MovedU(first, again analysis.Tone) float64 {
	b := uncertainty.Budget{Terms: []uncertainty.Term{repeatability(beforeRepeats, first), repeatability(beforeTwice, again)}}
	u, err := b.ExpandedU(Coverage)
	if err != nil {
		return math.NaN()
	}
	return u
}

// AgainProblems names what before and before-again show together; each stands on before-again. The
// gain moved where they differ by more than 0.1 dB + U.
func AgainProblems(before, again Side) []Problem {
	var found []Problem
	b, a := before.Tone, again.Tone
	add := func(name, format string, args ...any) {
		found = append(found, Problem{Name: name, AtSec: math.NaN(), Text: fmt.Sprintf(format, args...)})
	}
	if before.SHA256 == again.SHA256 || before.Frames == again.Frames && SameSamples(b, a) {
		add(SameRecording, "before and before-again are one and the same recording; record before-again anew, after all the others")
		return found
	}
	if math.Abs(a.FreqHz/b.FreqHz-1) > sameFreqWithin {
		add(FrequencyDiffers, "the tone is %.6g Hz here and %.6g Hz in before; record both with one setting of the generator", a.FreqHz, b.FreqHz)
	}
	moved := a.LevelDBFS - b.LevelDBFS
	if math.Abs(moved) > mostMovedDB+MovedU(b, a) {
		add(GainMoved, "the level is %+.2f dB against before: a knob was moved, or the rig warmed up; let it warm up and record all takes again, no knob touched", moved)
	}
	return found
}

// LegsProblems names a take of legs that does not hold two legs: one channel only, or one signal in
// both, or digital silence in one. A leg without a tone but with noise is no problem of the take:
// the unit may well be open there.
func LegsProblems(channels int, hot, cold analysis.Tone, silentHot, silentCold bool) []Problem {
	text := ""
	switch {
	case channels < 2:
		text = "there is one channel only; record hot to screen and cold to screen as two channels of one take"
	case silentHot && silentCold:
		text = "both channels hold digital silence; look at routing and cables, and record again"
	case silentHot || silentCold:
		text = "one channel holds digital silence: nothing was routed to it; arm both inputs and record again"
	case SameSamples(hot, cold):
		text = "both channels hold one and the same signal; give each leg an input of its own, and record as two channels, not mono"
	default:
		return nil
	}
	return []Problem{{Name: OneChannel, AtSec: math.NaN(), Text: text}}
}

// What two tones of the same samples differ by: rounding alone.
const copyDB, copyRad, copyNoiseDB = 1e-7, 1e-6, 1e-4

// SameSamples tells a copy, at the same polarity or turned over, from two recordings or two inputs,
// whose noise differs. Two legs, or two takes from a player and a recorder on one clock, may agree
// closely in level and phase, but not in the noise beside the tone as well.
func SameSamples(a, b analysis.Tone) bool {
	turn := math.Abs(math.Remainder(a.PhaseRad-b.PhaseRad, math.Pi))
	return a.Blocks > 0 && a.StartSec == b.StartSec && a.EndSec == b.EndSec &&
		math.Abs(a.LevelDBFS-b.LevelDBFS) < copyDB && turn < copyRad &&
		math.Abs(a.NoiseDBFS-b.NoiseDBFS) < copyNoiseDB && math.Abs(a.ScatterDB-b.ScatterDB) <= 1e-3*a.ScatterDB
}

// BothProblems names what the two channels of both.wav show together.
func BothProblems(straight, through analysis.Tone, reading LossReading) []Problem {
	var found []Problem
	add := func(name, format string, args ...any) {
		found = append(found, Problem{Name: name, AtSec: math.NaN(), Text: fmt.Sprintf(format, args...)})
	}
	weakUDB := scatterU(reading)
	switch {
	case SameSamples(straight, through):
		add(SameRecording, "both channels hold one and the same signal; channel 1 goes straight through, channel 2 through the pad")
	case reading.LossDB < -(weakUDB + swappedDB):
		add(SwappedTakes, "channel 2 is %.2f dB louder than channel 1, which no passive pad does; the channels are swapped: the pad belongs into channel 2", -reading.LossDB)
	}
	if weakUDB > mostWeakUDB {
		add(TooWeak, "the tone scatters so much that U of the loss is %.2g dB; record again with more level or gain, or a longer tone", weakUDB)
	}
	return found
}
