package suspect

import (
	"math"
	"slices"
	"strings"
	"testing"

	"padproof/compare"
	"padproof/compare/network"
)

func circuit(t testing.TB, name string, tolFrac float64, ohms ...float64) *network.Circuit {
	t.Helper()
	var parts []network.Part
	for i, ref := range network.Refs(name) {
		parts = append(parts, network.Part{Ref: ref, Value: ohms[i], TolFrac: tolFrac})
	}
	c, err := network.New(name, parts)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// line is a U pad of Saltmarsh between 100 ohms and 10 kilohms, with the loss that it shows.
func line(t testing.TB, lossDB float64) Evidence {
	return Evidence{
		Circuit: circuit(t, "U", 0.01, 560, 560, 330),
		Rig:     compare.Rig{Ends: network.Ends{SourceOhms: 100, LoadOhms: 10000}, SourceTolFrac: 0.01, LoadTolFrac: 0.01},
		Loss:    []Point{{FreqHz: 997, LossDB: lossDB, StdUDB: 0.01}},
		ToneHz:  997,
	}
}

func words(s Suspect) string {
	var all []string
	for _, f := range s.Faults {
		all = append(all, f.String())
	}
	return strings.Join(all, " or ")
}

func first(t testing.TB, r Ranking, want string) Suspect {
	t.Helper()
	if len(r.Suspects) == 0 {
		t.Fatalf("no suspects (sound %v, none %v), want %s", r.Sound, r.NoneWeight, want)
	}
	if got := words(r.Suspects[0]); got != want {
		t.Errorf("first suspect = %s (weight %.3f), want %s", got, r.Suspects[0].Weight, want)
	}
	return r.Suspects[0]
}

// R3 of the U pad open: source, R1, R2 and load are in series, so the loss is
// 20 lg (100 + 560 + 560 + 10000)/(100 + 10000) = 0.914 dB. A sound unit reads 330 ohms at the output
// and this one none.
func TestShuntOpenByHand(t *testing.T) {
	lossDB := 20 * math.Log10(11220.0/10100)
	s := first(t, Rank(line(t, lossDB)), "R3 open")
	if s.Weight < 0.6 || math.Abs(s.BenchLossDB-lossDB) > 1e-9 {
		t.Errorf("weight %v, loss %v, want over 0.6 and %v", s.Weight, s.BenchLossDB, lossDB)
	}
	c := s.Confirm
	if c.Reading.PinA != "out.hot" || c.Reading.PinB != "out.cold" || math.Abs(c.Reading.GoodOhms-330) > 1e-9 || !math.IsInf(c.Reading.WrongOhms, 1) {
		t.Errorf("confirm by %+v, want out.hot to out.cold, 330 Ω and open", c.Reading)
	}
}

// R1 open, driven and read balanced: the cold leg, -0.5 V behind 50 + 560 ohms, meets 5000 ohms beside
// 330 + 5000; R3 carries 5000/5330 of it over to hot. Straight through there is 10000/10100 V. The
// mirror image, R2 open, loses as much; the legs tell them apart.
func TestSeriesOpenByHand(t *testing.T) {
	beside := 1 / (1/5000.0 + 1/5330.0)
	cold := 0.5 * beside / (beside + 610)
	hot := cold * 5000 / 5330
	e := line(t, 20*math.Log10(10000.0/10100/(cold-hot)))
	s := first(t, Rank(e), "R1 open or hot leg open at in or R2 open or cold leg open at in")
	if s.Distinct != 2 {
		t.Errorf("%d distinct faults, want 2: R1 open is hot leg open at in", s.Distinct)
	}
	e.Legs = &Legs{FreqHz: 997, LoadOhms: 5000, OverDB: 20 * math.Log10(hot/cold), StdUDB: 0.02, PhaseDeg: 0, PhaseStdUDeg: 1}
	first(t, Rank(e), "R1 open or hot leg open at in")
	e.Legs.OverDB *= -1
	first(t, Rank(e), "R2 open or cold leg open at in")
}

// A bridge of solder across R3 leaves nothing. With the dead output the reading that parts a short from
// opens is taken in, and settles it.
func TestOhmsSettle(t *testing.T) {
	e := line(t, 80)
	e.Loss[0].AtLeast = true
	e.Rig.Ends.Drive, e.Rig.Ends.Sense = network.DriveFloating, network.SenseFloating
	r := Rank(e)
	if len(r.Suspects) == 0 || r.SoundP > 1e-6 {
		t.Fatalf("suspects %v, p %v, want some and next to nothing", r.Suspects, r.SoundP)
	}
	e.Ohms = []Ohms{{PinA: "in.hot", PinB: "in.cold", Ohms: 1122}} // R1 and R2 alone
	s := first(t, Rank(e), "R3 short")
	if s.Weight < 0.7 {
		t.Errorf("weight %v, want over 0.7", s.Weight)
	}
	e.Ohms = []Ohms{{PinA: "in.hot", PinB: "in.cold", Ohms: math.Inf(1)}, {PinA: "in.hot", PinB: "out.hot", Ohms: math.Inf(1)}}
	first(t, Rank(e), "R1 open or hot leg open at in")
}

// A sound unit is not suspected, whatever of its tolerance it uses.
func TestSoundDrawsNone(t *testing.T) {
	c := circuit(t, "U", 0.01, 560, 560, 330)
	for _, units := range []*network.Circuit{c, c.With("R1", 564), c.With("R3", 328)} {
		e := line(t, units.LossDB(network.Ends{SourceOhms: 100, LoadOhms: 10000}, 997))
		if r := Rank(e); r.SoundP < 0.05 || r.Sound < 0.5 {
			t.Errorf("sound unit: p = %v, weight %v, want over 0.05 and 0.5", r.SoundP, r.Sound)
		}
	}
}

// The amount of a drift is found, from the closed form of U's loss: 20 lg of
// (100 + 1120 + Rp)/Rp · 10000/10100, Rp being R3 beside the load; by hand its slope at 330 ohms is some
// 0.07 dB for 1 %, and the parts and the bench, all 1 %, leave about 1 % open.
func TestDriftAmount(t *testing.T) {
	lossDB := func(r3 float64) float64 {
		rp := r3 * 10000 / (r3 + 10000)
		return 20 * math.Log10((1220+rp)/rp*10000/10100)
	}
	for _, frac := range []float64{-0.4, -0.2, 0.24, 0.6, 1.5} {
		e := line(t, lossDB(330*(1+frac)))
		e.Ohms = []Ohms{{PinA: "in.hot", PinB: "out.hot", Ohms: 560}, {PinA: "in.cold", PinB: "out.cold", Ohms: 560}}
		r := Rank(e)
		s := r.Suspects[0]
		i := slices.IndexFunc(s.Faults, func(f Fault) bool { return f.End == NoEnd && f.Form == network.PartDrifted && f.Ref == "R3" })
		if i < 0 {
			t.Errorf("R3 off by %v: first suspect %v, want R3 in it", frac, words(s))
			continue
		}
		f := s.Faults[i]
		if math.Abs(f.Value-frac) > 0.02*(1+frac) {
			t.Errorf("R3 off by %v: found %v", frac, f)
		}
		if s.Faults[0].End == NoEnd && s.Faults[0].Form == network.PartDrifted && !(s.DriftStdU > 0.001 && s.DriftStdU < 0.03*(1+frac)) {
			t.Errorf("R3 off by %v: DriftStdU = %v, want around 0.01", frac, s.DriftStdU)
		}
	}
}

// A pad between matched ends does not care for its source alone; straight through counts too. With all
// else known, only the source explains a loss that depends on it: 20 lg (Rs + 1120 + Rp)/Rp times
// 10000/(Rs + 10000), and the readings find every part sound.
func TestSourceNotAsStated(t *testing.T) {
	rp := 330.0 * 10000 / 10330
	source := 400.0
	e := line(t, 20*math.Log10((source+1120+rp)/rp*10000/(source+10000)))
	e.Ohms = []Ohms{
		{PinA: "in.hot", PinB: "out.hot", Ohms: 560}, {PinA: "in.cold", PinB: "out.cold", Ohms: 560}, {PinA: "out.hot", PinB: "out.cold", Ohms: 330},
	}
	s := first(t, Rank(e), "source not as stated")
	if f := s.Faults[0]; math.Abs(f.Ratio-4) > 0.3 || math.Abs(s.DriftFrac-3) > 0.3 {
		t.Errorf("ratio %v, DriftFrac %v, want about 4 and 3", f.Ratio, s.DriftFrac)
	}
	if s.Confirm.Reading.PinA == "" {
		t.Error("no reading to rule out others by")
	}
}

func TestPolarityTellsCrossedLegs(t *testing.T) {
	c := circuit(t, "U", 0.01, 560, 560, 330)
	e := line(t, c.LossDB(network.Ends{SourceOhms: 100, LoadOhms: 10000}, 997))
	e.Polarity = -1
	r := Rank(e)
	first(t, r, "legs crossed")
	if r.SoundP > 0.001 {
		t.Errorf("p = %v of a sound unit turned over, want next to nothing", r.SoundP)
	}
}

// Hum over the rig's own raises legs that hang over a short, which leaves none hanging.
func TestHumCounts(t *testing.T) {
	e := line(t, 80)
	e.Loss[0].AtLeast = true
	e.Rig.Ends.Drive, e.Rig.Ends.Sense = network.DriveFloating, network.SenseFloating
	share := func(h *Hum) float64 { // of R3 short against R1 open
		s := newSearch(e)
		s.e.Hum = h
		straights := s.straights(s.ends)
		all := s.hypotheses()
		s.scoreAll(all, s.predict(e.Circuit, s.ends, straights), straights)
		at := func(words string) float64 {
			return all[slices.IndexFunc(all, func(h *hypothesis) bool { return h.fault.String() == words })].logScore
		}
		return math.Exp(at("R3 short") - at("R1 open"))
	}
	hums, quiet := share(&Hum{UnitDBu: -70, RigDBu: -100, UDB: 1}), share(&Hum{UnitDBu: -100, RigDBu: -100, UDB: 1})
	none := share(nil)
	if wantHums, wantQuiet := none*humElse/humWithLoose, none*(1-humElse)/(1-humWithLoose); math.Abs(hums/wantHums-1) > 1e-9 || math.Abs(quiet/wantQuiet-1) > 1e-9 {
		t.Errorf("R3 short against R1 open: with hum %v, without %v, want %v and %v", hums, quiet, wantHums, wantQuiet)
	}
	if unknown := share(&Hum{UnitDBu: -70, RigDBu: nan}); unknown != none {
		t.Errorf("with a rig's hum that is not known %v, want %v", unknown, none)
	}
}

// R5 of an H pad short: both sides of the output lie on one point, and only what the tolerances leave of
// the balance comes through, here 1 % of R1. That is no other fault for it.
func TestOutputInBalance(t *testing.T) {
	c := circuit(t, "H", 0.01, 240, 240, 240, 240, 120)
	ends := network.Ends{SourceOhms: 600, LoadOhms: 600, Sense: network.SenseUnbalanced}
	unit := c.With("R5", 0).With("R1", 242.4)
	lossDB := unit.LossDB(ends, 997)
	if !(lossDB > 50 && lossDB < 90) {
		t.Fatalf("loss = %v, want what is left of a balance", lossDB)
	}
	r := Rank(Evidence{
		Circuit: c, Rig: compare.Rig{Ends: ends, SourceTolFrac: 0.05, LoadTolFrac: 0.02},
		Loss: []Point{{FreqHz: 997, LossDB: lossDB, StdUDB: 0.05}},
	})
	first(t, r, "R5 short")
}

// A floating drive puts the legs where their loads have them: hot over cold straight through is their
// ratio. legs-before takes that off, also where the unit does not have it: with cold down to screen at
// in, hot is what it would be between loads of any ratio. Here the hot load is 4 % low.
func TestLegsBefore(t *testing.T) {
	c := circuit(t, "U", 0.01, 560, 560, 330)
	ends := network.Ends{SourceOhms: 600, LoadOhms: 600, Drive: network.DriveFloating}
	fault := network.Fault{Form: network.LegToScreen, Pin: "in.cold"}
	parts := append(fault.Apply(c).Parts(), network.Part{Ref: "low", Value: 300 * 0.96 / 0.04, A: "out.hot", B: "screen"})
	unit, err := network.New(network.Custom, parts)
	if err != nil {
		t.Fatal(err)
	}
	_, legs := unit.LegVolts(ends, 300, 997)
	e := Evidence{
		Circuit: c, Rig: compare.Rig{Ends: ends, SourceTolFrac: 0.01, LoadTolFrac: 0.05},
		Loss: []Point{{FreqHz: 997, LossDB: fault.Apply(c).LossDB(ends, 997), StdUDB: 0.01}},
		Legs: &Legs{FreqHz: 997, LoadOhms: 300, StdUDB: 0.01, PhaseDeg: math.NaN(), Before: true},
	}
	e.Legs.OverDB = 20*math.Log10(abs(legs.Hot)/abs(legs.Cold)) - 20*math.Log10(0.96)
	first(t, Rank(e), fault.String())
	chi := func() float64 {
		s := newSearch(e)
		w := newScorer(s)
		w.score(s.predict(fault.Apply(c), ends, s.straights(ends)))
		return w.lastChi
	}
	known := chi()
	e.Legs.Before = false
	if unknown := chi(); !(known < 6 && unknown > 2*known) {
		t.Errorf("chi-square of the true fault = %v for two figures, without legs-before %v, want under 6, and over twice as much", known, unknown)
	}
}

// A reading that was taken is not asked for again.
func TestReadingNotTakenYet(t *testing.T) {
	c := circuit(t, "U", 0.01, 560, 560, 330)
	ends := network.Ends{SourceOhms: 100, LoadOhms: 10000}
	e := Evidence{Circuit: c, Rig: compare.Rig{Ends: ends}, Loss: []Point{{FreqHz: 997, LossDB: c.With("R3", 370).LossDB(ends, 997), StdUDB: 0.02}}}
	for range len(compare.Readings(c)) {
		r := Rank(e).Suspects[0].Confirm.Reading
		for _, o := range e.Ohms {
			if o.PinA == r.PinA && o.PinB == r.PinB && o.Joined == r.Joined {
				t.Fatalf("after %d readings %s is asked for again", len(e.Ohms), r.How())
			}
		}
		e.Ohms = append(e.Ohms, Ohms{PinA: r.PinA, PinB: r.PinB, Joined: r.Joined, Ohms: r.On(c.With("R3", 370))})
	}
	if got := Rank(e).Suspects[0].Confirm; got.Reading.PinA != "" || got.Tells() {
		t.Errorf("with every reading taken %s is asked for", got.Reading.How())
	}
}
