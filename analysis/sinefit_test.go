package analysis

import (
	"encoding/csv"
	"math"
	"math/rand/v2"
	"os"
	"strconv"
	"strings"
	"testing"
)

func readTable(t *testing.T, name string) [][]string {
	t.Helper()
	text, err := os.ReadFile("testdata/" + name)
	if err != nil {
		t.Fatal(err)
	}
	var kept []string
	for _, l := range strings.Split(string(text), "\n") {
		if !strings.HasPrefix(l, "#") {
			kept = append(kept, l)
		}
	}
	rows, err := csv.NewReader(strings.NewReader(strings.Join(kept, "\n"))).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	return rows[1:]
}

func number(t *testing.T, text string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(strings.TrimSpace(text), 64)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

// NIST StRD, univariate data set Lew: 200 readings of a beam's deflection. The sine printed in the
// e-Handbook, 1.4.2.5.3, is not the least-squares optimum; testdata/sine_fit_lew.csv has both.
func TestFitSineLew(t *testing.T) {
	var x []float64
	for _, row := range readTable(t, "nist_strd_lew.csv") {
		x = append(x, number(t, row[len(row)-1]))
	}
	if len(x) != 200 {
		t.Fatalf("%d readings, want 200", len(x))
	}
	const rateHz, tol = 1.0, 1e-6
	fit, err := FitSine4(x, rateHz, 0.3)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "offset", fit.Offset, -178.768157, 178*tol)
	near(t, "amplitude", fit.Peak(), 343.288566, 343*tol)
	near(t, "frequency", fit.FreqHz, 0.301807035, 0.3*tol)
	near(t, "residual sd", fit.ResidualRMS, 134.066401, 134*tol)

	// A sin(2πft+φ), A negative, t from 1: as a cosine at t = 1 its phase is 2πf+φ+π/2 (-A = A+π).
	want := math.Remainder(2*math.Pi*0.301807035+1.827671+math.Pi/2, 2*math.Pi)
	near(t, "phase", fit.PhaseRad(), want, 1e-5)

	const printedHz, printedSD = 0.302596, 155.8484
	three, err := FitSine3(x, rateHz, printedHz)
	if err != nil {
		t.Fatal(err)
	}
	sd := three.ResidualRMS * math.Sqrt(197./196) // the table counts the frequency as fitted
	near(t, "residual sd at the printed frequency", sd, 148.812203, 148*tol)
	if sd > printedSD {
		t.Errorf("residual sd %g is worse than the printed %g", sd, printedSD)
	}
}

// Cramér-Rao bounds (testdata/sine_fit_crb.csv: formulas and their source there; 15 % allowed).
func TestFitSineReachesTheBound(t *testing.T) {
	const trials = 300
	for _, row := range readTable(t, "sine_fit_crb.csv") {
		peak, sigma, n := number(t, row[0]), number(t, row[1]), int(number(t, row[2]))
		rateHz, freqHz := number(t, row[3]), number(t, row[4])
		random := rand.New(rand.NewPCG(11, uint64(n)))
		sums := make([][2]float64, 4)
		x := make([]float64, n)
		for range trials {
			phase := 2 * math.Pi * random.Float64()
			for i := range x {
				x[i] = 0.1 + peak*math.Cos(2*math.Pi*freqHz/rateHz*float64(i)+phase) + sigma*random.NormFloat64()
			}
			fit, err := FitSine4(x, rateHz, freqHz+2)
			if err != nil {
				t.Fatal(err)
			}
			for k, v := range []float64{fit.Peak(), fit.FreqHz - freqHz, fit.Offset, math.Remainder(fit.PhaseRad()-phase, 2*math.Pi)} {
				sums[k][0] += v
				sums[k][1] += v * v
			}
		}
		for k, column := range []int{5, 7, 9, 11} {
			mean := sums[k][0] / trials
			got := math.Sqrt(sums[k][1]/trials - mean*mean)
			bound := number(t, row[column])
			near(t, "n "+row[2]+": sd over its bound, "+[]string{"amplitude", "frequency", "offset", "phase"}[k], got/bound, 1, 0.15)
		}
	}
}

func TestFitSineRefuses(t *testing.T) {
	good := make([]float64, 100)
	for i := range good {
		good[i] = math.Sin(float64(i))
	}
	bad := append([]float64(nil), good...)
	bad[50] = math.NaN()
	for _, c := range []struct {
		name           string
		x              []float64
		rateHz, freqHz float64
	}{
		{"no samples", nil, 48000, 997},
		{"three samples", good[:3], 48000, 997},
		{"not a number", bad, 48000, 997},
		{"frequency 0", good, 48000, 0},
		{"half the rate", good, 48000, 24000},
		{"frequency not a number", good, 48000, math.NaN()},
		{"rate 0", good, 0, 997},
		{"infinite", []float64{1, 2, math.Inf(1), 3, 4, 5}, 48000, 997},
	} {
		if f, err := FitSine3(c.x, c.rateHz, c.freqHz); err == nil {
			t.Errorf("%s: FitSine3 = %+v, want an error", c.name, f)
		}
		if f, err := FitSine4(c.x, c.rateHz, c.freqHz); err == nil {
			t.Errorf("%s: FitSine4 = %+v, want an error", c.name, f)
		}
	}
	// Silence: any frequency fits, but nothing may hang or panic.
	if f, err := FitSine4(make([]float64, 100), 48000, 997); err == nil && f.Peak() != 0 {
		t.Errorf("silence: %+v", f)
	}
}
