package network

import (
	"math"
)

// InputImpedance returns what the source sees: the impedance between the input legs,
// hot to screen if the network or the drive is unbalanced, with load and cable in
// place and the source taken away. It is +Inf (no imaginary part) where no current can
// flow.
func (c *Circuit) InputImpedance(e Ends, freqHz float64) complex128 {
	e = e.bounded()
	omega := angular(freqHz)
	s := begin(len(c.nodes))
	defer s.end()
	s.pad(c, c.values, omega)
	s.plugs(c.unbalanced, e)
	s.load(e, omega)
	return s.impedance(inHot, inCold)
}

// OutputImpedance returns what the load sees: the impedance between the output legs,
// hot to screen if the network or the sense is unbalanced, with the source connected
// but dead, load and cable taken away. It is +Inf (no imaginary part) where no current
// can flow. Its real part is what makes the pad's thermal noise.
func (c *Circuit) OutputImpedance(e Ends, freqHz float64) complex128 {
	e = e.bounded()
	omega := angular(freqHz)
	s := begin(len(c.nodes))
	defer s.end()
	s.pad(c, c.values, omega)
	s.plugs(c.unbalanced, e)
	s.source(e, 0)
	return s.impedance(outHot, outCold)
}

// impedance returns the impedance between two drawn nodes of a filled solver.
func (s *solver) impedance(a, b uint8) complex128 {
	s.inject(a, b, 1)
	s.build()
	if !s.joined(a, b) {
		return complex(math.Inf(1), 0)
	}
	s.solve()
	return s.volts(a, b)
}
