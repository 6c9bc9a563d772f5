package proof

import (
	"math"

	"padproof/cmd/padproof/internal/result"
	"padproof/compare"
	"padproof/compare/network"
)

// drawnOf is a circuit in the form of the result; nil where there is none.
func drawnOf(c *network.Circuit) *result.Drawing {
	if c == nil {
		return nil
	}
	d := &result.Drawing{Network: c.Name(), Unbalanced: c.Unbalanced()}
	for _, p := range c.Parts() {
		d.Parts = append(d.Parts, result.DrawnPart{
			Ref: p.Ref, Kind: p.Kind.String(), Value: result.Number(p.Value), Code: p.Code(), A: p.A, B: p.B,
		})
	}
	return d
}

// spreadCurve is the loss in thirds of an octave from 20 Hz to 20 kHz, with the
// spread of sound units.
func spreadCurve(c *network.Circuit, e network.Ends) []result.SpreadPoint {
	var curve []result.SpreadPoint
	for n := -17; n <= 13; n++ {
		freqHz := 1000 * math.Pow(10, float64(n)/10)
		curve = append(curve, result.SpreadPoint{
			FreqHz: result.Number(freqHz), LossDB: result.Number(c.LossDB(e, freqHz)), Spread: spreadOf(compare.SoundSpread(c, e, freqHz)),
		})
	}
	return curve
}
