package lotstat

import (
	"fmt"
	"math"
	"testing"
)

// Newcombe, Statistics in Medicine 17, 1998, 857-872, table I, the method of
// Clopper and Pearson (from memory).
func TestYieldPublished(t *testing.T) {
	for _, c := range []struct {
		passed, units int
		low, high     float64
	}{
		{81, 263, 0.2527, 0.3676}, {0, 20, 0, 0.1684}, {1, 29, 0.0009, 0.1776},
	} {
		y := must[Yield](t)(YieldOf(c.passed, c.units, 0.95))
		what := fmt.Sprintf("%d of %d", c.passed, c.units)
		near(t, what+" low", y.Interval.Low, c.low, 5e-5)
		near(t, what+" high", y.Interval.High, c.high, 5e-5)
	}
}

// All passed: the lower end is (α/2)^(1/n), in closed form.
func TestYieldAllPassed(t *testing.T) {
	for _, n := range []int{1, 2, 10, 1000, 1_000_000} {
		y := must[Yield](t)(YieldOf(n, n, 0.95))
		want := math.Pow(0.025, 1/float64(n))
		near(t, fmt.Sprintf("%d of %d", n, n), y.Interval.Low, want, 1e-10)
		if y.Frac != 1 || y.Interval.High != 1 {
			t.Errorf("%d of %d = %+v", n, n, y)
		}
	}
}

func TestYieldOdd(t *testing.T) {
	y := must[Yield](t)(YieldOf(0, 0, 0.95))
	if !math.IsNaN(y.Frac) || y.Interval.Low != 0 || y.Interval.High != 1 {
		t.Errorf("no units = %+v", y)
	}
	_, err := YieldOf(3, 2, 0.95)
	refused(t, "3 of 2", err, "3 of 2")
	_, err = YieldOf(-1, 2, 0.95)
	refused(t, "-1 of 2", err, "-1 of 2")
	_, err = YieldOf(1, 2, 1)
	refused(t, "a coverage of 1", err, "coverage")
}
