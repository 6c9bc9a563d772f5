package network

import (
	"fmt"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"testing"
)

var inf = math.Inf(1)

// extremes are part values from link to open, with some that resonate at 159.2 Hz.
var extremes = []float64{0, 0, 5e-324, 1e-300, 1e-15, 1e-12, 1e-6, 1e-3, 1, 1, 150, 1e4, 1e12, 1e18, 1e300, math.MaxFloat64, inf, inf}

// anyCircuit draws a drawing that need not make sense.
func anyCircuit(rng *rand.Rand) *Circuit {
	name := Networks()[rng.IntN(8)]
	var parts []Part
	for _, ref := range Refs(name) {
		parts = append(parts, Part{Ref: ref, Value: 1, TolFrac: rng.Float64()})
	}
	nodes := append(terminalNames[:], "mid", "mid.hot", "a", "b", "c", "d")
	for i := range 1 + rng.IntN(8) {
		a, b := rng.IntN(len(nodes)), rng.IntN(len(nodes)-1)
		if b >= a {
			b++
		}
		parts = append(parts, Part{Ref: fmt.Sprint("X", i), Kind: Kind(rng.IntN(3)), Value: 1, TolFrac: rng.Float64(), A: nodes[a], B: nodes[b]})
	}
	c, err := New(name, parts)
	if err != nil {
		return anyCircuit(rng)
	}
	for _, p := range c.Parts() {
		c = c.With(p.Ref, extremes[rng.IntN(len(extremes))])
	}
	return c
}

func anyEnds(rng *rand.Rand) Ends {
	odd := []float64{math.NaN(), -1, 0, 1e-300, 1e-3, 100, 1e4, 1e12, 1e300, inf}
	return Ends{
		SourceOhms: odd[rng.IntN(len(odd))], Drive: Drive(rng.IntN(6) - 1),
		LoadOhms: odd[rng.IntN(len(odd))], Sense: Sense(rng.IntN(5) - 1),
		CableFarads: []float64{math.NaN(), -1, 0, 3e-10, 1, inf}[rng.IntN(6)],
	}
}

// No value of any part, and no ends, may give NaN, a gain without bound or a panic.
func TestNeverNaN(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	freqsHz := []float64{0, 60, 1 / (2 * math.Pi), 997, 1e300, -1, math.NaN(), inf}
	for n := range 4000 {
		c, e, f := anyCircuit(rng), anyEnds(rng), freqsHz[rng.IntN(len(freqsHz))]
		check := func(what string, xs ...float64) {
			for _, x := range xs {
				if math.IsNaN(x) || math.IsInf(x, -1) {
					t.Errorf("circuit %d: %s of %+v, %+v at %v Hz = %v", n, what, c.parts, e, f, xs)
					return
				}
			}
		}
		checkComplex := func(what string, zs ...complex128) {
			for _, z := range zs {
				if cmplx.IsNaN(z) || math.IsInf(imag(z), 0) {
					t.Errorf("circuit %d: %s of %+v, %+v at %v Hz = %v", n, what, c.parts, e, f, zs)
					return
				}
			}
		}
		check("LossDB", c.LossDB(e, f))
		straight, withPad := c.LoadVolts(e, f)
		checkComplex("LoadVolts", straight, withPad)
		if straight == 0 {
			t.Errorf("circuit %d: LoadVolts straight of %+v at %v Hz = 0", n, e, f)
		}
		legsStraight, legs := c.LegVolts(e, e.LoadOhms, f)
		checkComplex("LegVolts", legsStraight.Hot, legsStraight.Cold, legs.Hot, legs.Cold)
		checkComplex("InputImpedance", c.InputImpedance(e, f))
		checkComplex("OutputImpedance", c.OutputImpedance(e, f))
		check("Sensitivities", c.Sensitivities(e, f)...)
		ends := c.EndSensitivities(e, f)
		check("EndSensitivities", ends.SourceDB, ends.LoadDB, ends.CableDB)
		check("Dissipation", c.Dissipation(e, f, 1)...)
		check("Ohms", c.Ohms("in.hot", "out.cold"), c.Ohms("in.hot", "in.cold", [2]string{"out.hot", "out.cold"}))
		ph, _ := c.PhantomDrop(0.004)
		check("PhantomDrop", ph.Hot.LostVolts, ph.Hot.LeftVolts, ph.Cold.LostVolts, ph.Cold.LeftVolts, ph.FeedAmps)
		for _, p := range c.parts {
			for _, in := range c.ValuesForLoss(e, f, p.Ref, 10, 20) {
				check("ValuesForLoss", in.Low, in.High)
				if !(in.Low >= 0 && in.Low <= in.High) {
					t.Errorf("circuit %d: ValuesForLoss = %v", n, in)
				}
			}
		}
		if n%20 == 0 {
			low, high := c.WorstCase(e, f)
			check("WorstCase", low, high)
			s := c.Spread(e, f, 5, 1)
			check("Spread", s.MeanDB, s.SDDB, s.LowDB, s.HighDB, s.LeastDB, s.MostDB)
		}
	}
}
