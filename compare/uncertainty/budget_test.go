package uncertainty

import (
	"math"
	"slices"
	"testing"
)

// JCGM 100:2008, H.1, the end gauge (testdata/gum_h1_budget.csv), in nm. The row
// "d (combined)" sums up the three before it; the last two sources, in 1/°C and
// °C, come in through the gauge's length, 0.1 °C and 11.5e-6/°C.
func TestEndGauge(t *testing.T) {
	const example = "GUM H.1"
	const lengthNM = 50000623
	sensitivity := map[string]float64{"alpha_S": 0, "theta (deviation from 20 degC)": 0,
		"delta alpha": lengthNM * 0.1, "delta theta": lengthNM * 11.5e-6}
	var gauge, comparison Budget
	for _, row := range table(t, "testdata/gum_h1_budget.csv") {
		if row["input"] == "d (combined)" {
			continue
		}
		c, ok := sensitivity[row["input"]]
		if !ok {
			c = 1
		}
		term := Term{row["input"], number(t, row["standard_uncertainty"]), c, number(t, row["dof"]), Normal}
		near(t, "contribution of "+row["input"], term.Contribution(), number(t, row["contribution_nm"]), 0.1)
		if row["input"][:2] == "d:" {
			comparison.Terms = append(comparison.Terms, term)
		}
		gauge.Terms = append(gauge.Terms, term)
	}
	check := func(quantity string, got float64) {
		t.Helper()
		want := lookUp(t, example, quantity)
		near(t, quantity, got, want.value, want.tol)
	}
	check("u_c first order", gauge.CombinedU())
	check("nu(d)", comparison.EffectiveDof())
	check("nu_eff", gauge.EffectiveDof())
	// 16.64 cut down to 16.
	check("k95(16)", CoverageFactor(0.95, gauge.EffectiveDof()))
	check("t99(16)", CoverageFactor(0.99, gauge.EffectiveDof()))
	check("U99", expand(t, 0.99, gauge.Terms...))
	// Unrounded: t99(16) times 31.7049779 nm.
	near(t, "U99, unrounded", expand(t, 0.99, gauge.Terms...), 92.603, 0.001)
}

// attenuator is EA-4/02 S7, a 30 dB step attenuator (testdata/ea402_s7_budget.csv).
func attenuator(t *testing.T) Budget {
	t.Helper()
	var b Budget
	for _, row := range table(t, "testdata/ea402_s7_budget.csv") {
		name, sensitivity := row["input"], number(t, row["sensitivity"])
		switch row["distribution"] {
		case "rectangular":
			b.Terms = append(b.Terms, FromRectangle(name, number(t, row["half_width_db"]), sensitivity))
		case "arcsine":
			b.Terms = append(b.Terms, FromArcsine(name, number(t, row["half_width_db"]), sensitivity))
		case "normal":
			b.Terms = append(b.Terms, FromNormal(name, number(t, row["standard_uncertainty_db"]), sensitivity))
		case "student t":
			b.Terms = append(b.Terms, FromSample(name, number(t, row["standard_uncertainty_db"]), number(t, row["dof"]), sensitivity))
		default:
			t.Fatalf("%s: distribution %s", name, row["distribution"])
		}
	}
	return b
}

func TestAttenuator(t *testing.T) {
	const example = "EA-4/02 S7 / NIST TN 1900 E11"
	b := attenuator(t)
	// The standard error of the four readings, unrounded.
	var variance float64
	for _, reading := range []float64{30.033, 30.058, 30.018, 30.052} {
		variance += (reading - 30.04025) * (reading - 30.04025) / 3
	}
	b.Terms[0].StandardU = math.Sqrt(variance / 4)
	of4 := lookUp(t, example, "u of that mean")
	near(t, "u of the mean", b.Terms[0].StandardU, of4.value, of4.tol)

	u := lookUp(t, "EA-4/02 S7", "u(L_X)")
	near(t, "u(L_X)", b.CombinedU(), u.value, u.tol)
	dof := lookUp(t, "EA-4/02 S7", "nu_eff")
	near(t, "nu_eff", b.EffectiveDof(), dof.value, dof.tol)
	expanded := lookUp(t, "EA-4/02 S7", "U (k=2)")
	near(t, "U (k=2)", 2*b.CombinedU(), expanded.value, expanded.tol)
	// Root sum of squares of the printed standard uncertainties, 0.022455, times
	// Student's t at 109 degrees of freedom, 1.98197 (tables of the t distribution).
	near(t, "U at 95 %", expand(t, 0.95, b.Terms...), 1.98197*0.022455, 3e-6)
	if term, share := b.Dominant(); term.Source != "dL_M mismatch" || math.Abs(share-0.02/0.022455) > 1e-3 {
		t.Errorf("%s: Dominant() = %s, %g, want dL_M mismatch, 0.891", example, term.Source, share)
	}
}

// JCGM 101:2008, 9.2: sums of four.
func TestSumsOfFour(t *testing.T) {
	const unit = 1.7320508075688772 // half-width of a rectangle of u = 1
	four := func(term Term) []Term { return []Term{term, term, term, term} }
	want := lookUp(t, "JCGM 101 9.2.2", "sum of 4 normal u=1: 95 % half width")
	near(t, "9.2.2: U of four normal", expand(t, 0.95, four(FromNormal("", 1, 1))...), want.value, want.tol)

	// No rectangle dominates: the law of propagation stands, as the standard prints it.
	near(t, "9.2.3: U of four rectangles", expand(t, 0.95, four(FromRectangle("", unit, 1))...), 3.92, 0.005)

	wide := four(FromRectangle("", unit, 1))
	wide[3] = FromRectangle("wide", 10*unit, 1)
	want = lookUp(t, "JCGM 101 9.2.4", "u(y)")
	near(t, "9.2.4: u(y)", Budget{wide}.CombinedU(), want.value, want.tol)
	want = lookUp(t, "JCGM 101 9.2.4", "3 rectangular u=1 and one u=10: 95 % half width")
	near(t, "9.2.4: U", expand(t, 0.95, wide...), want.value, want.tol)
	// 17.01613 by numeric convolution of the four rectangles; here three of them
	// count as normal.
	near(t, "9.2.4: U against the exact", expand(t, 0.95, wide...), 17.01613, 0.03)

	// The same with the rectangle's edges in doubt: the law of propagation again.
	want = lookUp(t, "JCGM 101 9.2.4", "same by law of propagation")
	wide[3].Dof = 1e9
	near(t, "9.2.4: U, edges in doubt", expand(t, 0.95, wide...), want.value, want.tol)
}

// NPL Report DEM-ES-011, 9.2, and JCGM 101:2008, 9.4: what a straight budget
// makes of a bent model.
func TestLawOfPropagation(t *testing.T) {
	want := lookUp(t, "NPL DEM-ES-011 9.2", "y=ln(x): propagation u")
	near(t, "u(ln x)", Budget{[]Term{FromRectangle("x", 0.5, 1/0.6)}}.CombinedU(), want.value, want.tol)

	for _, x1 := range []string{"0.010", "0.050"} {
		v := number(t, x1)
		high := lookUp(t, "JCGM 101 9.4", "comparison loss x1="+x1+": propagation interval high")
		low := lookUp(t, "JCGM 101 9.4", "comparison loss x1="+x1+": propagation interval low")
		u := expand(t, 0.95, FromNormal("x1", 0.005, 2*v), FromNormal("x2", 0.005, 0))
		near(t, "comparison loss at "+x1+": high", 1e6*(v*v+u), high.value, high.tol)
		near(t, "comparison loss at "+x1+": low", 1e6*(v*v-u), low.value, low.tol)
	}
}

// JCGM 100:2008, Table G.2 (from memory; any table of Student's t has them).
func TestCoverageFactor(t *testing.T) {
	inf := math.Inf(1)
	tests := []struct{ coverage, dof, want, tol float64 }{
		{0.95, 1, 12.71, 0.005}, {0.95, 2, 4.30, 0.005}, {0.95, 3, 3.18, 0.005},
		{0.95, 10, 2.23, 0.005}, {0.95, 50, 2.01, 0.005}, {0.95, inf, 1.960, 0.0005},
		{0.99, 1, 63.66, 0.005}, {0.99, 10, 3.17, 0.005}, {0.99, inf, 2.576, 0.0005},
		{0.95, 3.99, 3.18, 0.005},      // cut down
		{0.95, 7 - 1e-12, 2.36, 0.005}, // a 7 that lost a digit
		// Closed forms: tan(0.475π) for one degree, √2·0.95·√(2/(1-0.95²))/√2 for two.
		{0.95, 1, math.Tan(0.475 * math.Pi), 1e-9},
		{0.95, 2, 0.95 * math.Sqrt(2/(1-0.95*0.95)), 1e-12},
	}
	for _, tt := range tests {
		near(t, "CoverageFactor", CoverageFactor(tt.coverage, tt.dof), tt.want, tt.tol)
	}
	// Both ways of finding it meet, and end at the normal one.
	near(t, "CoverageFactor beyond 10,000", CoverageFactor(0.99, 10_001), CoverageFactor(0.99, 10_000), 1e-6)
	near(t, "CoverageFactor at 1e9", CoverageFactor(0.99, 1e9), CoverageFactor(0.99, inf), 1e-8)
	for _, bad := range [][2]float64{{0, 5}, {1, 5}, {-1, 5}, {math.NaN(), 5}, {0.95, 0.5}, {0.95, math.NaN()}} {
		if k := CoverageFactor(bad[0], bad[1]); !math.IsNaN(k) {
			t.Errorf("CoverageFactor(%g, %g) = %g, want NaN", bad[0], bad[1], k)
		}
	}
}

func TestNilBudgets(t *testing.T) {
	for _, terms := range [][]Term{
		nil,
		{FromNormal("", 0, 1), FromRectangle("", 0, 1), FromSample("", 0, 1, 1)},
		{FromNormal("", 5, 0), FromRectangle("", 5, 0)},
	} {
		b := Budget{terms}
		if u := expand(t, 0.95, terms...); u != 0 || b.CombinedU() != 0 || !math.IsInf(b.EffectiveDof(), 1) {
			t.Errorf("%v: U, CombinedU, EffectiveDof = %g, %g, %g, want 0, 0, +Inf", terms, u, b.CombinedU(), b.EffectiveDof())
		}
		if _, share := b.Dominant(); share != 0 {
			t.Errorf("%v: Dominant share = %g, want 0", terms, share)
		}
	}
	// A nil term of few degrees of freedom does not pull the others down.
	if dof := (Budget{[]Term{FromSample("", 0, 1, 1), FromNormal("", 1, 1)}}).EffectiveDof(); !math.IsInf(dof, 1) {
		t.Errorf("EffectiveDof with a nil term = %g, want +Inf", dof)
	}
	for _, coverage := range []float64{0, 1, -0.5, 95, math.NaN()} {
		if u, err := (Budget{}).ExpandedU(coverage); err == nil || !math.IsNaN(u) {
			t.Errorf("ExpandedU(%g) = %g, %v, want NaN and an error", coverage, u, err)
		}
	}
}

// A lone term with few degrees of freedom keeps them: no digit lost on the way
// may cut a 7 down to 6.
func TestLoneSampleKeepsItsDof(t *testing.T) {
	for dof := 1.0; dof <= 300; dof++ {
		for _, u := range []float64{0.1, 0.3, 1.0 / 3, 0.0041} {
			near(t, "U of a lone sample", expand(t, 0.95, FromSample("", u, dof, 1))/u, CoverageFactor(0.95, dof), 1e-9)
		}
	}
}

// U follows the unit, and cares neither for the order of the terms nor for signs.
func TestExpandedUProperties(t *testing.T) {
	for _, rectangle := range []float64{0.1, 1, 3, 40} {
		make4 := func(unit float64) []Term {
			return []Term{
				FromSample("a", 0.4, 5, unit), FromRectangle("b", rectangle, -unit),
				FromNormal("c", 0.2, unit), FromArcsine("d", 0.3, -unit),
			}
		}
		want := expand(t, 0.95, make4(1)...)
		for _, unit := range []float64{1e-180, 1e-12, 1e9, 1e180, -1} {
			near(t, "U by unit", expand(t, 0.95, make4(unit)...)/math.Abs(unit), want, 1e-12*want)
		}
		back := make4(1)
		slices.Reverse(back)
		near(t, "U of the terms reversed", expand(t, 0.95, back...), want, 1e-12*want)
	}
}

func BenchmarkExpandedU(b *testing.B) {
	for name, half := range map[string]float64{"t": 0.1, "rectangle": 10} {
		budget := Budget{[]Term{FromSample("a", 0.4, 7, 1), FromRectangle("b", half, 1), FromNormal("c", 0.2, 1),
			FromRectangle("d", 0.2, 1), FromRectangle("e", 0.1, 1), FromRectangle("f", 0.1, 1)}}
		b.Run(name, func(b *testing.B) {
			for b.Loop() {
				if _, err := budget.ExpandedU(0.95); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}
