package rehearsal

import (
	"math"
	"math/rand/v2"

	"padproof/analysis"
)

// inTurn plays sources one after another.
func inTurn(sources ...source) source {
	return func(emit func([]float64) error) error {
		for _, s := range sources {
			if err := s(emit); err != nil {
				return err
			}
		}
		return nil
	}
}

// blocks plays so many seconds in blocks that fill makes; they come to it as the last left
// them, at first silent.
func blocks(rateHz, sec float64, fill func(block []float64)) source {
	return func(emit func([]float64) error) error {
		block := make([]float64, 4096)
		for left := int(math.Round(rateHz * sec)); left > 0; {
			n := min(left, len(block))
			fill(block[:n])
			if err := emit(block[:n]); err != nil {
				return err
			}
			left -= n
		}
		return nil
	}
}

// silence is nothing for some seconds.
func silence(rateHz, sec float64) source { return blocks(rateHz, sec, func([]float64) {}) }

// whiteNoise is Gaussian noise of RMS 1.
func whiteNoise(rateHz, sec float64, rng *rand.Rand) source {
	return blocks(rateHz, sec, func(block []float64) {
		for i := range block {
			block[i] = rng.NormFloat64()
		}
	})
}

// steadyTone is a sine of full scale between two silences.
func steadyTone(rateHz, freqHz, sec float64) source {
	quiet := silence(rateHz, SilenceSec)
	tone := func(emit func([]float64) error) error {
		n := 0.0
		return blocks(rateHz, sec, func(block []float64) {
			for i := range block {
				block[i] = math.Sin(2 * math.Pi * math.Mod(freqHz*n, rateHz) / rateHz)
				n++
			}
		})(emit)
	}
	return inTurn(quiet, tone, quiet)
}

// testSignal is the test signal, its first tone at full scale, played at a rate and heard by
// a clock that counts ratio samples for each.
func testSignal(rateHz, ratio float64) source {
	raise := gain(analysis.RatioFromDB(-analysis.SignalPeakDBFS))
	return func(emit func([]float64) error) error {
		signal := func(emit func([]float64) error) error { return analysis.GenerateHeard(rateHz, ratio, emit) }
		return scene{signal, [][]effect{{raise}}}.play(emit)
	}
}
