package analysis

import (
	"math"
	"math/bits"
	"math/cmplx"
)

// A gate is a stretch of the test signal's time, let in and out gently.
type gate struct {
	fromSec, toSec   float64
	riseSec, fallSec float64 // raised cosines, within
}

// gain returns the gate at a signal second.
func (g gate) gain(sec float64) float64 {
	in, left := sec-g.fromSec, g.toSec-sec
	gain := 1.0
	if in < g.riseSec {
		gain = 0.5 - 0.5*math.Cos(math.Pi*math.Max(0, in)/g.riseSec)
	}
	if left < g.fallSec {
		gain *= 0.5 - 0.5*math.Cos(math.Pi*math.Max(0, left)/g.fallSec)
	}
	return gain
}

// energySec returns the integral of the gate's square: 3/8 of its edges and all between.
func (g gate) energySec() float64 {
	return g.toSec - g.fromSec - 0.625*(g.riseSec+g.fallSec)
}

// binHz is the spacing of bins that the gate resolves.
func (g gate) binHz() float64 { return 1 / (g.toSec - g.fromSec) }

// A clockSpectrum gives the Fourier integral of a take over a gate, at evenly spaced frequencies,
// both by the signal's clock and not the recorder's:
//
//	X(k) = Σ x(n) g(t(n)) exp(-2πi k binHz (t(n) - fromSec)) Δt
//
// with t(n) the signal second of sample n. Two takes with clocks and rates of their own so come to
// one clock without any resampling and its errors: the samples are summed at the very times and
// frequencies wanted, by the chirp transform (L. I. Bluestein, "A linear filtering approach to the
// computation of the discrete Fourier transform", IEEE Trans. AU-18, 1970; from memory). Samples
// are taken piece by piece, so memory does not grow with the rate.
type clockSpectrum struct {
	s      Samples
	p      Placement
	g      gate
	rateHz float64
	beta   float64 // turns by which bin 1 moves from one sample to the next
	plan   *transform
	chirp  []complex128 // exp(πi beta k²)
	kernel []complex128 // its transform, in the transform's order
	z      []complex128
	x      []float64
	swap   []int32 // the transform's order
}

// newClockSpectrum prepares for a number of bins from 0 on.
func newClockSpectrum(s Samples, p Placement, g gate, count int) *clockSpectrum {
	c := &clockSpectrum{s: s, p: p, g: g, rateHz: s.RateHz()}
	c.beta = g.binHz() / (c.rateHz * p.Ratio)
	samples := int((g.toSec-g.fromSec)*p.Ratio*c.rateHz) + 2
	n := 8
	for n < 2*count && n < samples+count {
		n *= 2
	}
	c.x = make([]float64, n-count)
	c.plan, c.z, c.kernel = transformOf(n), make([]complex128, n), make([]complex128, n)
	c.chirp = make([]complex128, max(count, len(c.x)))
	for k := range c.chirp {
		c.chirp[k] = turnOfPart(c.beta * float64(k) * float64(k) / 2)
	}
	copy(c.kernel, c.chirp[:count])
	for m := range c.x {
		c.kernel[(n-m)%n] = c.chirp[m]
	}
	c.plan.run(c.kernel)
	c.swap = make([]int32, n)
	shift := bits.LeadingZeros64(uint64(n - 1))
	for i := range c.swap {
		c.swap[i] = int32(bits.Reverse64(uint64(i)) >> shift)
	}
	return c
}

// sum adds up the bins, as many as were prepared for. The take must hold the whole gate.
func (c *clockSpectrum) sum(count int) ([]complex128, error) {
	bins := make([]complex128, count)
	frame := max(0, int64(math.Ceil(c.p.TakeSec(c.g.fromSec)*c.rateHz)))
	end := int64(math.Floor(c.p.TakeSec(c.g.toSec) * c.rateHz))
	for frame <= end {
		x := c.x[:min(int64(len(c.x)), end-frame+1)]
		n, err := readFull(c.s, x, frame)
		if err != nil {
			return nil, err
		}
		if n == 0 {
			break
		}
		c.piece(bins, x[:n], frame)
		frame += int64(n)
	}
	return bins, nil
}

// piece adds the samples from a frame on.
func (c *clockSpectrum) piece(bins []complex128, x []float64, frame int64) {
	stepSec := 1 / (c.rateHz * c.p.Ratio)
	fromSec := c.p.SignalSec(float64(frame)/c.rateHz) - c.g.fromSec
	clear(c.z)
	for m, v := range x {
		if !(math.Abs(v) <= largestSample) {
			continue
		}
		v *= stepSec * c.g.gain(c.g.fromSec+fromSec+float64(m)*stepSec)
		c.z[m] = complex(v, 0) * cmplx.Conj(c.chirp[m])
	}
	c.plan.run(c.z)
	for i, k := range c.kernel {
		c.z[i] = cmplx.Conj(c.z[i] * k)
	}
	for i, j := range c.swap {
		if int(j) > i {
			c.z[i], c.z[j] = c.z[j], c.z[i]
		}
	}
	c.plan.run(c.z) // of the conjugate: the inverse, in the transform's order
	scale, turnBin := complex(1/float64(len(c.z)), 0), c.g.binHz()*fromSec
	for k := range bins {
		turn := turnOfPart(-float64(k) * turnBin)
		bins[k] += cmplx.Conj(c.z[c.swap[k]]) * cmplx.Conj(c.chirp[k]) * turn * scale
	}
}
