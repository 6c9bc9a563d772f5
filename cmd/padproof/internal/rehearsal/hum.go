package rehearsal

import (
	"math"
	"math/cmplx"
	"math/rand/v2"

	"padproof/analysis"
)

// humHarmonics is how many lines hum has, the mains line among them.
const humHarmonics = 10

// hum adds a frequency and its harmonics.
type hum struct {
	lines []complex128 // each harmonic's peak and phase, the lowest first
	step  complex128   // turn of the lowest in one sample
	now   complex128
}

// newHum makes mains hum: the mains line at a level in dBFS, its harmonic n by 20 lg n² less,
// as far as they lie below half the rate. All together lie 0.34 dB higher (the sum of 1/n⁴).
// Phases are random.
func newHum(levelDBFS, mainsHz, rateHz float64, rng *rand.Rand) *hum {
	var lines []complex128
	for n := 1.0; n <= humHarmonics; n++ {
		phase := 2 * math.Pi * rng.Float64()
		if n*mainsHz < keptToFrac*rateHz {
			lines = append(lines, cmplx.Rect(analysis.PeakFromDBFS(levelDBFS)/(n*n), phase))
		}
	}
	return newLines(lines, mainsHz, rateHz)
}

// newLines makes a frequency and harmonics of given peaks and phases.
func newLines(lines []complex128, freqHz, rateHz float64) *hum {
	return &hum{lines: lines, step: cmplx.Rect(1, 2*math.Pi*freqHz/rateHz), now: 1}
}

func (h *hum) run(block []float64) []float64 {
	for i := range block {
		sum := complex(0, 0) // Horner's rule: harmonic n is the turn of the lowest to the n
		for n := len(h.lines) - 1; n >= 0; n-- {
			sum = (sum + h.lines[n]) * h.now
		}
		block[i] += real(sum)
		h.now *= h.step
	}
	h.now /= complex(cmplx.Abs(h.now), 0) // rounding must not make it grow
	return block
}

func (*hum) rest() []float64 { return nil }
