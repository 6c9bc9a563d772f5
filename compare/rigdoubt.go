package compare

import (
	"math"

	"padproof/compare/network"
	"padproof/compare/uncertainty"
)

// rigMoves are the ends of the rig with one figure at an end of its rectangle.
type rigMove struct {
	source string
	half   float64
	move   func(e *network.Ends, sign float64)
}

func (r Rig) moves() []rigMove {
	all := []rigMove{
		{sourceSrc, r.SourceTolFrac * r.Ends.SourceOhms, func(e *network.Ends, sign float64) {
			e.SourceOhms = math.Max(0, e.SourceOhms+sign*r.SourceTolFrac*r.Ends.SourceOhms)
		}},
		{loadSrc, r.LoadTolFrac * r.Ends.LoadOhms, func(e *network.Ends, sign float64) {
			e.LoadOhms = math.Max(0, e.LoadOhms+sign*r.LoadTolFrac*r.Ends.LoadOhms)
		}},
		{cableSrc, r.CableTolFarads, func(e *network.Ends, sign float64) {
			e.CableFarads = math.Max(0, e.CableFarads+sign*r.CableTolFarads)
		}},
	}
	var some []rigMove
	for _, m := range all {
		if m.half > 0 && !math.IsInf(m.half, 0) && !math.IsNaN(m.half) {
			some = append(some, m)
		}
	}
	return some
}

// cornerDB is how far the loss of a circuit may lie from that between the stated
// ends: the worst of all corners of the rig's rectangles.
func (r Rig) cornerDB(c *network.Circuit, freqHz float64) float64 {
	moves := r.moves()
	stated := c.LossDB(r.Ends, freqHz)
	worst := 0.0
	for corner := range 1 << len(moves) {
		e := r.Ends
		for i, m := range moves {
			m.move(&e, float64(2*(corner>>i&1)-1))
		}
		if d := math.Abs(c.LossDB(e, freqHz) - stated); d > worst && !math.IsInf(d, 0) {
			worst = d
		}
	}
	return worst
}

// rigTerms are the rig's impedances through the model. Each counts with the
// larger of its two one-sided deviations; what source, load and cable do
// together beyond the sum of these, as between matched ends, where each alone
// does next to nothing, is a term of its own. The measured loss holds the true
// impedances and the modelled one the stated, so a larger loss at a larger
// source lowers the difference: the sign is minus.
func rigTerms(k LossCase, beta float64) []uncertainty.Term {
	c, f := k.Circuit, k.Reading.FreqHz
	stated := c.LossDB(k.Rig.Ends, f)
	if math.IsInf(stated, 0) {
		return nil // nothing comes through, whatever the rig
	}
	var terms []uncertainty.Term
	sum := 0.0
	for _, m := range k.Rig.moves() {
		below, above := k.Rig.Ends, k.Rig.Ends
		m.move(&below, -1)
		m.move(&above, 1)
		up, down := c.LossDB(above, f)-stated, c.LossDB(below, f)-stated
		most := up
		if math.Abs(down) > math.Abs(up) {
			most = -down
		}
		if math.IsNaN(most) || math.IsInf(most, 0) {
			continue
		}
		sum += math.Abs(most)
		terms = append(terms, uncertainty.FromRectangle(m.source, m.half, -beta*most/m.half))
	}
	if together := k.Rig.cornerDB(c, f) - sum; together > 1e-6 {
		terms = append(terms, uncertainty.FromRectangle(togetherSrc, together, beta))
	}
	return terms
}
