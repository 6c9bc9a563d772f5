package network

import "math"

// dbPerNeper turns a relative change of a voltage into dB.
const dbPerNeper = 20 / math.Ln10

// Sensitivities returns, for each part in part order, the change of LossDB per relative
// change of its value: d LossDB / d ln value. It is 0 for links and open parts, and for
// all where nothing comes through. The adjoint network gives them all from one
// solution (Director and Rohrer 1969, from memory).
func (c *Circuit) Sensitivities(e Ends, freqHz float64) []float64 {
	sens := make([]float64, len(c.parts))
	s := c.through(c.values, e.bounded(), angular(freqHz))
	defer s.end()
	s.eachSensitivity(func(i int, b branch, db float64) {
		if b.role != ofPad {
			return
		}
		if c.parts[i].Kind != Capacitor {
			db = -db // admittance falls as the value rises
		}
		sens[i] = db
	})
	return sens
}

// EndSensitivity is the change of LossDB per relative change of each figure of the
// ends.
type EndSensitivity struct {
	SourceDB, LoadDB, CableDB float64
}

// EndSensitivities returns the change of LossDB per relative change of the source, the
// load and the cable: d LossDB / d ln value, with the figure changed on both sides of
// the comparison. It is 0 for a cable of 0 F and a load of +Inf, and for all where
// nothing comes through.
func (c *Circuit) EndSensitivities(e Ends, freqHz float64) EndSensitivity {
	e = e.bounded()
	omega := angular(freqHz)
	with := c.endSensitivity(c.values, e, omega)
	if with == (EndSensitivity{}) {
		return with
	}
	straight := c.endSensitivity(nil, e, omega)
	return EndSensitivity{
		SourceDB: with.SourceDB - straight.SourceDB,
		LoadDB:   with.LoadDB - straight.LoadDB,
		CableDB:  with.CableDB - straight.CableDB,
	}
}

// endSensitivity does so for the load voltage alone, as a loss.
func (c *Circuit) endSensitivity(values []float64, e Ends, omega float64) (sens EndSensitivity) {
	s := c.through(values, e, omega)
	defer s.end()
	s.eachSensitivity(func(_ int, b branch, db float64) {
		switch b.role {
		case ofSource:
			sens.SourceDB -= db
		case ofLoad:
			sens.LoadDB -= db
		case ofCable:
			sens.CableDB += db
		}
	})
	return sens
}

// eachSensitivity gives, for each finite branch, the change of the loss in dB per
// relative change of its admittance; nothing if no voltage stands at the load.
func (s *solver) eachSensitivity(yield func(i int, b branch, db float64)) {
	load := s.loadVolts()
	if load == 0 {
		return
	}
	s.solveAdjoint(outHot, outCold)
	for i, b := range s.branches {
		if b.what != finite {
			continue
		}
		across := complex(b.emf, 0) - s.volts(b.a, b.b)
		change := b.y * across * s.adjointVolts(b.a, b.b) / load
		yield(i, b, -dbPerNeper*real(change))
	}
}
