package compare

import (
	"math"

	"padproof/compare/network"
	"padproof/compare/uncertainty"
)

// CurveTerms gives the terms that the rig's impedances leave open of a designed
// response: of the loss of a circuit at one frequency less that at the tone, in
// dB. Each counts with the larger of its two one-sided deviations.
func (r Rig) CurveTerms(c *network.Circuit) func(freqHz, toneHz float64) []uncertainty.Term {
	return func(freqHz, toneHz float64) []uncertainty.Term {
		curve := func(e network.Ends) float64 { return c.LossDB(e, freqHz) - c.LossDB(e, toneHz) }
		stated := curve(r.Ends)
		var terms []uncertainty.Term
		for _, m := range r.moves() {
			below, above := r.Ends, r.Ends
			m.move(&below, -1)
			m.move(&above, 1)
			most := math.Max(math.Abs(curve(above)-stated), math.Abs(curve(below)-stated))
			if most > 1e-9 && !math.IsInf(most, 0) {
				terms = append(terms, uncertainty.FromRectangle(m.source, m.half, most/m.half))
			}
		}
		return terms
	}
}
