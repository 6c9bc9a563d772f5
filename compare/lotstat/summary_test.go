package lotstat

import (
	"math"
	"strings"
	"testing"
)

// NIST StRD univariate sets: certified mean and standard deviation, to the digits
// that 64-bit data of such a mean can hold (testdata/nist_strd_*.csv).
func TestSummariseCertified(t *testing.T) {
	tolerances := map[string]float64{"NumAcc3": 1e-8, "NumAcc4": 1e-7}
	for _, row := range table(t, "nist_strd_univariate_certified.csv") {
		name := row["dataset"]
		rows := table(t, "nist_strd_"+strings.ToLower(name)+".csv")
		var values []float64
		for _, r := range rows {
			for column, text := range r {
				if column == "y" || len(r) == 1 {
					values = append(values, number(t, text))
				}
			}
		}
		s := must[Summary](t)(Summarise(values, 0.95))
		if s.N != len(rows) {
			t.Fatalf("%s: %d values of %d rows", name, s.N, len(rows))
		}
		tol, ok := tolerances[name]
		if !ok {
			tol = 1e-13
		}
		mean, sd := number(t, row["mean"]), number(t, row["stdev_n_minus_1"])
		near(t, name+" mean", s.Mean, mean, 1e-13*math.Abs(mean))
		near(t, name+" standard deviation", s.StdDev, sd, tol*sd)
	}
}

// NIST/SEMATECH e-Handbook 1.3.5.2, heat flow: 195 readings, mean 9.261460,
// standard deviation 0.022789, 95 % interval 9.258242 to 9.264679 (from memory).
func TestMeanIntervalPublished(t *testing.T) {
	half := meanHalfWidth(Summary{N: 195, Mean: 9.261460, StdDev: 0.022789}, 0.95)
	near(t, "low", 9.261460-half, 9.258242, 1.5e-6)
	near(t, "high", 9.261460+half, 9.264679, 1.5e-6)
}

func TestSummariseOdd(t *testing.T) {
	one := must[Summary](t)(Summarise([]float64{14}, 0.95))
	if one.Mean != 14 || !math.IsNaN(one.StdDev) || !math.IsNaN(one.MeanInterval.Low) {
		t.Errorf("one reading = %+v", one)
	}
	alike := must[Summary](t)(Summarise([]float64{0.1, 0.1, 0.1}, 0.95))
	if alike.Mean != 0.1 || alike.StdDev != 0 || alike.MeanInterval.Low != 0.1 || alike.StdDevInterval.High != 0 {
		t.Errorf("three alike = %+v", alike)
	}
	_, err := Summarise(nil, 0.95)
	refused(t, "no readings", err, "no readings")
	_, err = Summarise([]float64{1, math.NaN()}, 0.95)
	refused(t, "a NaN", err, "reading 2", "NaN")
	_, err = Summarise([]float64{math.MaxFloat64, math.MaxFloat64, -math.MaxFloat64}, 0.95)
	refused(t, "too large", err, "too large")
	_, err = Summarise([]float64{1, 2}, 95)
	refused(t, "a coverage of 95", err, "between 0 and 1")
}
