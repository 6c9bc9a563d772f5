package rehearsal

import (
	"errors"
	"math"
	"math/cmplx"
	"slices"

	"gonum.org/v1/gonum/dsp/fourier"
)

const (
	leastTaps = 1 << 11
	mostTaps  = 1 << 20

	// The response is kept between these, of the rate above. At 44.1 kHz that must reach past the
	// last twelfth of an octave below 20 kHz, 20.5 kHz at its upper edge.
	keptFromHz = 10.0
	keptToFrac = 0.47

	// How far off the response may be, relative: within the first the kernel is long
	// enough, and with the most taps the second (0.0004 dB) will do. What lies 120 dB under
	// the peak of the response need not be so exact.
	closeFrac, enoughFrac = 1e-7, 5e-5
	roughFrac             = 1e-5 // 0.0001 dB: close enough for noise
	depthFrac             = 1e-6
)

var errSlow = errors.New("the drawing rings or settles too slowly to be simulated at this sample rate")

// kernel returns the taps of a filter with a frequency response, time 0 in the middle (at
// half their number, a power of two). The response must be that of something real, so that
// negative frequencies have the conjugate; at half the rate its imaginary part is brought
// down to 0.
//
// The taps are the inverse transform of the response at evenly spaced frequencies, which is
// exact at those; their number is doubled until it also holds half way between.
func kernel(rateHz float64, response func(freqHz float64) complex128) ([]float64, error) {
	return kernelWithin(rateHz, closeFrac, response)
}

// kernelWithin does so until the response is kept within a part of itself.
func kernelWithin(rateHz, withinFrac float64, response func(freqHz float64) complex128) ([]float64, error) {
	at := func(turns float64) complex128 { return realAtHalf(response(turns*rateHz), turns) }
	n := leastTaps
	grid := make([]complex128, n/2+1)
	for k := range grid {
		grid[k] = at(float64(k) / float64(n))
	}
	for ; ; n *= 2 {
		taps := inverse(grid)
		between := make([]complex128, n/2)
		for k := range between {
			between[k] = at((float64(k) + 0.5) / float64(n))
		}
		off := worst(taps, between, rateHz)
		if off <= withinFrac || n == mostTaps && off <= enoughFrac {
			return slices.Concat(taps[n/2:], taps[:n/2]), nil
		}
		if n == mostTaps || math.IsNaN(off) {
			return nil, errSlow
		}
		finer := make([]complex128, n+1)
		for k, v := range grid {
			finer[2*k] = v
		}
		for k, v := range between {
			finer[2*k+1] = v
		}
		grid = finer
	}
}

// realAtHalf takes the imaginary part away between the highest frequency kept and half the
// rate, by a raised cosine.
func realAtHalf(v complex128, turns float64) complex128 {
	if turns <= keptToFrac {
		return v
	}
	keep := 0.5 + 0.5*math.Cos(math.Pi*(turns-keptToFrac)/(0.5-keptToFrac))
	return complex(real(v), keep*imag(v))
}

// inverse returns the taps of a response given from 0 to half the rate, time 0 first and
// negative times at the end.
func inverse(grid []complex128) []float64 {
	n := 2 * (len(grid) - 1)
	taps := fourier.NewFFT(n).Sequence(nil, grid)
	for i := range taps {
		taps[i] /= float64(n)
	}
	return taps
}

// worst returns how far the taps are off the response half way between the frequencies
// they were made at, relative, at the worst of those kept.
func worst(taps []float64, between []complex128, rateHz float64) float64 {
	n := len(taps)
	padded := make([]float64, 2*n)
	copy(padded, taps[:n/2])
	copy(padded[2*n-n/2:], taps[n/2:])
	got := fourier.NewFFT(2*n).Coefficients(nil, padded)
	peak := 0.0
	for _, want := range between {
		peak = math.Max(peak, cmplx.Abs(want))
	}
	if peak == 0 {
		return 0
	}
	off := 0.0
	for k, want := range between {
		turns := (float64(k) + 0.5) / float64(n)
		if turns*rateHz >= keptFromHz && turns <= keptToFrac {
			off = math.Max(off, cmplx.Abs(got[2*k+1]-want)/math.Max(cmplx.Abs(want), depthFrac*peak))
		}
	}
	return off
}
