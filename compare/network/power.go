package network

import "math/cmplx"

// Dissipation returns the watts in each part, in part order, while the pad's input
// stands at inputVoltsRMS, leg to leg (hot to screen if the network or the drive is
// unbalanced), driven by these ends. Links, open parts, capacitors and inductors take
// none. Where the pad shorts its input, so that no voltage can stand there, all are 0.
func (c *Circuit) Dissipation(e Ends, freqHz, inputVoltsRMS float64) []float64 {
	watts := make([]float64, len(c.parts))
	s := c.through(c.values, e.bounded(), angular(freqHz))
	defer s.end()
	at := cmplx.Abs(s.volts(inHot, inCold))
	if at == 0 {
		return watts
	}
	scale := inputVoltsRMS / at
	for i := range watts {
		if b := s.branches[i]; b.what == finite {
			v := scale * cmplx.Abs(s.volts(b.a, b.b))
			watts[i] = v * v * real(b.y)
		}
	}
	return watts
}
