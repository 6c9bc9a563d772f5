package suspect

import (
	"math"
	"math/cmplx"

	"padproof/compare"
	"padproof/compare/network"
)

// A print is what pins can show of a circuit: transfers at bench and service, legs, and what an
// ohmmeter reads.
type print []complex128

var printHz = []float64{20, 1000, 20000}

// printOf takes the print of a circuit, cheapest figures first, and stops at the first that differs
// from another's.
func (s *search) printOf(c *network.Circuit, against print) (p print, same bool) {
	add := func(v complex128) bool {
		p = append(p, v)
		return against == nil || alikeFigures(v, against[len(p)-1])
	}
	for _, e := range []network.Ends{s.ends, s.serviceEnds()} {
		for _, hz := range printHz {
			if !add(c.Transfer(e, hz)) {
				return p, false
			}
		}
	}
	legsOhms := s.ends.LoadOhms
	if s.e.Legs != nil {
		legsOhms = s.e.Legs.LoadOhms
	}
	_, legs := c.LegVolts(s.ends, legsOhms, 1000)
	if !add(legs.Hot) || !add(legs.Cold) {
		return p, false
	}
	for _, r := range compare.Readings(s.e.Circuit) {
		if !add(complex(math.Min(r.On(c), 1e12), 0)) {
			return p, false
		}
	}
	return p, true
}

// alikeFigures leaves room for rounding: one circuit may be written in two ways.
func alikeFigures(a, b complex128) bool {
	const relative, nothing = 1e-9, 1e-13
	return cmplx.Abs(a-b) <= relative*math.Max(cmplx.Abs(a), cmplx.Abs(b))+nothing
}

// alike tells whether no pin can tell two hypotheses apart: one circuit, or a part of another value
// and a drift of it by as much as that, within its doubt.
func (s *search) alike(a, b *hypothesis) bool {
	if a.fault.End != b.fault.End {
		return false
	}
	if a.family != b.family {
		if b.family {
			a, b = b, a
		}
		return s.driftIs(a, b)
	}
	if a.family {
		return a.fault.End != NoEnd || a.fault.Ref == b.fault.Ref
	}
	if a.print == nil {
		a.print, _ = s.printOf(a.circuit, nil)
	}
	_, same := s.printOf(b.circuit, a.print)
	return same
}

// driftIs tells whether a drift of a part may be the other value that it has in b.
func (s *search) driftIs(drift, b *hypothesis) bool {
	if drift.fault.End != NoEnd || len(b.fault.Parts()) != 1 || b.fault.Ref != drift.fault.Ref {
		return false
	}
	was, _ := s.e.Circuit.Part(b.fault.Ref)
	is, _ := b.circuit.Part(b.fault.Ref)
	t := math.Log(is.Value / was.Value)
	const doubts = 2
	return math.Abs(t-drift.in.t) <= doubts*drift.in.tStdU+1e-3
}
