package network

import (
	"math"
	"math/cmplx"
	"math/rand/v2"
	"testing"
)

// Every slope against the central difference of the figure itself, on circuits drawn at random.
func TestSlopesAreDifferences(t *testing.T) {
	rng := rand.New(rand.NewPCG(4, 1))
	const step = 1e-4
	for n := range 300 {
		c := sampleCircuit(rng)
		e := Ends{SourceOhms: 50 + 500*rng.Float64(), Drive: Drive(rng.IntN(4)), LoadOhms: 1000 + 9000*rng.Float64(), Sense: Sense(rng.IntN(3)), CableFarads: 1e-9 * rng.Float64()}
		freqHz := []float64{50, 997, 15000}[rng.IntN(3)]
		check := func(what string, got complex128, at func(by float64) complex128) {
			t.Helper()
			want := (at(1+step) - at(1-step)) / (2 * step)
			if cmplx.Abs(got-want) > 1e-6*(cmplx.Abs(want)+cmplx.Abs(at(1))) {
				t.Errorf("circuit %d (%s): slope by %s = %v, want %v", n, c.Name(), what, got, want)
			}
		}
		load := func(c *Circuit, e Ends) complex128 {
			_, v := c.LoadVolts(e, freqHz)
			return v
		}
		got := c.LoadSlope(e, freqHz, nil)
		if v := load(c, e); cmplx.Abs(got.At-v) > 1e-12*cmplx.Abs(v) {
			t.Errorf("circuit %d: LoadSlope.At = %v, want %v", n, got.At, v)
		}
		for i, p := range c.Parts() {
			check(p.Ref, got.Parts[i], func(by float64) complex128 { return load(c.With(p.Ref, p.Value*by), e) })
		}
		bySource := func(by float64) Ends { o := e; o.SourceOhms *= by; return o }
		byLoad := func(by float64) Ends { o := e; o.LoadOhms *= by; return o }
		byCable := func(by float64) Ends { o := e; o.CableFarads *= by; return o }
		check("source", got.Source, func(by float64) complex128 { return load(c, bySource(by)) })
		check("load", got.Load, func(by float64) complex128 { return load(c, byLoad(by)) })
		check("cable", got.Cable, func(by float64) complex128 { return load(c, byCable(by)) })
		straight := c.StraightSlope(e, freqHz)
		check("source straight", straight.Source, func(by float64) complex128 {
			v, _ := c.LoadVolts(bySource(by), freqHz)
			return v
		})

		hot, cold := c.LegSlopes(e, 5000, freqHz)
		check("both leg loads on hot", hot.Load+hot.ColdLoad, func(by float64) complex128 {
			_, l := c.LegVolts(e, 5000*by, freqHz)
			return l.Hot
		})
		check("both leg loads on cold", cold.Load+cold.ColdLoad, func(by float64) complex128 {
			_, l := c.LegVolts(e, 5000*by, freqHz)
			return l.Cold
		})
		for i, p := range c.Parts() {
			check(p.Ref+" on hot", hot.Parts[i], func(by float64) complex128 {
				_, l := c.With(p.Ref, p.Value*by).LegVolts(e, 5000, freqHz)
				return l.Hot
			})
		}

		straightHot, _ := c.StraightLegSlopes(e, 5000, freqHz)
		check("source on hot straight", straightHot.Source, func(by float64) complex128 {
			l, _ := c.LegVolts(bySource(by), 5000, freqHz)
			return l.Hot
		})

		for _, joined := range [][][2]string{nil, {{"out.hot", "out.cold"}}} {
			ohms, shares := c.OhmsSlope("in.hot", "in.cold", joined...)
			if want := c.Ohms("in.hot", "in.cold", joined...); ohms != want {
				t.Errorf("circuit %d: OhmsSlope = %v, want %v", n, ohms, want)
			}
			if math.IsInf(ohms, 1) {
				continue
			}
			for i, p := range c.Parts() {
				check(p.Ref+" on ohms", complex(shares[i], 0), func(by float64) complex128 {
					return complex(c.With(p.Ref, p.Value*by).Ohms("in.hot", "in.cold", joined...), 0)
				})
			}
		}
	}
}

// sampleCircuit draws a network with parts that matter, at times with a capacitor and an inductor.
func sampleCircuit(rng *rand.Rand) *Circuit {
	name := Networks()[rng.IntN(7)]
	var parts []Part
	for _, ref := range Refs(name) {
		parts = append(parts, Part{Ref: ref, Value: 20 * math.Pow(100, rng.Float64()), TolFrac: 0.01})
	}
	if rng.IntN(2) == 0 {
		parts = append(parts, Part{Ref: "C1", Kind: Capacitor, Value: 1e-8, A: "out.hot", B: "screen"})
	}
	if rng.IntN(3) == 0 {
		parts = append(parts, Part{Ref: "L1", Kind: Inductor, Value: 1e-2, A: "in.hot", B: "screen"})
	}
	c, err := New(name, parts)
	if err != nil {
		panic(err)
	}
	return c
}

// The shares of U between in.hot and in.cold are its three resistors in series, by hand; with the
// output joined R3 has none. One leg's load has no part in the other leg of two that are apart.
func TestSlopesByHand(t *testing.T) {
	c, err := New("U", []Part{{Ref: "R1", Value: 560}, {Ref: "R2", Value: 470}, {Ref: "R3", Value: 330}})
	if err != nil {
		t.Fatal(err)
	}
	ohms, parts := c.OhmsSlope("in.hot", "in.cold")
	for i, want := range []float64{560, 470, 330} {
		if math.Abs(parts[i]-want) > 1e-9 {
			t.Errorf("share of R%d of %v Ω = %v, want %v", i+1, ohms, parts[i], want)
		}
	}
	if _, parts = c.OhmsSlope("in.hot", "in.cold", [2]string{"out.hot", "out.cold"}); parts[2] != 0 {
		t.Errorf("share of R3, output joined = %v, want 0", parts[2])
	}
	// R3 open: hot is 0.5 V · 5000/(5000 + 560 + 50).
	hot, cold := c.With("R3", math.Inf(1)).LegSlopes(Ends{SourceOhms: 100, LoadOhms: 1e4}, 5000, 997)
	if want := 0.5 * 5000 / 5610; math.Abs(real(hot.At)-want) > 1e-12 || cmplx.Abs(hot.ColdLoad) > 1e-15 || cmplx.Abs(cold.Load) > 1e-15 {
		t.Errorf("hot = %v, want %v; by the cold load %v, want 0; cold by the hot load %v, want 0", hot.At, want, hot.ColdLoad, cold.Load)
	}
	if want := 0.5 * 5000 / 5610 * 610 / 5610; math.Abs(real(hot.Load)-want) > 1e-12 {
		t.Errorf("slope of hot by its load = %v, want %v", hot.Load, want)
	}
}
