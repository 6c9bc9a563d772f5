package network

import (
	"math"
	"testing"
)

// Series and parallel by hand.
func TestOhms(t *testing.T) {
	u := mustNew(t, "U", append(ohms(560, 470, 330), at("C1", Capacitor, 1e-6, "out.hot", "screen"), at("L1", Inductor, 1, "in.cold", "x"), at("R4", Resistor, 100, "x", "screen"))...)
	l := mustNew(t, "L", ohms(680, 150)...)
	out := [2]string{"out.hot", "out.cold"}
	for _, tt := range []struct {
		c      *Circuit
		a, b   string
		joined [][2]string
		want   float64
	}{
		{u, "in.hot", "in.cold", nil, 560 + 330 + 470},
		{u, "in.cold", "in.hot", [][2]string{out}, 560 + 470},
		{u, "out.hot", "out.cold", nil, 330},
		{u, "out.hot", "out.cold", [][2]string{{"in.hot", "in.cold"}}, 330.0 * 1030 / 1360},
		{u, "out.hot", "out.cold", [][2]string{out}, 0},
		{u, "in.hot", "screen", nil, 560 + 330 + 470 + 100},
		{u, "in.cold", "x", nil, 0},
		{u, "in.hot", "in.hot", nil, 0},
		{u, "in.hot", "nowhere", nil, inf},
		{u, "in.hot", "in.cold", [][2]string{{"out.hot", "nowhere"}}, 1360},
		{u.With("R1", inf), "in.hot", "out.hot", nil, inf},
		{u.With("R4", inf), "in.hot", "screen", nil, inf},
		{l, "in.hot", "in.cold", nil, 830},
		{l, "in.hot", "out.cold", [][2]string{{"out.hot", "screen"}}, 680},
		{l, "in.cold", "screen", nil, 0},
	} {
		if got := tt.c.Ohms(tt.a, tt.b, tt.joined...); !near(got, tt.want, 1e-9*min(tt.want, 1e6)) {
			t.Errorf("%s: Ohms(%s, %s, %v) = %v, want %v", tt.c.Name(), tt.a, tt.b, tt.joined, got, tt.want)
		}
	}
}

// What goes into the pad goes into its parts and its load (conservation of energy).
func TestDissipationAddsUp(t *testing.T) {
	const freqHz, inputVolts = 4000, 2.5
	for _, c := range []*Circuit{reactive(t), saltmarsh(t, "H"), saltmarsh(t, "O"), saltmarsh(t, "bridged-T"), saltmarsh(t, "U").With("R1", 0)} {
		for _, e := range []Ends{
			{SourceOhms: 100, Drive: DriveFloating, LoadOhms: 600, Sense: SenseFloating, CableFarads: 1e-9},
			{SourceOhms: 100, Drive: DriveUnbalanced, LoadOhms: 600, Sense: SenseUnbalanced},
		} {
			var inParts float64
			for _, w := range c.Dissipation(e, freqHz, inputVolts) {
				inParts += w
			}
			s := c.through(c.values, e, angular(freqHz))
			in, load := square(s.volts(inHot, inCold)), square(s.volts(outHot, outCold))
			s.end()
			inLoad := inputVolts * inputVolts * load / in / e.LoadOhms
			want := inputVolts * inputVolts * real(1/c.InputImpedance(e, freqHz))
			if got := inParts + inLoad; !near(got, want, 1e-12*want) {
				t.Errorf("%s, %v: Dissipation and load add up to %v W, want %v", c.Name(), e, got, want)
			}
		}
	}
	for _, w := range saltmarsh(t, "O").With("R1", 0).Dissipation(Ends{SourceOhms: 100, LoadOhms: 1e4}, 997, 1) {
		if w != 0 {
			t.Errorf("Dissipation behind a shorted input = %v, want 0", w)
		}
	}
}

// Ohm's law: half the current through each leg.
func TestPhantomDrop(t *testing.T) {
	u := mustNew(t, "U", ohms(560, 560, 330)...)
	leg := func(lost, feedVolts float64) PhantomLeg {
		return PhantomLeg{LostVolts: lost, LeftVolts: PhantomVolts - feedVolts - lost}
	}
	blocked := func(at float64) PhantomLeg { return PhantomLeg{LostVolts: at, Blocked: true} }
	shunted := mustNew(t, "U", append(ohms(560, 560, inf), at("R4", Resistor, 10000, "in.hot", "screen"))...)
	fed := 48 * 10000.0 / (10000 + 560 + 6800) // no current drawn but by R4
	for _, tt := range []struct {
		name      string
		c         *Circuit
		amps      float64
		hot, cold PhantomLeg
		feedAmps  float64
	}{
		{"U", u, 0.004, leg(1.12, 13.6), leg(1.12, 13.6), 0.004},
		{"links", mustNew(t, "U", ohms(0, 0, inf)...), 0.004, leg(0, 13.6), leg(0, 13.6), 0.004},
		{"no current", u, 0, leg(0, 0), leg(0, 0), 0},
		{"hot open, no bridge", u.With("R1", inf).With("R3", inf), 0.004, blocked(48), leg(2.24, 27.2), 0.004},
		{"capacitors in both legs", mustNew(t, Custom, at("C1", Capacitor, 1e-5, "in.hot", "out.hot"), at("C2", Capacitor, 1e-5, "in.cold", "out.cold")), 0.004, blocked(48), blocked(48), 0},
		{"shunt to screen", shunted, 0, PhantomLeg{LostVolts: fed * 0.056, LeftVolts: fed}, leg(0, 0), fed / 10000},
		{"hot pin on screen", mustNew(t, "U", append(ohms(560, 560, inf), at("R4", Resistor, 0, "in.hot", "screen"))...), 0.002, blocked(48 * 560.0 / 7360), leg(1.12, 13.6), 0.002 + 48/7360.0},
	} {
		got, ok := tt.c.PhantomDrop(tt.amps)
		same := func(a, b PhantomLeg) bool {
			return a.Blocked == b.Blocked && near(a.LostVolts, b.LostVolts, 1e-9) && near(a.LeftVolts, b.LeftVolts, 1e-9)
		}
		if !ok || !same(got.Hot, tt.hot) || !same(got.Cold, tt.cold) || !near(got.FeedAmps, tt.feedAmps, 1e-12) {
			t.Errorf("%s: PhantomDrop(%g) = %+v, %v, want %+v, %+v, %g A", tt.name, tt.amps, got, ok, tt.hot, tt.cold, tt.feedAmps)
		}
	}
	if _, ok := saltmarsh(t, "T").PhantomDrop(0.004); ok {
		t.Error("PhantomDrop of a T is ok, want not: it shorts the cold leg")
	}
}

// The source as a plug: what the noise of a pad is made of. By hand: a U with its input
// plugged by ohms has R3 beside the plug and both legs.
func TestOutputImpedanceOfPlug(t *testing.T) {
	u := saltmarsh(t, "U")
	for _, plug := range []float64{0, 100, 150} {
		e := Ends{SourceOhms: plug, Drive: DriveFloating, LoadOhms: 10000}
		round := 560 + 560 + max(plug, minEndOhms)
		want := 330 * round / (330 + round)
		if got := u.OutputImpedance(e, 997); !near(real(got), want, 1e-9) || imag(got) != 0 {
			t.Errorf("OutputImpedance with a plug of %g Ω = %v, want %v", plug, got, want)
		}
	}
	e := Ends{SourceOhms: 100, Drive: DriveFloating, LoadOhms: math.Inf(1), Sense: SenseFloating}
	open := saltmarsh(t, "H").With("R1", math.Inf(1)).With("R3", math.Inf(1))
	for what, got := range map[string]complex128{"InputImpedance": open.InputImpedance(e, 997), "OutputImpedance": open.OutputImpedance(e, 997)} {
		if got != complex(math.Inf(1), 0) {
			t.Errorf("%s of open legs = %v, want +Inf", what, got)
		}
	}
}
