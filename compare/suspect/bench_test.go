package suspect

import (
	"math"
	"testing"
	"time"

	"padproof/compare"
	"padproof/compare/network"
)

// twelve is a drawing of twelve parts with all that takes can show of a unit of it, one part of which
// has drifted.
func twelve(t testing.TB) Evidence {
	t.Helper()
	r := func(ref string, ohms float64, a, b string) network.Part {
		return network.Part{Ref: ref, Value: ohms, TolFrac: 0.01, A: a, B: b}
	}
	c, err := network.New(network.Custom, []network.Part{
		r("R1", 220, "in.hot", "a.hot"), r("R2", 220, "in.cold", "a.cold"), r("R3", 1000, "a.hot", "a.cold"),
		r("R4", 330, "a.hot", "b.hot"), r("R5", 330, "a.cold", "b.cold"), r("R6", 680, "b.hot", "b.cold"),
		r("R7", 150, "b.hot", "out.hot"), r("R8", 150, "b.cold", "out.cold"),
		r("R9", 4700, "a.hot", "screen"), r("R10", 4700, "a.cold", "screen"),
		{Ref: "C1", Kind: network.Capacitor, Value: 470e-12, TolFrac: 0.05, A: "out.hot", B: "out.cold"},
		{Ref: "C2", Kind: network.Capacitor, Value: 10e-9, TolFrac: 0.05, A: "b.hot", B: "b.cold"},
	})
	if err != nil {
		t.Fatal(err)
	}
	unit := c.With("R4", 330*1.4)
	ends := network.Ends{SourceOhms: 100, LoadOhms: 10000, CableFarads: 300e-12}
	e := Evidence{
		Circuit: c, ToneHz: 997, GainStdUDB: 0.03, Polarity: 1,
		Rig:  compare.Rig{Ends: ends, SourceTolFrac: 0.1, LoadTolFrac: 0.05, CableTolFarads: 15e-12},
		Loss: []Point{{FreqHz: 997, LossDB: unit.LossDB(ends, 997), StdUDB: 0.01}},
	}
	for i := range 20 {
		hz := 20 * math.Pow(1000, float64(i)/19)
		e.Response = append(e.Response, Point{FreqHz: hz, LossDB: unit.LossDB(ends, hz) - unit.LossDB(ends, 997), StdUDB: 0.01})
	}
	_, legs := unit.LegVolts(ends, 5000, 997)
	e.Legs = &Legs{FreqHz: 997, LoadOhms: 5000, OverDB: 20 * math.Log10(abs(legs.Hot)/abs(legs.Cold)), StdUDB: 0.02, PhaseDeg: math.NaN()}
	return e
}

func abs(z complex128) float64 { return math.Hypot(real(z), imag(z)) }

func BenchmarkRank(b *testing.B) {
	e := twelve(b)
	b.ReportAllocs()
	for range b.N {
		Rank(e)
	}
}

// The search of twelve parts is to take 50 ms; the test leaves room for a slow machine that does
// something else meanwhile.
func TestRankIsQuick(t *testing.T) {
	const most = 400 * time.Millisecond
	e := twelve(t)
	least := time.Duration(math.MaxInt64)
	for range 5 {
		start := time.Now()
		r := Rank(e)
		least = min(least, time.Since(start))
		if got := r.Suspects[0].Faults[0].String(); got != "R4 drifted +40 %" {
			t.Errorf("first suspect = %s, want R4 drifted +40 %%", got)
		}
	}
	t.Logf("whole search of twelve parts, 20 response points and legs: %v", least)
	if least > most {
		t.Errorf("the search took %v, want 50 ms, at most %v", least, most)
	}
}
