package network

import "math"

// BoltzmannJPerK is the Boltzmann constant in joules per kelvin: exact, by the definition of the
// kelvin of 2019 (CGPM 26, Resolution 1).
const BoltzmannJPerK = 1.380649e-23

// A Band runs from LowHz to HighHz.
type Band struct{ LowHz, HighHz float64 }

// Thermal is the thermal noise across the load, between the output legs (hot to screen
// if the network or the sense is unbalanced): volts squared per hertz, or volts squared
// where it is summed over a band.
type Thermal struct {
	UnitVV float64 // of the pad with the source impedance at its input
	LoadVV float64 // of the load, if it is a real resistor
	OhmsSq float64 // |Z|² of all that lies there: times a noise current squared it is volts squared
}

// ThermalDensity returns the thermal noise at a frequency, all at one temperature in kelvin. UnitVV
// is 4kT Re Zout |Zl/(Zl+Zout)|² (H. Nyquist, Phys. Rev. 32, 1928), Zout being
// [Circuit.OutputImpedance] and Zl load and cable. It is worked out part by part: a current into
// the output makes across each resistor what a current in that resistor makes at the output, so
// that a load tied to screen beside a lopsided pad needs no care either. EMF has no part in it; for
// a pad whose input is closed by a plug, leg to leg, the plug is the source and floats.
//
// A temperature below 0 or NaN counts as 0.
func (c *Circuit) ThermalDensity(e Ends, freqHz, kelvin float64) Thermal {
	return c.thermal(c.values, e, freqHz, kelvin)
}

// StraightThermalDensity is ThermalDensity with the source impedance right at the load and no pad:
// UnitVV is that of a plug that closes the rig's input.
func (c *Circuit) StraightThermalDensity(e Ends, freqHz, kelvin float64) Thermal {
	return c.thermal(nil, e, freqHz, kelvin)
}

// ThermalNoise returns ThermalDensity summed over bands: exact to about a part in a million where no
// resonance is sharper than a quality of 10.
func (c *Circuit) ThermalNoise(e Ends, kelvin float64, bands []Band) Thermal {
	return c.thermalOver(c.values, e, kelvin, bands)
}

// StraightThermalNoise returns StraightThermalDensity summed over bands.
func (c *Circuit) StraightThermalNoise(e Ends, kelvin float64, bands []Band) Thermal {
	return c.thermalOver(nil, e, kelvin, bands)
}

func (c *Circuit) thermal(values []float64, e Ends, freqHz, kelvin float64) Thermal {
	e = e.bounded()
	omega := angular(freqHz)
	nodes := terminals
	if values != nil {
		nodes = len(c.nodes)
	}
	s := begin(nodes)
	defer s.end()
	if values != nil {
		s.pad(c, values, omega)
	} else {
		s.straight()
	}
	s.plugs(c.unbalanced, e)
	s.source(e, 0)
	s.load(e, omega)
	s.inject(outHot, outCold, 1)
	s.build()
	s.solve()
	var t Thermal
	density := 4 * BoltzmannJPerK * atLeast(kelvin, 0)
	for _, b := range s.branches {
		if b.what != finite {
			continue
		}
		v := density * real(b.y) * square(s.volts(b.a, b.b))
		if b.role == ofLoad {
			t.LoadVV += v
		} else {
			t.UnitVV += v
		}
	}
	t.OhmsSq = square(s.volts(outHot, outCold))
	return t
}

// Gauss's four points on -1 to 1 and their weights (Abramowitz and Stegun, 25.4.30), on panels of a
// sixth of an octave at most.
var (
	gaussAt      = [4]float64{-0.861136311594053, -0.339981043584856, 0.339981043584856, 0.861136311594053}
	gaussWeights = [4]float64{0.347854845137454, 0.652145154862546, 0.652145154862546, 0.347854845137454}
)

const panelRatio = 1.122462048309373

func (c *Circuit) thermalOver(values []float64, e Ends, kelvin float64, bands []Band) Thermal {
	var total Thermal
	add := func(freqHz, widthHz float64) {
		t := c.thermal(values, e, freqHz, kelvin)
		total.UnitVV += t.UnitVV * widthHz
		total.LoadVV += t.LoadVV * widthHz
		total.OhmsSq += t.OhmsSq * widthHz
	}
	if e.CableFarads == 0 && (values == nil || c.resistive()) {
		width := 0.0
		for _, b := range bands {
			width += math.Max(0, b.HighHz-b.LowHz)
		}
		add(1000, width)
		return total
	}
	for _, b := range bands {
		for low := math.Max(0, b.LowHz); low < b.HighHz; {
			high := math.Min(b.HighHz, math.Max(low*panelRatio, low+1))
			for i, x := range gaussAt {
				add((low+high)/2+x*(high-low)/2, gaussWeights[i]*(high-low)/2)
			}
			low = high
		}
	}
	return total
}

// resistive reports whether all parts are resistors.
func (c *Circuit) resistive() bool {
	for _, p := range c.parts {
		if p.Kind != Resistor {
			return false
		}
	}
	return true
}
