package network

import (
	"errors"
	"fmt"
	"math"
	"os/exec"
	"strings"
	"testing"
)

// The table holds pads with faulty legs solved by the circuit simulator ngspice 39 (Debian package
// ngspice); testdata/legfault_table.py made it.
const legFaultTable = "testdata/legfault_table.csv"

func TestLegFaultsAgainstSimulator(t *testing.T) {
	seen := map[string]bool{}
	for _, cells := range readTable(t, legFaultTable) {
		c := mustNew(t, cells[0], simulatedParts(t, cells[0], cells[1])...)
		drive, errD := ParseDrive(cells[3])
		sense, errS := ParseSense(cells[4])
		f, err := ParseFault(c, cells[2])
		if err := errors.Join(errD, errS, err); err != nil {
			t.Fatal(err)
		}
		e := Ends{SourceOhms: number(t, cells[5]), Drive: drive, LoadOhms: number(t, cells[6]), Sense: sense, CableFarads: number(t, cells[7])}
		freqHz, want := number(t, cells[8]), number(t, cells[9])
		const tol = 1e-5 // dB; the simulator's ties of 1 TΩ to screen weigh on open legs
		if got := f.Apply(c).LossDB(e, freqHz); !near(got, want, tol) {
			t.Errorf("%s with %q, %v, %v: LossDB(%g Hz) = %.7f, want %.7f ± %g", cells[0], cells[2], drive, sense, freqHz, got, want, tol)
		}
		seen[cells[0]+" "+cells[2]] = true
	}
	for _, network := range []string{"U", "H", "O", "L", "T"} {
		for _, f := range mustNew(t, network, ohms(100, 100, 100, 100, 100)[:len(Refs(network))]...).LegFaults() {
			if !seen[network+" "+f.String()] {
				t.Errorf("%s has no row for %s with %q", legFaultTable, network, f)
			}
		}
	}
}

func TestLegFaultTableIsFresh(t *testing.T) {
	for _, tool := range []string{"python3", "ngspice"} {
		if _, err := exec.LookPath(tool); err != nil {
			t.Skipf("%s is not installed: the kept table is not made again", tool)
		}
	}
	cmd := exec.Command("python3", "legfault_table.py")
	cmd.Dir = "testdata"
	text, err := cmd.Output()
	if err != nil {
		t.Fatalf("legfault_table.py failed: %v", err)
	}
	kept, fresh := readTable(t, legFaultTable), parseTable(t, string(text))
	if len(kept) != len(fresh) {
		t.Fatalf("legfault_table.py gave %d rows, want %d as kept", len(fresh), len(kept))
	}
	for i, want := range kept {
		if got := fresh[i]; !sameCells(got, want) {
			t.Errorf("legfault_table.py gave %q, want %q as kept", got, want)
		}
	}
}

// What a balanced and an unbalanced drawing can have, in the words of the answer.
func TestLegFaults(t *testing.T) {
	texts := func(c *Circuit) string {
		var all []string
		for _, f := range c.LegFaults() {
			back, err := ParseFault(c, "  "+strings.ReplaceAll(f.String(), " ", "  "))
			if err != nil || back != f || f.Parts() != nil {
				t.Errorf("ParseFault(%q) = %+v, %v, want %+v without parts", f, back, err, f)
			}
			all = append(all, f.String())
		}
		return strings.Join(all, "; ")
	}
	const both = "hot leg open at in; hot leg open at out; cold leg open at in; cold leg open at out; " +
		"hot leg to screen at in; hot leg to screen at out; cold leg to screen at in; cold leg to screen at out; " +
		"legs crossed; in and out swapped"
	if got := texts(mustNew(t, "U", ohms(560, 470, 330)...)); got != both {
		t.Errorf("LegFaults() of a U = %q, want %q", got, both)
	}
	const hot = "hot leg open at in; hot leg open at out; hot leg to screen at in; hot leg to screen at out; in and out swapped"
	l := mustNew(t, "L", ohms(680, 150)...)
	if got := texts(l); got != hot {
		t.Errorf("LegFaults() of an L = %q, want %q", got, hot)
	}
	for _, text := range []string{"cold leg open at in", "cold leg to screen at out", "legs crossed"} {
		_, err := ParseFault(l, text)
		var e *Error
		if !errors.As(err, &e) || !strings.Contains(e.Text, "balanced network") || !strings.Contains(e.Hint, "hot leg open at in") {
			t.Errorf("ParseFault(%q) of an L = %#v, want an Error about balanced networks", text, err)
		}
	}
}

// An ohmmeter between pin and pin: an open leg reads nothing, a leg to screen reads 0; the others are
// the readings of the sound pad at other pins.
func TestLegFaultsByOhmmeter(t *testing.T) {
	c := mustNew(t, "U", ohms(560, 470, 330)...)
	for _, tc := range []struct {
		text, a, b string
		want       float64
	}{
		{"hot leg open at in", "in.hot", "out.hot", inf},
		{"hot leg open at in", "in.cold", "out.cold", 470},
		{"cold leg open at out", "out.hot", "out.cold", inf},
		{"hot leg to screen at out", "out.hot", "screen", 0},
		{"hot leg to screen at out", "in.hot", "screen", 560},
		{"legs crossed", "in.hot", "out.cold", 560},
		{"legs crossed", "in.hot", "out.hot", 560 + 330},
		{"in and out swapped", "in.hot", "in.cold", 330},
		{"in and out swapped", "out.hot", "out.cold", 560 + 470 + 330},
	} {
		f, err := ParseFault(c, tc.text)
		if err != nil {
			t.Fatal(err)
		}
		if got := f.Apply(c).Ohms(tc.a, tc.b); !near(got, tc.want, 1e-9) {
			t.Errorf("with %q: Ohms(%s, %s) = %v, want %v", tc.text, tc.a, tc.b, got, tc.want)
		}
	}
	if got := c.Ohms("in.hot", "out.hot"); !near(got, 560, 1e-9) || len(c.Nodes()) != terminals || len(c.Parts()) != 3 {
		t.Errorf("the sound pad changed: %v Ω, nodes %q", got, c.Nodes())
	}
}

// Crossed legs turn the polarity over and, between ends that do not tell the legs apart, do nothing
// else; doing either thing twice undoes it.
func TestLegFaultsTwice(t *testing.T) {
	c := mustNew(t, "H", ohms(150, 220, 180, 120, 430)...)
	e := Ends{SourceOhms: 150, Drive: DriveFloating, LoadOhms: 2700, Sense: SenseFloating, CableFarads: 1e-9}
	crossed := Fault{Form: LegsCrossed}.Apply(c)
	if got, want := crossed.Transfer(e, 997), -c.Transfer(e, 997); !near(real(got), real(want), 1e-12) || !near(imag(got), imag(want), 1e-12) {
		t.Errorf("Transfer with crossed legs = %v, want %v", got, want)
	}
	e.Drive, e.Sense = DriveBalanced, SenseUnbalanced
	for _, f := range []Fault{{Form: LegsCrossed}, {Form: EndsSwapped}} {
		if got, want := f.Apply(f.Apply(c)).LossDB(e, 997), c.LossDB(e, 997); !near(got, want, 1e-12) {
			t.Errorf("%q twice: LossDB = %v, want %v", f, got, want)
		}
	}
}

// A fault for which the drawing has no room is refused and changes nothing.
func TestLegFaultsOfALargeDrawing(t *testing.T) {
	parts := []Part{{Ref: "R0", Value: 1, A: "in.hot", B: "n1"}, {Ref: "Rc", Value: 1, A: "in.cold", B: "out.cold"}}
	last := maxNodes - terminals
	for i := 1; i < last; i++ {
		parts = append(parts, Part{Ref: fmt.Sprintf("R%d", i), Value: 1, A: fmt.Sprintf("n%d", i), B: fmt.Sprintf("n%d", i+1)})
	}
	parts = append(parts, Part{Ref: "Rz", Value: 1, A: fmt.Sprintf("n%d", last), B: "out.hot"})
	c := mustNew(t, Custom, parts...)
	open := Fault{Form: LegOpen, Pin: "in.hot"}
	if _, err := ParseFault(c, open.String()); err == nil || !strings.Contains(err.Error(), "too large") {
		t.Errorf("ParseFault(%q) of %d nodes: %v, want an error: too large", open, len(c.Nodes()), err)
	}
	e := Ends{SourceOhms: 100, LoadOhms: 1e4}
	if got, want := open.Apply(c).LossDB(e, 997), c.LossDB(e, 997); got != want || math.IsInf(got, 1) {
		t.Errorf("LossDB = %v, want %v unchanged", got, want)
	}
}
