package compare

import (
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"gonum.org/v1/gonum/stat/distuv"

	"padproof/compare/uncertainty"
)

func TestDecide(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	pad, noise, match := PlusMinus(14, 0.3), AtMost(3), AtLeast(20)
	tests := []struct {
		name     string
		rule     Rule
		measured float64
		uDB      float64
		limit    Limit
		expected float64
		want     Verdict
		reason   string // part of it
	}{
		{"middle", Guarded, 14, 0.09, pad, 13.97, Pass, ""},
		{"just inside high", Guarded, 14.2, 0.09, pad, 13.97, Pass, ""},
		{"just inside low", Guarded, 13.8, 0.09, pad, 13.97, Pass, ""},
		{"zero rule is guarded", "", 14.25, 0.09, pad, 13.97, Unproven, "0.05 dB inside the upper limit, less than U 0.09 dB"},
		{"guard band high", Guarded, 14.25, 0.09, pad, 13.97, Unproven, "0.05 dB inside the upper limit, less than U 0.09 dB"},
		{"guard band low", Guarded, 13.75, 0.09, pad, 13.97, Unproven, "0.05 dB inside the lower limit, less than U 0.09 dB"},
		{"a little inside", Guarded, 14.299, 0.0912, pad, 13.97, Unproven, "0.001 dB inside the upper limit, less than U 0.091 dB"},
		{"on the limit", Guarded, 14.3, 0.09, pad, 13.97, Unproven, "on the upper limit, with U 0.09 dB"},
		{"just outside", Guarded, 14.35, 0.09, pad, 13.97, Unproven, "0.05 dB outside the upper limit, not more than U 0.09 dB"},
		{"just outside low", Guarded, 13.65, 0.09, pad, 13.97, Unproven, "0.05 dB outside the lower limit"},
		{"nearly U outside", Guarded, 14.389, 0.0899, pad, 13.97, Unproven, "0.089 dB outside the upper limit, not more than U 0.09 dB"},
		{"exactly U outside", Guarded, 14.75, 0.25, Limit{13.5, 14.5}, 14, Unproven, "0.25 dB outside the upper limit, not more than U 0.25 dB"},
		{"outside", Guarded, 14.4, 0.09, pad, 13.97, Fail, ""},
		{"outside low", Guarded, 13.6, 0.09, pad, 13.97, Fail, ""},
		{"no doubt, on the limit", Guarded, 14.5, 0, Limit{13.5, 14.5}, 14, Pass, ""},
		{"no doubt, a point", Guarded, 14, 0, Limit{14, 14}, 14, Pass, ""},
		{"no doubt, beside a point", Guarded, 14.1, 0, Limit{14, 14}, 14, Fail, ""},

		{"U too wide", Guarded, 14, 0.31, pad, 13.97, Unproven, "U 0.31 dB is wider than the ±0.3 dB limit; no reading can pass until U is below 0.3 dB"},
		{"U barely too wide", Guarded, 14, 0.3004, pad, 13.97, Unproven, "U 0.3004 dB is wider than the ±0.3 dB limit"},
		{"U far too wide", Guarded, 14, 45, pad, 13.97, Unproven, "U 45 dB is wider than the ±0.3 dB limit"},
		{"U too wide, yet far off", Guarded, 15, 0.4, pad, 13.97, Fail, ""},
		{"a point and doubt", Guarded, 14, 0.0512, Limit{14, 14}, 14, Unproven, "U 0.051 dB is wider than the ±0 dB limit"},

		{"at most, below", Guarded, 2, 0.9, noise, 0, Pass, ""},
		{"at most, far below", Guarded, -60, 40, noise, nan, Pass, ""},
		{"at most, guard band", Guarded, 2.5, 0.9, noise, nan, Unproven, "0.5 dB inside the upper limit, less than U 0.9 dB"},
		{"at most, above", Guarded, 4, 0.9, noise, nan, Fail, ""},
		{"at least, above", Guarded, 21, 0.9, match, nan, Pass, ""},
		{"at least, below", Guarded, 19, 0.9, match, nan, Fail, ""},

		{"shared, inside", Shared, 14.299, 0.09, pad, 13.97, Pass, ""},
		{"shared, outside", Shared, 14.301, 0.09, pad, 13.97, Fail, ""},
		{"shared, outside low", Shared, 13.699, 0.09, pad, 13.97, Fail, ""},
		{"shared, on the limit", Shared, 14.5, 0.09, Limit{13.5, 14.5}, 13.97, Pass, ""},
		{"shared, U a third", Shared, 14.2, 0.25, PlusMinus(14, 0.75), 13.97, Pass, ""},
		{"shared, U over a third", Shared, 14, 0.12, pad, 13.97, Unproven, "U 0.12 dB is more than a third of the ±0.3 dB limit; a shared decision needs U 0.1 dB or less"},
		{"shared, U over a third, far off", Shared, 20, 0.12, pad, 13.97, Unproven, "more than a third"},
		{"shared, at most", Shared, 2.9, 0.9, noise, 0, Pass, ""},
		{"shared, at most, above", Shared, 3.1, 0.9, noise, 0, Fail, ""},
		{"shared, at most, wide", Shared, 2, 1.1, noise, 0, Unproven, "U 1.1 dB is more than a third of the 3 dB between expected figure and limit; a shared decision needs U 1 dB or less"},
		{"shared, at least", Shared, 20.1, 0.9, match, 23, Pass, ""},
		{"shared, at least, wide", Shared, 20.1, 1.1, match, 23, Unproven, "a third of the 3 dB"},
		{"shared, nothing expected", Shared, 2, 0.1, noise, nan, Unproven, "needs an expected figure"},
		{"shared, expected infinite", Shared, 2, 0.1, noise, inf, Unproven, "needs an expected figure"},
		{"shared, expected on the limit", Shared, 2, 0.1, noise, 3, Unproven, "needs U 0 dB or less"},

		{"no limit", Guarded, 14, 0.09, NoLimit(), 13.97, None, ""},
		{"no limit, no reading", Guarded, nan, nan, NoLimit(), nan, None, ""},
		{"no reading", Guarded, nan, 0.09, pad, 13.97, Unproven, "no finite reading"},
		{"nothing comes through", Guarded, inf, 0.09, pad, 13.97, Unproven, "no finite reading"},
		{"a bound instead", Guarded, 62, 0.5, pad, 13.97, Fail, ""},
		{"infinite, at least", Guarded, inf, 0.09, match, 13.97, Unproven, "no finite reading"},
		{"U NaN", Guarded, 14, nan, pad, 13.97, Unproven, "uncertainty of the reading is not known"},
		{"U negative", Shared, 14, -0.1, pad, 13.97, Unproven, "uncertainty of the reading is not known"},
		{"U infinite", Guarded, 14, inf, noise, 13.97, Unproven, "uncertainty of the reading is not known"},
		{"limit NaN", Guarded, 14, 0.1, Limit{nan, 15}, 13.97, Unproven, "no range"},
		{"limit crossed", Guarded, 14, 0.1, Limit{15, 13}, 13.97, Unproven, "the limit, 15 to 13, is no range"},
		{"limit nowhere", Guarded, 14, 0.1, AtMost(-inf), 13.97, Unproven, "no range"},
		{"unknown rule", "generous", 14, 0.1, pad, 13.97, Unproven, `"generous"`},
	}
	for _, tt := range tests {
		got, reason := Decide(tt.rule, tt.measured, tt.uDB, tt.limit, tt.expected)
		if got != tt.want || !strings.Contains(reason, tt.reason) || (reason == "") != (got != Unproven) {
			t.Errorf("%s: Decide(%q, %g, %g, %v, %g) = %q, %q, want %q, %q",
				tt.name, tt.rule, tt.measured, tt.uDB, tt.limit, tt.expected, got, reason, tt.want, tt.reason)
		}
	}
}

func TestParseRule(t *testing.T) {
	for text, want := range map[string]Rule{"": Guarded, "guarded": Guarded, "shared": Shared} {
		if got, err := ParseRule(text); got != want || err != nil {
			t.Errorf("ParseRule(%q) = %q, %v, want %q", text, got, err, want)
		}
	}
	for _, text := range []string{"Guarded", "simple", " shared"} {
		if got, err := ParseRule(text); err == nil || got != "" {
			t.Errorf("ParseRule(%q) = %q, %v, want an error", text, got, err)
		}
	}
}

func TestToleranceRatio(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	tests := []struct {
		limit         Limit
		expected, uDB float64
		want          float64
		ok            bool
	}{
		{PlusMinus(14, 0.3), 13.97, 0.1, 3, true},
		{PlusMinus(14, 0.3), nan, 0.6, 0.5, true},
		{AtMost(3), 0, 0.5, 6, true},
		{AtMost(3), 4, 0.5, 2, true},
		{AtLeast(20), 23, 1.5, 2, true},
		{AtMost(3), nan, 0.5, 0, false},
		{AtMost(3), -inf, 0.5, 0, false},
		{NoLimit(), 14, 0.1, 0, false},
		{PlusMinus(14, 0.3), 14, 0, 0, false},
		{PlusMinus(14, 0.3), 14, nan, 0, false},
		{PlusMinus(14, 0.3), 14, -1, 0, false},
		{Limit{nan, 3}, 1, 1, 0, false},
		{Limit{3, 1}, 1, 1, 0, false},
	}
	for _, tt := range tests {
		got, ok := ToleranceRatio(tt.limit, tt.expected, tt.uDB)
		if ok != tt.ok || math.Abs(got-tt.want) > 1e-9 {
			t.Errorf("ToleranceRatio(%v, %g, %g) = %g, %t, want %g, %t", tt.limit, tt.expected, tt.uDB, got, ok, tt.want, tt.ok)
		}
	}
}

func TestCombine(t *testing.T) {
	tests := []struct {
		checks []Verdict
		want   Verdict
	}{
		{[]Verdict{Pass}, Pass},
		{[]Verdict{None, Pass, None}, Pass},
		{[]Verdict{Pass, Unproven, Pass}, Unproven},
		{[]Verdict{Unproven, Fail, Pass}, Fail},
		{[]Verdict{Fail, Unproven}, Fail},
		{[]Verdict{Pass, Fail}, Fail},
		{[]Verdict{None, Fail}, Fail},
		{[]Verdict{Pass, "pass"}, Unproven},
		{[]Verdict{"pass", Pass}, Unproven},
	}
	for _, tt := range tests {
		if got, reason := Combine(tt.checks...); got != tt.want || reason != "" {
			t.Errorf("Combine(%q) = %q, %q, want %q", tt.checks, got, reason, tt.want)
		}
	}
	for _, checks := range [][]Verdict{nil, {None, None}} {
		if got, reason := Combine(checks...); got != Unproven || reason != "no limit set" {
			t.Errorf("Combine(%q) = %q, %q, want UNPROVEN, no limit set", checks, got, reason)
		}
	}
}

// passingReadings returns the ends of the readings that pass around one that does, to
// 1e-9; infinite where nothing limits them.
func passingReadings(t *testing.T, uDB float64, limit Limit, inside float64) (low, high float64) {
	t.Helper()
	pass := func(measured float64) bool {
		v, _ := Decide(Guarded, measured, uDB, limit, math.NaN())
		return v == Pass
	}
	if !pass(inside) {
		t.Fatalf("reading %g with U %g within %v does not pass", inside, uDB, limit)
	}
	edge := func(far float64) float64 {
		if pass(far) {
			return math.Inf(int(math.Copysign(1, far)))
		}
		in, out := inside, far
		for math.Abs(in-out) > 1e-9 {
			if mid := (in + out) / 2; pass(mid) {
				in = mid
			} else {
				out = mid
			}
		}
		return in
	}
	return edge(-1e6), edge(1e6)
}

func normalCDF(z float64) float64 { return distuv.UnitNormal.CDF(z) }

func figureNear(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s = %.10g, want %.10g ± %.2g", what, got, want, tol)
	}
}

// JCGM 106:2012, 7.3.2 (an upper limit of -5.40 V) and 7.4 (12.5 to 16.3): the
// probability that the true value conforms, which is what passes without doubt.
// Both are too low for a guarded PASS at 95 %.
func TestConformanceProbability(t *testing.T) {
	tests := []struct {
		clause      string
		limit       Limit
		inside      float64
		measured, u float64
		want, exact float64
	}{
		{"7.3.2", AtMost(-5.40), -6, -5.47, 0.05, 0.92, 0.9192433},
		{"7.4", Limit{12.5, 16.3}, 14, 13.6, 1.8, 0.66, 0.6626298},
	}
	for _, tt := range tests {
		low, high := passingReadings(t, 0, tt.limit, tt.inside)
		got := normalCDF((high-tt.measured)/tt.u) - normalCDF((low-tt.measured)/tt.u)
		figureNear(t, tt.clause+": conformance probability", got, tt.want, 0.005)
		figureNear(t, tt.clause+": conformance probability", got, tt.exact, 1e-6)
		if v, reason := Decide(Guarded, tt.measured, 1.96*tt.u, tt.limit, math.NaN()); v != Unproven {
			t.Errorf("%s: Decide = %q, %q, want UNPROVEN", tt.clause, v, reason)
		}
	}
}

// JCGM 106:2012, 9.5.4: true values follow a gamma distribution of shape 4 and
// mean 1 µm, the limit is 2 µm, u is 0.25 µm. The guard band stands for U.
func TestFalseAcceptance(t *testing.T) {
	made := distuv.Gamma{Alpha: 4, Beta: 4}
	limit := AtMost(2)
	figureNear(t, "share of true values above the limit", made.Survival(2), 0.042, 0.0005)

	accepted := func(guard float64) float64 {
		_, high := passingReadings(t, guard, limit, 0)
		const steps, top = 20_000, 12.0
		var sum float64
		for i := range steps {
			x := 2 + (top-2)*(float64(i)+0.5)/steps
			sum += made.Prob(x) * normalCDF((high-x)/0.25)
		}
		return sum * (top - 2) / steps
	}
	figureNear(t, "false acceptance without a guard band", accepted(0), 0.0080191119, 1e-6)
	figureNear(t, "false acceptance with 0.328 µm", accepted(0.328), 0.001, 5e-6)
	_, high := passingReadings(t, 0.328, limit, 0)
	figureNear(t, "acceptance limit", high, 1.67, 0.005)
}

// ILAC-G8:09/2019: the chance that a true value on the limit is accepted, for a
// guard band of so many times U = 2u. The row of 0.83 U and those after 1 U are
// from memory.
func TestSpecificFalseAcceptance(t *testing.T) {
	for _, tt := range []struct{ times, want float64 }{
		{0, 0.5}, {0.83, 0.0484572}, {1, 0.0227501319}, {1.5, 0.0013499}, {3, 9.8659e-10},
	} {
		const u = 0.05
		_, high := passingReadings(t, tt.times*2*u, PlusMinus(0, 1), 0)
		figureNear(t, fmt.Sprintf("false acceptance at w = %g U", tt.times), normalCDF((high-1)/u), tt.want, 1e-4*tt.want)
	}
	_, high := passingReadings(t, 1.96*0.05, PlusMinus(0, 1), 0)
	figureNear(t, "false acceptance at w = 1.96 u", normalCDF((high-1)/0.05), 0.025, 1e-5)
}

// Ten thousand units each, every source drawn from its stated distribution and
// the scatter estimated anew: a true value on the limit passes wrongly, or fails
// wrongly, in at most 3 %; 2U inside at least 97 % pass, 2U outside as many fail.
func TestDecideRisks(t *testing.T) {
	const units = 10_000
	tests := []struct {
		name   string
		stdErr float64
		dof    int // 0 stands for known
		others []uncertainty.Term
	}{
		{"normal", 0.05, 0, []uncertainty.Term{uncertainty.FromRectangle("", 0.02, 1)}},
		{"Student's t, 2 dof", 0.004, 2, nil},
		{"Student's t, 7 dof", 0.02, 7, []uncertainty.Term{uncertainty.FromRectangle("", 0.01, -1)}},
		{"rectangle", 0.004, 7, []uncertainty.Term{uncertainty.FromRectangle("", 0.05, 1), uncertainty.FromRectangle("", 0.01, 1)}},
		{"rectangle alone", 0, 0, []uncertainty.Term{uncertainty.FromRectangle("", 0.05, 1)}},
	}
	limit := PlusMinus(14, 3)
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			t.Parallel()
			rng := rand.New(rand.NewPCG(106, 2012))
			share := func(insideU float64, of Verdict) float64 {
				count := 0
				for i := range units {
					deviation, uDB := drawReading(t, rng, tt.stdErr, tt.dof, tt.others)
					trueDB := limit.High - insideU*uDB
					if i%2 == 1 {
						trueDB = limit.Low + insideU*uDB
					}
					if v, _ := Decide(Guarded, trueDB+deviation, uDB, limit, 14); v == of {
						count++
					}
				}
				return float64(count) / units
			}
			if got := share(0, Pass); got > 0.03 {
				t.Errorf("on the limit: wrong PASS %.4f, want at most 0.03", got)
			}
			if got := share(0, Fail); got > 0.03 {
				t.Errorf("on the limit: FAIL %.4f, want at most 0.03", got)
			}
			if got := share(2, Pass); got < 0.97 {
				t.Errorf("2U inside: PASS %.4f, want at least 0.97", got)
			}
			if got := share(-2, Fail); got < 0.97 {
				t.Errorf("2U outside: FAIL %.4f, want at least 0.97", got)
			}
		})
	}
}

// drawReading returns one reading's deviation from the truth and the U that its
// budget gives.
func drawReading(t *testing.T, rng *rand.Rand, stdErr float64, dof int, others []uncertainty.Term) (deviation, uDB float64) {
	t.Helper()
	deviation = stdErr * rng.NormFloat64()
	terms := append([]uncertainty.Term{uncertainty.FromNormal("repeatability", stdErr, 1)}, others...)
	if dof > 0 {
		var chiSquared float64
		for range dof {
			z := rng.NormFloat64()
			chiSquared += z * z
		}
		terms[0] = uncertainty.FromSample("repeatability", stdErr*math.Sqrt(chiSquared/float64(dof)), float64(dof), 1)
	}
	for _, term := range others {
		deviation += term.Sensitivity * term.Distribution(0).Draw(rng)
	}
	uDB, err := uncertainty.Budget{Terms: terms}.ExpandedU(0.95)
	if err != nil {
		t.Fatal(err)
	}
	return deviation, uDB
}
