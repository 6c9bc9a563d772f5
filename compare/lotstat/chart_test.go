package lotstat

import (
	"math"
	"math/rand/v2"
	"testing"
)

// NIST/SEMATECH e-Handbook 6.3.2.2: flow rate of ten batches.
func TestChartPublished(t *testing.T) {
	const example = "NIST 6.3.2.2 individuals"
	flow := column(t, "spc_nist_individuals.csv", "flowrate")
	l := must[ChartLimits](t)(FindChartLimits(flow))
	published(t, example, "mean", l.Centre)
	published(t, example, "mean moving range", l.MeanRange)
	published(t, example, "UCL (d2=1.128)", l.High)
	published(t, example, "LCL (d2=1.128)", l.Low)
	near(t, "limit of the moving range", l.RangeHigh, 6.1347, 0.001)
	if !l.Provisional {
		t.Error("limits of ten readings are not provisional")
	}
	// The handbook finds the process in control.
	for _, book := range []Book{Nelson, WesternElectric} {
		c := must[Chart](t)(ReadChart(flow, l, book))
		if len(c.Breaks) > 0 {
			t.Errorf("%s: %+v", book, c.Breaks)
		}
	}
}

// The factors against the table of the range distribution, which has more digits.
func TestChartFactors(t *testing.T) {
	row := table(t, "control_chart_constants.csv")[0]
	if row["n"] != "2" {
		t.Fatalf("first row is for n = %s", row["n"])
	}
	near(t, "d2", rangeD2, number(t, row["d2"]), 5e-4)
	near(t, "D4", rangeD4, number(t, row["d4_upper_limit_factor"]), 6e-4)
}

// NIST/SEMATECH e-Handbook 6.3.2.4: EWMA of weight 0.3 about 50, deviation 2.0539.
func TestEWMAPublished(t *testing.T) {
	y := column(t, "spc_nist_ewma.csv", "y")
	e := must[EWMA](t)(ReadEWMA(y, 50, 2.0539, 0.3, 3))
	published(t, "NIST 6.3.2.4 EWMA lambda 0.3 start 50 s 2.0539", "UCL", e.High)
	published(t, "NIST 6.3.2.4 EWMA", "LCL", e.Low)
	for i, want := range column(t, "spc_nist_ewma.csv", "ewma_published_2dp") {
		near(t, "average", e.Values[i], want, 0.005)
	}
	if len(e.Beyond) > 0 {
		t.Errorf("beyond: %v; the handbook finds none", e.Beyond)
	}
	e = must[EWMA](t)(ReadEWMA([]float64{0, 0, 9, 9, 9}, 0, 3, 0.5, 3))
	if len(e.Beyond) != 2 || e.Beyond[0] != 3 {
		t.Errorf("averages %v, limits %g to %g: beyond %v, want 3 and 4", e.Values, e.Low, e.High, e.Beyond)
	}
	_, err := ReadEWMA(y, 50, 2, 0, 3)
	refused(t, "a weight of 0", err, "weight")
	_, err = ReadEWMA(y, 50, -2, 0.3, 3)
	refused(t, "a negative deviation", err, "-2")
}

func TestChartOdd(t *testing.T) {
	_, err := FindChartLimits([]float64{1})
	refused(t, "one reading", err, "two readings")
	_, err = FindChartLimits([]float64{1, math.NaN()})
	refused(t, "a NaN", err, "reading 2")
	_, err = KnownChartLimits(0, math.NaN())
	refused(t, "a NaN deviation", err, "NaN")
	_, err = ReadChart([]float64{1}, ChartLimits{}, "Somebody")
	refused(t, "a book that is none", err, "Somebody", "Nelson")

	alike := constant(14, 30)
	l := must[ChartLimits](t)(FindChartLimits(alike))
	if l.Low != 14 || l.High != 14 || l.RangeHigh != 0 {
		t.Errorf("limits of readings all alike = %+v", l)
	}
	if c := must[Chart](t)(ReadChart(alike, l, Nelson)); len(c.Breaks) != 0 {
		t.Errorf("readings all alike break %+v", c.Breaks)
	}
	c := must[Chart](t)(ReadChart([]float64{14, 14.1}, l, Nelson))
	if len(c.Breaks) != 2 || c.Breaks[0].Rule != "Nelson 1" || c.Breaks[1].Rule != "moving range 1" {
		t.Errorf("a reading off limits without width breaks %+v", c.Breaks)
	}
}

// A steady line breaks rules about as often as FalseBreaks says, by simulation;
// merged and joint breaks leave it rough.
func TestFalseBreaks(t *testing.T) {
	rng := rand.New(rand.NewPCG(15, 16))
	const lots, units = 400, 200
	for _, book := range []Book{Nelson, WesternElectric} {
		seen, foretold := 0.0, 0.0
		for range lots {
			values := make([]float64, units)
			for i := range values {
				values[i] = rng.NormFloat64()
			}
			c := must[Chart](t)(ReadChart(values, must[ChartLimits](t)(FindChartLimits(values)), book))
			seen += float64(len(c.Breaks)) / lots
			foretold += c.FalseBreaks / lots
		}
		near(t, string(book)+" breaks of a steady line", foretold, seen, 0.15*seen)
	}
}
