package compare

import (
	"math"
	"math/cmplx"
	"slices"
	"strings"

	"padproof/compare/network"
)

// A site is where a resistor may go: beside one part, beside both of a pair, or across two pins.
type site struct {
	refs     []string
	across   [2]string
	parallel bool
}

// sites are the places where a trim leaves a balanced pad as balanced as it is.
func (k ReworkCase) sites(seen []explanation) []site {
	var all []site
	both := func(refs ...string) {
		p, _ := k.Circuit.Part(refs[0])
		for _, parallel := range []bool{true, false} {
			all = append(all, site{refs, [2]string{p.A, p.B}, parallel})
		}
	}
	for _, p := range k.Circuit.Parts() {
		if p.Kind != network.Resistor || p.Value <= 0 || math.IsInf(p.Value, 0) {
			continue
		}
		partner, alone := k.partner(p.Ref), k.alone(seen)
		switch {
		case k.Circuit.Unbalanced() || partner == p.Ref || alone == p.Ref:
			both(p.Ref)
		case partner != "" && p.Ref < partner && alone != partner:
			both(p.Ref, partner)
		}
	}
	for _, pins := range k.pinPairs() {
		if !k.bridged(pins) {
			all = append(all, site{across: pins, parallel: true})
		}
	}
	return all
}

// alone is the one part that is known to be off; "" where it is not known, or two are.
func (k ReworkCase) alone(seen []explanation) string {
	if k.Unit != nil && len(seen) == 1 && len(seen[0].off) == 1 {
		return seen[0].off[0]
	}
	return ""
}

func (k ReworkCase) pinPairs() [][2]string {
	if k.Circuit.Unbalanced() {
		return [][2]string{{"out.hot", "screen"}, {"in.hot", "screen"}}
	}
	return [][2]string{{"out.hot", "out.cold"}, {"in.hot", "in.cold"}}
}

// bridged reports whether a resistor sits right across two pins: a trim then goes beside it.
func (k ReworkCase) bridged(pins [2]string) bool {
	return slices.ContainsFunc(k.Circuit.Parts(), func(p network.Part) bool {
		return p.Kind == network.Resistor && k.sameNodes([2]string{p.A, p.B}, pins)
	})
}

// sameNodes compares two pairs of nodes, either way round.
func (k ReworkCase) sameNodes(a, b [2]string) bool {
	for _, pair := range []*[2]string{&a, &b} {
		for i, n := range pair {
			if k.Circuit.Unbalanced() && strings.HasSuffix(n, ".cold") && (n == "in.cold" || n == "out.cold") {
				pair[i] = "screen"
			}
		}
	}
	return a == b || a == [2]string{b[1], b[0]}
}

// partner is the part in the same place of the other leg: the part itself where it lies between the
// legs, "" where there is none. Nodes are told by their names: x.hot and x.cold are partners, a node
// called otherwise belongs to no leg but the screen.
func (k ReworkCase) partner(ref string) string {
	p, _ := k.Circuit.Part(ref)
	want := [2]string{otherLeg(p.A), otherLeg(p.B)}
	if want[0] == "" || want[1] == "" {
		return ""
	}
	if k.sameNodes([2]string{p.A, p.B}, want) {
		return ref
	}
	for _, q := range k.Circuit.Parts() {
		if q.Kind == p.Kind && k.sameNodes([2]string{q.A, q.B}, want) {
			return q.Ref
		}
	}
	return ""
}

func otherLeg(node string) string {
	if name, ok := strings.CutSuffix(node, ".hot"); ok {
		return name + ".cold"
	}
	if name, ok := strings.CutSuffix(node, ".cold"); ok {
		return name + ".hot"
	}
	if node == "screen" {
		return node
	}
	return ""
}

// with is the value of a part with the trim beside it.
func (s site) with(value, ohms float64) float64 {
	if s.parallel {
		return value * ohms / (value + ohms)
	}
	return value + ohms
}

// trimRef is the ref of a resistor across two pins, until a person gives it one.
const trimRef = "trim"

// on is the unit with the trim in it.
func (s site) on(c *network.Circuit, ohms float64) *network.Circuit {
	if len(s.refs) == 0 {
		if trimmed, err := c.Added(network.Part{Ref: trimRef, Value: ohms, A: s.across[0], B: s.across[1]}); err == nil {
			return trimmed
		}
		return c // no room: the trim does nothing, and is not offered
	}
	for _, ref := range s.refs {
		p, _ := c.Part(ref)
		c = c.With(ref, s.with(p.Value, ohms))
	}
	return c
}

// watts is the heat in the hottest resistor of a trim: it takes its share of what the part and it
// take together.
func (k ReworkCase) watts(s site, unit *network.Circuit, ohms float64) float64 {
	if !(k.InputVoltsRMS > 0) {
		return math.NaN()
	}
	trimmed := s.on(unit, ohms)
	each := trimmed.Dissipation(k.Service, k.Reading.FreqHz, k.InputVoltsRMS)
	hottest := 0.0
	for i, p := range trimmed.Parts() {
		before, _ := unit.Part(p.Ref)
		share := 0.0
		switch {
		case p.Ref == trimRef && len(s.refs) == 0:
			share = 1
		case slices.Contains(s.refs, p.Ref) && s.parallel:
			share = before.Value / (before.Value + ohms)
		case slices.Contains(s.refs, p.Ref):
			share = ohms / (before.Value + ohms)
		}
		hottest = math.Max(hottest, share*each[i])
	}
	return hottest
}

// strain is how far the impedances at both ends lie from the drawing's, as logarithms, in service.
func (k ReworkCase) strain(c *network.Circuit) float64 {
	f := k.Reading.FreqHz
	apart := func(a, b complex128) float64 { return math.Abs(math.Log(cmplx.Abs(a) / cmplx.Abs(b))) }
	return apart(c.InputImpedance(k.Service, f), k.Circuit.InputImpedance(k.Service, f)) +
		apart(c.OutputImpedance(k.Service, f), k.Circuit.OutputImpedance(k.Service, f))
}
