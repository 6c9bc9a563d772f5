package network

import (
	"errors"
	"math"
	"strings"
	"testing"
)

func TestNewRefuses(t *testing.T) {
	u := ohms(560, 560, 330)
	with := func(parts []Part, more ...Part) []Part { return append(append([]Part(nil), parts...), more...) }
	many := func(n int, part func(i int) Part) (parts []Part) {
		for i := range n {
			parts = append(parts, part(i))
		}
		return parts
	}
	ref := func(i int) string { return "R" + strings.Repeat("i", i+1) }
	for _, tt := range []struct {
		name, network string
		parts         []Part
		ref, node     string
		text          string
	}{
		{"no such network", "V", u, "", "", `no network is called "V"`},
		{"no parts", "custom", nil, "", "", "no parts"},
		{"missing ref", "U", u[:2], "R3", "", "R3 is missing"},
		{"unknown ref", "U", with(u, Part{Ref: "R4", Value: 10}), "R4", "", "R4 has no place"},
		{"unknown ref in custom", "custom", u, "R1", "", "R1 has no place"},
		{"ref twice", "U", with(u, Part{Ref: "R3", Value: 10}), "R3", "", "R3 is there twice"},
		{"no ref", "U", with(u, Part{Value: 10}), "", "", "no ref"},
		{"seat taken by nodes", "U", with(u[:2], at("R3", Resistor, 330, "in.hot", "in.cold")), "R3", "", "R3 has its place"},
		{"capacitor in a seat", "U", with(u[:2], Part{Ref: "R3", Kind: Capacitor, Value: 1e-9}), "R3", "", "R3 of the network U is a resistor"},
		{"negative value", "U", with(u[:2], Part{Ref: "R3", Value: -1}), "R3", "", "value of -1"},
		{"NaN value", "U", with(u[:2], Part{Ref: "R3", Value: math.NaN()}), "R3", "", "value of NaN"},
		{"no kind", "U", with(u[:2], Part{Ref: "R3", Kind: 9, Value: 1}), "R3", "", "neither resistor"},
		{"capacitor of 0", "U", with(u, at("C1", Capacitor, 0, "out.hot", "screen")), "C1", "", "0 F"},
		{"infinite capacitor", "U", with(u, at("C1", Capacitor, math.Inf(1), "out.hot", "screen")), "C1", "", "infinite capacitor"},
		{"infinite inductor", "U", with(u, at("L1", Inductor, math.Inf(1), "out.hot", "screen")), "L1", "", "infinite inductor"},
		{"negative tolerance", "U", with(u[:2], Part{Ref: "R3", Value: 1, TolFrac: -0.01}), "R3", "", "tolerance"},
		{"NaN tolerance", "U", with(u[:2], Part{Ref: "R3", Value: 1, TolFrac: math.NaN()}), "R3", "", "tolerance"},
		{"tolerance over 100 %", "U", with(u[:2], Part{Ref: "R3", Value: 1, TolFrac: 1.5}), "R3", "", "tolerance of 150 %"},
		{"one node", "U", with(u, at("C1", Capacitor, 1e-9, "out.hot", "")), "C1", "", "one node only"},
		{"both ends on one node", "U", with(u, at("C1", Capacitor, 1e-9, "out.hot", "out.hot")), "C1", "", "both ends on node out.hot"},
		{"loose node", "U", with(u, at("C1", Capacitor, 1e-9, "out.hto", "screen")), "C1", "out.hto", "only C1 touches it"},
		{"loose island", "U", with(u, at("R8", Resistor, 1, "a", "b"), at("R9", Resistor, 1, "b", "a")), "R8", "a", "no chain of parts"},
		{"too many parts", "custom", many(65, func(i int) Part { return at(ref(i), Resistor, 1, "in.hot", "out.hot") }), "", "", "64 parts"},
		{"too many nodes", "custom", many(64, func(i int) Part { return at(ref(i), Resistor, 1, "a"+ref(i), "b"+ref(i)) }), ref(29), "b" + ref(29), "64 nodes"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			c, err := New(tt.network, tt.parts)
			var e *Error
			if !errors.As(err, &e) || c != nil {
				t.Fatalf("New = %v, %v, want nil and an *Error", c, err)
			}
			if e.Ref != tt.ref || e.Node != tt.node || !strings.Contains(e.Error(), tt.text) {
				t.Errorf("New fails with ref %q, node %q, %q, want ref %q, node %q, %q", e.Ref, e.Node, e, tt.ref, tt.node, tt.text)
			}
		})
	}
}

func TestNewAccepts(t *testing.T) {
	for _, network := range Networks() {
		if network == Custom {
			continue
		}
		c := saltmarsh(t, network)
		unbalanced := network == "L" || network == "T" || network == "pi" || network == "bridged-T"
		if c.Name() != network || c.Unbalanced() != unbalanced || c.Balanced() == unbalanced {
			t.Errorf("%s: Name %q, Unbalanced %v, Balanced %v, want unbalanced %v", network, c.Name(), c.Unbalanced(), c.Balanced(), unbalanced)
		}
		if got, want := len(c.Parts()), len(Refs(network)); got != want {
			t.Errorf("%s has %d parts, want %d", network, got, want)
		}
	}
	// Order as given, nodes filled in, a link, an open part, an inductor of 0 H, an added
	// part at an inner node.
	c := mustNew(t, "H",
		at("C1", Capacitor, 1e-9, "mid.hot", "screen"), Part{Ref: "R5", Value: math.Inf(1)}, Part{Ref: "R1"},
		Part{Ref: "R2", Value: 150}, Part{Ref: "R3", Value: 150}, Part{Ref: "R4", Value: 150}, at("L1", Inductor, 0, "mid.hot", "mid.cold"))
	if got := c.Parts()[1]; got.Ref != "R5" || got.A != "mid.hot" || got.B != "mid.cold" {
		t.Errorf("Parts()[1] = %+v, want R5 between mid.hot and mid.cold", got)
	}
	if p, ok := c.Part("R2"); !ok || p.Value != 150 || p.A != "in.cold" {
		t.Errorf("Part(R2) = %+v, %v, want 150 Ω from in.cold", p, ok)
	}
	if _, ok := c.Part("R9"); ok {
		t.Error("Part(R9) is there, want none")
	}
	if got := strings.Join(c.Nodes(), " "); got != "screen out.cold out.hot in.cold in.hot mid.hot mid.cold" {
		t.Errorf("Nodes = %s", got)
	}
}

// DESIGN: custom is unbalanced where nothing is drawn in the cold leg.
func TestCustomBalance(t *testing.T) {
	series := at("R1", Resistor, 470, "in.hot", "out.hot")
	for _, tt := range []struct {
		name  string
		parts []Part
		want  bool
	}{
		{"cold never used", []Part{series, at("R2", Resistor, 220, "out.hot", "screen")}, true},
		{"both linked to screen", []Part{series, at("R2", Resistor, 0, "in.cold", "screen"), at("R3", Resistor, 0, "out.cold", "in.cold")}, true},
		{"one linked, one unused", []Part{series, at("R2", Resistor, 0, "screen", "out.cold"), at("R3", Resistor, 100, "out.hot", "out.cold")}, true},
		{"cold through", []Part{series, at("R2", Resistor, 0, "in.cold", "out.cold")}, false},
		{"cold resistor to screen", []Part{series, at("R2", Resistor, 1, "in.cold", "screen")}, false},
		{"only the output's cold used", []Part{series, at("R2", Resistor, 220, "out.hot", "out.cold")}, false},
	} {
		if got := mustNew(t, Custom, tt.parts...).Unbalanced(); got != tt.want {
			t.Errorf("%s: Unbalanced = %v, want %v", tt.name, got, tt.want)
		}
	}
}

func TestEndsText(t *testing.T) {
	for d := DriveBalanced; d <= DriveUnbalanced; d++ {
		text, _ := d.MarshalText()
		var back Drive
		if err := back.UnmarshalText(text); err != nil || back != d {
			t.Errorf("drive %q reads back as %v, %v", text, back, err)
		}
	}
	for s := SenseBalanced; s <= SenseUnbalanced; s++ {
		text, _ := s.MarshalText()
		var back Sense
		if err := back.UnmarshalText(text); err != nil || back != s {
			t.Errorf("sense %q reads back as %v, %v", text, back, err)
		}
	}
	if got := DriveImpedanceBalanced.String(); got != "impedance-balanced" {
		t.Errorf("String = %q, want impedance-balanced", got)
	}
	if _, err := ParseDrive("Balanced"); err == nil {
		t.Error("ParseDrive(Balanced) succeeded, want an error")
	}
	if _, err := ParseSense("impedance-balanced"); err == nil {
		t.Error("ParseSense(impedance-balanced) succeeded, want an error")
	}
}

func TestEndsCheck(t *testing.T) {
	good := Ends{SourceOhms: 100, LoadOhms: 10000, CableFarads: 300e-12}
	nan, inf := math.NaN(), math.Inf(1)
	for _, tt := range []struct {
		name string
		edit func(*Ends)
		ok   bool
	}{
		{"as it is", func(*Ends) {}, true},
		{"no source impedance", func(e *Ends) { e.SourceOhms = 0 }, true},
		{"open load", func(e *Ends) { e.LoadOhms = inf }, true},
		{"no cable", func(e *Ends) { e.CableFarads = 0 }, true},
		{"negative source", func(e *Ends) { e.SourceOhms = -1 }, false},
		{"infinite source", func(e *Ends) { e.SourceOhms = inf }, false},
		{"NaN source", func(e *Ends) { e.SourceOhms = nan }, false},
		{"no load", func(e *Ends) { e.LoadOhms = 0 }, false},
		{"NaN load", func(e *Ends) { e.LoadOhms = nan }, false},
		{"negative cable", func(e *Ends) { e.CableFarads = -1e-12 }, false},
		{"NaN cable", func(e *Ends) { e.CableFarads = nan }, false},
		{"no drive", func(e *Ends) { e.Drive = 4 }, false},
		{"no sense", func(e *Ends) { e.Sense = -1 }, false},
	} {
		e := good
		tt.edit(&e)
		if err := e.Check(); (err == nil) != tt.ok {
			t.Errorf("%s: Check = %v, want ok %v", tt.name, err, tt.ok)
		}
		if got := saltmarsh(t, "U").LossDB(e, 997); math.IsNaN(got) {
			t.Errorf("%s: LossDB = NaN", tt.name)
		}
	}
}
