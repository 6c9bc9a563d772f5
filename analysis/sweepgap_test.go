package analysis

import (
	"math"
	"math/rand/v2"
	"testing"
)

// A gap in the sweep is found where it was made, and none in a sound take, at a
// weak level too.
func TestSweepGaps(t *testing.T) {
	const rateHz = 48000.0
	for _, levelDB := range []float64{0, -60} {
		rng := rand.New(rand.NewPCG(3, 3))
		var x []float64
		gain, sigma := RatioFromDB(levelDB), RatioFromDB(-105)/math.Sqrt2
		if err := Generate(rateHz, func(block []float64) error {
			for _, v := range block {
				x = append(x, gain*v+sigma*rng.NormFloat64())
			}
			return nil
		}); err != nil {
			t.Fatal(err)
		}
		p := Placement{Ratio: 1, Polarity: 1}
		if gaps, err := SweepGaps(&clip{x: x, rateHz: rateHz}, p); err != nil || len(gaps) > 0 {
			t.Errorf("%.0f dB: gaps at %v (%v) in a sound take", levelDB, gaps, err)
		}
		for i := range int(0.02 * rateHz) {
			x[int(12.5*rateHz)+i] = 0
		}
		gaps, err := SweepGaps(&clip{x: x, rateHz: rateHz}, p)
		if err != nil || len(gaps) != 1 || math.Abs(gaps[0]-12.51) > 0.02 {
			t.Errorf("%.0f dB: gaps at %v (%v), want one at 12.5 s", levelDB, gaps, err)
		}
	}
}
