package network

import (
	"math"
)

// A Slope is a voltage per volt of EMF, or an impedance, with what each figure that it depends on
// does to it: the change per relative change, d At / d ln value. Links and open parts do nothing.
type Slope struct {
	At       complex128
	Parts    []complex128 // in part order
	Source   complex128
	Load     complex128 // all of the load; for a leg, the load of the hot leg
	ColdLoad complex128 // for a leg, the load of the cold leg; else 0
	Cable    complex128
}

// LoadSlope returns the voltage across the load with the pad and its slopes; parts is reused for the
// slopes of the parts where it is large enough. The adjoint network gives them all from one solution
// (Director and Rohrer 1969, from memory).
func (c *Circuit) LoadSlope(e Ends, freqHz float64, parts []complex128) Slope {
	return c.loadSlope(c.values, e, freqHz, parts)
}

// StraightSlope is LoadSlope straight through, without a pad.
func (c *Circuit) StraightSlope(e Ends, freqHz float64) Slope {
	return c.loadSlope(nil, e, freqHz, nil)
}

func (c *Circuit) loadSlope(values []float64, e Ends, freqHz float64, parts []complex128) Slope {
	s := c.through(values, e.bounded(), angular(freqHz))
	defer s.end()
	slope := c.slopeOf(s, outHot, outCold, values != nil, parts)
	slope.At = s.loadVolts()
	slope.Load += slope.ColdLoad
	slope.ColdLoad = 0
	return slope
}

// LegSlopes returns the leg voltages of [Circuit.LegVolts] with the pad and their slopes, by the load
// of each leg apart.
func (c *Circuit) LegSlopes(e Ends, legsLoadOhms, freqHz float64) (hot, cold Slope) {
	return c.legSlopes(c.values, e, legsLoadOhms, freqHz)
}

// StraightLegSlopes is LegSlopes straight through, without a pad.
func (c *Circuit) StraightLegSlopes(e Ends, legsLoadOhms, freqHz float64) (hot, cold Slope) {
	return c.legSlopes(nil, e, legsLoadOhms, freqHz)
}

func (c *Circuit) legSlopes(values []float64, e Ends, legsLoadOhms, freqHz float64) (hot, cold Slope) {
	e = e.bounded()
	e.Sense = SenseBalanced
	e.LoadOhms = 2 * atLeast(legsLoadOhms, minEndOhms)
	s := c.through(values, e, angular(freqHz))
	defer s.end()
	pad := values != nil
	if s.floating { // see legVolts: the middle lies at screen
		hot = c.slopeOf(s, outHot, outCold, pad, nil)
		return hot.times(0.5), hot.times(-0.5)
	}
	return c.slopeOf(s, outHot, screen, pad, nil), c.slopeOf(s, outCold, screen, pad, nil)
}

// slopeOf reads a voltage of a solved circuit and its slopes.
func (c *Circuit) slopeOf(s *solver, a, b uint8, pad bool, parts []complex128) Slope {
	slope := Slope{At: s.volts(a, b)}
	if pad {
		if cap(parts) < len(c.parts) {
			parts = make([]complex128, len(c.parts))
		}
		slope.Parts = parts[:len(c.parts)]
		clear(slope.Parts)
	}
	s.solveAdjoint(a, b)
	for i, br := range s.branches {
		if br.what != finite {
			continue
		}
		across := complex(br.emf, 0) - s.volts(br.a, br.b)
		change := br.y * across * s.adjointVolts(br.a, br.b) // per relative change of the admittance
		switch {
		case br.role == ofPad && c.parts[i].Kind == Capacitor:
			slope.Parts[i] = change
		case br.role == ofPad:
			slope.Parts[i] = -change
		case br.role == ofSource:
			slope.Source -= change
		case br.role == ofCable:
			slope.Cable += change
		case br.role == ofLoad && br.a == outCold:
			slope.ColdLoad -= change
		case br.role == ofLoad:
			slope.Load -= change
		}
	}
	return slope
}

func (p Slope) times(k complex128) Slope {
	parts := make([]complex128, len(p.Parts))
	for i, v := range p.Parts {
		parts[i] = k * v
	}
	return Slope{At: k * p.At, Parts: parts, Source: k * p.Source, Load: k * p.Load, ColdLoad: k * p.ColdLoad, Cable: k * p.Cable}
}

// OhmsSlope returns what [Circuit.Ohms] does, and the change per relative change of each part: the
// share of the reading that falls on the part (by Tellegen's theorem, the square of the current
// through it times its resistance, at 1 A). They add up to the reading. All are 0 where it is +Inf.
func (c *Circuit) OhmsSlope(pinA, pinB string, joined ...[2]string) (ohms float64, parts []float64) {
	parts = make([]float64, len(c.parts))
	s, a, b, ok := c.ohmmeter(pinA, pinB, joined)
	if !ok {
		return math.Inf(1), parts
	}
	defer s.end()
	ohms = real(s.impedance(a, b))
	if math.IsInf(ohms, 1) {
		return ohms, parts
	}
	for i, br := range s.branches {
		if br.what == finite {
			parts[i] = real(br.y) * square(s.volts(br.a, br.b))
		}
	}
	return ohms, parts
}
