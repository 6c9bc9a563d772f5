package uncertainty

import (
	"fmt"
	"math"
	"runtime"
	"strings"
	"testing"
)

const trials = 400_000 // twice what JCGM 101:2008, 7.2.2 asks for

func run(t *testing.T, model func(x []float64) float64, inputs ...Distribution) Result {
	t.Helper()
	r, err := MonteCarlo(model, inputs, trials, 20)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

func sum(x []float64) float64 {
	var s float64
	for _, v := range x {
		s += v
	}
	return s
}

// JCGM 101:2008, 9.2.
func TestMonteCarloSumsOfFour(t *testing.T) {
	const unit = 1.7320508075688772
	n, r, wide := Gaussian(0, 1), Uniform(0, unit), Uniform(0, 10*unit)
	tests := []struct {
		example, quantity string
		inputs            []Distribution
	}{
		{"JCGM 101 9.2.2", "sum of 4 normal u=1: 95 % half width", []Distribution{n, n, n, n}},
		{"JCGM 101 9.2.3", "sum of 4 rectangular u=1: 95 % half width", []Distribution{r, r, r, r}},
		{"JCGM 101 9.2.4", "3 rectangular u=1 and one u=10: 95 % half width", []Distribution{r, r, r, wide}},
	}
	for _, tt := range tests {
		want := lookUp(t, tt.example, tt.quantity)
		got := run(t, sum, tt.inputs...)
		// The ends of an interval scatter from run to run, by about 0.005 of u here.
		tol := want.tol + 0.01*got.SD
		near(t, tt.example+": symmetric half-width", got.Symmetric.HalfWidth(), want.value, tol)
		near(t, tt.example+": shortest half-width", got.Shortest.HalfWidth(), want.value, tol)
		near(t, tt.example+": Mean", got.Mean, 0, 0.005*got.SD)
	}
}

// NIST TN 1900, Example E11: the attenuator of EA-4/02 S7. Its t has 0.0091 dB as
// standard deviation; taken as the scale, the interval is 29.998 to 30.088.
func TestMonteCarloAttenuator(t *testing.T) {
	const example = "NIST TN 1900 E11"
	var centres, sensitivity []float64
	var inputs []Distribution
	for i, row := range table(t, "testdata/ea402_s7_budget.csv") {
		term := attenuator(t).Terms[i]
		centres = append(centres, number(t, row["estimate_db"]))
		sensitivity = append(sensitivity, term.Sensitivity)
		inputs = append(inputs, term.Distribution(centres[i]))
	}
	model := func(x []float64) float64 {
		var y float64
		for i, v := range x {
			y += sensitivity[i] * v
		}
		return y
	}
	byScale := run(t, model, inputs...)
	near(t, "by scale: low", byScale.Symmetric.Low, 29.998, 0.001)
	near(t, "by scale: high", byScale.Symmetric.High, 30.088, 0.001)

	inputs[0] = ScaledTOfSD(centres[0], 0.0091, 3)
	bySD := run(t, model, inputs...)
	for quantity, got := range map[string]float64{
		"L_X Monte Carlo":                 bySD.Mean,
		"u(L_X) (normal/Gaussian inputs)": bySD.SD,
		"95 % interval low":               bySD.Symmetric.Low,
		"95 % interval high":              bySD.Symmetric.High,
	} {
		want := lookUp(t, example, quantity)
		near(t, quantity, got, want.value, want.tol)
	}
}

// NPL Report DEM-ES-011, 9.2. The logarithm of a rectangle has its moments in
// closed form too.
func TestMonteCarloLogarithm(t *testing.T) {
	r := run(t, func(x []float64) float64 { return math.Log(x[0]) }, Uniform(0.6, 0.5))
	mean, u := lookUp(t, "NPL DEM-ES-011 9.2", "y=ln(x), x rectangular 0.1..1.1: MC mean"), lookUp(t, "NPL DEM-ES-011 9.2", "y=ln(x): MC u")
	near(t, "Mean", r.Mean, mean.value, mean.tol)
	near(t, "SD", r.SD, u.value, u.tol)
	exact := 1.1*math.Log(1.1) - 0.1*math.Log(0.1) - 1
	near(t, "Mean, closed form", r.Mean, exact, 0.003)
	// x at 2.5 % and 97.5 % of the rectangle.
	near(t, "Symmetric.Low", r.Symmetric.Low, math.Log(0.125), 0.006)
	near(t, "Symmetric.High", r.Symmetric.High, math.Log(1.075), 0.001)
	// The density of ln x rises to the top, so the shortest interval ends there.
	near(t, "Shortest.Low", r.Shortest.Low, math.Log(0.15), 0.005)
	near(t, "Shortest.High", r.Shortest.High, math.Log(1.1), 0.001)
}

// JCGM 101:2008, 9.4, comparison loss x1² + x2² with u = 0.005 each, in 1e-6.
func TestMonteCarloComparisonLoss(t *testing.T) {
	model := func(x []float64) float64 { return 1e6 * (x[0]*x[0] + x[1]*x[1]) }
	check := func(quantity string, got float64) {
		t.Helper()
		want := lookUp(t, "JCGM 101 9.4", "comparison loss "+quantity)
		near(t, quantity, got, want.value, want.tol)
	}
	at := func(x1 float64) Result { return run(t, model, Gaussian(x1, 0.005), Gaussian(0, 0.005)) }
	zero := at(0)
	check("x1=0: MC mean", zero.Mean)
	check("x1=0: MC u", zero.SD)
	check("x1=0: MC interval high", zero.Shortest.High)
	near(t, "x1=0: Shortest.Low", zero.Shortest.Low, 0, 0.1)
	// An exponential of mean 50: ends at -50 ln 0.975 and -50 ln 0.025.
	near(t, "x1=0: Symmetric.Low", zero.Symmetric.Low, -50*math.Log(0.975), 0.05)
	near(t, "x1=0: Symmetric.High", zero.Symmetric.High, -50*math.Log(0.025), 1.5)
	check("x1=0.010: MC interval high", at(0.010).Shortest.High)
	far := at(0.050)
	check("x1=0.050: MC interval low", far.Shortest.Low)
	check("x1=0.050: MC interval high", far.Shortest.High)
}

// A dominating rectangle with few readings beside it: the budget's interval is
// that of drawing both.
func TestBudgetAgainstMonteCarlo(t *testing.T) {
	for _, dof := range []float64{3, 7, math.Inf(1)} {
		terms := []Term{FromRectangle("drift", 0.5, -1), FromSample("repeatability", 0.05, dof, 2)}
		r := run(t, func(x []float64) float64 { return 2*x[1] - x[0] }, terms[0].Distribution(0), terms[1].Distribution(0))
		near(t, fmt.Sprintf("dof %g: U", dof), expand(t, 0.95, terms...), r.Symmetric.HalfWidth(), 0.001)
	}
}

func TestMonteCarloSameOnAnyCores(t *testing.T) {
	defer runtime.GOMAXPROCS(runtime.GOMAXPROCS(0))
	inputs := []Distribution{Gaussian(1, 2), ScaledT(0, 1, 4), UShaped(0, 1), Triangular(0, 1), Uniform(0, 1)}
	var first Result
	for i, cores := range []int{1, 2, 7} {
		runtime.GOMAXPROCS(cores)
		r, err := MonteCarlo(sum, inputs, 50_001, 99)
		if err != nil {
			t.Fatal(err)
		}
		if i == 0 {
			first = r
		} else if r != first {
			t.Errorf("on %d cores: %+v, want %+v as on one", cores, r, first)
		}
	}
	other, err := MonteCarlo(sum, inputs, 50_001, 100)
	if err != nil || other.Mean == first.Mean {
		t.Errorf("another seed: %+v, %v, want another answer", other, err)
	}
	// Blocks of one run are not copies of one another.
	a, b := make([]float64, 2*blockSize), make(map[float64]bool)
	drawAll(a, sum, inputs[:1], 5)
	for _, v := range a {
		b[v] = true
	}
	if len(b) != len(a) {
		t.Errorf("%d different values in %d draws, want all different", len(b), len(a))
	}
}

// The counting of JCGM 101:2008, 7.7, on values that are their own rank.
func TestIntervalRanks(t *testing.T) {
	tests := []struct{ n, low, high int }{
		{200, 5, 195},   // q = 190, r = 5
		{1000, 25, 975}, // q = 950, r = 25
		{101, 3, 99},    // 95.95: q = 96, (101-96)/2 = 2.5, r = 3
		{110, 3, 108},   // 104.5: q = 105, 2.5, r = 3
	}
	for _, tt := range tests {
		values := make([]float64, tt.n)
		for i := range values {
			values[i] = float64(tt.n - i)
		}
		r, n := summarise(values), float64(tt.n)
		if want := (Interval{float64(tt.low), float64(tt.high)}); r.Symmetric != want {
			t.Errorf("%d values: Symmetric = %v, want %v", tt.n, r.Symmetric, want)
		}
		// Of the whole numbers 1 to n.
		near(t, "Mean", r.Mean, (n+1)/2, 1e-9)
		near(t, "SD", r.SD, math.Sqrt(n*(n+1)/12), 1e-9)
	}
}

func TestMonteCarloErrors(t *testing.T) {
	inf, nan := math.Inf(1), math.NaN()
	one := []Distribution{Gaussian(0, 1)}
	tests := []struct {
		name   string
		model  func([]float64) float64
		inputs []Distribution
		trials int
		want   string
	}{
		{"no model", nil, one, 1000, "no model"},
		{"few", sum, one, 99, "99 trials"},
		{"negative", sum, one, -1, "-1 trials"},
		{"many", sum, one, 1 << 40, "trials"},
		{"NaN mean", sum, []Distribution{one[0], Gaussian(nan, 1)}, 1000, "input 2"},
		{"infinite mean", sum, []Distribution{Uniform(inf, 1)}, 1000, "input 1"},
		{"negative width", sum, []Distribution{Uniform(0, -1)}, 1000, "width -1"},
		{"infinite width", sum, []Distribution{Gaussian(0, inf)}, 1000, "width +Inf"},
		{"no dof", sum, []Distribution{ScaledT(0, 1, 0)}, 1000, "0 degrees"},
		{"no sd at 2 dof", sum, []Distribution{ScaledTOfSD(0, 1, 2)}, 1000, "width NaN"},
		{"shape", sum, []Distribution{{Shape: -1}}, 1000, "unknown shape -1"},
		{"model NaN", func(x []float64) float64 { return math.Sqrt(-1 - x[0]*x[0]) }, one, 1000, "gives NaN in trial 1"},
		{"model infinite", func(x []float64) float64 { return 1 / (x[0] - x[0]) }, one, 1000, "gives +Inf in trial 1"},
	}
	for _, tt := range tests {
		r, err := MonteCarlo(tt.model, tt.inputs, tt.trials, 1)
		if err == nil || !strings.Contains(err.Error(), tt.want) {
			t.Errorf("%s: error = %v, want one with %q", tt.name, err, tt.want)
		}
		if r != (Result{}) {
			t.Errorf("%s: %+v with an error, want nothing", tt.name, r)
		}
	}
	r, err := MonteCarlo(func([]float64) float64 { return 3 }, nil, 1000, 1)
	if err != nil || r.Mean != 3 || r.SD != 0 || r.Shortest != (Interval{3, 3}) {
		t.Errorf("a constant: %+v, %v, want 3 without doubt", r, err)
	}
}

func BenchmarkMonteCarlo(b *testing.B) {
	inputs := []Distribution{Gaussian(0, 1), Uniform(0, 1), ScaledT(0, 1, 7), UShaped(0, 1)}
	b.ReportAllocs()
	for b.Loop() {
		if _, err := MonteCarlo(sum, inputs, 200_000, 1); err != nil {
			b.Fatal(err)
		}
	}
}
