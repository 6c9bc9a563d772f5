package compare

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"padproof/compare/network"
)

// An explanation is a unit that reads on the bench what was read, and the parts of it that are off.
type explanation struct {
	off    []string
	unit   *network.Circuit
	leftDB float64 // of the reading, what moving those parts does not explain
}

// explained are the units to trim. Where there are none the Rework says what to do instead.
func (k ReworkCase) explained() ([]explanation, Rework) {
	if k.Unit != nil {
		return k.explainedBy(k.Unit)
	}
	if fault := k.grossFault(); fault != "" {
		return nil, Rework{Reason: fmt.Sprintf("a resistor to bring the loss in is sought once it is known what is wrong: %q would read the same on this bench; rule it out with an ohmmeter first", fault)}
	}
	var seen []explanation
	for _, p := range k.Circuit.Parts() {
		value, ok := k.nearestValue(p)
		if !ok || !trimmable(value/p.Value) {
			continue
		}
		x := explanation{off: []string{p.Ref}}
		x.unit, x.leftDB = k.anchored(k.Circuit.With(p.Ref, value), x.off, k.Rig.Ends, k.Loss.BenchDB)
		seen = append(seen, x)
	}
	if len(seen) == 0 {
		return nil, Rework{Reason: fmt.Sprintf("no part of the drawing, up to %d times off, explains the reading: there is nothing to trim until it is known what is wrong", trimFactor)}
	}
	return seen, Rework{}
}

func trimmable(factor float64) bool { return factor >= 1.0/trimFactor && factor <= trimFactor }

// explainedBy takes the one circuit that is known to explain the reading.
func (k ReworkCase) explainedBy(unit *network.Circuit) ([]explanation, Rework) {
	off, sameWiring := k.differing(unit)
	switch {
	case !sameWiring:
		return nil, Rework{Reason: "no resistor mends a leg or a plug: find the joint and solder it again"}
	case len(off) == 0:
		return nil, Rework{Reason: "no part of the unit is the likeliest to be off: there is nothing to trim"}
	}
	drawn := make([]network.Part, len(off))
	factors := make([]float64, len(off))
	for i, ref := range off {
		is, _ := unit.Part(ref)
		drawn[i], _ = k.Circuit.Part(ref)
		factors[i] = is.Value / drawn[i].Value
	}
	mend := k.mend(off...)
	if len(off) == 1 {
		mend.Ohms = drawn[0].Value
	}
	swapped := len(off) == 2 && near(factors[0]*factors[1], 1) && near(drawn[0].Value*factors[0], drawn[1].Value)
	alike := len(off) == 1 || len(off) == 2 && near(factors[0], factors[1]) && k.partner(off[0]) == off[1]
	switch {
	case slices.ContainsFunc(drawn, func(p network.Part) bool { return p.Kind != network.Resistor }):
		return nil, Rework{Mends: []Mend{mend}, Reason: "what is off is no resistor: replace it"}
	case swapped:
		return nil, Rework{Mends: []Mend{mend}, Reason: "no resistor mends two parts that are swapped: put each in its place"}
	case !alike:
		return nil, Rework{Mends: []Mend{mend}, Reason: "more than one part is off: replace them"}
	case !trimmable(factors[0]):
		return nil, Rework{Mends: []Mend{mend}, Reason: fmt.Sprintf("%s is open, shorted or another part: replace it", strings.Join(off, " and "))}
	}
	x := explanation{off: off}
	x.unit, x.leftDB = k.anchored(unit, off, k.Rig.Ends, k.Loss.BenchDB)
	return []explanation{x}, Rework{Mends: []Mend{mend}}
}

func near(a, b float64) bool { return math.Abs(a-b) <= 0.01*math.Abs(b) }

// mend is the drawing's own part, put in place of what is off.
func (k ReworkCase) mend(refs ...string) Mend {
	return Mend{Refs: refs, Ohms: math.NaN(), BenchLossDB: k.Loss.BenchExpectedDB, ServiceLossDB: k.Loss.ServiceExpectedDB}
}

// differing are the parts whose value is not the drawing's; false where anything else differs.
func (k ReworkCase) differing(unit *network.Circuit) (off []string, sameWiring bool) {
	drawn, is := k.Circuit.Parts(), unit.Parts()
	if len(drawn) != len(is) {
		return nil, false
	}
	for i, p := range drawn {
		q := is[i]
		if p.Ref != q.Ref || p.A != q.A || p.B != q.B {
			return nil, false
		}
		if p.Kind != q.Kind || math.Abs(p.Value-q.Value) > 1e-9*p.Value {
			off = append(off, p.Ref)
		}
	}
	return off, true
}

// nearestValue is the value of a resistor nearest the drawing's that explains the reading within U.
func (k ReworkCase) nearestValue(p network.Part) (value float64, ok bool) {
	if p.Kind != network.Resistor || p.Value <= 0 || math.IsInf(p.Value, 0) {
		return 0, false
	}
	l, least := k.Loss, math.Inf(1)
	for _, span := range k.Circuit.ValuesForLoss(k.Rig.Ends, k.Reading.FreqHz, p.Ref, l.BenchDB-l.BenchUDB, l.BenchDB+l.BenchUDB) {
		v := min(max(p.Value, span.Low), span.High)
		if far := math.Abs(math.Log(v / p.Value)); far < least {
			value, least = v, far
		}
	}
	return value, !math.IsInf(least, 1)
}

// grossFault names a fault no trim is for that would read what was read: a part open, shorted, ten
// times or a tenth, a leg or a plug, two parts swapped. "" where there is none.
func (k ReworkCase) grossFault() string {
	var faults []network.Fault
	for _, p := range k.Circuit.Parts() {
		for _, form := range []network.FaultForm{network.PartOpen, network.PartShort, network.PartTimesTen, network.PartTenth} {
			faults = append(faults, network.Fault{Form: form, Ref: p.Ref})
		}
	}
	faults = append(faults, k.Circuit.LegFaults()...)
	for _, f := range faults {
		c := f.Apply(k.Circuit)
		within := k.Loss.BenchUDB + math.Min(othersDB(c, k.Rig.Ends, k.Reading.FreqHz, -1), 1)
		if math.Abs(c.LossDB(k.Rig.Ends, k.Reading.FreqHz)-k.Loss.BenchDB) <= within {
			return f.String()
		}
	}
	for _, s := range k.swapsThatFit(k.Loss.BenchDB, k.Loss.BenchUDB, 0) {
		return network.Fault{Form: network.PartsSwapped, Ref: s.refs[0], Other: s.refs[1]}.String()
	}
	return ""
}

// anchored moves the parts that are off, alike and as a factor, until the unit reads benchDB
// between the given ends, by Newton's method in the logarithm of the factor. Where it
// cannot, leftDB is what is missing.
func (k ReworkCase) anchored(c *network.Circuit, off []string, e network.Ends, benchDB float64) (unit *network.Circuit, leftDB float64) {
	const steps, closeDB, longest = 12, 1e-10, 0.5
	best, least := c, math.Inf(1)
	for range steps {
		missing := benchDB - c.LossDB(e, k.Reading.FreqHz)
		if math.IsNaN(missing) || math.Abs(missing) >= least {
			break
		}
		best, least, leftDB = c, math.Abs(missing), missing
		if least < closeDB {
			break
		}
		slope := 0.0
		s := c.Sensitivities(e, k.Reading.FreqHz)
		for i, p := range c.Parts() {
			if slices.Contains(off, p.Ref) {
				slope += s[i]
			}
		}
		if slope == 0 {
			break
		}
		factor := math.Exp(math.Min(math.Max(missing/slope, -longest), longest))
		for _, ref := range off {
			p, _ := c.Part(ref)
			c = c.With(ref, p.Value*factor)
		}
	}
	return best, leftDB
}
