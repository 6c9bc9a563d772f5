package suspect

import (
	"math"
	"slices"
	"strings"
	"testing"

	"padproof/compare"
	"padproof/compare/network"
)

func TestFaultsOfAPad(t *testing.T) {
	c := circuit(t, "U", 0.01, 560, 560, 330)
	var got []string
	for _, f := range Faults(c) {
		got = append(got, f.String())
		if !strings.HasSuffix(f.String(), "swapped") && f.Form != network.LegsCrossed && len(f.Parts()) > 1 {
			t.Errorf("%v is about %v", f, f.Parts())
		}
		if back, err := network.ParseFault(c, f.String()); err != nil || back.String() != f.String() {
			t.Errorf("ParseFault(%q) = %v, %v", f, back, err)
		}
	}
	for _, want := range []string{"R1 open", "R3 short", "R2 x10", "R2 /10", "R3 is 300", "R3 is 360", "R1 is 510", "R1 is 620",
		"R1 and R3 swapped", "R2 and R3 swapped", "hot leg open at in", "cold leg to screen at out", "legs crossed", "in and out swapped"} {
		if !slices.Contains(got, want) {
			t.Errorf("%q is not looked for", want)
		}
	}
	if slices.Contains(got, "R1 and R2 swapped") {
		t.Error("a swap of equal parts is looked for")
	}
}

// The bridge and the shunt of a bridged T share no node, and sit side by side all the same.
func TestSwapOfFewParts(t *testing.T) {
	names := func(fs []Fault) (all []string) {
		for _, f := range fs {
			all = append(all, f.String())
		}
		return all
	}
	if got := names(Faults(circuit(t, "bridged-T", 0.01, 600, 600, 1300, 270))); !slices.Contains(got, "R3 and R4 swapped") {
		t.Errorf("R3 and R4 swapped is not looked for among %q", got)
	}
}

// Turned round, a symmetrical T pad is the same pad: that is no fault.
func TestSameCircuitIsNoFault(t *testing.T) {
	s := newSearch(Evidence{Circuit: circuit(t, "T", 0.01, 300, 300, 430), Rig: compare.Rig{Ends: network.Ends{SourceOhms: 600, LoadOhms: 600, Drive: network.DriveUnbalanced, Sense: network.SenseUnbalanced}},
		Loss: []Point{{FreqHz: 997, LossDB: 10, StdUDB: 0.1}}})
	var sum float64
	for _, h := range s.hypotheses() {
		sum += h.prior
		if h.fault.Form == network.EndsSwapped {
			t.Error("in and out swapped of a symmetrical pad is looked for")
		}
	}
	if math.Abs(sum-faultPrior) > 1e-12 {
		t.Errorf("priors add up to %v, want %v", sum, faultPrior)
	}
}

// Values of E24 by the table of IEC 60063.
func TestNeighbours(t *testing.T) {
	for _, c := range []struct{ value, below, above float64 }{
		{330, 300, 360}, {100, 91, 110}, {1000, 910, 1100}, {910, 820, 1000}, {9.1, 8.2, 10}, {562, 510, 620}, {350, 330, 360},
		{220e-12, 200e-12, 240e-12}, {4.7e-6, 4.3e-6, 5.1e-6},
	} {
		below, above, ok := neighbours(c.value)
		if !ok || math.Abs(below/c.below-1) > 1e-12 || math.Abs(above/c.above-1) > 1e-12 {
			t.Errorf("neighbours(%v) = %v, %v, %v, want %v and %v", c.value, below, above, ok, c.below, c.above)
		}
	}
	for _, value := range []float64{0, math.Inf(1), math.NaN(), -1} {
		if _, _, ok := neighbours(value); ok {
			t.Errorf("neighbours(%v) are some", value)
		}
	}
}
