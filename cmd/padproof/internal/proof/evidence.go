package proof

import (
	"math"
	"math/cmplx"
	"slices"

	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/unit"
	"padproof/compare"
	"padproof/compare/network"
	"padproof/compare/suspect"
	"padproof/compare/uncertainty"
)

// findings are what the checks have measured, kept for the search of what is
// wrong. What was not taken, or is void, is nil.
type findings struct {
	loss     *compare.LossReading
	response []compare.ResponseDeviation
	legs     *compare.LegsFinding
	deadLegs [2]bool // hot, cold
	legsHz   float64
	polarity int
	noise    *compare.NoiseCase
	hum      *compare.HumFigure
}

// evidence is all that was measured, in the form that faults are scored by.
func (c *check) evidence() suspect.Evidence {
	e := suspect.Evidence{Circuit: c.Circuit, Rig: c.Rig, Service: c.Service, ToneHz: c.toneHz()}
	f := c.findings
	switch {
	case f.loss != nil && c.stands("loss"):
		own := uncertainty.Budget{Terms: f.loss.Terms}.CombinedU()
		e.Loss = []suspect.Point{{FreqHz: f.loss.FreqHz, LossDB: f.loss.LossDB, StdUDB: own}}
	case f.loss == nil:
		e.Loss = c.nothingThrough()
	}
	if c.stands("response") {
		e.Response = fewPoints(f.response)
	}
	if f.legs != nil && c.stands("legs") {
		e.Legs = c.legsEvidence()
	}
	if c.stands("polarity") {
		e.Polarity = f.polarity
	}
	if f.noise != nil && (c.stands("noise") || c.stands("noise-level")) {
		e.Noise = suspect.NoiseOf(*f.noise)
	}
	if f.hum != nil && c.stands("hum") {
		e.Hum = &suspect.Hum{UnitDBu: f.hum.Measured, RigDBu: f.hum.RigDBu, UDB: f.hum.UDB}
	}
	for _, o := range c.ohms {
		e.Ohms = append(e.Ohms, suspect.Ohms{PinA: o.PinA, PinB: o.PinB, Joined: o.Joined, Ohms: o.Ohms, TolFrac: o.TolFrac, PlusOhms: o.PlusOhms})
	}
	return e
}

// stands reports whether a check was made and no problem of its takes voids it.
func (c *check) stands(name string) bool {
	made := slices.ContainsFunc(c.answer.Checks, func(one result.Check) bool { return one.Name == name })
	return made && !c.voids[name]
}

func (c *check) toneHz() float64 {
	if c.findings.loss != nil {
		return c.findings.loss.FreqHz
	}
	return 0
}

// nothingThrough is the evidence of a take through the pad that holds no tone
// while the one straight through does: the loss is at least what lies between the
// tone there and the highest peak here.
func (c *check) nothingThrough() []suspect.Point {
	straight, through := c.takes.pair()
	tone, ok := c.takes.tone(straight.role)
	if !ok || through.measured == nil || c.voided(straight) || !onlyProblem(through, compare.NoTone) {
		return nil
	}
	atLeast := tone.LevelDBFS - through.measured.PeakDBFS + c.Gains.AfterDB
	if !(atLeast > 0) || math.IsInf(atLeast, 0) {
		return nil
	}
	return []suspect.Point{{FreqHz: tone.FreqHz, LossDB: atLeast, AtLeast: true}}
}

// onlyProblem reports whether a take has the problem, and no other that would
// take the ground from a loss.
func onlyProblem(t *take, name string) bool {
	has := false
	for _, p := range t.problems {
		switch {
		case p.Name == name:
			has = true
		case compare.Voids(p.Name, "loss"):
			return false
		}
	}
	return has
}

// mostPoints of a response are kept as evidence: neighbours say much the same.
const mostPoints = 20

// fewPoints are points of a response, evenly spread.
func fewPoints(all []compare.ResponseDeviation) []suspect.Point {
	var some []suspect.Point
	step := max(1, (len(all)+mostPoints-1)/mostPoints)
	for i := step / 2; i < len(all); i += step {
		p := all[i]
		if u := p.UDB / 2; u > 0 && !math.IsInf(u, 0) && !math.IsNaN(p.MeasuredDB) {
			some = append(some, suspect.Point{FreqHz: p.FreqHz, LossDB: p.MeasuredDB, StdUDB: u})
		}
	}
	return some
}

// legsEvidence is hot over cold as measured: what the drawing gives is put back.
func (c *check) legsEvidence() *suspect.Legs {
	f, load := c.findings.legs, c.Sheet.LegsLoadOhms(c.Circuit.Unbalanced())
	_, drawn := c.Circuit.LegVolts(c.Rig.Ends, load, c.findings.legsHz)
	l := &suspect.Legs{
		FreqHz: c.findings.legsHz, LoadOhms: load, OverDB: f.Measured + f.DrawnDB, StdUDB: f.ReadingStdUDB,
		PhaseDeg: math.NaN(), PhaseStdUDeg: f.PhaseUDeg / 2,
		Before:  c.takes.by[unit.LegsBefore] != nil,
		DeadHot: c.findings.deadLegs[0], DeadCold: c.findings.deadLegs[1],
	}
	if !math.IsNaN(f.PhaseDeg) && drawn.Cold != 0 {
		l.PhaseDeg = math.Remainder(f.PhaseDeg+cmplx.Phase(drawn.Hot/drawn.Cold)*180/math.Pi, 360)
	}
	if math.IsNaN(l.OverDB) && !(l.DeadHot && l.DeadCold) {
		return nil
	}
	return l
}

// likeliest is the circuit that most likely explains what was read: that of the
// first suspect, where it is more likely than all else together; the drawing itself
// where it is the bench that is not as stated. Nil where nothing stands out.
func (c *check) likeliest() *network.Circuit {
	if c.ranking == nil || len(c.ranking.Suspects) == 0 {
		return nil
	}
	first := c.ranking.Suspects[0]
	if first.Weight < 0.5 || first.Distinct > 1 || len(first.Faults) == 0 {
		return nil
	}
	circuit, _ := first.Faults[0].Apply(c.Circuit, c.Rig.Ends)
	return circuit
}
