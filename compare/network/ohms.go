package network

import (
	"math"
	"slices"
)

// Ohms returns what an ohmmeter reads between two nodes of the unit alone, everything
// else open: direct current, so capacitors are open and inductors links. The joined
// pairs are shorted together first, the other end for example:
//
//	c.Ohms("in.hot", "in.cold", [2]string{"out.hot", "out.cold"})
//
// It is 0 between nodes that are one and +Inf where no current can flow. A name that is
// no node of the drawing touches nothing. In an unbalanced network in.cold, out.cold
// and screen are one node.
func (c *Circuit) Ohms(pinA, pinB string, joined ...[2]string) float64 {
	a, okA := c.node(pinA)
	b, okB := c.node(pinB)
	if !okA || !okB {
		return math.Inf(1)
	}
	s := begin(len(c.nodes))
	defer s.end()
	s.pad(c, c.values, 0)
	if c.unbalanced {
		s.wire(inCold, screen)
		s.wire(outCold, screen)
	}
	for _, pair := range joined {
		p, okP := c.node(pair[0])
		q, okQ := c.node(pair[1])
		if okP && okQ {
			s.wire(p, q)
		}
	}
	return real(s.impedance(a, b))
}

// OneNode reports whether two names mean one node: the same name, or two of in.cold, out.cold
// and screen in an unbalanced network.
func (c *Circuit) OneNode(a, b string) bool {
	return a == b || c.unbalanced && cold(a) && cold(b)
}

func cold(name string) bool {
	return name == terminalNames[screen] || name == terminalNames[inCold] || name == terminalNames[outCold]
}

// windingHz is where a coil's reactance is taken for the most that its wire may have in
// resistance: a coil of a quality under 1 at 1 kHz is no use in a pad (common practice, no
// source).
const windingHz = 1000

// OhmExtremes returns the two circuits between whose [Circuit.Ohms] those of every unit lie
// whose parts keep to their tolerances: the resistance between two nodes of a network of
// resistors never falls when one of them rises (Rayleigh's monotonicity law; Doyle and Snell,
// Random Walks and Electric Networks, 1984, from memory). The wire of an inductor, which no
// drawing states, has from nothing to its reactance at 1 kHz: in most it is a resistor.
func (c *Circuit) OhmExtremes() (least, most *Circuit) {
	at := func(sign float64) *Circuit {
		return c.edited(func(parts []Part) {
			for i := range parts {
				p := &parts[i]
				if p.Kind != Capacitor && !math.IsInf(p.Value, 1) {
					p.Value *= 1 + sign*p.TolFrac
				}
				if p.Kind == Inductor && sign > 0 {
					p.Kind, p.Value = Resistor, 2*math.Pi*windingHz*p.Value
				}
			}
		})
	}
	return at(-1), at(1)
}

// node returns the number of a node.
func (c *Circuit) node(name string) (uint8, bool) {
	i := slices.Index(c.nodes, name)
	return uint8(max(i, 0)), i >= 0
}
