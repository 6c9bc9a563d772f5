package proof

import (
	"slices"
	"strings"
	"testing"

	"padproof/compare"
	"padproof/compare/network"
	"padproof/compare/suspect"
)

// No pins are named where a reading there is that of a sound unit, and the way that does show the fault
// is; a shorted capacitor shows on an ohmmeter.
func TestConfirmNamesWhatShowsIt(t *testing.T) {
	parts := []network.Part{
		{Ref: "R1", Value: 1000, TolFrac: 0.01, A: "in.hot", B: "out.hot"},
		{Ref: "R2", Value: 470, TolFrac: 0.01, A: "out.hot", B: "out.cold"},
		{Ref: "R3", Value: 1000, TolFrac: 0.01, A: "in.cold", B: "out.cold"},
		{Ref: "C1", Kind: network.Capacitor, Value: 22e-9, TolFrac: 0.05, A: "out.hot", B: "out.cold"},
	}
	sound, err := network.New("custom", parts)
	if err != nil {
		t.Fatal(err)
	}
	ends := network.Ends{SourceOhms: 100, LoadOhms: 10000}
	for _, tt := range []struct {
		fault, says string
		pins        bool
	}{
		{"C1 x10", "capacitance meter", false},
		{"C1 short", "with the first of these 0 Ω", true}, // or R2, beside it
		{"R2 x10", "read out.hot to out.cold", true},
	} {
		f, err := network.ParseFault(sound, tt.fault)
		if err != nil {
			t.Fatal(err)
		}
		unit := f.Apply(sound)
		e := suspect.Evidence{Circuit: sound, Rig: compare.Rig{Ends: ends}, ToneHz: 997}
		for _, hz := range []float64{997, 5000, 20000} {
			p := suspect.Point{FreqHz: hz, LossDB: min(unit.LossDB(ends, hz), 90), StdUDB: 0.02}
			p.AtLeast = p.LossDB == 90
			e.Loss = append(e.Loss, p)
		}
		all := suspect.Rank(e).Suspects
		if len(all) == 0 || !slices.ContainsFunc(all[0].Faults, func(f suspect.Fault) bool { return f.String() == tt.fault }) {
			t.Errorf("%s: the first suspect is not it: %+v", tt.fault, all)
			continue
		}
		if got := confirmOf(all[0], sound, false); (len(got.Pins) == 2) != tt.pins || !strings.Contains(got.How, tt.says) {
			t.Errorf("%s: pins %q, %q; want pins %v and %q", tt.fault, got.Pins, got.How, tt.pins, tt.says)
		}
	}
}
