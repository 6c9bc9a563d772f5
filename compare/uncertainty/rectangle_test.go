package uncertainty

import (
	"fmt"
	"math"
	"testing"

	"gonum.org/v1/gonum/stat/distuv"
)

// within is the probability that the sum of a rectangle ±a and a Student's t
// (normal at +Inf) lies within ±h, by Simpson's rule over the rectangle: another
// way than the one the code takes.
func within(h, a, scale, dof float64) float64 {
	cdf := distuv.StudentsT{Sigma: scale, Nu: dof}.CDF
	if math.IsInf(dof, 1) {
		cdf = distuv.Normal{Sigma: scale}.CDF
	}
	const steps = 4000
	var sum float64
	for i := range steps + 1 {
		r := -a + 2*a*float64(i)/steps
		weight := 2.0
		switch {
		case i == 0 || i == steps:
			weight = 1
		case i%2 == 1:
			weight = 4
		}
		sum += weight * (cdf(h-r) - cdf(-h-r))
	}
	return sum / (3 * steps)
}

func TestRectangleHalfWidth(t *testing.T) {
	const a = 1.7
	for _, share := range []float64{0.701, 0.8, 0.9, 0.99, 0.999} {
		scale := a / math.Sqrt(3) * math.Sqrt(1/(share*share)-1)
		for _, dof := range []float64{1, 2, 3, 7, 30, 2000, math.Inf(1)} {
			for _, coverage := range []float64{0.5, 0.95, 0.99, 0.9973} {
				h := rectangleHalfWidth(a, scale, dof, coverage)
				near(t, fmt.Sprintf("share %g, dof %g: probability within U", share, dof), within(h, a, scale, dof), coverage, 1e-7)
			}
		}
	}
}

// Closed forms at both ends: a rectangle alone holds 95 % of itself in 0.95 a;
// with a little normal noise, still far from the edge, so does the sum.
func TestRectangleAlone(t *testing.T) {
	near(t, "U of a rectangle ±0.3", expand(t, 0.95, FromRectangle("", 0.3, 1)), 0.285, 1e-12)
	near(t, "U at sensitivity -2", expand(t, 0.95, FromRectangle("", 0.3, -2)), 0.57, 1e-12)
	for _, scale := range []float64{1e-300, 1e-15, 1e-11, 1e-6, 1e-3} {
		near(t, "U with little noise", rectangleHalfWidth(1, scale, math.Inf(1), 0.95), 0.95, 1e-9)
		if h := rectangleHalfWidth(1, scale, 1, 0.95); !(h >= 0.95-1e-9 && h <= 0.95+20*scale) {
			t.Errorf("U with a noise of %g and one degree of freedom = %g, want just above 0.95", scale, h)
		}
	}
	// Fewer degrees of freedom, more doubt.
	last := math.Inf(1)
	for dof := 1.0; dof < 50; dof++ {
		h := rectangleHalfWidth(1, 0.5, dof, 0.95)
		if h >= last {
			t.Errorf("U at %g degrees of freedom = %g, want less than %g at one fewer", dof, h, last)
		}
		last = h
	}
}

// The switch from Student's t to the rectangle's own interval is a small step,
// and a downward one.
func TestStepAtDominantShare(t *testing.T) {
	at := func(share float64) float64 {
		return expand(t, 0.95, FromNormal("", math.Sqrt(1-share*share), 1), FromRectangle("", share*math.Sqrt(3), 1))
	}
	before, after := at(DominantShare-1e-6), at(DominantShare+1e-6)
	if step := before - after; step < 0 || step > 0.02*before {
		t.Errorf("U at share 0.7 goes from %g to %g, want a fall of at most 2 %%", before, after)
	}
}
