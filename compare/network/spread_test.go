package network

import (
	"math"
	"math/rand/v2"
	"testing"
)

// The adjoint solution must agree with a central difference through the full model.
func TestSensitivities(t *testing.T) {
	const step, tolDB = 1e-4, 1e-6
	everyPart(t, func(name string, c *Circuit, e Ends, p Part) {
		want := (c.With(p.Ref, p.Value*(1+step)).LossDB(e, 3000) - c.With(p.Ref, p.Value*(1-step)).LossDB(e, 3000)) / (2 * step)
		if got := c.Sensitivities(e, 3000)[c.index(p.Ref)]; !near(got, want, tolDB) {
			t.Errorf("%s: Sensitivities = %v, want %v", name, got, want)
		}
	})
	for _, c := range []*Circuit{reactive(t), saltmarsh(t, "U"), saltmarsh(t, "T")} {
		everyEnds(func(e Ends) {
			got := c.EndSensitivities(e, 20000)
			difference := func(set func(e *Ends, factor float64)) float64 {
				up, down := e, e
				set(&up, 1+step)
				set(&down, 1-step)
				return (c.LossDB(up, 20000) - c.LossDB(down, 20000)) / (2 * step)
			}
			for _, v := range []struct {
				what      string
				got, want float64
			}{
				{"SourceDB", got.SourceDB, difference(func(e *Ends, f float64) { e.SourceOhms *= f })},
				{"LoadDB", got.LoadDB, difference(func(e *Ends, f float64) { e.LoadOhms *= f })},
				{"CableDB", got.CableDB, difference(func(e *Ends, f float64) { e.CableFarads *= f })},
			} {
				if !near(v.got, v.want, tolDB) {
					t.Errorf("%s, %v: EndSensitivities.%s = %v, want %v", c.Name(), e, v.what, v.got, v.want)
				}
			}
		})
	}
}

// Closed form: the loss of an unloaded divider is 20 lg(1 + R1/R2).
func TestWorstCaseDivider(t *testing.T) {
	parts := ohms(900, 100)
	parts[0].TolFrac, parts[1].TolFrac = 0.05, 0.01
	low, high := mustNew(t, "L", parts...).WorstCase(unloaded(DriveUnbalanced, SenseUnbalanced), 997)
	wantLow, wantHigh := 20*math.Log10(1+855.0/101), 20*math.Log10(1+945.0/99)
	if !near(low, wantLow, 1e-4) || !near(high, wantHigh, 1e-4) {
		t.Errorf("WorstCase = %v, %v, want %v, %v", low, high, wantLow, wantHigh)
	}
}

// A worst case may lie inside the tolerances: a bridge that can be balanced lets nothing
// through, a trap is deepest at its resonance.
func TestWorstCaseInside(t *testing.T) {
	bridge := mustNew(t, Custom,
		at("R1", Resistor, 1000, "in.hot", "out.hot"), at("R2", Resistor, 1000, "in.cold", "out.cold"),
		at("R3", Resistor, 1020, "in.hot", "out.cold"), at("R4", Resistor, 1030, "in.cold", "out.hot"))
	if _, high := bridge.WorstCase(Ends{SourceOhms: 100, Drive: DriveFloating, LoadOhms: 1e4, Sense: SenseFloating}, 997); high < 250 {
		t.Errorf("bridge: WorstCase high = %v, want all but everything", high)
	}
	parts := []Part{{Ref: "R1", Value: 1000}, {Ref: "R2", Value: math.Inf(1)}, {Ref: "R3", Value: 10, A: "out.hot", B: "x"},
		{Ref: "L1", Kind: Inductor, Value: 0.01, A: "x", B: "y"}, {Ref: "C1", Kind: Capacitor, Value: 1e-6, TolFrac: 0.2, A: "y", B: "screen"}}
	trap := mustNew(t, "L", parts...)
	resonanceHz := 1 / (2 * math.Pi * math.Sqrt(0.01*1.05e-6))
	low, high := trap.WorstCase(unloaded(DriveUnbalanced, SenseUnbalanced), resonanceHz)
	if want := 20 * math.Log10(101); !near(high, want, 1e-4) {
		t.Errorf("trap: WorstCase high = %v, want %v at resonance", high, want)
	}
	if want := trap.With("C1", 0.8e-6).LossDB(unloaded(DriveUnbalanced, SenseUnbalanced), resonanceHz); !near(low, want, 1e-6) {
		t.Errorf("trap: WorstCase low = %v, want %v at 0.8 µF", low, want)
	}
}

// ladder has 14 resistors, more than all corners are tried for.
func ladder(tb testing.TB) *Circuit {
	tb.Helper()
	nodes := []string{"in.hot", "a", "b", "c", "d", "e", "out.hot"}
	parts := []Part{at("R0", Resistor, 5000, "in.hot", "screen")}
	for i := range 6 {
		parts = append(parts,
			at("RS"+nodes[i], Resistor, 50*float64(i+1), nodes[i], nodes[i+1]),
			at("RP"+nodes[i], Resistor, 1000*float64(i+1), nodes[i+1], "screen"))
	}
	return mustNew(tb, Custom, append(parts, at("R9", Resistor, 700, "a", "c"))...)
}

func TestWorstCaseHoldsSpread(t *testing.T) {
	pads := []*Circuit{reactive(t), ladder(t)}
	for _, name := range Networks()[:7] {
		pads = append(pads, saltmarsh(t, name))
	}
	for i, c := range pads {
		everyEnds(func(e Ends) {
			low, high := c.WorstCase(e, 5000)
			s := c.Spread(e, 5000, 300, uint64(i))
			if !(low <= s.LeastDB && s.LeastDB <= s.LowDB && s.LowDB < s.MeanDB && s.MeanDB < s.HighDB && s.HighDB <= s.MostDB && s.MostDB <= high) {
				t.Errorf("%s, %v: WorstCase = %v, %v does not hold Spread = %+v", c.Name(), e, low, high, s)
			}
		})
	}
}

// With more than 12 parts the corner is searched for; every corner must be inside.
func TestWorstCaseOfManyParts(t *testing.T) {
	c := ladder(t)
	e := unbalancedEnds(100, 10000).bounded()
	low, high := c.WorstCase(e, 997)
	w := c.worst(e, 997)
	if len(w.moving) <= maxCornerParts {
		t.Fatalf("%d parts, want more than %d", len(w.moving), maxCornerParts)
	}
	least, most := math.Inf(1), math.Inf(-1)
	values := append([]float64(nil), c.values...)
	for corner := range 1 << len(w.moving) {
		for bit, i := range w.moving {
			l, h := c.parts[i].limits()
			values[i] = l
			if corner>>bit&1 == 1 {
				values[i] = h
			}
		}
		least, most = min(least, w.loss(values)), max(most, w.loss(values))
	}
	if !near(low, least, 1e-9) || !near(high, most, 1e-9) {
		t.Errorf("WorstCase = %v, %v, want %v, %v as over all corners", low, high, least, most)
	}
}

// Closed form: one part, rectangular, an unloaded divider.
func TestSpreadOfOnePart(t *testing.T) {
	const units = 20000
	parts := ohms(900, 100)
	parts[0].TolFrac, parts[1].TolFrac = 0.1, 0
	c := mustNew(t, "L", parts...)
	s := c.Spread(unloaded(DriveUnbalanced, SenseUnbalanced), 997, units, 1)
	db := func(r1 float64) float64 { return 20 * math.Log10(1+r1/100) }
	// The loss is all but straight in R1 here; its spread is that of the rectangle.
	wantSD := dbPerNeper * 90 / 1000 / math.Sqrt(3)
	for _, v := range []struct {
		what           string
		got, want, tol float64
	}{
		{"LowDB", s.LowDB, db(900 - 90*0.95), 0.012}, // four standard errors of a quantile
		{"HighDB", s.HighDB, db(900 + 90*0.95), 0.012},
		{"LeastDB", s.LeastDB, db(810), 0.001},
		{"MostDB", s.MostDB, db(990), 0.001},
		{"MeanDB", s.MeanDB, 20 - dbPerNeper*0.5*math.Pow(0.09, 2)/3, 4 * wantSD / math.Sqrt(units)},
		{"SDDB", s.SDDB, wantSD, 0.01 * wantSD},
	} {
		if !near(v.got, v.want, v.tol) {
			t.Errorf("Spread.%s = %v, want %v ± %v", v.what, v.got, v.want, v.tol)
		}
	}
	if again := c.Spread(unloaded(DriveUnbalanced, SenseUnbalanced), 997, units, 1); again != s {
		t.Errorf("Spread with the same seed = %+v, want %+v", again, s)
	}
	if other := c.Spread(unloaded(DriveUnbalanced, SenseUnbalanced), 997, units, 2); other == s {
		t.Error("Spread with another seed gives the same units")
	}
}

func TestSpreadOfNothing(t *testing.T) {
	e := Ends{SourceOhms: 100, LoadOhms: 10000}
	short := saltmarsh(t, "U").With("R3", 0)
	if s := short.Spread(e, 997, 10, 1); !math.IsInf(s.MeanDB, 1) || s.SDDB != 0 || !math.IsInf(s.LowDB, 1) {
		t.Errorf("Spread of a short = %+v, want +Inf and no spread", s)
	}
	if low, high := short.WorstCase(e, 997); !math.IsInf(low, 1) || !math.IsInf(high, 1) {
		t.Errorf("WorstCase of a short = %v, %v, want +Inf", low, high)
	}
	exact := mustNew(t, "U", Part{Ref: "R1", Value: 560}, Part{Ref: "R2", Value: 560}, Part{Ref: "R3", Value: 330})
	if s := exact.Spread(e, 997, 0, 1); s.Units != 2 || s.SDDB != 0 || s.LeastDB != exact.LossDB(e, 997) {
		t.Errorf("Spread without tolerances = %+v, want none", s)
	}
	some := spreadOf([]float64{10, math.Inf(1), 12})
	if !math.IsInf(some.MeanDB, 1) || !math.IsInf(some.SDDB, 1) || some.LeastDB != 10 {
		t.Errorf("spreadOf(10, +Inf, 12) = %+v", some)
	}
}

func TestSample(t *testing.T) {
	c := saltmarsh(t, "H")
	rng := rand.New(rand.NewPCG(3, 4))
	for range 100 {
		for i, p := range c.Sample(rng).Parts() {
			want := c.Parts()[i]
			if got := p.Value; !(math.Abs(got/want.Value-1) <= want.TolFrac) || got == want.Value {
				t.Fatalf("Sample has %s = %v, want another within 1 %% of %v", p.Ref, got, want.Value)
			}
		}
	}
}
