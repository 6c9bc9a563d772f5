package rehearsal

import (
	"math"
	"math/rand/v2"
)

// The band that a level of noise is stated for.
const (
	bandFromHz = 20.0
	bandToHz   = 20000.0
)

// noise adds white Gaussian noise.
type noise struct {
	rms float64
	rng *rand.Rand
}

// noiseRMS returns the RMS of white noise up to half the rate whose part in the band has
// the given level: 10 lg of twice its mean square (AES17). -Inf is none.
func noiseRMS(levelDBFS, rateHz float64) float64 {
	inBand := math.Pow(10, levelDBFS/10) / 2
	return math.Sqrt(inBand * (rateHz / 2) / (math.Min(bandToHz, rateHz/2) - bandFromHz))
}

func (n noise) run(block []float64) []float64 {
	if n.rms > 0 {
		for i := range block {
			block[i] += n.rms * n.rng.NormFloat64()
		}
	}
	return block
}

func (noise) rest() []float64 { return nil }

// dither adds triangular noise of two steps peak to peak.
type dither struct {
	step float64
	rng  *rand.Rand
}

func (d dither) run(block []float64) []float64 {
	for i := range block {
		block[i] += d.step * (d.rng.Float64() - d.rng.Float64())
	}
	return block
}

func (dither) rest() []float64 { return nil }
