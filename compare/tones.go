package compare

import (
	"fmt"
	"math"

	"padproof/analysis"
)

// SameFrequency tells tones of one setting of a generator, as two machines with
// two clocks may record them, from tones of two settings.
func SameFrequency(aHz, bHz float64) bool { return math.Abs(aHz/bHz-1) <= mostFreqShift }

// IsMainsLine tells a line that is likely to be hum: one of the first ten
// harmonics of 50 or 60 Hz, within half a per cent.
func IsMainsLine(freqHz float64) bool {
	for _, mainsHz := range []float64{50, 60} {
		if n := math.Round(freqHz / mainsHz); n >= 1 && n <= 10 && math.Abs(freqHz/(n*mainsHz)-1) < 0.005 {
			return true
		}
	}
	return false
}

// levelStepDB is how far two stretches of one tone must lie apart to count as
// two levels, beyond what their scatter explains.
const levelStepDB = 0.1

// PairTones picks the stretch of before and that of after that a loss is judged
// at: those of the tone of before nearest 1 kHz, at its loudest level. A tone of
// before that after lacks, and a tone that stands at other levels, or in another
// order of them, in after than in before, are problems of after: which stretch
// belongs to which cannot be told. ok is false where there is no pair at all.
func PairTones(before, after []analysis.Tone) (b, a analysis.Tone, found []Problem, ok bool) {
	if len(before) == 0 || len(after) == 0 {
		return b, a, nil, false
	}
	main := NearestTo1k(before)
	for _, t := range before {
		if len(at(after, t.FreqHz)) == 0 && len(at(before[:indexOf(before, t)], t.FreqHz)) == 0 {
			found = append(found, Problem{Name: NoTone, AtSec: math.NaN(), Text: fmt.Sprintf("the tone of %.6g Hz that before holds is not here; record all of the tones again, through the pad", t.FreqHz)})
		}
	}
	levelsB, levelsA := levels(at(before, main.FreqHz)), levels(at(after, main.FreqHz))
	if len(levelsA) == 0 {
		return b, a, found, false
	}
	loudest := 0
	for i, t := range levelsB {
		if t.LevelDBFS > levelsB[loudest].LevelDBFS {
			loudest = i
		}
	}
	if !sameSteps(levelsB, levelsA) {
		found = append(found, Problem{Name: GainMoved, AtSec: math.NaN(), Text: fmt.Sprintf("the tone of %.6g Hz stands at %s here and at %s in before; record each take in one go, one level, nothing touched", main.FreqHz, listLevels(levelsA), listLevels(levelsB))})
	}
	return levelsB[loudest], levelsA[min(loudest, len(levelsA)-1)], found, true
}

// NearestTo1k is the tone nearest 1 kHz, of several stretches the loudest; tones
// holds at least one.
func NearestTo1k(tones []analysis.Tone) analysis.Tone {
	best := tones[0]
	for _, t := range tones[1:] {
		nearer := math.Abs(math.Log(t.FreqHz/1000)) < math.Abs(math.Log(best.FreqHz/1000))
		if SameFrequency(t.FreqHz, best.FreqHz) {
			nearer = t.LevelDBFS > best.LevelDBFS
		}
		if nearer {
			best = t
		}
	}
	return best
}

// at are the stretches of one frequency.
func at(tones []analysis.Tone, freqHz float64) []analysis.Tone {
	var some []analysis.Tone
	for _, t := range tones {
		if SameFrequency(t.FreqHz, freqHz) {
			some = append(some, t)
		}
	}
	return some
}

func indexOf(tones []analysis.Tone, one analysis.Tone) int {
	for i, t := range tones {
		if t.StartSec == one.StartSec {
			return i
		}
	}
	return 0
}

// levels are the stretches of one tone in order, those that follow one another
// at one level taken as one, the longest standing for it.
func levels(tones []analysis.Tone) []analysis.Tone {
	var steps []analysis.Tone
	for _, t := range tones {
		last := len(steps) - 1
		if last >= 0 && math.Abs(t.LevelDBFS-steps[last].LevelDBFS) < levelStepDB+3*(t.StdErrDB+steps[last].StdErrDB) {
			if t.EndSec-t.StartSec > steps[last].EndSec-steps[last].StartSec {
				steps[last] = t
			}
			continue
		}
		steps = append(steps, t)
	}
	return steps
}

// sameSteps tells whether two takes step through levels alike.
func sameSteps(b, a []analysis.Tone) bool {
	if len(b) != len(a) {
		return false
	}
	for i := range b {
		stepB, stepA := b[i].LevelDBFS-b[0].LevelDBFS, a[i].LevelDBFS-a[0].LevelDBFS
		if math.Abs(stepB-stepA) > levelStepDB+3*(b[i].StdErrDB+b[0].StdErrDB+a[i].StdErrDB+a[0].StdErrDB) {
			return false
		}
	}
	return true
}

func listLevels(steps []analysis.Tone) string {
	text := ""
	for i, t := range steps {
		if i > 0 {
			text += ", "
		}
		text += fmt.Sprintf("%.1f", t.LevelDBFS)
	}
	return text + " dBFS"
}
