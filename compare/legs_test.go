package compare

import (
	"math"
	"math/cmplx"
	"math/rand/v2"
	"strings"
	"testing"

	"padproof/analysis"
	"padproof/compare/network"
)

// legTone is what a channel of the given gain and turn reads of a leg's voltage.
func legTone(volts complex128, gainDB, turnRad float64) *analysis.Tone {
	tone := steady(-10+20*math.Log10(cmplx.Abs(volts))+gainDB, 0.001)
	tone.PhaseRad = math.Remainder(cmplx.Phase(volts)+turnRad, 2*math.Pi)
	return &tone
}

type legScene struct {
	unit                   *network.Circuit // as built
	ends                   network.Ends     // as they are
	loadOhms               float64
	channelDB, channelTurn float64 // of the cold channel against the hot one
	straight               bool    // recorded too
}

func (s legScene) record(c LegsCase) LegsCase {
	straight, with := s.unit.LegVolts(s.ends, s.loadOhms, toneHz)
	c.Hot.Tone, c.Cold.Tone = *legTone(with.Hot, 0, 0), *legTone(with.Cold, s.channelDB, s.channelTurn)
	if s.straight {
		c.StraightHot, c.StraightCold = legTone(straight.Hot, 0, 0), legTone(straight.Cold, s.channelDB, s.channelTurn)
	}
	return c
}

func TestJudgeLegs(t *testing.T) {
	drawn := circuit(t, "U", 0.01, 560, 560, 330)
	balanced := ends(network.DriveBalanced, network.SenseBalanced, 100, 10000, 300e-12)
	hotAlone := ends(network.DriveImpedanceBalanced, network.SenseBalanced, 100, 10000, 300e-12)
	single := circuit(t, "L", 0.01, 560, 330)
	tests := []struct {
		name        string
		drawn, unit *network.Circuit
		ends        network.Ends
		before      bool
		channelDB   float64
		turn        float64
		want        Verdict
		reason      string
	}{
		{"sound", drawn, drawn, balanced, true, 0, 0, Pass, ""},
		{"sound, channels unlike", drawn, drawn, balanced, true, 3, 2, Pass, ""},
		{"sound, without before", drawn, drawn, balanced, false, 0.05, 0, Pass, ""},
		{"legs unlike", drawn, drawn.With("R1", 800), balanced, true, 0, 0, Fail, ""},
		{"legs unlike, without before", drawn, drawn.With("R1", 1200), balanced, false, 0, 0, Fail, ""},
		{"unlike by channel alone, without before", drawn, drawn, balanced, false, 0.95, 0, Unproven, "legs-before"},
		{"a leg turned over", drawn, drawn, balanced, false, 0, math.Pi, Fail, "180°"},
		{"35° off", drawn, drawn, balanced, false, 0, 35 * math.Pi / 180, Fail, "35° away"},
		{"29° off", drawn, drawn, balanced, false, 0, 29 * math.Pi / 180, Pass, ""},
		{"hot driven alone", drawn, drawn, hotAlone, true, 0, 0, Pass, ""},
		{"unbalanced network", single, single, ends(network.DriveUnbalanced, network.SenseUnbalanced, 100, 10000, 0), false, 0, 0, Unproven, "20 dB"},
	}
	for _, tt := range tests {
		c := LegsCase{
			Circuit: tt.drawn, LegsLoadOhms: 5000, ChannelMatchDB: 0.1, LinearityDB: 0.01,
			Rig:   Rig{Ends: tt.ends, SourceTolFrac: 0.1, LoadTolFrac: 0.05, CableTolFarads: 30e-12},
			Limit: PlusMinus(0, 1),
		}
		f, err := JudgeLegs(legScene{unit: tt.unit, ends: tt.ends, loadOhms: 5000, channelDB: tt.channelDB, channelTurn: tt.turn, straight: tt.before}.record(c))
		if err != nil {
			t.Fatal(err)
		}
		if f.Verdict != tt.want || !strings.Contains(f.Reason, tt.reason) {
			t.Errorf("%s: %s, %.3f ± %.3f dB, %.0f° (%s), want %s (%s)", tt.name, f.Verdict, f.Measured, f.UDB, f.PhaseDeg, f.Reason, tt.want, tt.reason)
		}
		if math.IsNaN(f.UDB) != math.IsNaN(f.Measured) {
			t.Errorf("%s: measured %g with U %g", tt.name, f.Measured, f.UDB)
		}
	}
}

// A leg without a tone is a unit at fault, if what else is there cannot hide one.
func TestJudgeLegsDeadLeg(t *testing.T) {
	drawn := circuit(t, "U", 0.01, 560, 560, 330)
	base := LegsCase{
		Circuit: drawn, LegsLoadOhms: 5000, ChannelMatchDB: 0.1, Limit: PlusMinus(0, 1),
		Rig: Rig{Ends: ends(network.DriveBalanced, network.SenseBalanced, 100, 10000, 0)},
	}
	live, dead := Leg{Tone: steady(-20, 0.001)}, func(most float64) Leg { return Leg{NoTone: true, MostDBFS: most} }
	tests := []struct {
		name      string
		hot, cold Leg
		want      Verdict
		reason    string
	}{
		{"cold dead", live, dead(-80), Fail, "cold leg holds no tone"},
		{"hot dead", dead(-80), live, Fail, "hot leg holds no tone"},
		{"cold hidden", live, dead(-15), Unproven, "hum"},
		{"hot hidden", dead(-20.2), live, Unproven, "hum"},
		{"both dead", dead(-80), dead(-80), Unproven, "neither"},
	}
	for _, tt := range tests {
		c := base
		c.Hot, c.Cold = tt.hot, tt.cold
		f, err := JudgeLegs(c)
		if err != nil {
			t.Fatal(err)
		}
		if f.Verdict != tt.want || !strings.Contains(f.Reason, tt.reason) {
			t.Errorf("%s: %s, %.1f dB (%s), want %s (%s)", tt.name, f.Verdict, f.Measured, f.Reason, tt.want, tt.reason)
		}
	}
}

// The phase is compared while both tones stand, whatever moment each was measured from.
func TestPhaseBetween(t *testing.T) {
	a, b := steady(-6, 0.001), steady(-6, 0.001)
	a.PhaseRad, b.PhaseRad, b.StartSec = 1, 0.25+2*math.Pi*toneHz*0.35, a.StartSec+0.35
	within(t, "phase", phaseBetween(a, b), 0.75, 1e-9)
}

// Loads of the two legs and channels drawn from their tolerances: sound units' excess lies inside U
// in at least 95 %.
func TestLegsCovered(t *testing.T) {
	random := rand.New(rand.NewPCG(8, 8))
	flat := func() float64 { return 2*random.Float64() - 1 }
	drawn := circuit(t, "U", 0, 560, 560, 330)
	e := ends(network.DriveBalanced, network.SenseBalanced, 100, 10000, 300e-12)
	for _, before := range []bool{true, false} {
		const trials = 300
		inside := 0
		for range trials {
			rig := Rig{Ends: e, LoadTolFrac: 0.05}
			// Each leg has a load of its own, the same in both takes.
			loads := [2]float64{5000 * (1 + 0.05*flat()), 5000 * (1 + 0.05*flat())}
			channelDB := 0.005 * flat()
			straight, with := legsLoaded(t, e, loads, 0, 0, 1e12), legsLoaded(t, e, loads, 560, 560, 330)
			c := LegsCase{Circuit: drawn, LegsLoadOhms: 5000, ChannelMatchDB: 0.005, Rig: rig, Limit: PlusMinus(0, 1)}
			c.Hot.Tone, c.Cold.Tone = *legTone(with.Hot, 0, 0), *legTone(with.Cold, channelDB, 0)
			if before {
				c.StraightHot, c.StraightCold = legTone(straight.Hot, 0, 0), legTone(straight.Cold, channelDB, 0)
			}
			f, err := JudgeLegs(c)
			if err != nil {
				t.Fatal(err)
			}
			if math.Abs(f.Measured) <= f.UDB {
				inside++
			}
		}
		if share := float64(inside) / trials; share < 0.925 {
			t.Errorf("legs-before %v: excess of sound units inside U in %.3f, want at least 0.95", before, share)
		}
	}
}

// legsLoaded are the legs of a U pad with a load of its own on each leg.
func legsLoaded(t *testing.T, e network.Ends, loads [2]float64, hot, cold, across float64) network.Legs {
	t.Helper()
	parts := []network.Part{
		{Ref: "R1", Value: hot, A: "in.hot", B: "out.hot"},
		{Ref: "R2", Value: cold, A: "in.cold", B: "out.cold"},
		{Ref: "R3", Value: across, A: "out.hot", B: "out.cold"},
		{Ref: "R4", Value: loads[0], A: "out.hot", B: "screen"},
		{Ref: "R5", Value: loads[1], A: "out.cold", B: "screen"},
	}
	c, err := network.New("custom", parts)
	if err != nil {
		t.Fatal(err)
	}
	_, with := c.LegVolts(e, math.Inf(1), toneHz)
	return with
}
