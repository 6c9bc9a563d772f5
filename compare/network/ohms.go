package network

import (
	"math"
	"slices"
)

// Ohms returns what an ohmmeter reads between two nodes of the unit alone, everything
// else open: direct current, so capacitors are open, unless shorted, and inductors links, unless broken. The joined
// pairs are shorted together first, the other end for example:
//
//	c.Ohms("in.hot", "in.cold", [2]string{"out.hot", "out.cold"})
//
// It is 0 between nodes that are one and +Inf where no current can flow. A name that is
// no node of the drawing touches nothing. In an unbalanced network in.cold, out.cold
// and screen are one node.
func (c *Circuit) Ohms(pinA, pinB string, joined ...[2]string) float64 {
	s, a, b, ok := c.ohmmeter(pinA, pinB, joined)
	if !ok {
		return math.Inf(1)
	}
	defer s.end()
	return real(s.impedance(a, b))
}

// ohmmeter fills a solver with the unit alone; false where a pin is no node.
func (c *Circuit) ohmmeter(pinA, pinB string, joined [][2]string) (s *solver, a, b uint8, ok bool) {
	a, okA := c.node(pinA)
	b, okB := c.node(pinB)
	if !okA || !okB {
		return nil, 0, 0, false
	}
	s = begin(len(c.nodes))
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
	return s, a, b, true
}

// node returns the number of a node.
func (c *Circuit) node(name string) (uint8, bool) {
	i := slices.Index(c.nodes, name)
	return uint8(max(i, 0)), i >= 0
}
