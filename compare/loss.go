package compare

import (
	"math"

	"padproof/compare/network"
	"padproof/compare/uncertainty"
)

// A Rig is the bench as the model knows it, with its doubts. Tolerances are
// half-widths of a rectangle (JCGM 100, 4.3.7).
type Rig struct {
	Ends           network.Ends
	SourceTolFrac  float64 // of SourceOhms
	LoadTolFrac    float64 // of LoadOhms
	CableTolFarads float64 // of CableFarads
}

// A LossReading is the insertion loss that two takes gave on the bench, with
// the uncertainty terms of the reading alone: the rig's impedances come in
// through the model.
type LossReading struct {
	LossDB float64
	FreqHz float64
	Terms  []uncertainty.Term // in dB, sensitivity 1
}

// A LossCase is all that a loss is judged by.
type LossCase struct {
	Circuit *network.Circuit
	Rig     Rig
	Service network.Ends
	Reading LossReading
	Ohms    []OhmSeen // ohmmeter readings of the unit; they leave out what contradicts them
}

// A Loss is the bench reading carried over to service.
type Loss struct {
	BenchDB         float64 // as recorded
	BenchExpectedDB float64 // what the drawing gives on this rig
	BenchUDB        float64 // expanded, of the difference of the two

	ServiceDB         float64 // carried over; NaN where no part alone explains the reading
	AtLeastDB         float64 // where ServiceDB is NaN since a part may be open for good: the least there may be, U taken off; else NaN
	ServiceExpectedDB float64 // what the drawing gives in service
	UDB               float64 // expanded, of ServiceDB

	Beta    float64            // share of a bench deviation that carries over
	Budget  uncertainty.Budget // of ServiceDB
	Outside bool               // the bench deviation is more than the tolerances and U allow

	// ReadOtherwise: the ohmmeter readings contradict every part and swap that would explain
	// a bench loss outside the tolerances. ServiceDB is then what it is without the readings.
	ReadOtherwise bool
}

// Coverage is the probability that U covers (JCGM 100).
const Coverage = 0.95

// JudgeLoss carries the reading over to service. Where the bench deviation lies
// within the worst case of the tolerances plus U, the service loss is
//
//	modelled service loss + beta (bench loss - modelled bench loss)
//
// and otherwise the middle of the range of service losses that any single part,
// moved alone until it explains the bench loss within U, would give, or two
// parts swapped, or no pad at all; what the ohmmeter readings contradict is left out. Where nothing of the kind explains it, ServiceDB and UDB are NaN: the reading then proves
// nothing about service. A reading of NaN gives a ServiceDB of NaN.
func JudgeLoss(k LossCase) (Loss, error) {
	c, f := k.Circuit, k.Reading.FreqHz
	l := Loss{
		BenchDB:           k.Reading.LossDB,
		BenchExpectedDB:   c.LossDB(k.Rig.Ends, f),
		ServiceExpectedDB: c.LossDB(k.Service, f),
		AtLeastDB:         math.NaN(),
	}
	bench := uncertainty.Budget{Terms: append(append([]uncertainty.Term(nil), k.Reading.Terms...), rigTerms(k, 1)...)}
	var err error
	if l.BenchUDB, err = bench.ExpandedU(Coverage); err != nil {
		return Loss{}, err
	}

	over := carryOver(c, k.Rig.Ends, k.Service, f, doubtsOf(c))
	l.Beta = over.beta
	low, high := c.WorstCase(k.Rig.Ends, f)
	l.Outside = l.BenchDB < low-l.BenchUDB || l.BenchDB > high+l.BenchUDB
	if l.Outside && k.Rig.Ends != k.Service {
		return judgeOutside(k, l)
	}
	l.ServiceDB = l.ServiceExpectedDB + l.Beta*(l.BenchDB-l.BenchExpectedDB)
	l.Budget.Terms = serviceTerms(k, l.Beta)
	if over.leftDB > 0 {
		l.Budget.Terms = append(l.Budget.Terms, uncertainty.FromNormal(carrySrc, over.leftDB, 1))
	}
	l.UDB, err = l.Budget.ExpandedU(Coverage)
	return l, err
}

// A reading this near to nothing is that of a pad that is not in circuit, or is
// wired straight through.
const straightDB = 0.1

// judgeOutside is the answer where more is wrong than tolerances allow: each
// part alone is moved through the full model, any two are swapped, and the pad
// is taken out. What the takes and the rig leave
// open is inside that range already, so those terms count with sensitivity 0.
// The truth is likely at one of the range's ends, where one part or another is
// the culprit, so U holds the whole range and not 95 % of it.
func judgeOutside(k LossCase, l Loss) (Loss, error) {
	r := k.explain(l)
	if r.lowDB > r.highDB && len(k.Ohms) > 0 {
		without := k
		without.Ohms = nil
		r = without.explain(l)
		l.ReadOtherwise = r.lowDB <= r.highDB
	}
	l.ServiceDB, l.UDB = math.NaN(), math.NaN()
	if r.lowDB > r.highDB {
		return l, nil
	}
	l.Beta = 0
	rest := uncertainty.Budget{Terms: serviceTerms(k, 0)}
	if r.leftDB > 0 {
		rest.Terms = append(rest.Terms, uncertainty.FromNormal(otherPartsSrc, r.leftDB, 1))
	}
	restUDB, err := rest.ExpandedU(Coverage)
	if math.IsInf(r.highDB, 1) {
		l.AtLeastDB = r.lowDB - restUDB
		return l, err
	}
	half := (r.highDB - r.lowDB) / 2
	l.ServiceDB, l.UDB = r.lowDB+half, half+restUDB
	l.Budget.Terms = append(rest.Terms, uncertainty.FromRectangle(carrySrc, half, 1))
	return l, err
}

// A reach is the range of service losses that go with a bench loss.
type reach struct {
	lowDB, highDB float64 // low above high: nothing explains the bench loss
	leftDB        float64 // what parts within tolerance leave open, a standard uncertainty
}

func (r *reach) include(fromDB, toDB, leftDB float64) {
	r.lowDB, r.highDB, r.leftDB = math.Min(r.lowDB, fromDB), math.Max(r.highDB, toDB), math.Max(r.leftDB, leftDB)
}

// explain collects what explains a bench loss outside the tolerances.
func (k LossCase) explain(l Loss) reach {
	r := reach{lowDB: math.Inf(1), highDB: math.Inf(-1)}
	for i := range k.Circuit.Parts() {
		for _, v := range k.valuesThatFit(i, l.BenchDB, l.BenchUDB, 0) {
			r.include(v.serviceDB, v.serviceDB, v.aloneLeftDB)
		}
	}
	for _, w := range k.swapsThatFit(l.BenchDB, l.BenchUDB, 0) {
		over := carryOver(w.circuit, k.Rig.Ends, k.Service, k.Reading.FreqHz, doubtsOf(w.circuit))
		r.include(w.serviceDB, w.serviceDB, over.leftDB)
	}
	if math.Abs(l.BenchDB) <= l.BenchUDB+straightDB {
		r.include(0, 0, 0)
	}
	return r
}

// serviceTerms are those of the reading and of the rig, as far as they reach
// the service loss.
func serviceTerms(k LossCase, beta float64) []uncertainty.Term {
	var terms []uncertainty.Term
	for _, t := range k.Reading.Terms {
		t.Sensitivity *= beta
		terms = append(terms, t)
	}
	return append(terms, rigTerms(k, beta)...)
}
