package suspect_test

import (
	"math"
	"testing"

	"padproof/compare"
	"padproof/compare/network"
	"padproof/compare/suspect"
	"padproof/compare/uncertainty"
)

func (u *made) ends() network.Ends {
	return network.Ends{SourceOhms: u.Rig.Source, Drive: u.Rig.Drive, LoadOhms: u.Rig.Load, Sense: u.Rig.Sense, CableFarads: u.Rig.Cable}
}

func (u *made) rig() compare.Rig {
	return compare.Rig{Ends: u.ends(), SourceTolFrac: u.Rig.SourceTol, LoadTolFrac: u.Rig.LoadTol, CableTolFarads: u.Rig.CableTol * u.Rig.Cable}
}

// A taking is which takes there are of a unit.
type taking struct {
	name                string
	signal, legs, noise bool // the test signal (response and polarity), legs, both noise takes
}

var takings = []taking{
	{name: "loss alone"},
	{name: "test signal", signal: true},
	{name: "test signal and legs", signal: true, legs: true},
	{name: "every take", signal: true, legs: true, noise: true},
}

// looked are the takings that a run looks at.
func looked() []taking {
	if long() {
		return takings
	}
	return []taking{takings[0], takings[2]}
}

// evidence is what those takes show of a unit.
func (u *made) evidence(k taking) suspect.Evidence {
	e := suspect.Evidence{
		Circuit: u.of.circuit, Rig: u.rig(), ToneHz: toneHz, GainStdUDB: u.GainStdDB,
		Loss: []suspect.Point{{FreqHz: toneHz, LossDB: u.Loss.DB, StdUDB: u.Loss.Std, AtLeast: u.Loss.AtLeast}},
	}
	if k.signal {
		e.Polarity = u.Polarity
		for _, p := range u.Response {
			e.Response = append(e.Response, suspect.Point{FreqHz: p[0], LossDB: p[1], StdUDB: p[2]})
		}
	}
	if l := u.Legs; k.legs && l != nil {
		e.Legs = &suspect.Legs{
			FreqHz: toneHz, LoadOhms: u.Rig.LegsLoad, OverDB: l.DB, StdUDB: l.Std, PhaseDeg: float64(l.Phase), PhaseStdUDeg: float64(l.PhaseStd),
			DeadHot: l.DeadHot, DeadCold: l.DeadCold, Before: l.Before,
		}
	}
	if k.noise {
		e.Noise = u.noise()
	}
	return e
}

func (u *made) noise() *suspect.Noise {
	return &suspect.Noise{
		Bench: compare.NoiseBench{
			Ends: u.ends(), LoadTolFrac: u.Rig.LoadTol, CableTolFarads: u.Rig.CableTol * u.Rig.Cable,
			FullScaleDBu: 0, CalibrationUDB: 0.2, GainDriftDB: 0.02, PadPlugOhms: u.Noise.Plug, TempC: 21, TempHalfC: 2,
		},
		Bands: []network.Band{{LowHz: 20, HighHz: 20000}},
		PadVV: u.Noise.PadVV, RigVV: u.Noise.RigVV, PadStdUFrac: u.Noise.Part, RigStdUFrac: u.Noise.Part,
	}
}

// meter takes a reading of the unit.
func (u *made) meter(t testing.TB, r compare.OhmReading) suspect.Ohms {
	t.Helper()
	key := r.PinA + "," + r.PinB
	if r.Joined != [2]string{} {
		key += "|" + r.Joined[0] + "," + r.Joined[1]
	}
	ohms, ok := u.Ohms[key]
	if !ok {
		t.Errorf("%s: the units have no reading %q", u.Design, key)
	}
	if math.IsNaN(float64(ohms)) {
		ohms = number(math.Inf(1))
	}
	return suspect.Ohms{PinA: r.PinA, PinB: r.PinB, Joined: r.Joined, Ohms: float64(ohms)}
}

// Limits that units are judged by, in dB.
const (
	lossLimitDB     = 0.5
	responseLimitDB = 0.3
	legsLimitDB     = 1.0
	legsPhaseDeg    = 30
)

// verdict is that of the checks that the takes allow: loss carried over to service (the bench), legs
// where both are drawn within 20 dB of one another, response, and the same polarity.
func (u *made) verdict(t testing.TB, k taking) compare.Verdict {
	t.Helper()
	all := []compare.Verdict{u.lossVerdict(t)}
	if k.signal {
		if u.Polarity < 0 {
			all = append(all, compare.Fail)
		}
		drawn := func(hz float64) float64 {
			return u.of.circuit.LossDB(u.ends(), hz) - u.of.circuit.LossDB(u.ends(), toneHz)
		}
		for _, p := range u.Response {
			if math.Abs(p[1]-drawn(p[0])) > responseLimitDB+3*p[2] {
				all = append(all, compare.Fail)
			}
		}
	}
	if k.legs && u.Legs != nil {
		all = append(all, u.legsVerdict())
	}
	verdict, _ := compare.Combine(all...)
	return verdict
}

func (u *made) lossVerdict(t testing.TB) compare.Verdict {
	expected := u.of.circuit.LossDB(u.ends(), toneHz)
	limit := compare.PlusMinus(expected, lossLimitDB)
	if u.Loss.AtLeast {
		if u.Loss.DB > limit.High {
			return compare.Fail
		}
		return compare.Unproven
	}
	l, err := compare.JudgeLoss(compare.LossCase{
		Circuit: u.of.circuit, Rig: u.rig(), Service: u.ends(),
		Reading: compare.LossReading{LossDB: u.Loss.DB, FreqHz: toneHz, Terms: []uncertainty.Term{
			uncertainty.FromNormal("reading", u.Loss.Std, 1), uncertainty.FromNormal("gain", u.GainStdDB, 1),
		}},
	})
	if err != nil {
		t.Errorf("%s: %v", u.Unit, err)
	}
	v, _ := compare.Decide(compare.Guarded, l.ServiceDB, l.UDB, limit, l.ServiceExpectedDB)
	return v
}

func (u *made) legsVerdict() compare.Verdict {
	_, with := u.of.circuit.LegVolts(u.ends(), u.Rig.LegsLoad, toneHz)
	drawn := 20 * math.Log10(absOf(with.Hot)/absOf(with.Cold))
	l := u.Legs
	if !(math.Abs(drawn) <= 20) || l.DeadHot && l.DeadCold {
		return compare.None
	}
	turn := math.Remainder(float64(l.Phase)-degrees(with.Hot/with.Cold), 360)
	if l.DeadHot || l.DeadCold || math.Abs(turn) > legsPhaseDeg {
		return compare.Fail
	}
	v, _ := compare.Decide(compare.Guarded, l.DB-drawn, 2*l.Std, compare.PlusMinus(0, legsLimitDB), 0)
	return v
}
