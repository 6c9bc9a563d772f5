package analysis

import "math"

// A Density is what a spectrum holds about a frequency, in one hertz.
type Density struct {
	FreqHz     float64
	MeanSquare float64 // in a band of one hertz
	Dof        float64 // how well it is known, as for [Spectrum.PowerIn]
}

// Densities returns the noise in bands of a part of an octave, such as the 24th, their middles at
// 1000·G^(k/perOctave) with G = 10^0.3 (IEC 61260-1, 5.2 and 5.4), as far as these lie in the range.
// What lies in the ranges left out is not counted; a band that they take up wholly is not there. None
// for a perOctave under 1 or a range that is none.
func (sp *Spectrum) Densities(perOctave int, within FreqRange, leftOut ...FreqRange) []Density {
	if perOctave < 1 || !(within.LowHz > 0) || !(within.HighHz >= within.LowHz) || math.IsInf(within.HighHz, 0) {
		return nil
	}
	step := 0.3 / float64(perOctave)
	first := int(math.Ceil(math.Log10(within.LowHz/1000)/step - 1e-9))
	last := int(math.Floor(math.Log10(within.HighHz/1000)/step + 1e-9))
	half := math.Pow(10, step/2)
	var all []Density
	for k := first; k <= last; k++ {
		middle := 1000 * math.Pow(10, float64(k)*step)
		kept := FreqRange{middle / half, middle * half}.Without(leftOut...)
		wide := 0.0
		for _, r := range kept {
			wide += r.HighHz - r.LowHz
		}
		meanSquare, dof := sp.PowerIn(kept)
		if wide > 0 && dof > 0 {
			all = append(all, Density{FreqHz: middle, MeanSquare: meanSquare / wide, Dof: dof})
		}
	}
	return all
}

// LineIn returns the mean square of a line that a range takes up: what lies in it less the noise that
// lies beside it, on either side over as much. It may be negative where there is none.
func (sp *Spectrum) LineIn(r FreqRange) float64 {
	wide := r.HighHz - r.LowHz
	inside, _ := sp.PowerIn([]FreqRange{r})
	beside := math.Inf(1)
	for _, side := range []FreqRange{{r.LowHz - wide, r.LowHz}, {r.HighHz, r.HighHz + wide}} {
		if side.LowHz > 0 && side.HighHz < sp.RateHz/2 {
			meanSquare, _ := sp.PowerIn([]FreqRange{side})
			beside = math.Min(beside, meanSquare)
		}
	}
	if math.IsInf(beside, 1) {
		return inside
	}
	return inside - beside
}

// LineBins is the noise bandwidth of the spectra's window in bins: a bin times this reads a line that
// stands on it in full, and noise as in a band of so many bins.
const LineBins = 2.13

// A Peak is the highest bin of a few.
type Peak struct{ FreqHz, MeanSquare float64 }

// Peaks returns a spectrum in at most so many points from one frequency to another, evenly on a
// logarithmic axis: of the bins that fall together the highest is kept, so that no line is lost.
// Where the bins lie further apart than the points each bin is one.
func (sp *Spectrum) Peaks(fromHz, toHz float64, most int) []Peak {
	if most < 1 || !(fromHz > 0) || !(toHz > fromHz) {
		return nil
	}
	toHz = math.Min(toHz, sp.RateHz/2)
	perPoint := math.Log(toHz/fromHz) / float64(most)
	var all []Peak
	point := math.MinInt
	for k := max(1, int(math.Ceil(fromHz/sp.BinHz))); k < len(sp.MeanSquare); k++ {
		freqHz := float64(k) * sp.BinHz
		if freqHz > toHz {
			break
		}
		p := Peak{freqHz, sp.MeanSquare[k]}
		at := min(most-1, int(math.Log(freqHz/fromHz)/perPoint))
		if at != point {
			all, point = append(all, p), at
		} else if last := &all[len(all)-1]; p.MeanSquare > last.MeanSquare {
			*last = p
		}
	}
	return all
}

// Departures returns the level of each block that [Steady] judges against the running median before
// it, in dB, and the middle of the block. Nothing where Steady has no blocks.
func Departures(t *Track, tone Tone, fromSec, toSec float64) (atSec, db []float64) {
	v := newView(t, tone)
	v.between(fromSec, toSec)
	if v.to-v.from < leastBlocks || !v.settled() {
		return nil, nil
	}
	v.eachDeparture(func(b int, departDB float64, _ bool) {
		atSec, db = append(atSec, t.MiddleSec(b)), append(db, departDB)
	})
	return atSec, db
}
