package lotstat

import (
	"math"

	"padproof/compare"
	"padproof/compare/network"
)

// A Model is how the bench loss of a drawing depends on its parts and on the ends
// of the bench.
type Model struct {
	Parts []LotPart
	Ends  []LotEnd
}

// A LotPart is one part of the drawing.
type LotPart struct {
	Ref     string
	Kind    network.Kind
	Value   float64 // Ω, F or H
	TolFrac float64 // half-width
	BenchDB float64 // change of the bench loss per relative change of the value, dB
}

// A LotEnd is one figure of the bench.
type LotEnd struct {
	Name    string  // "source", "load", "cable"
	TolFrac float64 // half-width; an end without is not suspected
	BenchDB float64 // as of a part
}

// ModelOf makes the model of a drawing on a bench at a frequency.
func ModelOf(c *network.Circuit, rig compare.Rig, freqHz float64) Model {
	var m Model
	sens := c.Sensitivities(rig.Ends, freqHz)
	for i, p := range c.Parts() {
		m.Parts = append(m.Parts, LotPart{Ref: p.Ref, Kind: p.Kind, Value: p.Value, TolFrac: p.TolFrac, BenchDB: sens[i]})
	}
	ends := c.EndSensitivities(rig.Ends, freqHz)
	m.Ends = []LotEnd{
		{"source", rig.SourceTolFrac, ends.SourceDB},
		{"load", rig.LoadTolFrac, ends.LoadDB},
	}
	if rig.Ends.CableFarads > 0 {
		m.Ends = append(m.Ends, LotEnd{"cable", rig.CableTolFarads / rig.Ends.CableFarads, ends.CableDB})
	}
	return m
}

// soundStdDevDB is the spread that parts drawn from rectangles as wide as their
// tolerances give units.
func (m Model) soundStdDevDB() float64 {
	sum := 0.0
	for _, p := range m.Parts {
		sum += square(p.BenchDB*p.TolFrac) / 3
	}
	return math.Sqrt(sum)
}
