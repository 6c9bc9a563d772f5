package suspect

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"

	"padproof/compare"
	"padproof/compare/network"
)

var inf, nan = math.Inf(1), math.NaN()

// anyDrawing draws a drawing that need not make sense: links, open parts, capacitors and inductors of
// any value.
func anyDrawing(rng *rand.Rand) *network.Circuit {
	extremes := []float64{0, 0, 1e-300, 1e-12, 1e-3, 1, 150, 680, 1e4, 1e12, 1e300, inf}
	name := network.Networks()[rng.IntN(8)]
	var parts []network.Part
	for _, ref := range network.Refs(name) {
		parts = append(parts, network.Part{Ref: ref, Value: 1, TolFrac: rng.Float64()})
	}
	nodes := []string{"in.hot", "in.cold", "out.hot", "out.cold", "screen", "mid", "a", "b"}
	for i := range 1 + rng.IntN(5) {
		a, b := rng.IntN(len(nodes)), rng.IntN(len(nodes)-1)
		if b >= a {
			b++
		}
		parts = append(parts, network.Part{Ref: fmt.Sprint("X", i), Kind: network.Kind(rng.IntN(3)), Value: 1, TolFrac: rng.Float64(), A: nodes[a], B: nodes[b]})
	}
	c, err := network.New(name, parts)
	if err != nil {
		return anyDrawing(rng)
	}
	for _, p := range c.Parts() {
		c = c.With(p.Ref, extremes[rng.IntN(len(extremes))])
	}
	return c
}

func anyEvidence(rng *rand.Rand) Evidence {
	odd := func(usual ...float64) float64 {
		return append(usual, usual[0], usual[0], nan, -1, 0, 1e-300, 1e300, inf, -inf)[rng.IntN(len(usual)+9)]
	}
	e := Evidence{
		Circuit: anyDrawing(rng), ToneHz: odd(997), GainStdUDB: odd(0.03), Polarity: rng.IntN(3) - 1,
		Rig: compare.Rig{
			Ends: network.Ends{
				SourceOhms: odd(100, 600), LoadOhms: odd(1e4, 600), CableFarads: odd(3e-10),
				Drive: network.Drive(rng.IntN(4)), Sense: network.Sense(rng.IntN(3)),
			},
			SourceTolFrac: odd(0.1, 0.5), LoadTolFrac: odd(0.1, 0.5), CableTolFarads: odd(1e-10),
		},
		Loss: []Point{{FreqHz: odd(997), LossDB: odd(14, 0, -3), StdUDB: odd(0.01), AtLeast: rng.IntN(4) == 0}},
	}
	if rng.IntN(2) == 0 {
		e.Service = network.Ends{SourceOhms: odd(600), LoadOhms: odd(600)}
	}
	for range rng.IntN(5) {
		e.Response = append(e.Response, Point{FreqHz: odd(20, 20000), LossDB: odd(0.1), StdUDB: odd(0.02), AtLeast: rng.IntN(6) == 0})
	}
	if rng.IntN(2) == 0 {
		e.Legs = &Legs{FreqHz: odd(997), LoadOhms: odd(5000), OverDB: odd(0.1, 40), StdUDB: odd(0.02), PhaseDeg: odd(180), PhaseStdUDeg: odd(1),
			DeadHot: rng.IntN(3) == 0, DeadCold: rng.IntN(3) == 0, Before: rng.IntN(2) == 0}
	}
	if rng.IntN(3) == 0 {
		e.Noise = &Noise{PadVV: odd(1e-12), RigVV: odd(1e-13), PadStdUFrac: odd(0.01), RigStdUFrac: odd(0.01),
			Bands: []network.Band{{LowHz: odd(20), HighHz: odd(20000)}},
			Bench: compare.NoiseBench{Ends: e.Rig.Ends, CalibrationUDB: odd(0.2), GainDriftDB: odd(0.02), HighAmps: odd(2e-12), PadPlugOhms: odd(150), NoisePlugOhms: odd(0), TempC: odd(21)}}
	}
	if rng.IntN(3) == 0 {
		e.Hum = &Hum{UnitDBu: odd(-70), RigDBu: odd(-100), UDB: odd(1)}
	}
	for range rng.IntN(3) {
		readings := compare.Readings(e.Circuit)
		r := readings[rng.IntN(len(readings))]
		e.Ohms = append(e.Ohms, Ohms{PinA: r.PinA, PinB: r.PinB, Joined: r.Joined, Ohms: odd(330, 1), TolFrac: odd(0.005), PlusOhms: odd(0.2)})
	}
	return e
}

// Whatever is measured of whatever drawing, weights are shares that add up to no more than 1, every
// suspect has a fault, and no figure that must be one is NaN.
func TestWeightsAreShares(t *testing.T) {
	rng := rand.New(rand.NewPCG(9, 4))
	for n := range 500 {
		e := anyEvidence(rng)
		checkRanking(t, n, e, Rank(e))
	}
}

func checkRanking(t *testing.T, n int, e Evidence, r Ranking) {
	t.Helper()
	share := func(what string, x float64) {
		t.Helper()
		if !(x >= 0 && x <= 1+1e-9) {
			t.Errorf("evidence %d: %s = %v of %+v, want 0 to 1", n, what, x, e)
		}
	}
	sum := r.NoneWeight + r.Sound
	share("NoneWeight", r.NoneWeight)
	share("Sound", r.Sound)
	share("SoundP", r.SoundP)
	last := inf
	for _, s := range r.Suspects {
		share("Weight", s.Weight)
		sum += s.Weight
		if s.Weight > last || len(s.Faults) == 0 || s.Distinct < 1 || s.Distinct > len(s.Faults) {
			t.Errorf("evidence %d: suspect %+v after one of weight %v", n, s, last)
		}
		last = s.Weight
		for _, f := range s.Faults {
			if math.IsNaN(f.Value) || math.IsInf(f.Value, 0) || f.End != NoEnd && !(f.Ratio > 0 && f.Ratio < inf) {
				t.Errorf("evidence %d: fault %+v", n, f)
			}
		}
		if len(s.Faults) == 0 || s.Faults[0].End == NoEnd && s.Faults[0].Form != network.PartDrifted {
			continue
		}
		if math.IsNaN(s.DriftFrac) || math.IsInf(s.DriftFrac, 0) || !(s.DriftStdU >= 0) || math.IsInf(s.DriftStdU, 0) {
			t.Errorf("evidence %d: %v, DriftFrac %v ± %v", n, s.Faults[0], s.DriftFrac, s.DriftStdU)
		}
	}
	share("the sum of all", sum)
}

func TestNothingMeasured(t *testing.T) {
	for _, e := range []Evidence{{}, {Circuit: circuit(t, "U", 0.01, 560, 560, 330)}} {
		if r := Rank(e); len(r.Suspects) > 0 || r.SoundP != 1 {
			t.Errorf("Rank(nothing) = %+v, want no suspects and 1", r)
		}
	}
}

func FuzzRank(f *testing.F) {
	f.Add(uint64(1))
	f.Fuzz(func(t *testing.T, seed uint64) {
		e := anyEvidence(rand.New(rand.NewPCG(seed, 4)))
		checkRanking(t, int(seed), e, Rank(e))
	})
}
