package network

import "math"

// An impedance under linkOhms counts as a link, one over openOhms as open. Between
// them the solver works without loss of digits.
const (
	linkOhms = 1e-15
	openOhms = 1e18
	maxHz    = 1e9
)

// A branch is what lies between two nodes at one frequency: an admittance, perhaps
// with an EMF in series that drives current out of it into a.
type branch struct {
	a, b uint8
	what state
	role role
	y    complex128 // siemens
	emf  float64    // volts
}

type state uint8

const (
	finite state = iota
	link
	open
)

type role uint8

const (
	ofPad role = iota
	ofSource
	ofLoad
	ofCable
)

// angular returns 2πf, with f brought into the range that the solver takes.
func angular(freqHz float64) float64 {
	return 2 * math.Pi * min(atLeast(freqHz, 0), maxHz)
}

// between returns a part of the given value between two nodes.
func between(a, b uint8, kind Kind, value, omega float64) branch {
	br := branch{a: a, b: b}
	switch kind {
	case Resistor:
		if br.what = kindOfOhms(value); br.what == finite {
			br.y = complex(1/value, 0)
		}
	case Inductor:
		ohms := omega * value
		switch {
		case math.IsInf(value, 1):
			ohms = value // its wire is broken, for direct current too
		case omega == 0:
			ohms = 0
		}
		if br.what = kindOfOhms(ohms); br.what == finite {
			br.y = complex(0, -1/ohms)
		}
	case Capacitor:
		siemens := omega * value
		switch {
		case math.IsInf(value, 1):
			siemens = value // shorted, for direct current too
		case omega == 0:
			siemens = 0
		}
		if br.what = kindOfOhms(1 / siemens); br.what == finite {
			br.y = complex(0, siemens)
		}
	}
	return br
}

// kindOfOhms says how an impedance of that size is treated.
func kindOfOhms(ohms float64) state {
	switch {
	case ohms < linkOhms:
		return link
	case ohms > openOhms:
		return open
	}
	return finite
}

// finiteRange returns the least and the most value of a part that is neither link
// nor open.
func finiteRange(kind Kind, omega float64) (low, high float64) {
	low, high = 2*linkOhms, openOhms/2
	switch kind {
	case Inductor:
		return low / omega, high / omega
	case Capacitor:
		return 1 / (omega * high), 1 / (omega * low)
	}
	return low, high
}
