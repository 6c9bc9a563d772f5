package compare

import (
	"math"

	"padproof/compare/network"
)

// An over is how a bench deviation carries over to service.
type over struct {
	beta   float64 // share that carries over
	leftDB float64 // standard uncertainty of what that estimate leaves
}

// carryOver is the best linear estimate of the service deviation from the bench
// deviation, each part's tolerance being a rectangle: with sb, ss the
// sensitivities of bench and service loss to a part and s its standard
// uncertainty, beta = sum(sb ss s^2) / sum((sb s)^2), and what is left has the
// variance sum((ss s)^2) - beta sum(sb ss s^2). doubts are the s of
// the parts, relative. Where no part has any doubt, or the bench sees none, beta
// is 1.
func carryOver(c *network.Circuit, bench, service network.Ends, freqHz float64, doubts []float64) over {
	sb, ss := c.Sensitivities(bench, freqHz), c.Sensitivities(service, freqHz)
	var bb, bs, ssq float64
	for i, s := range doubts {
		if s == 0 || math.IsNaN(sb[i]) || math.IsNaN(ss[i]) {
			continue
		}
		bb += sb[i] * sb[i] * s * s
		bs += sb[i] * ss[i] * s * s
		ssq += ss[i] * ss[i] * s * s
	}
	if bb < 1e-24 {
		return over{beta: 1, leftDB: math.Sqrt(ssq)}
	}
	beta := bs / bb
	left := ssq - beta*bs
	if left < 1e-12*ssq {
		left = 0 // rounding: the two conditions weigh every part alike
	}
	return over{beta: beta, leftDB: math.Sqrt(left)}
}

// doubtsOf are the standard uncertainties of the parts by their tolerances.
func doubtsOf(c *network.Circuit) []float64 {
	var doubts []float64
	for _, p := range c.Parts() {
		doubts = append(doubts, p.TolFrac/math.Sqrt(3))
	}
	return doubts
}

// doubtsBut are doubtsOf, but for one part.
func doubtsBut(c *network.Circuit, index int, doubt float64) []float64 {
	doubts := doubtsOf(c)
	doubts[index] = doubt
	return doubts
}

// othersDB is how far the tolerances of all parts but one (-1: of all) may move
// the loss, each at its worst. A 95 % spread would not do: the deviation that
// counts as within the tolerances reaches to the worst case, and a part that
// the bench does not see must fit up to there.
func othersDB(c *network.Circuit, e network.Ends, freqHz float64, but int) float64 {
	s := c.Sensitivities(e, freqHz)
	var sum float64
	for i, p := range c.Parts() {
		if v := math.Abs(s[i]) * p.TolFrac; i != but && !math.IsNaN(v) && !math.IsInf(v, 0) {
			sum += v
		}
	}
	return sum
}

// othersOf is othersDB of the drawing, or of the drawing with the part shorted
// or open where the others then weigh more.
func (k LossCase) othersOf(index int) float64 {
	ref := k.Circuit.Parts()[index].Ref
	most := 0.0
	for _, c := range []*network.Circuit{k.Circuit, k.Circuit.With(ref, 0), k.Circuit.With(ref, math.Inf(1))} {
		if !math.IsInf(c.LossDB(k.Rig.Ends, k.Reading.FreqHz), 0) {
			most = math.Max(most, othersDB(c, k.Rig.Ends, k.Reading.FreqHz, index))
		}
	}
	return most
}

// A moved part is one that, moved alone, explains a bench loss, with the
// service losses that go with it.
type moved struct {
	index                       int
	lowValue, highValue         float64 // hull of the values that fit, 0 to +Inf
	serviceLowDB, serviceHighDB float64
	leftDB                      float64 // what the other parts leave open, a standard uncertainty
}

// movedParts moves each part alone from 0 to infinity and keeps the values at
// which the bench loss lies within uDB, and what the other parts may bring, of
// benchDB; the service losses are those of the moved part alone.
func movedParts(k LossCase, benchDB, uDB float64) []moved {
	var all []moved
	for i := range k.Circuit.Parts() {
		if m, ok := movePart(k, i, benchDB, uDB+k.othersOf(i), k.serviceOf); ok {
			all = append(all, m)
		}
	}
	return all
}

// movePart moves one part; service says which service loss goes with a value of
// it and a bench loss.
func movePart(k LossCase, index int, benchDB, widthDB float64, service func(index int, value, benchDB float64) (serviceDB, leftDB float64)) (moved, bool) {
	p := k.Circuit.Parts()[index]
	fits := k.Circuit.ValuesForLoss(k.Rig.Ends, k.Reading.FreqHz, p.Ref, benchDB-widthDB, benchDB+widthDB)
	if len(fits) == 0 {
		return moved{}, false
	}
	m := moved{
		index: index, lowValue: fits[0].Low, highValue: fits[len(fits)-1].High,
		serviceLowDB: math.Inf(1), serviceHighDB: math.Inf(-1),
	}
	for _, fit := range fits {
		for _, value := range valuesWithin(fit.Low, fit.High, p.Value) {
			serviceDB, left := service(index, value, benchDB)
			if math.IsNaN(serviceDB) {
				continue
			}
			m.serviceLowDB = math.Min(m.serviceLowDB, serviceDB)
			m.serviceHighDB = math.Max(m.serviceHighDB, serviceDB)
			m.leftDB = math.Max(m.leftDB, left)
		}
	}
	return m, m.serviceLowDB <= m.serviceHighDB
}

// serviceWith is the service loss where the part at index has the given value
// and the bench read benchDB; what that value does not explain of the reading
// is carried over on account of the other parts.
func (k LossCase) serviceWith(index int, value, benchDB float64) (serviceDB, leftDB float64) {
	c := k.Circuit.With(k.Circuit.Parts()[index].Ref, value)
	bench, service := c.LossDB(k.Rig.Ends, k.Reading.FreqHz), c.LossDB(k.Service, k.Reading.FreqHz)
	if math.IsInf(bench, 0) || math.IsInf(service, 0) {
		return service, 0
	}
	over := carryOver(c, k.Rig.Ends, k.Service, k.Reading.FreqHz, doubtsBut(c, index, 0))
	return service + over.beta*(benchDB-bench), over.leftDB
}

// serviceOf is the service loss where the part at index has the given value and
// nothing else is carried over. What is left is the doubt that the other parts
// bring in when all that the bench read is laid to the moved one, of which
// nothing is known beforehand.
func (k LossCase) serviceOf(index int, value, _ float64) (serviceDB, leftDB float64) {
	c := k.Circuit.With(k.Circuit.Parts()[index].Ref, value)
	if service := c.LossDB(k.Service, k.Reading.FreqHz); !math.IsInf(service, 0) {
		const unknown = 1 // relative: a factor of e
		return service, carryOver(c, k.Rig.Ends, k.Service, k.Reading.FreqHz, doubtsBut(c, index, unknown)).leftDB
	}
	return math.Inf(1), 0
}

// valuesWithin samples an interval of values evenly on a logarithmic scale, its
// ends among them; 0 and +Inf are reached by way of a thousandth and a thousand
// times the nominal value.
func valuesWithin(low, high, nominal float64) []float64 {
	const points = 9
	values := []float64{low}
	from, to := low, high
	if nominal <= 0 || math.IsInf(nominal, 0) {
		nominal = 1
	}
	if from <= 0 {
		from = math.Min(nominal/1000, to)
	}
	if math.IsInf(to, 0) {
		to = math.Max(nominal*1000, from)
	}
	if from > 0 && to > from {
		for i := 0; i <= points; i++ {
			values = append(values, from*math.Pow(to/from, float64(i)/points))
		}
	}
	return append(values, high)
}
