package uncertainty

import (
	"math"
	"strings"
	"testing"
)

// JCGM 100:2008, H.1 and EA-4/02 S7 print the half-width of a source and the
// standard uncertainty they make of it.
func TestTermStandardU(t *testing.T) {
	tests := []struct {
		name string
		term Term
		want float64
		tol  float64
	}{
		{"H.1 expansion coefficient ±2e-6", FromRectangle("", 2e-6, 1), 1.2e-6, 0.05e-6},
		{"H.1 temperature difference ±0.05", FromRectangle("", 0.05, 1), 0.029, 0.0005},
		{"H.1 cyclic temperature ±0.5", FromArcsine("", 0.5, 1), 0.35, 0.005},
		{"S7 reference attenuator ±0.00433", FromRectangle("", 0.00433, 1), 0.0025, 1e-6},
		{"S7 mismatch ±0.02828", FromArcsine("", 0.02828, 1), 0.02, 1e-5},
		{"4.3.9 triangle, a/√6", FromTriangle("", math.Sqrt(6), 1), 1, 1e-15},
		{"certificate, U 0.2 at k 2", FromExpanded("", 0.2, 2, 1), 0.1, 1e-15},
		{"normal", FromNormal("", 0.3, 1), 0.3, 0},
		{"sample", FromSample("", 0.3, 4, 1), 0.3, 0},
	}
	for _, tt := range tests {
		near(t, tt.name+": StandardU", tt.term.StandardU, tt.want, tt.tol)
		if tt.term.Shape != StudentT && !math.IsInf(tt.term.Dof, 1) {
			t.Errorf("%s: Dof = %g, want +Inf", tt.name, tt.term.Dof)
		}
	}
	near(t, "Contribution at sensitivity -3", FromNormal("", 0.5, -3).Contribution(), 1.5, 0)
}

// What a term is drawn from must have the term's standard uncertainty; a
// Student's t has it as its scale, so a larger standard deviation.
func TestTermDistribution(t *testing.T) {
	for _, term := range []Term{
		FromNormal("", 0.7, 1), FromRectangle("", 2, 1), FromArcsine("", 2, 1), FromTriangle("", 2, 1),
		FromSample("", 0.7, 8, 1), {"", 0.7, 1, 8, Normal},
	} {
		want := term.StandardU
		if !math.IsInf(term.Dof, 1) {
			want *= math.Sqrt(8.0 / 6)
		}
		r, err := MonteCarlo(func(x []float64) float64 { return x[0] }, []Distribution{term.Distribution(5)}, 200_000, 3)
		if err != nil {
			t.Fatal(err)
		}
		near(t, term.Shape.String()+": SD", r.SD, want, 0.006*want)
		near(t, term.Shape.String()+": Mean", r.Mean, 5, 0.01)
	}
}

func TestBadTerms(t *testing.T) {
	inf, nan := math.Inf(1), math.NaN()
	tests := []struct {
		name string
		term Term
		want string
	}{
		{"negative", FromNormal("drift", -1, 1), "drift: standard uncertainty -1"},
		{"negative half-width", FromRectangle("drift", -1, 1), "drift: standard uncertainty"},
		{"NaN", FromNormal("drift", nan, 1), "drift: standard uncertainty NaN"},
		{"infinite", FromNormal("drift", inf, 1), "not finite"},
		{"infinite, without effect", FromNormal("drift", inf, 0), "not finite"},
		{"sensitivity NaN", FromNormal("drift", 1, nan), "not finite"},
		{"sensitivity infinite", FromNormal("drift", 1, -inf), "not finite"},
		{"overflow", FromNormal("drift", 1e200, 1e200), "not finite"},
		{"k of 0", FromExpanded("drift", 1, 0, 1), "standard uncertainty NaN"},
		{"k negative", FromExpanded("drift", -1, -2, 1), "standard uncertainty NaN"},
		{"no dof", FromSample("drift", 1, 0, 1), "drift: 0 degrees of freedom"},
		{"dof NaN", FromSample("drift", 1, nan, 1), "NaN degrees"},
		{"dof left out", Term{Source: "drift", StandardU: 1, Sensitivity: 1}, "0 degrees"},
		{"shape", Term{"drift", 1, 1, inf, Shape(9)}, "unknown shape 9"},
		{"nameless", FromNormal("", -1, 1), "without a name"},
	}
	for _, tt := range tests {
		b := Budget{[]Term{FromNormal("sound", 1, 1), tt.term}}
		u, err := b.ExpandedU(0.95)
		if err == nil || !strings.Contains(err.Error(), tt.want) {
			t.Errorf("%s: error = %v, want one with %q", tt.name, err, tt.want)
		}
		if !math.IsNaN(u) || !math.IsNaN(b.CombinedU()) || !math.IsNaN(b.EffectiveDof()) {
			t.Errorf("%s: U, CombinedU, EffectiveDof = %g, %g, %g, want NaN", tt.name, u, b.CombinedU(), b.EffectiveDof())
		}
		if term, share := b.Dominant(); share != 0 || term != (Term{}) {
			t.Errorf("%s: Dominant() = %v, %g, want none", tt.name, term, share)
		}
	}
}
