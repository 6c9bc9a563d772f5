package uncertainty

import (
	"math"
	"math/rand/v2"
	"testing"
)

// How often the true value lies within U, every source drawn from its stated
// distribution and the scatter estimated anew for each unit from readings that
// follow a normal one: 93 to 98 % where repeatability dominates, at least 94 %
// where one rectangle does.
func TestCoverage(t *testing.T) {
	inf := math.Inf(1)
	gain := []Term{FromRectangle("gain drift", 0.05, 1), FromRectangle("linearity", 0.01, 1),
		FromRectangle("source", 10, 0.0004), FromRectangle("load", 500, -1e-5)}
	tests := []struct {
		name   string
		stdErr float64 // true standard error of repeatability
		dof    float64
		others []Term
		low    float64
		high   float64
	}{
		{"repeatability alone, 1 dof", 1, 1, nil, 0.93, 0.98},
		{"repeatability alone, 7 dof", 1, 7, nil, 0.93, 0.98},
		{"repeatability, 3 dof, and a rectangle", 1, 3, []Term{FromRectangle("", 0.8, 1)}, 0.93, 0.98},
		{"repeatability, 4 dof, and many", 1, 4, []Term{FromRectangle("", 0.6, 1), FromNormal("", 0.2, -1), FromArcsine("", 0.4, 1)}, 0.93, 0.98},
		{"repeatability, 7 dof, and many", 1, 7, []Term{FromRectangle("", 0.6, 1), FromTriangle("", 0.5, -1), FromArcsine("", 0.4, 1)}, 0.93, 0.98},
		{"repeatability, 15 dof, and a rectangle as large", 1, 15, []Term{FromRectangle("", 1.7, 1)}, 0.93, 0.98},

		{"rectangle alone", 0, inf, []Term{FromRectangle("", 1, 1)}, 0.94, 1},
		{"rectangle just dominates, 3 dof", 1, 3, []Term{FromRectangle("", 1.8, 1)}, 0.94, 1},
		{"rectangle just dominates, 15 dof", 1, 15, []Term{FromRectangle("", 1.8, 1)}, 0.94, 1},
		{"rectangle and normal", 1, inf, []Term{FromRectangle("", 4, 1)}, 0.94, 1},
		{"rectangle ten times, 2 dof", 1, 2, []Term{FromRectangle("", 17, 1)}, 0.94, 1},
		{"rectangle with smaller ones, 5 dof", 0.3, 5, []Term{FromRectangle("", 3, 1), FromRectangle("", 1, 1), FromNormal("", 0.3, 1)}, 0.94, 1},
		{"gain drift of a rig, 7 dof", 0.004, 7, gain, 0.94, 1},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			t.Parallel()
			rng := rand.New(rand.NewPCG(2008, 100))
			const units = 8000
			inside := 0
			for range units {
				stdErr := tt.stdErr * math.Sqrt(chiSquaredOverDof(rng, tt.dof))
				b := Budget{append([]Term{FromSample("repeatability", stdErr, tt.dof, 1)}, tt.others...)}
				deviation := tt.stdErr * rng.NormFloat64()
				for _, term := range tt.others {
					deviation += term.Sensitivity * term.Distribution(0).Draw(rng)
				}
				u, err := b.ExpandedU(0.95)
				if err != nil {
					t.Fatal(err)
				}
				if math.Abs(deviation) <= u {
					inside++
				}
			}
			if got := float64(inside) / units; got < tt.low || got > tt.high {
				t.Errorf("coverage = %.4f, want %.2f to %.2f", got, tt.low, tt.high)
			}
		})
	}
}

// chiSquaredOverDof is the ratio of an estimated to the true variance.
func chiSquaredOverDof(rng *rand.Rand, dof float64) float64 {
	if math.IsInf(dof, 1) {
		return 1
	}
	var sum float64
	for range int(dof) {
		z := rng.NormFloat64()
		sum += z * z
	}
	return sum / dof
}
