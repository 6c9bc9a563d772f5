package compare

import (
	"math"
	"slices"

	"padproof/compare/network"
	"padproof/compare/uncertainty"
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

// othersDB is the 95 % spread that the tolerances of all parts but one (-1: of
// all) give the loss.
func othersDB(c *network.Circuit, e network.Ends, freqHz float64, but int) float64 {
	s := c.Sensitivities(e, freqHz)
	var sum float64
	for i, p := range c.Parts() {
		if v := s[i] * p.TolFrac / math.Sqrt(3); i != but && !math.IsNaN(v) && !math.IsInf(v, 0) {
			sum += v * v
		}
	}
	return 1.96 * math.Sqrt(sum)
}

// A fitting value is one of a part that, moved there alone, explains a bench
// loss, with what then holds in service.
type fitting struct {
	value     float64
	withinDB  float64 // how closely it had to fit
	serviceDB float64 // with this value alone; +Inf where nothing comes through

	// Carried over from there: what the value does not explain of the reading is
	// laid to the other parts.
	carriedDB  float64
	carriedUDB float64 // expanded: what the other parts, the reading and the rig leave open

	aloneLeftDB float64 // standard uncertainty that the others bring when all is laid to this part
}

// valuesThatFit moves one part alone from 0 to infinity and keeps the values
// that explain the bench loss within the doubt of the reading, of the rig and of
// the other parts, and that no ohmmeter reading contradicts. That doubt is the one of the circuit with the value in it: a
// wrong part may make rig and other parts weigh far more than on the drawing.
// uDB is the expanded uncertainty of the bench loss on the drawing; believedDB is
// a deviation that counts as within the tolerances for a sound unit, and must
// then for one with a wrong part too.
func (k LossCase) valuesThatFit(index int, benchDB, uDB, believedDB float64) []fitting {
	part := k.Circuit.Parts()[index]
	w := k.widthOf(uDB, believedDB)
	nominal := uDB + math.Max(believedDB, othersDB(k.Circuit, k.Rig.Ends, k.Reading.FreqHz, index))
	var fits []fitting
	read := k.readAllows(part)
	for _, value := range k.candidates(part, benchDB, nominal, read) {
		if !read.holds(value) || !k.readAllowsAt(part, value) {
			continue
		}
		if f, ok := k.fit(index, value, benchDB, w); ok {
			fits = append(fits, f)
		}
	}
	return fits
}

// widthOf is how far the bench loss may be off.
func (k LossCase) widthOf(uDB, believedDB float64) width {
	own := uncertainty.Budget{Terms: k.Reading.Terms}.CombinedU()
	factor := 2.0
	if drawn := math.Hypot(own, k.Rig.cornerDB(k.Circuit, k.Reading.FreqHz)/math.Sqrt(3)); drawn > 0 && uDB > 2*drawn {
		factor = uDB / drawn // few degrees of freedom
	}
	return width{own, factor, believedDB}
}

// A width is what a bench loss may be off by and still be explained.
type width struct {
	own, factor float64 // standard uncertainty of the reading alone, and what expands it
	believedDB  float64
}

// fit tries one value.
func (k LossCase) fit(index int, value, benchDB float64, w width) (fitting, bool) {
	freqHz := k.Reading.FreqHz
	c := k.Circuit.With(k.Circuit.Parts()[index].Ref, value)
	bench := c.LossDB(k.Rig.Ends, freqHz)
	if math.IsInf(bench, 0) || math.IsNaN(bench) {
		return fitting{}, false
	}
	corner := k.Rig.cornerDB(c, freqHz)
	// Near a null of the circuit slopes say nothing: no tolerance moves a loss by more than this.
	const mostDB = 20
	others := math.Max(math.Min(othersDB(c, k.Rig.Ends, freqHz, index), mostDB), w.believedDB)
	corner = math.Min(corner, mostDB)
	f := fitting{value: value, withinDB: w.factor*w.own + corner + others}
	if math.Abs(bench-benchDB) > f.withinDB*(1+1e-9) {
		return fitting{}, false
	}
	f.serviceDB = c.LossDB(k.Service, freqHz)
	f.carriedDB = f.serviceDB
	if math.IsInf(f.serviceDB, 0) {
		return f, true
	}
	const unknown = 1 // relative: a factor of e
	f.aloneLeftDB = carryOver(c, k.Rig.Ends, k.Service, freqHz, doubtsBut(c, index, unknown)).leftDB
	over := carryOver(c, k.Rig.Ends, k.Service, freqHz, doubtsBut(c, index, 0))
	f.carriedDB += over.beta * (benchDB - bench)
	f.carriedUDB = math.Hypot(1.96*over.leftDB, over.beta*w.factor*math.Hypot(w.own, corner/math.Sqrt(3)))
	return f, true
}

// candidates are the values that are tried: 0 and infinity, six a decade around
// the nominal one, those at which the drawing's own doubt would end, and those at
// which the ohmmeter readings' would.
func (k LossCase) candidates(part network.Part, benchDB, widthDB float64, read values) []float64 {
	nominal := part.Value
	if nominal <= 0 || math.IsInf(nominal, 0) {
		nominal = 1
	}
	values := []float64{0, math.Inf(1)}
	const perDecade, decades = 6, 4
	for i := -perDecade * decades; i <= perDecade*decades; i++ {
		values = append(values, nominal*math.Pow(10, float64(i)/perDecade))
	}
	for _, span := range k.Circuit.ValuesForLoss(k.Rig.Ends, k.Reading.FreqHz, part.Ref, benchDB-widthDB, benchDB+widthDB) {
		values = append(values, steps(span.Low, span.High)...)
	}
	if len(k.Ohms) > 0 && read.low <= read.high {
		values = append(values, steps(read.low, read.high)...)
	}
	slices.Sort(values)
	return slices.Compact(values)
}

// steps are both ends of a range of values, and seven between where it has ends.
func steps(low, high float64) []float64 {
	all := []float64{low, high}
	if low > 0 && !math.IsInf(high, 0) {
		for i := 1; i < 8; i++ {
			all = append(all, low*math.Pow(high/low, float64(i)/8))
		}
	}
	return all
}
