package suspect

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"
)

// turnedP is the chance that the markers of a sound unit are read at the wrong polarity.
const turnedP = 1e-4

// soundP is the chance that a sound unit departs at least as far: chi-square over all that was
// measured, with what it has in common through parts and ends. A bound that is broken counts as a
// figure of its own. It follows a fill by the drawing's prediction.
func (w *scorer) soundP(drawn *prediction) float64 {
	w.fill(drawn)
	w.covariance()
	w.factor()
	chi, dof := w.chi(), float64(w.known)
	for i := w.known; i < len(w.rows); i++ {
		if p := w.boundChance(i); p < 0.5 {
			z := distuv.UnitNormal.Quantile(math.Max(p/2, 1e-12))
			chi, dof = chi+z*z, dof+1
		}
	}
	if w.noise != nil {
		if z, ok := w.noise.departure(drawn.noise); ok {
			chi, dof = chi+z*z, dof+1
		}
	}
	p := 1.0
	if dof > 0 {
		p = distuv.ChiSquared{K: dof}.Survival(chi)
	}
	if w.polarity(drawn) < math.Log(0.01) {
		p = math.Min(p, turnedP)
	}
	if math.IsNaN(p) {
		return 0
	}
	return p
}
