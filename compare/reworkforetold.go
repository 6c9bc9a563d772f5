package compare

import (
	"fmt"
	"math"
	"slices"

	"padproof/compare/network"
	"padproof/compare/uncertainty"
)

// foretell says what a trim gives: the middle of what the explanations give, with a U that
// holds them all, since the truth is likely one of them.
func (k ReworkCase) foretell(s site, ohms float64, seen []explanation) Trim {
	t := Trim{
		Refs: s.refs, Across: s.across, Parallel: s.parallel, Ohms: ohms, BothLegs: len(s.refs) == 2,
		Watts: k.watts(s, seen[0].unit, ohms), InputVoltsRMS: k.InputVoltsRMS,
	}
	var bench, service span
	for _, x := range seen {
		w := world{unit: x.unit, ends: k.Rig.Ends, benchDB: k.Loss.BenchDB, ohms: ohms, leftDB: x.leftDB}
		here, there := k.after(w, s)
		benchU, serviceU := k.doubt(x, w, s)
		bench.include(here, benchU)
		service.include(there, serviceU)
	}
	t.BenchLossDB, t.BenchUDB = bench.middle()
	t.ServiceLossDB, t.ServiceUDB = service.middle()
	return t
}

// A span is the range of a figure over the explanations, and the largest doubt of one.
type span struct {
	low, high, u float64
	any          bool
}

func (s *span) include(v, u float64) {
	if !s.any {
		s.low, s.high, s.any = v, v, true
	}
	s.low, s.high, s.u = math.Min(s.low, v), math.Max(s.high, v), math.Max(s.u, u)
}

func (s span) middle() (v, u float64) { return (s.low + s.high) / 2, (s.high-s.low)/2 + s.u }

// A world is one way that things may be: the unit before the trim, the ends of the bench, what
// was read there and the resistor that is added.
type world struct {
	unit    *network.Circuit
	ends    network.Ends
	benchDB float64
	ohms    float64
	leftDB  float64
}

// after is what bench and service read with the trim in. What moving the parts that are off did not
// explain of the reading stays.
func (k ReworkCase) after(w world, s site) (benchDB, serviceDB float64) {
	c := s.on(w.unit, w.ohms)
	return c.LossDB(w.ends, k.Reading.FreqHz) + w.leftDB, c.LossDB(k.Service, k.Reading.FreqHz) + w.leftDB
}

// doubt is the expanded uncertainty of what is foretold from one explanation: each
// doubtful figure is moved, the unit brought back to what was read, and the trim added again
// (JCGM 100, 5.1.3, note 2: sensitivities from the model itself). The next reading on the bench
// brings its own doubt.
func (k ReworkCase) doubt(x explanation, nominal world, s site) (benchUDB, serviceUDB float64) {
	bench0, service0 := k.after(nominal, s)
	var bench, service uncertainty.Budget
	add := func(source string, term func(string, float64, float64) uncertainty.Term, worlds ...world) {
		var db, ds float64
		for _, w := range worlds {
			here, there := k.after(w, s)
			db, ds = math.Max(db, math.Abs(here-bench0)), math.Max(ds, math.Abs(there-service0))
		}
		bench.Terms = append(bench.Terms, term(source, db, 1))
		service.Terms = append(service.Terms, term(source, ds, 1))
	}
	own := k.Reading.standardU()
	add("reading", uncertainty.FromNormal, k.again(x, nominal.read(own)), k.again(x, nominal.read(-own)))
	for _, m := range k.Rig.moves() {
		up, down := nominal, nominal
		m.move(&up.ends, 1)
		m.move(&down.ends, -1)
		add(m.source, uncertainty.FromRectangle, k.again(x, up), k.again(x, down))
	}
	for _, p := range nominal.unit.Parts() {
		if p.TolFrac <= 0 || slices.Contains(x.off, p.Ref) || math.IsInf(p.Value, 0) {
			continue
		}
		up, down := nominal, nominal
		up.unit = nominal.unit.With(p.Ref, p.Value*(1+p.TolFrac))
		down.unit = nominal.unit.With(p.Ref, p.Value*(1-p.TolFrac))
		add(p.Ref, uncertainty.FromRectangle, k.again(x, up), k.again(x, down))
	}
	thick, thin := nominal, nominal
	thick.ohms, thin.ohms = nominal.ohms*(1+k.TrimTolFrac), nominal.ohms*(1-k.TrimTolFrac)
	add(trimRef, uncertainty.FromRectangle, thick, thin)
	bench.Terms = append(bench.Terms, k.Reading.Terms...)
	return expanded(bench), expanded(service)
}

// standardU is the standard uncertainty of a reading that, taken as normal, has its U.
func (r LossReading) standardU() float64 {
	return expanded(uncertainty.Budget{Terms: r.Terms}) / 1.96
}

// expanded is U, and without end where the budget gives none.
func expanded(b uncertainty.Budget) float64 {
	u, err := b.ExpandedU(Coverage)
	if err != nil || math.IsNaN(u) {
		return math.Inf(1)
	}
	return u
}

func (w world) read(moreDB float64) world {
	w.benchDB += moreDB
	return w
}

// again brings the unit of a world back to what was read in it.
func (k ReworkCase) again(x explanation, w world) world {
	w.unit, w.leftDB = k.anchored(w.unit, x.off, w.ends, w.benchDB)
	return w
}

// noTrim says why no resistor is offered.
func (k ReworkCase) noTrim(nearest *Trim) string {
	if nearest == nil {
		return "the drawing has no place for a resistor that would bring the loss in"
	}
	if k.Limit.Holds(nearest.ServiceLossDB) {
		return fmt.Sprintf("%s might bring the loss in, to %.2f dB in service, but it cannot be foretold closer than ± %.2f dB, which is too much for the limits; find out which part is off, with an ohmmeter, or make the doubt of the bench smaller",
			nearest.Words(), nearest.ServiceLossDB, nearest.ServiceUDB)
	}
	return fmt.Sprintf("no single resistor (E24 or E96) brings the loss in; the nearest, %s, would give %.2f dB in service", nearest.Words(), nearest.ServiceLossDB)
}
