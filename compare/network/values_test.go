package network

import (
	"fmt"
	"math"
	"math/cmplx"
	"testing"
)

// reactive is a balanced pad with every kind of part.
func reactive(tb testing.TB) *Circuit {
	return mustNew(tb, Custom,
		at("R1", Resistor, 180, "in.hot", "a"), at("L1", Inductor, 0.01, "a", "out.hot"),
		at("R2", Resistor, 200, "in.cold", "b"), at("C1", Capacitor, 1e-6, "b", "out.cold"),
		at("R3", Resistor, 330, "out.hot", "out.cold"), at("C2", Capacitor, 2.2e-8, "a", "b"),
		at("R4", Resistor, 1500, "a", "screen"), at("R5", Resistor, 0, "x", "screen"), at("L2", Inductor, 0.1, "x", "out.cold"))
}

// grid is link, open and what lies between.
func grid(kind Kind) []float64 {
	xs := []float64{0, math.Inf(1)}
	per := map[Kind]float64{Resistor: 1, Inductor: 1e-4, Capacitor: 1e-9}[kind]
	for d := -5.0; d <= 8; d += 0.1 {
		xs = append(xs, per*math.Pow(10, d))
	}
	return xs
}

// everyPart calls f with each part of several pads between several ends.
func everyPart(t *testing.T, f func(name string, c *Circuit, e Ends, p Part)) {
	pads := []*Circuit{reactive(t)}
	for _, name := range Networks()[:7] {
		pads = append(pads, saltmarsh(t, name))
	}
	for _, c := range pads {
		everyEnds(func(e Ends) {
			for _, p := range c.Parts() {
				f(fmt.Sprintf("%s, %v, %s", c.Name(), e, p.Ref), c, e, p)
			}
		})
	}
}

// The bilinear form must give what the full model gives, for every value.
func TestDependence(t *testing.T) {
	everyPart(t, func(name string, c *Circuit, e Ends, p Part) {
		b := c.Dependence(e, 3000, p.Ref)
		for _, x := range grid(p.Kind) {
			if got, want := b.At(x), c.With(p.Ref, x).Transfer(e, 3000); cmplx.Abs(got-want) > 1e-10*(1+cmplx.Abs(want)) {
				t.Errorf("%s: At(%g) = %v, want %v", name, x, got, want)
			}
		}
	})
}

// The intervals must hold just those values whose loss, by the full model, is in the
// range, and their ends must give the limits.
func TestValuesForLoss(t *testing.T) {
	const tolDB = 1e-7
	everyPart(t, func(name string, c *Circuit, e Ends, p Part) {
		lossDB := c.LossDB(e, 3000)
		for _, limits := range [][2]float64{
			{lossDB - 0.1, lossDB + 0.1}, {lossDB + 0.2, lossDB + 3}, {lossDB - 3, lossDB - 0.2}, {lossDB + 1, math.Inf(1)}, {math.Inf(-1), lossDB},
		} {
			found := c.ValuesForLoss(e, 3000, p.Ref, limits[0], limits[1])
			for _, in := range found {
				for _, x := range []float64{in.Low, in.High} {
					if x == 0 || math.IsInf(x, 1) {
						continue
					}
					if got := c.With(p.Ref, x).LossDB(e, 3000); !near(got, limits[0], tolDB) && !near(got, limits[1], tolDB) {
						t.Errorf("%s in %v dB: LossDB at the end %v = %v", name, limits, x, got)
					}
				}
			}
			for _, x := range grid(p.Kind) {
				got := c.With(p.Ref, x).LossDB(e, 3000)
				inside := got >= limits[0] && got <= limits[1]
				edge := near(got, limits[0], tolDB) || near(got, limits[1], tolDB)
				if holds(found, x) != inside && !edge {
					t.Errorf("%s in %v dB: %v holds %g = %v, want %v (%v dB)", name, limits, found, x, !inside, inside, got)
				}
			}
			for i := 1; i < len(found); i++ {
				if !(found[i-1].High < found[i].Low) {
					t.Errorf("%s in %v dB: %v is not sorted and apart", name, limits, found)
				}
			}
		}
	})
}

func holds(in []Interval, x float64) bool {
	for _, i := range in {
		if x >= i.Low && x <= i.High {
			return true
		}
	}
	return false
}

// Closed form: between nil and an open load, K = 1 + R1/R2.
func TestValuesForLossClosedForm(t *testing.T) {
	c := mustNew(t, "L", append(ohms(900, 100), at("C1", Capacitor, 1e-9, "in.cold", "screen"))...)
	noShunt := c.With("R2", inf) // any series part will do, if only there is one
	coupled := mustNew(t, Custom, at("C1", Capacitor, 1e-6, "in.hot", "out.hot"))
	e := unloaded(DriveUnbalanced, SenseUnbalanced)
	db := func(k float64) float64 { return 20 * math.Log10(k) }
	close := func(got, want float64) bool { // the source is 1 mΩ, and 1e-15 Ω a link
		return got == want || !math.IsInf(want, 1) && math.Abs(got-want) <= 1e-4*want+linkOhms
	}
	for _, tt := range []struct {
		name      string
		c         *Circuit
		ref       string
		low, high float64
		want      []Interval
	}{
		{"series", c, "R1", db(5), db(20), []Interval{{400, 1900}}},
		{"shunt", c, "R2", db(5), db(20), []Interval{{900.0 / 19, 225}}},
		{"shunt from open", c, "R2", db(1), db(2), []Interval{{900, inf}}},
		{"series from nothing", c, "R1", -1, db(2), []Interval{{0, 100}}},
		{"series open only", noShunt, "R1", 300, inf, []Interval{{inf, inf}}},
		{"shunt short only", c, "R2", 400, inf, []Interval{{0, 0}}},
		{"series anything but open", noShunt, "R1", -1, 300, []Interval{{0, openOhms / 2}}},
		{"series anything", c, "R1", math.Inf(-1), inf, []Interval{{0, inf}}},
		{"capacitor in series, none only", coupled, "C1", 300, inf, []Interval{{0, 0}}},
		{"capacitor in series, any", coupled, "C1", -1, 300, []Interval{{0, inf}}},
		{"out of reach", c, "R1", -10, -1, nil},
		{"no effect, in range", c, "C1", 19, 21, []Interval{{0, inf}}},
		{"no effect, out of range", c, "C1", 21, 22, nil},
		{"limits crossed", c, "R1", 20, 10, nil},
		{"limit NaN", c, "R1", math.NaN(), 10, nil},
		{"no such part", c, "R9", 19, 21, []Interval{{0, inf}}},
	} {
		got := tt.c.ValuesForLoss(e, 997, tt.ref, tt.low, tt.high)
		same := len(got) == len(tt.want)
		for i := 0; same && i < len(got); i++ {
			same = close(got[i].Low, tt.want[i].Low) && close(got[i].High, tt.want[i].High)
		}
		if !same {
			t.Errorf("%s: ValuesForLoss(%s, %g, %g) = %v, want %v", tt.name, tt.ref, tt.low, tt.high, got, tt.want)
		}
	}
}

func TestEdits(t *testing.T) {
	c := saltmarsh(t, "U")
	e := Ends{SourceOhms: 100, LoadOhms: 10000}
	before := c.LossDB(e, 997)
	short := c.With("R3", -5)
	if p, _ := short.Part("R3"); p.Value != 0 {
		t.Errorf("With(R3, -5) has R3 = %v, want 0", p.Value)
	}
	if p, _ := c.With("R3", math.NaN()).Part("R3"); p.Value != 0 {
		t.Errorf("With(R3, NaN) has R3 = %v, want 0", p.Value)
	}
	swapped := c.Swapped("R1", "R3")
	r1, _ := swapped.Part("R1")
	r3, _ := swapped.Part("R3")
	if r1.Value != 330 || r3.Value != 560 || r1.A != "in.hot" || r3.A != "out.hot" {
		t.Errorf("Swapped(R1, R3) = %+v, %+v, want 330 and 560 Ω in their places", r1, r3)
	}
	want := mustNew(t, "U", ohms(330, 560, 560)...).LossDB(e, 997)
	if got := swapped.LossDB(e, 997); got != want {
		t.Errorf("Swapped(R1, R3): LossDB = %v, want %v", got, want)
	}
	mixed := reactive(t)
	if p, _ := mixed.Swapped("L1", "C2").Part("L1"); p.Kind != Capacitor || p.Value != 2.2e-8 || p.A != "a" || p.B != "out.hot" {
		t.Errorf("Swapped(L1, C2) has %+v at L1, want 22 nF between a and out.hot", p)
	}
	back := mixed.Swapped("L1", "C2").Swapped("L1", "C2")
	if got, want := back.LossDB(e, 997), mixed.LossDB(e, 997); got != want {
		t.Errorf("swapped twice: LossDB = %v, want %v", got, want)
	}
	for _, same := range []*Circuit{c, c.With("R9", 1), c.Swapped("R1", "R9"), c.With("R1", 560)} {
		if got := same.LossDB(e, 997); got != before {
			t.Errorf("LossDB = %v, want %v as before the edits", got, before)
		}
	}
}

// A lossless resonance has no pole that gives NaN.
func TestBilinearPole(t *testing.T) {
	for _, b := range []Bilinear{{AtZero: 1, AtInf: 2, Knee: -5}, {AtZero: 0, AtInf: 0, Knee: -5}, {AtZero: 1, AtInf: 1}, {AtInf: 1}, {AtZero: 1, Knee: cmplx.Inf()}} {
		for _, x := range []float64{0, 4.999, 5, 6, inf} {
			if got := b.At(x); cmplx.IsNaN(got) || cmplx.IsInf(got) {
				t.Errorf("%+v.At(%g) = %v, want a number", b, x, got)
			}
		}
	}
}
