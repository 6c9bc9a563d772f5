package rehearsal

import (
	"errors"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"testing"
)

// The overlap-save filter must give what plain convolution gives, however the signal is cut.
func TestFilterConvolves(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 1))
	kernel := make([]float64, 64)
	for i := range kernel {
		kernel[i] = rng.NormFloat64()
	}
	for _, length := range []int{0, 1, 31, 193, 194, 1000} {
		signal := make([]float64, length)
		for i := range signal {
			signal[i] = rng.NormFloat64()
		}
		var got []float64
		src := func(emit func([]float64) error) error {
			for rest := signal; len(rest) > 0; {
				n := min(1+rng.IntN(300), len(rest))
				if err := emit(rest[:n]); err != nil {
					return err
				}
				rest = rest[n:]
			}
			return nil
		}
		err := scene{src, [][]effect{{newFilter(kernel)}}}.play(func(b []float64) error {
			got = append(got, b...)
			return nil
		})
		if err != nil || len(got) != length {
			t.Fatalf("%d samples came out as %d, %v", length, len(got), err)
		}
		for n := range got {
			want := 0.0
			for k, h := range kernel {
				if at := n + len(kernel)/2 - k; at >= 0 && at < length {
					want += h * signal[at]
				}
			}
			if math.Abs(got[n]-want) > 1e-12 {
				t.Fatalf("%d samples: output %d = %v, want %v ± 1e-12", length, n, got[n], want)
			}
		}
	}
}

// dft returns the transform of samples at one frequency, first sample at time 0, by the
// definition; the phasor is set right every 4096 samples.
func dft(samples []float64, freqHz, rateHz float64) complex128 {
	var sum, phasor complex128
	step := cmplx.Exp(complex(0, -2*math.Pi*freqHz/rateHz))
	for n, x := range samples {
		if n%4096 == 0 {
			phasor = cmplx.Exp(complex(0, -2*math.Pi*math.Mod(freqHz*float64(n), rateHz)/rateHz))
		}
		sum += complex(x, 0) * phasor
		phasor *= step
	}
	return sum
}

// A first-order low-pass and high-pass have a closed form; so has a sign turned over.
func TestKernelHoldsResponse(t *testing.T) {
	lowPass := func(cornerHz float64) func(float64) complex128 {
		return func(f float64) complex128 { return 1 / complex(1, f/cornerHz) }
	}
	highPass := func(cornerHz float64) func(float64) complex128 {
		return func(f float64) complex128 { return complex(0, f/cornerHz) / complex(1, f/cornerHz) }
	}
	for name, tc := range map[string]struct {
		rateHz   float64
		response func(float64) complex128
	}{
		"level":                {48000, func(float64) complex128 { return -0.25 }},
		"low-pass 8 kHz":       {48000, lowPass(8e3)},
		"low-pass 8 kHz, 44k":  {44100, lowPass(8e3)},
		"low-pass 1.7 MHz":     {44100, lowPass(1.7e6)},
		"high-pass 3 Hz":       {48000, highPass(3)},
		"high-pass 40 Hz, 96k": {96000, highPass(40)},
	} {
		taps, err := kernel(tc.rateHz, tc.response)
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		for _, freqHz := range []float64{20, 23.7, 100, 997, 7919, 20500} { // the last twelfth of an octave ends at 20535 Hz
			late := cmplx.Exp(complex(0, 2*math.Pi*freqHz*float64(len(taps)/2)/tc.rateHz))
			got, want := dft(taps, freqHz, tc.rateHz)*late, tc.response(freqHz)
			const tol = 1e-6 // relative, 1e-5 dB
			if off := cmplx.Abs(got-want) / cmplx.Abs(want); off > tol {
				t.Errorf("%s: response at %g Hz = %v, want %v within %g", name, freqHz, got, want, tol)
			}
		}
	}
}

// A cable of 300 pF settles at once: its kernel needs no more than the least taps.
func TestKernelOfACableIsShort(t *testing.T) {
	p := plan(pad(t))
	p.Bench.Ends.CableFarads = 300e-12
	for _, role := range p.Takes {
		s := staged(t, p, role)
		if f, ok := s.channels[0][1].(*filter); !ok || f.taps != leastTaps {
			t.Errorf("%s: the second effect is %T with %d taps, want a filter with %d", role, s.channels[0][1], f.taps, leastTaps)
		}
	}
}

func TestKernelRefusesWhatRingsOn(t *testing.T) {
	resonance := func(f float64) complex128 { // 1 kHz, Q = 1e6
		return 1 / complex(1, 1e6*(f/1000-1000/math.Max(f, 1e-9)))
	}
	if _, err := kernel(8000, resonance); !errors.Is(err, errSlow) {
		t.Errorf("kernel of a resonance of Q 1e6: error %v, want %v", err, errSlow)
	}
}
