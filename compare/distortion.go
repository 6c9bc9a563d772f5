package compare

import (
	"math"

	"padproof/analysis"
	"padproof/compare/uncertainty"
)

// A DistortionFinding is what the harmonics of after show. Figures are in dB relative to the tone.
type DistortionFinding struct {
	Finding         // Measured is after's, as recorded; NaN where only a bound is known
	RigDB   float64 // the same from before; NaN where only a bound is known
	MostDB  float64 // after's harmonics are below this at 95 %
	LowDB   float64 // what the pad adds: the difference of the two amplitudes, less their doubt
	HighDB  float64 // and their sum, with it
}

// JudgeDistortion judges what the pad adds to the harmonics of the rig: between the difference of
// the two amplitudes and their sum, since nothing is known of their phases. FAIL where even the
// difference breaks the limit, PASS where even the sum keeps it, else UNPROVEN.
//
// The noise in the harmonics' bins is no distortion: what shows no harmonics gives a bound, and
// that is what is judged.
func JudgeDistortion(before, after analysis.Tone, linearityDB float64, limit Limit, rule Rule) (DistortionFinding, error) {
	b, a := before.Distortion(), after.Distortion()
	bBest, _, bMost := b.Amplitude()
	aBest, aLeast, aMost := a.Amplitude()
	f := DistortionFinding{
		Finding: nothingFound(limit, math.NaN()), RigDB: math.NaN(),
		MostDB: analysis.DBFromRatio(aMost),
		LowDB:  analysis.DBFromRatio(aLeast - bMost), HighDB: analysis.DBFromRatio(aMost + bMost),
	}
	if a.Harmonics == 0 || b.Harmonics == 0 {
		f.leaveOpen("no harmonic of the tone lies below 20 kHz and 0.45 of the sample rate; record the tone of the test signal at 44.1 kHz or more")
		return f, nil
	}
	if b.Shows() {
		f.RigDB = analysis.DBFromRatio(bBest)
	}
	if a.Shows() {
		f.Measured = analysis.DBFromRatio(aBest)
		f.Budget.Terms = distortionTerms(a, linearityDB)
	}
	var err error
	if f.UDB, err = f.Budget.ExpandedU(Coverage); err != nil {
		return f, err
	}
	f.judge(limit, rule, aBest, bBest)
	return f, nil
}

// distortionTerms are the doubt of a level of harmonics, in dB of amplitude: half the relative
// change of the power.
func distortionTerms(d analysis.Distortion, linearityDB float64) []uncertainty.Term {
	terms := []uncertainty.Term{uncertainty.FromNormal(afterHarmonics, d.StandardU/d.Power, DBPerPower)}
	if linearityDB > 0 {
		terms = append(terms, uncertainty.FromRectangle(linearitySrc, linearityDB, 1))
	}
	return terms
}

// judge holds the sum and the difference, each with its own doubt, against the limit.
func (f *DistortionFinding) judge(limit Limit, rule Rule, after, rig float64) {
	expected := f.RigDB // a pad of parts that are linear adds nothing
	sumDB, uSumDB := withDoubt(after+rig, f.HighDB)
	differenceDB, uDifferenceDB := withDoubt(after-rig, f.LowDB)
	if math.IsNaN(expected) {
		expected = sumDB
	}
	high, why := Decide(rule, sumDB, uSumDB, limit, expected)
	if high == Pass || high == None {
		f.Verdict = high
		return
	}
	if low, _ := Decide(rule, differenceDB, uDifferenceDB, limit, expected); low == Fail && differenceDB > analysis.FloorDBFS {
		f.Verdict = Fail
		return
	}
	rigMost := f.RigDB
	switch {
	case !math.IsNaN(rigMost) && rigMost > limit.High-6.02:
		f.leaveOpen("the rig itself shows %.1f dB in before, so what the pad adds lies between %s and %.1f dB; use a generator and an interface with less distortion, or less level", rigMost, atLeastDB(f.LowDB), f.HighDB)
	case math.IsNaN(f.Measured):
		f.leaveOpen("the noise of after hides harmonics up to %.1f dB; record after again, longer or with more level or gain", f.MostDB)
	case high == Fail:
		f.leaveOpen("what the pad adds lies between %s and %.1f dB, across the limit; use a rig with less distortion, or less level", atLeastDB(f.LowDB), f.HighDB)
	default:
		f.leaveOpen("%s; record before and after again, longer or with more level", why)
	}
}

// withDoubt is a figure in dB and how far its bound lies from it; where there is no figure, the
// bound alone.
func withDoubt(amplitude, boundDB float64) (db, uDB float64) {
	db = analysis.DBFromRatio(amplitude)
	if db == analysis.FloorDBFS {
		return boundDB, 0
	}
	return db, math.Abs(boundDB - db)
}

func atLeastDB(db float64) string {
	if db <= analysis.FloorDBFS {
		return "nothing"
	}
	return plainDB(db, 1)
}
