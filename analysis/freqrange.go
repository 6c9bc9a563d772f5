package analysis

import (
	"math"
	"sort"
	"sync"
)

// A FreqRange runs from LowHz to HighHz.
type FreqRange struct{ LowHz, HighHz float64 }

// Without returns what is left of a range once others are taken out of it: ranges in order, apart
// from one another, none where nothing is left. The others may overlap and come in any order; one
// that is no range (NaN, or its ends crossed) takes nothing out.
func (r FreqRange) Without(others ...FreqRange) []FreqRange {
	ordered := append([]FreqRange(nil), others...)
	sort.Slice(ordered, func(i, j int) bool { return ordered[i].LowHz < ordered[j].LowHz })
	var left []FreqRange
	at := r.LowHz
	for _, o := range ordered {
		if !(o.HighHz > at) || !(o.LowHz < o.HighHz) {
			continue
		}
		if o.LowHz > at && at < r.HighHz {
			left = append(left, FreqRange{at, math.Min(o.LowHz, r.HighHz)})
		}
		at = o.HighHz
	}
	if at < r.HighHz {
		left = append(left, FreqRange{at, r.HighHz})
	}
	return left
}

// PowerIn returns the mean square of what lies in some ranges, which must be apart from one another.
// Bin k stands for what lies within half a bin of k·BinHz, and counts by the share of its width that
// lies in a range, so that the ranges need not fall between bins.
//
// dof says how well the figure is known if it is Gaussian noise: it scatters like a chi-square of
// so many degrees of freedom, its relative standard deviation being √(2/dof). That follows from the
// window and the overlap (P. D. Welch, IEEE Trans. AU-15, 1967): with segments of n samples w_t,
//
//	variance = Σ MeanSquare² · (n Σ w⁴ + 2 n Σ w_t² w_(t+n/2)² (1-1/Segments)) / (Σ w²)² / Segments
//
// which needs a spectrum that changes little over the nine bins of a main lobe. dof is 0 where the
// ranges hold nothing.
func (sp *Spectrum) PowerIn(ranges []FreqRange) (meanSquare, dof float64) {
	squares := 0.0
	for _, r := range ranges {
		from, to := r.LowHz/sp.BinHz+0.5, r.HighHz/sp.BinHz+0.5 // bin k runs from k to k+1
		from, to = math.Max(from, 0), math.Min(to, float64(len(sp.MeanSquare)))
		for k := int(from); float64(k) < to; k++ {
			share := math.Min(to, float64(k+1)) - math.Max(from, float64(k))
			v := sp.MeanSquare[k]
			meanSquare += share * v
			squares += share * v * v
		}
	}
	if !(meanSquare > 0) {
		return 0, 0
	}
	return meanSquare, 2 * meanSquare * meanSquare / (squares * binVariance(sp.Segments))
}

// binVariance returns the sum, over the neighbours of a bin, of their covariance with it, relative
// to the square of its mean: what PowerIn says of n Σ w⁴ and so on.
func binVariance(segments int) float64 {
	shape := windowShape()
	m := float64(segments)
	return (shape[0] + 2*shape[1]*(1-1/m)) / m
}

var windowShape = sync.OnceValue(func() (shape [2]float64) {
	w := windowOf(1024)
	n, power := len(w), 0.0
	for t, v := range w {
		power += v * v
		shape[0] += v * v * v * v
		if t < n/2 {
			shape[1] += v * v * w[t+n/2] * w[t+n/2]
		}
	}
	for i := range shape {
		shape[i] *= float64(n) / (power * power)
	}
	return shape
})
