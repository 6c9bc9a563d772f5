package compare

import (
	"fmt"
	"math"

	"padproof/analysis"
)

// A Side is one of two takes, as far as what is wrong between them goes.
type Side struct {
	SHA256 string
	Frames int64
	Tone   analysis.Tone
}

// Thresholds of what is wrong between two takes.
const (
	mostFreqShift   = 0.01 // of the frequency
	mostLossShiftDB = 0.01 // of the designed loss between the two frequencies
	mostWeakUDB     = 0.5  // expanded, of what the takes' own scatter leaves
	swappedDB       = 0.1  // a passive pad has no gain; so much may come of the rig
	sameSNRDB       = 0.02
	trimmedDB       = 1e-4       // a recording cut shorter keeps its level so closely, a pad does not
	sameDB, sameRad = 1e-3, 2e-3 // two recordings agree so closely once in a thousand, and only of no loss at all
)

// PairProblems names what only both takes together can show; each stands on
// after, the later of the two. designedDB is the bench loss of the drawing by
// frequency.
func PairProblems(before, after Side, reading LossReading, designedDB func(freqHz float64) float64) []Problem {
	var found []Problem
	add := func(name, format string, args ...any) {
		found = append(found, Problem{Name: name, AtSec: math.NaN(), Text: fmt.Sprintf(format, args...)})
	}
	b, a := before.Tone, after.Tone
	weakUDB := scatterU(reading)
	switch {
	case sameRecording(before, after) || math.Abs(b.LevelDBFS-a.LevelDBFS) < trimmedDB && designedDB(b.FreqHz) > 100*trimmedDB:
		add(SameRecording, "before and after are one and the same recording; record after through the pad")
	case reading.LossDB < -(weakUDB + swappedDB):
		add(SwappedTakes, "after is %.2f dB louder than before, which no passive pad does; the takes are swapped, or the gain was raised between them (state it as [calibration] after_gain_db in rig.toml)", -reading.LossDB)
	}
	if overdriven(a, b) {
		add(Clipped, "the third harmonic stands at %.1f dB here and at %.1f dB in before: the input is overdriven; lower the level or the gain and record again", a.HarmonicsDB[1], b.HarmonicsDB[1])
	}
	if overdriven(b, a) {
		add(Clipped, "before has a third harmonic of %.1f dB that is not here (%.1f dB): before is overdriven; lower the level or the gain and record both again", b.HarmonicsDB[1], a.HarmonicsDB[1])
	}
	shift := math.Abs(a.FreqHz/b.FreqHz - 1)
	lossShiftDB := math.Abs(designedDB(a.FreqHz) - designedDB(b.FreqHz))
	if shift > mostFreqShift || lossShiftDB > mostLossShiftDB {
		add(FrequencyDiffers, "the tone is %.6g Hz here and %.6g Hz in before; record both with one setting of the generator", a.FreqHz, b.FreqHz)
	}
	if weakUDB > mostWeakUDB {
		add(TooWeak, "the tone scatters so much that U of the loss is %.2g dB; record again with more level or gain, or a longer tone", weakUDB)
	}
	return found
}

// sameRecording tells two files of one recording: the same bytes, or the same
// length, phase and place of the tone, and either its level (saved in another
// form) or its distance from the noise (made quieter by calculation).
func sameRecording(before, after Side) bool {
	if before.SHA256 == after.SHA256 {
		return true
	}
	b, a := before.Tone, after.Tone
	return before.Frames == after.Frames && b.StartSec == a.StartSec &&
		math.Abs(math.Remainder(b.PhaseRad-a.PhaseRad, 2*math.Pi)) < sameRad &&
		(math.Abs(b.LevelDBFS-a.LevelDBFS) < sameDB || math.Abs(b.SNRDB-a.SNRDB) < sameSNRDB)
}

// overdriven tells a take whose peaks are pressed: it has a third harmonic that
// the other lacks, though a pad of parts without power adds and takes none
// relative to its tone. A crest pressed by a small share shows a third harmonic
// of a third of that (the cubic term of a series); mostPressed is 0.1 dB.
func overdriven(one, other analysis.Tone) bool {
	const mostPressed = 0.0115
	if len(one.HarmonicsDB) < 2 || len(other.HarmonicsDB) < 2 || one.SNRDB < 40 {
		return false
	}
	third, its := analysis.RatioFromDB(one.HarmonicsDB[1]), analysis.RatioFromDB(other.HarmonicsDB[1])
	return 3*(third-its) > mostPressed
}

// scatterU is about the expanded uncertainty that the takes' own scatter leaves.
func scatterU(r LossReading) float64 {
	var sum float64
	for _, t := range r.Terms {
		if !math.IsInf(t.Dof, 1) {
			sum += t.StandardU * t.StandardU
		}
	}
	return 2 * math.Sqrt(sum)
}
