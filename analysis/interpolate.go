package analysis

import "math"

const (
	// Images and ripple of the interpolator: 60 dB down, by Kaiser's window (J. F. Kaiser,
	// "Nonrecursive digital filter design using the I0-sinh window function", IEEE 1974).
	interpolatorDownDB = 60.0
	interpolatorBeta   = 0.1102 * (interpolatorDownDB - 8.7)
)

// An interpolator raises the rate by a whole factor: a sinc under Kaiser's window, flat up to 20 kHz
// or 0.45 of the rate.
type interpolator struct {
	phases [][]float64 // the filter of each new sample, the first left out: it is an old sample
	last   []float64   // the samples that the next block still needs
	work   []float64
}

func newInterpolator(rateHz float64, factor int) *interpolator {
	if factor < 2 {
		return &interpolator{}
	}
	passHz := math.Min(bandHighHz, usableFrac*rateHz)
	half := int(math.Ceil((interpolatorDownDB - 8) / (2.285 * 2 * math.Pi * (1 - 2*passHz/rateHz)) / 2))
	u := &interpolator{last: make([]float64, 2*half-1)}
	for p := 1; p < factor; p++ {
		taps := make([]float64, 2*half)
		for j := range taps {
			// The oldest sample first; the new one lies p/factor after number half-1.
			at := float64(half-1-j) + float64(p)/float64(factor)
			part := at / float64(half)
			taps[j] = sinc(at) * besselI0(interpolatorBeta*math.Sqrt(math.Max(0, 1-part*part))) / besselI0(interpolatorBeta)
		}
		u.phases = append(u.phases, taps)
	}
	return u
}

// run appends the raised samples of a block to dst.
func (u *interpolator) run(dst, x []float64) []float64 {
	if len(u.phases) == 0 {
		return append(dst, x...)
	}
	u.work = append(append(u.work[:0], u.last...), x...)
	long := len(u.last) + 1
	for i := range x {
		window := u.work[i : i+long]
		dst = append(dst, window[long/2-1])
		for _, taps := range u.phases {
			sum := 0.0
			for j, v := range window[:len(taps)] {
				sum += v * taps[j]
			}
			dst = append(dst, sum)
		}
	}
	copy(u.last, u.work[len(u.work)-len(u.last):])
	return dst
}

func sinc(x float64) float64 {
	if x == 0 {
		return 1
	}
	return math.Sin(math.Pi*x) / (math.Pi * x)
}

// besselI0 is the modified Bessel function of the first kind and order 0, by its series.
func besselI0(x float64) float64 {
	sum, term := 1.0, 1.0
	for k := 1.0; term > 1e-16*sum; k++ {
		term *= x * x / (4 * k * k)
		sum += term
	}
	return sum
}
