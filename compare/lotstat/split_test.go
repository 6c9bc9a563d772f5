package lotstat

import (
	"math"
	"math/rand/v2"
	"strings"
	"testing"
)

func constant(v float64, n int) []float64 {
	all := make([]float64, n)
	for i := range all {
		all[i] = v
	}
	return all
}

// Closed form: readings of standard deviation 5 by uncertainties of 3 leave 4.
func TestSplitClosedForm(t *testing.T) {
	a := 5 / math.Sqrt(2) // of two readings at ± a the deviation is a √2
	p := must[Split](t)(SplitSpread([]float64{-a, a}, []float64{3, 3}, 0.95))
	near(t, "observed", p.Observed, 5, 1e-12)
	near(t, "units", p.Units, 4, 1e-12)
	near(t, "share of measurement", p.MeasurementFrac, 9.0/25, 1e-12)
	uneven := must[Split](t)(SplitSpread([]float64{-a, a}, []float64{0, 3 * math.Sqrt2}, 0.95))
	near(t, "units, uneven uncertainties", uneven.Units, 4, 1e-12)
}

// The interval holds the true spread of the units in 95 % of lots.
func TestSplitCoverage(t *testing.T) {
	rng := rand.New(rand.NewPCG(9, 10))
	const lots, units, measurement = 4000, 0.10, 0.06
	stdU := constant(measurement, 25)
	held := 0
	for range lots {
		values := make([]float64, len(stdU))
		for i := range values {
			values[i] = units*rng.NormFloat64() + measurement*rng.NormFloat64()
		}
		p := must[Split](t)(SplitSpread(values, stdU, 0.95))
		if p.UnitsInterval.Low <= units && units <= p.UnitsInterval.High {
			held++
		}
	}
	near(t, "coverage", float64(held)/lots, 0.95, 0.012)
}

func TestSplitWords(t *testing.T) {
	rng := rand.New(rand.NewPCG(11, 12))
	values := make([]float64, 50)
	for i := range values {
		values[i] = rng.NormFloat64()
	}
	for _, c := range []struct {
		stdU  float64
		words string
	}{
		{0.1, "measurement makes 0.9 %"}, {1, "may be all alike"}, {3, "overstated"},
	} {
		p := must[Split](t)(SplitSpread(values, constant(c.stdU, 50), 0.95))
		if !strings.Contains(p.Text, c.words) {
			t.Errorf("uncertainty %g: %q, want %q", c.stdU, p.Text, c.words)
		}
		if !(p.Units >= 0 && p.UnitsInterval.Low >= 0 && p.MeasurementFrac <= 1) {
			t.Errorf("uncertainty %g: %+v", c.stdU, p)
		}
	}
	one := must[Split](t)(SplitSpread([]float64{1}, []float64{0.1}, 0.95))
	if !math.IsNaN(one.Units) || one.Measurement != 0.1 {
		t.Errorf("one unit = %+v", one)
	}
	alike := must[Split](t)(SplitSpread([]float64{1, 1}, []float64{0.1, 0.1}, 0.95))
	if alike.Units != 0 || !math.IsNaN(alike.MeasurementFrac) || alike.Text != "all readings are alike" {
		t.Errorf("two alike = %+v", alike)
	}
	_, err := SplitSpread([]float64{1, 2}, []float64{0.1, -0.1}, 0.95)
	refused(t, "a negative uncertainty", err, "uncertainty 2 is -0.1")
	_, err = SplitSpread([]float64{1, 2}, []float64{0.1}, 0.95)
	refused(t, "one uncertainty for two", err, "2 readings with 1")
	_, err = SplitSpread([]float64{1, 2}, []float64{0.1, math.NaN()}, 0.95)
	refused(t, "a NaN uncertainty", err, "uncertainty 2")
}
