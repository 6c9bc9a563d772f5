package network

import "math"

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
