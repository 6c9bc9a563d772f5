package network

import (
	"math"
	"math/cmplx"
	"testing"
)

// everyEnds calls f with every drive and sense between a few impedances.
func everyEnds(f func(e Ends)) {
	for d := DriveBalanced; d <= DriveUnbalanced; d++ {
		for s := SenseBalanced; s <= SenseUnbalanced; s++ {
			f(Ends{SourceOhms: 100, Drive: d, LoadOhms: 10000, Sense: s, CableFarads: 300e-12})
			f(Ends{SourceOhms: 600, Drive: d, LoadOhms: 600, Sense: s})
		}
	}
}

// unloaded is a source of nil and an open load.
func unloaded(d Drive, s Sense) Ends {
	return Ends{Drive: d, LoadOhms: math.Inf(1), Sense: s}
}

// Common practice, no source: 20 dB is a voltage ratio of 10, and an unloaded divider has
// K = 1 + Rseries/Rshunt.
func TestUnloadedDivider(t *testing.T) {
	const tolDB = 1e-4 // of a source of 1 mΩ
	for _, ratio := range []float64{0.001, 1, 9, 99, 9999} {
		wantDB := 20 * math.Log10(1+ratio)
		u := mustNew(t, "U", ohms(75*ratio, 75*ratio, 150)...)
		for _, e := range []Ends{unloaded(DriveBalanced, SenseBalanced), unloaded(DriveFloating, SenseFloating), unloaded(DriveFloating, SenseBalanced)} {
			if got := u.LossDB(e, 997); !near(got, wantDB, tolDB) {
				t.Errorf("U with K = %g, %v: LossDB = %v, want %v", 1+ratio, e, got, wantDB)
			}
		}
		l := mustNew(t, "L", ohms(150*ratio, 150)...)
		if got := l.LossDB(unloaded(DriveUnbalanced, SenseUnbalanced), 997); !near(got, wantDB, tolDB) {
			t.Errorf("L with K = %g: LossDB = %v, want %v", 1+ratio, got, wantDB)
		}
	}
	if got := mustNew(t, "L", ohms(1350, 150)...).LossDB(unloaded(DriveUnbalanced, SenseUnbalanced), 997); !near(got, 20, tolDB) {
		t.Errorf("LossDB of a tenth of the voltage = %v, want 20", got)
	}
}

// Straight wires in a box are the cable they replace.
func TestLinksAloneHaveNoLoss(t *testing.T) {
	for _, c := range []*Circuit{
		mustNew(t, "U", ohms(0, 0, math.Inf(1))...),
		mustNew(t, "H", ohms(0, 0, 0, 0, math.Inf(1))...),
		mustNew(t, "bridged-T", ohms(math.Inf(1), math.Inf(1), 0, 10)...),
	} {
		everyEnds(func(e Ends) {
			if got := c.Transfer(e, 997); cmplx.Abs(got-1) > 1e-12 {
				t.Errorf("%s of links, %v: Transfer = %v, want 1", c.Name(), e, got)
			}
		})
	}
}

func TestNothingComesThrough(t *testing.T) {
	floating := Ends{SourceOhms: 100, Drive: DriveFloating, LoadOhms: 10000, Sense: SenseFloating}
	open := floating
	open.LoadOhms = inf
	for _, tt := range []struct {
		name string
		c    *Circuit
		e    Ends
	}{
		{"hot leg open, floating", mustNew(t, "U", ohms(inf, 560, 330)...), floating},
		{"hot leg open, floating, load open", mustNew(t, "U", ohms(inf, 560, 330)...), open},
		{"both legs open", mustNew(t, "U", ohms(inf, inf, 330)...), Ends{SourceOhms: 100, LoadOhms: 10000}},
		{"shunt short", mustNew(t, "U", ohms(560, 560, 0)...), Ends{SourceOhms: 100, LoadOhms: 10000}},
		{"out.hot hanging on cold", mustNew(t, "H", ohms(100, 100, inf, 100, 100)...), Ends{SourceOhms: 100, Drive: DriveUnbalanced, LoadOhms: 10000, Sense: SenseFloating, CableFarads: 1e-9}},
		{"L with a short", mustNew(t, "L", ohms(560, 0)...), unbalancedEnds(100, 10000)},
		{"all open", mustNew(t, "T", ohms(inf, inf, inf)...), unbalancedEnds(100, inf)},
	} {
		if got := tt.c.LossDB(tt.e, 997); !math.IsInf(got, 1) {
			t.Errorf("%s: LossDB = %v, want +Inf", tt.name, got)
		}
		if got := tt.c.Transfer(tt.e, 997); got != 0 {
			t.Errorf("%s: Transfer = %v, want 0", tt.name, got)
		}
		for i, got := range tt.c.Sensitivities(tt.e, 997) {
			if got != 0 {
				t.Errorf("%s: Sensitivities[%d] = %v, want 0", tt.name, i, got)
			}
		}
	}
}

// Crossed legs turn the polarity over and change nothing else.
func TestPolarity(t *testing.T) {
	straight := mustNew(t, Custom, at("R1", Resistor, 560, "in.hot", "out.hot"), at("R2", Resistor, 560, "in.cold", "out.cold"), at("R3", Resistor, 330, "out.hot", "out.cold"))
	crossed := mustNew(t, Custom, at("R1", Resistor, 560, "in.hot", "out.cold"), at("R2", Resistor, 560, "in.cold", "out.hot"), at("R3", Resistor, 330, "out.hot", "out.cold"))
	for _, e := range []Ends{{SourceOhms: 100, LoadOhms: 1e4, CableFarads: 1e-8}, {SourceOhms: 100, LoadOhms: 1e4, Drive: DriveFloating, Sense: SenseFloating}} {
		a, b := straight.Transfer(e, 10000), crossed.Transfer(e, 10000)
		if cmplx.Abs(a+b) > 1e-12 {
			t.Errorf("%v: crossed Transfer = %v, want %v", e, b, -a)
		}
	}
}

// Reciprocity (common practice, no source): turned round, with the impedances of the two
// ends exchanged, a pad gives the same load current per volt of EMF.
func TestReciprocity(t *testing.T) {
	parts := saltmarsh(t, "H").Parts()
	parts = append(parts, at("C1", Capacitor, 2.2e-9, "mid.hot", "out.cold"), at("R6", Resistor, 900, "mid.cold", "screen"))
	other := map[string]string{"in.hot": "out.hot", "out.hot": "in.hot", "in.cold": "out.cold", "out.cold": "in.cold"}
	turned := make([]Part, len(parts))
	for i, p := range parts {
		turned[i] = p
		if n, ok := other[p.A]; ok {
			turned[i].A = n
		}
		if n, ok := other[p.B]; ok {
			turned[i].B = n
		}
	}
	c, back := mustNew(t, Custom, parts...), mustNew(t, Custom, turned...)
	for _, pair := range []struct {
		d Drive
		s Sense
	}{{DriveBalanced, SenseBalanced}, {DriveFloating, SenseFloating}, {DriveUnbalanced, SenseUnbalanced}} {
		_, ahead := c.LoadVolts(Ends{SourceOhms: 150, Drive: pair.d, LoadOhms: 4700, Sense: pair.s}, 5000)
		_, astern := back.LoadVolts(Ends{SourceOhms: 4700, Drive: pair.d, LoadOhms: 150, Sense: pair.s}, 5000)
		if got, want := astern/150, ahead/4700; cmplx.Abs(got-want) > 1e-12*cmplx.Abs(want) {
			t.Errorf("%v to %v turned round: load current = %v, want %v", pair.d, pair.s, got, want)
		}
	}
}

// The star-delta transformation: a T and a pi of these arms cannot be told apart.
func TestTeeIsPi(t *testing.T) {
	a, b, s := 330.0, 300.0, 390.0
	sum := a*b + b*s + s*a
	tee, pi := mustNew(t, "T", ohms(a, b, s)...), mustNew(t, "pi", ohms(sum/b, sum/s, sum/a)...)
	everyEnds(func(e Ends) {
		if got, want := pi.LossDB(e, 997), tee.LossDB(e, 997); !near(got, want, 1e-10) {
			t.Errorf("%v: LossDB of the pi = %v, want %v as of the T", e, got, want)
		}
		if got, want := pi.InputImpedance(e, 997), tee.InputImpedance(e, 997); cmplx.Abs(got-want) > 1e-8 {
			t.Errorf("%v: InputImpedance of the pi = %v, want %v as of the T", e, got, want)
		}
	})
	if got, want := pi.Ohms("in.hot", "out.hot"), tee.Ohms("in.hot", "out.hot"); !near(got, want, 1e-9) {
		t.Errorf("Ohms of the pi = %v, want %v as of the T", got, want)
	}
}

// An H is its T with each series arm parted between the legs, a U its L, an O its pi, as
// long as nothing ties a leg to screen or both legs are alike.
func TestBalancedTwins(t *testing.T) {
	for _, twin := range []struct{ balanced, unbalanced *Circuit }{
		{mustNew(t, "H", ohms(165, 165, 150, 150, 390)...), mustNew(t, "T", ohms(330, 300, 390)...)},
		{mustNew(t, "U", ohms(280, 280, 330)...), mustNew(t, "L", ohms(560, 330)...)},
		{mustNew(t, "O", ohms(1100, 200, 200, 900)...), mustNew(t, "pi", ohms(1100, 400, 900)...)},
	} {
		one := Ends{SourceOhms: 150, Drive: DriveUnbalanced, LoadOhms: 2700, Sense: SenseUnbalanced, CableFarads: 800e-12}
		want := twin.unbalanced.LossDB(one, 10000)
		for _, e := range []Ends{{Drive: DriveFloating, Sense: SenseFloating}, {Drive: DriveBalanced, Sense: SenseFloating}, {Drive: DriveFloating, Sense: SenseBalanced}, {}} {
			e.SourceOhms, e.LoadOhms, e.CableFarads = one.SourceOhms, one.LoadOhms, one.CableFarads
			if got := twin.balanced.LossDB(e, 10000); !near(got, want, 1e-10) {
				t.Errorf("%s, %v: LossDB = %v, want %v as of the %s", twin.balanced.Name(), e, got, want, twin.unbalanced.Name())
			}
		}
	}
}

// A link is the limit of ever smaller resistors, an open part of ever greater ones.
func TestLinkAndOpenAreLimits(t *testing.T) {
	for _, name := range Networks()[:7] {
		c := saltmarsh(t, name)
		everyEnds(func(e Ends) {
			for _, ref := range Refs(name) {
				if got, want := c.With(ref, 0).Transfer(e, 997), c.With(ref, 1e-12).Transfer(e, 997); cmplx.Abs(got-want) > 1e-11 {
					t.Errorf("%s, %v: Transfer with %s a link = %v, want %v as with 1 pΩ", name, e, ref, got, want)
				}
				if got, want := c.With(ref, math.Inf(1)).Transfer(e, 997), c.With(ref, 1e17).Transfer(e, 997); cmplx.Abs(got-want) > 1e-11 {
					t.Errorf("%s, %v: Transfer with %s open = %v, want %v as with 1e17 Ω", name, e, ref, got, want)
				}
			}
		})
	}
}

// An open load is the limit of ever higher loads, also where parts are open.
func TestOpenLoadIsLimit(t *testing.T) {
	for _, name := range []string{"U", "H", "O", "T"} {
		for _, ref := range append(Refs(name), "none") {
			c := saltmarsh(t, name).With(ref, math.Inf(1))
			everyEnds(func(e Ends) {
				far := e
				e.LoadOhms, far.LoadOhms = math.Inf(1), 1e16
				if got, want := c.Transfer(e, 997), c.Transfer(far, 997); cmplx.Abs(got-want) > 1e-8 {
					t.Errorf("%s, %s open, %v: Transfer = %v, want %v as with 1e16 Ω", name, ref, e, got, want)
				}
				_, got := c.LegVolts(e, math.Inf(1), 997)
				_, want := c.LegVolts(e, 1e14, 997)
				if cmplx.Abs(got.Hot-want.Hot) > 1e-8 || cmplx.Abs(got.Cold-want.Cold) > 1e-8 {
					t.Errorf("%s, %s open, %v: LegVolts = %v, want %v as with 1e14 Ω", name, ref, e, got, want)
				}
			})
		}
	}
}

// A resistor and a capacitor: −3.0103 dB where ωRC = 1, and the phase −45° (closed form).
func TestLowPass(t *testing.T) {
	c := mustNew(t, Custom, at("R1", Resistor, 1000, "in.hot", "out.hot"), at("C1", Capacitor, 1e-7, "out.hot", "screen"))
	e := unloaded(DriveUnbalanced, SenseUnbalanced)
	freqsHz := []float64{0, 1 / (2 * math.Pi * 1e-4), 1 / (2 * math.Pi * 1e-5)}
	want := []float64{0, 10 * math.Log10(2), 10 * math.Log10(101)}
	for i, got := range c.ResponseDB(e, freqsHz) {
		if !near(got, want[i], 1e-4) {
			t.Errorf("ResponseDB(%g Hz) = %v, want %v", freqsHz[i], got, want[i])
		}
	}
	if got := cmplx.Phase(c.Transfer(e, freqsHz[1])) * 180 / math.Pi; !near(got, -45, 1e-3) {
		t.Errorf("phase of Transfer = %v°, want -45°", got)
	}
}

// At resonance a lossless trap is a short and a lossless tank is open (closed form), though
// the admittances at their nodes cancel to nothing.
func TestResonance(t *testing.T) {
	resonanceHz := 1 / (2 * math.Pi)
	e := unloaded(DriveUnbalanced, SenseUnbalanced)
	trap := func(ohms float64) *Circuit {
		return mustNew(t, Custom, at("R1", Resistor, 1000, "in.hot", "out.hot"), at("R2", Resistor, ohms, "out.hot", "x"),
			at("L1", Inductor, 1, "x", "y"), at("C1", Capacitor, 1, "y", "screen"))
	}
	if got, want := trap(10).LossDB(e, resonanceHz), 20*math.Log10(101); !near(got, want, 1e-4) {
		t.Errorf("trap of 10 Ω: LossDB = %v, want %v", got, want)
	}
	if got := trap(0).LossDB(e, resonanceHz); got < 300 {
		t.Errorf("trap: LossDB = %v, want all but everything", got)
	}
	tank := mustNew(t, Custom, at("L1", Inductor, 1, "in.hot", "out.hot"), at("C1", Capacitor, 1, "in.hot", "out.hot"), at("R1", Resistor, 100, "out.hot", "screen"))
	if got := tank.LossDB(e, resonanceHz); got < 300 {
		t.Errorf("tank: LossDB = %v, want all but everything", got)
	}
}
