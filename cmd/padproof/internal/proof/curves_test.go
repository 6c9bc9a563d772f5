package proof

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"padproof/compare/network"
)

// An L of 900 and 100 ohm between 0 and a very high load loses 20 dB at any
// frequency; at 1 % either way 20 lg(1 + 909/99) and 20 lg(1 + 891/101) at worst.
func TestSpreadCurve(t *testing.T) {
	c, err := network.New("L", []network.Part{{Ref: "R1", Value: 900, TolFrac: 0.01}, {Ref: "R2", Value: 100, TolFrac: 0.01}})
	if err != nil {
		t.Fatal(err)
	}
	curve := spreadCurve(c, network.Ends{LoadOhms: 1e12, Drive: network.DriveUnbalanced, Sense: network.SenseUnbalanced})
	if len(curve) != 31 {
		t.Fatalf("%d points, want the 31 thirds of an octave from 20 Hz to 20 kHz", len(curve))
	}
	worstLow, worstHigh := 20*math.Log10(1+891./101), 20*math.Log10(1+909./99)
	for i, p := range curve {
		if want := 20 * math.Pow(10, float64(i)/10); math.Abs(float64(p.FreqHz)/want-1) > 0.003 { // nominal 20 Hz is 19.95
			t.Errorf("point %d at %g Hz, want %g", i, p.FreqHz, want)
		}
		s := p.Spread
		for what, pair := range map[string][2]float64{
			"loss": {float64(p.LossDB), 20}, "worst low": {float64(s.WorstLow), worstLow}, "worst high": {float64(s.WorstHigh), worstHigh},
		} {
			if math.Abs(pair[0]-pair[1]) > 1e-4 {
				t.Errorf("%s at %.0f Hz = %.5f, want %.5f", what, p.FreqHz, pair[0], pair[1])
			}
		}
		if !(s.WorstLow < s.Low95 && s.Low95 < p.LossDB && p.LossDB < s.High95 && s.High95 < s.WorstHigh) {
			t.Errorf("spread at %.0f Hz is out of order: %+v", p.FreqHz, s)
		}
	}
	d := drawnOf(c)
	if d.Network != "L" || !d.Unbalanced || len(d.Parts) != 2 || d.Parts[0].Code != "900" || d.Parts[1].A != "out.hot" || d.Parts[1].B != "screen" {
		t.Errorf("drawnOf = %+v", d)
	}
	if drawnOf(nil) != nil {
		t.Error("drawnOf(nil) is something")
	}
}

// A long track is thinned to a bounded number of points, in order, and keeps every
// lone extreme.
func TestThinned(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 1))
	for _, n := range []int{0, 1, 1999, 2000, 2001, 72000} {
		x, y := make([]float64, n), make([]float64, n)
		for i := range x {
			x[i], y[i] = float64(i), rng.Float64()
		}
		for range min(n, 20) {
			y[rng.IntN(n)] = float64(rng.IntN(2)*20 - 10) // far up or down
		}
		keptX, keptY := thinned(x, y)
		if len(keptX) != len(keptY) || len(keptX) > 2*levelPoints || n <= 2*levelPoints && len(keptX) != n {
			t.Errorf("%d points thinned to %d", n, len(keptX))
		}
		if !slices.IsSorted(keptX) {
			t.Errorf("%d points thinned out of order", n)
		}
		if n > 0 && (slices.Max(keptY) != slices.Max(y) || slices.Min(keptY) != slices.Min(y)) {
			t.Errorf("%d points lost an extreme", n)
		}
	}
}
