package analysis

import (
	"math"
	"sync"
)

// windowTerms are the coefficients, signs alternating, of the window of every spectrum here: four
// terms, continuous up to the third derivative, highest side lobe -82.6 dB, falling by 30 dB an
// octave (A. H. Nuttall, "Some windows with very good sidelobe behavior", IEEE Trans. ASSP-29,
// 1981; from memory, checked by computing both figures). A tone 90 dB above the noise is thus
// gone from a bin's noise some 20 bins away, where under a Hann window it takes several hundred.
var windowTerms = [4]float64{0.338946, 0.481973, 0.161054, 0.018027}

// lobeBins is the half-width of its main lobe: all but 1e-8 of a line's power lies within.
const lobeBins = 4

// windowPower returns the mean of the window's squares, a0² + ½Σak².
func windowPower() float64 {
	sum := windowTerms[0] * windowTerms[0]
	for _, a := range windowTerms[1:] {
		sum += a * a / 2
	}
	return sum
}

var windows sync.Map // length -> []float64; never changed once made

// windowOf returns the window in its periodic form: the sample after the last would be the first.
func windowOf(n int) []float64 {
	if w, ok := windows.Load(n); ok {
		return w.([]float64)
	}
	w := make([]float64, n)
	for i := range w {
		x := 2 * math.Pi * float64(i) / float64(n)
		w[i] = windowTerms[0] - windowTerms[1]*math.Cos(x) + windowTerms[2]*math.Cos(2*x) - windowTerms[3]*math.Cos(3*x)
	}
	kept, _ := windows.LoadOrStore(n, w)
	return kept.([]float64)
}

// leakage returns the most that a line shows in a bin offBins away from it, as a part of the
// line's whole power, for offsets beyond the main lobe: the window's transform without the ripple
// of its side lobes.
func leakage(offBins float64) float64 {
	d := offBins
	sum, sign := windowTerms[0]/d, -1.0
	for k := 1; k < len(windowTerms); k++ {
		sum += sign * windowTerms[k] * d / (d*d - float64(k*k))
		sign = -sign
	}
	sum /= math.Pi
	return sum * sum / windowPower()
}

// windowTailFrac returns how much of the window, as a part of its length, may lie outside a steady
// tone before the power it reads falls by the given number of decibels.
func windowTailFrac(fallDB float64) float64 {
	w := windowOf(1024)
	limit := windowPower() * float64(len(w)) * (1 - RatioFromDB(-2*fallDB))
	sum := 0.0
	for i, v := range w {
		if sum += v * v; sum > limit {
			return float64(i) / float64(len(w))
		}
	}
	return 1
}
