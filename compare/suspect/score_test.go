package suspect

import (
	"math"
	"math/cmplx"
	"testing"

	"padproof/compare"
	"padproof/compare/network"
)

// One error of the source moves the loss at every tone alike: two tones that depart alike are a sound
// unit's, two that depart apart are not.
func TestErrorsInCommon(t *testing.T) {
	e := line(t, 0)
	e.Rig.SourceTolFrac = 0.1
	p := func(first, second float64) float64 {
		c, stated := e.Circuit, e.Circuit.LossDB(e.Rig.Ends, 997)
		off := c.LossDB(network.Ends{SourceOhms: 108, LoadOhms: 10000}, 997) - stated
		e.Loss = []Point{{FreqHz: 200, LossDB: stated + first*off, StdUDB: 0.003}, {FreqHz: 2000, LossDB: stated + second*off, StdUDB: 0.003}}
		return Rank(e).SoundP
	}
	if alike, apart := p(1, 1), p(1, -1); alike < 0.2 || apart > 1e-6 {
		t.Errorf("p = %v alike and %v apart, want over 0.2 and next to nothing", alike, apart)
	}
}

// What each figure does to the ratio of with and without a pad, against differences.
func TestPredictionSlopes(t *testing.T) {
	e := twelve(t)
	s := newSearch(e)
	p := s.predict(e.Circuit, s.ends, s.straights(s.ends))
	const step = 1e-4
	at := func(move func(e *network.Ends, by float64), by float64) complex128 {
		ends := s.ends
		move(&ends, 1+by)
		return e.Circuit.Transfer(ends, 997)
	}
	for k, move := range map[int]func(e *network.Ends, by float64){
		sourceParam: func(e *network.Ends, by float64) { e.SourceOhms *= by },
		loadParam:   func(e *network.Ends, by float64) { e.LoadOhms *= by },
		cableParam:  func(e *network.Ends, by float64) { e.CableFarads *= by },
	} {
		want := (at(move, step) - at(move, -step)) / (2 * step)
		if got := p.by[s.toneAt*s.params+s.parts+k]; cmplx.Abs(got-want) > 1e-7 {
			t.Errorf("slope by end %d = %v, want %v", k, got, want)
		}
	}
}

// A second part that is off adds its slopes to the covariance. Both ways to that give the same.
func TestSecondPartByCovariance(t *testing.T) {
	e := twelve(t)
	s := newSearch(e)
	w := newScorer(s)
	p := s.predict(e.Circuit.With("R1", 300), s.ends, s.straights(s.ends))
	w.score(p)
	got := w.withSecond(p)
	var all []float64
	for part := range s.parts {
		for _, size := range secondSizes {
			q := p.clone()
			q.stdU[part] = math.Hypot(q.stdU[part], size)
			w.fill(q)
			w.fill(p) // what is nil but for doubts hangs on them too: keep that as it was
			for i := range w.rows {
				for k := range w.params {
					w.j[i*w.params+k] = w.raw[i*w.params+k] * q.stdU[k]
				}
			}
			all = append(all, w.gaussian()+w.bounds()+w.polarity(p)-math.Log(float64(s.parts*len(secondSizes))))
		}
	}
	if want := logSum(all); math.Abs(got-want) > 1e-6*math.Abs(want) {
		t.Errorf("withSecond = %v, want %v", got, want)
	}
}

// The prior of an amount is 1 in all: where nothing tells one from another, neither is anything lost.
func TestAmountsAddUp(t *testing.T) {
	s := newSearch(line(t, 14))
	for _, f := range []Fault{{Fault: network.Fault{Form: network.PartDrifted, Ref: "R1"}}, {End: SourceEnd}, {End: LoadEnd}} {
		in := integrate(s.sides(f, func(float64) float64 { return 0 }))
		if math.Abs(in.logScore) > 1e-9 {
			t.Errorf("%v: the prior adds up to %v, want 1", f, math.Exp(in.logScore))
		}
	}
	// A peak far narrower than the steps: the integral of a normal density over t, times the prior there.
	const at, stdU = 0.5, 0.0004
	f := Fault{Fault: network.Fault{Form: network.PartDrifted, Ref: "R1"}}
	in := integrate(s.sides(f, func(t float64) float64 { z := (t - at) / stdU; return -z * z / 2 }))
	want := math.Log(stdU * math.Sqrt(2*math.Pi) / at / math.Log(mostDrift/leastDrift) / 2)
	if math.Abs(in.logScore-want) > 0.03 || math.Abs(in.t-at) > stdU/10 || math.Abs(in.tStdU-stdU) > stdU/10 {
		t.Errorf("narrow peak: %v, at %v ± %v, want %v, %v ± %v", in.logScore, in.t, in.tStdU, want, at, stdU)
	}
}

// Two series parts of a U pad drift alike in all that the loss can tell; they are two faults.
func TestDriftsOfTwoPartsAreTwo(t *testing.T) {
	e := line(t, 0)
	e.Loss[0].LossDB = e.Circuit.With("R1", 1100).LossDB(e.Rig.Ends, 997)
	for _, s := range Rank(e).Suspects {
		refs := map[string]bool{}
		for _, f := range s.Faults {
			for _, ref := range f.Parts() {
				refs[ref] = true
			}
		}
		if s.Distinct < len(refs) {
			t.Errorf("%s: %d distinct, want at least %d", words(s), s.Distinct, len(refs))
		}
	}
}

// Driven in the hot leg alone, a U pad with R3 short has half the hot voltage on both legs. Two dead
// legs rule that out.
func TestDeadLegs(t *testing.T) {
	e := line(t, 80)
	e.Loss[0].AtLeast = true
	e.Rig.Ends.Drive = network.DriveUnbalanced
	weight := func() (sum float64) {
		for _, s := range Rank(e).Suspects {
			for _, f := range s.Faults {
				if f.String() == "R3 short" {
					sum += s.Weight
				}
			}
		}
		return sum
	}
	if w := weight(); w < 0.02 {
		t.Errorf("weight of R3 short from the loss alone %v, want some", w)
	}
	e.Legs = &Legs{FreqHz: 997, LoadOhms: 5000, DeadHot: true, DeadCold: true, PhaseDeg: math.NaN()}
	if w := weight(); w > 0.01 {
		t.Errorf("weight of R3 short with both legs dead %v, want none", w)
	}
}

// More noise than thermal may have a cause of its own, less has none.
func TestNoiseIsOneSided(t *testing.T) {
	c := circuit(t, "U", 0.01, 560, 560, 330)
	ends := network.Ends{SourceOhms: 150, LoadOhms: 10000, Drive: network.DriveFloating, CableFarads: 300e-12}
	bands := []network.Band{{LowHz: 20, HighHz: 20000}}
	pad := c.ThermalNoise(ends, 293.15, bands)
	plug := c.StraightThermalNoise(network.Ends{SourceOhms: 1e-3, LoadOhms: 10000, Drive: network.DriveFloating, CableFarads: 300e-12}, 293.15, bands)
	const rig = 1e-13
	n := Noise{
		Bench: compare.NoiseBench{Ends: ends, PadPlugOhms: 150, TempC: 20, CalibrationUDB: 0.1}, Bands: bands,
		RigVV: rig, PadStdUFrac: 0.002, RigStdUFrac: 0.002,
	}
	score := func(times float64) float64 {
		n.PadVV = rig + times*(pad.UnitVV-plug.UnitVV)
		s := newNoiseScale(&n)
		predicted := s.predict(c, 1)
		if want := pad.UnitVV - plug.UnitVV; math.Abs(predicted.UnitVV/want-1) > 1e-4 {
			t.Errorf("thermal noise by few frequencies = %v V², want %v (network.ThermalNoise)", predicted.UnitVV, want)
		}
		return math.Exp(s.score(predicted))
	}
	right, more, less := score(1), score(8), score(0.25)
	if !(right > 3) || math.Abs(more-otherNoise-lessNoise) > 1e-6 || math.Abs(less-lessNoise) > 1e-6 {
		t.Errorf("likelihood of thermal noise %v, of more %v, of less %v, want over 3, %v and %v", right, more, less, otherNoise+lessNoise, lessNoise)
	}
}
