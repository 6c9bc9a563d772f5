package lot

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"padproof/compare/lotstat"
)

func figureOf(values []float64) *figure {
	f := &figure{name: "loss", unit: "dB", values: values}
	for i := range values {
		f.units = append(f.units, string(rune('a'+i%26))+string(rune('a'+i/26)))
	}
	return f
}

func normal(n int, seed uint64) []float64 {
	rng := rand.New(rand.NewPCG(seed, 1))
	values := make([]float64, n)
	for i := range values {
		values[i] = 14 + 0.05*rng.NormFloat64()
	}
	return values
}

// One unit with a broken part does not widen the limits that the others are held
// against; it is named, and it breaks a rule.
func TestChartLeavesOutWhatIsFar(t *testing.T) {
	values := normal(60, 3)
	want, err := figureOf(values).chart()
	if err != nil {
		t.Fatal(err)
	}
	broken := slices.Insert(slices.Clone(values), 30, 0.9)
	f := figureOf(broken)
	got, err := f.chart()
	if err != nil {
		t.Fatal(err)
	}
	if got.Centre != want.Centre || got.Low != want.Low || got.High != want.High {
		t.Errorf("limits %v to %v about %v, want those without the broken unit, %v to %v about %v", got.Low, got.High, got.Centre, want.Low, want.High, want.Centre)
	}
	if !slices.Equal(got.LeftOut, f.units[30:31]) || got.Steady || len(got.Breaks) < 3 || got.Breaks[0].Units[0] != f.units[30] {
		t.Errorf("left out %v, steady %v, breaks %v", got.LeftOut, got.Steady, got.Breaks)
	}
}

// A steady line is called steady 19 times in 20 or so, a step of two standard
// deviations hardly ever.
func TestSteady(t *testing.T) {
	calledSteady := func(change func(i int, v float64) float64) int {
		n := 0
		for seed := range uint64(300) {
			values := normal(100, seed)
			for i := range values {
				values[i] = change(i, values[i])
			}
			c, err := figureOf(values).chart()
			if err != nil {
				t.Fatal(err)
			}
			if c.Steady {
				n++
			}
		}
		return n
	}
	if n := calledSteady(func(_ int, v float64) float64 { return v }); n < 270 {
		t.Errorf("%d of 300 steady lines are called steady, want at least 270", n)
	}
	if n := calledSteady(func(i int, v float64) float64 { return v + 0.1*float64(i/50) }); n > 30 {
		t.Errorf("%d of 300 lines with a step are called steady, want at most 30", n)
	}
}

// Figures all alike are steady, and so are two.
func TestChartOfLittle(t *testing.T) {
	for _, values := range [][]float64{{14, 14, 14}, {13.9, 14}} {
		c, err := figureOf(values).chart()
		if err != nil || !c.Steady || len(c.LeftOut) != 0 || math.IsNaN(float64(c.Centre)) {
			t.Errorf("chart of %v = %+v, %v", values, c, err)
		}
	}
	if steady([]float64{0, 1}, lotstat.Chart{Limits: lotstat.ChartLimits{Centre: 0, StdDev: 0.1}}) {
		t.Error("a point ten standard deviations off is steady")
	}
}
