package lotstat

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"
)

// A Width is the spread of a lot held against what sound parts would give.
type Width struct {
	Shown    bool    // P is under 0.01
	StdDevDB float64 // observed, a trend or a step taken off; NaN of less than two units
	SoundDB  float64 // standard deviation of units with parts within tolerance, as measured
	P        float64 // chance of so wide a spread with sound parts; NaN where not tested
}

// widthOf is the chi-square test of a variance (NIST/SEMATECH e-Handbook 1.3.5.8):
//
//	χ² = dof observed² / sound²
//
// sound² adds the parts, drawn from rectangles as wide as their tolerances
// (sensitivity² tolerance² / 3 each), and the readings' own uncertainty. Sums of
// rectangles have short tails: sound lots then break it less often than stated.
func widthOf(l Lot, o ordered) Width {
	w := Width{StdDevDB: math.NaN(), P: math.NaN(), SoundDB: math.Hypot(l.Model.soundStdDevDB(), l.stdUDB())}
	dof := float64(len(o.rest) - o.spent)
	if dof < 1 {
		return w
	}
	squares := sumSquares(o.rest)
	w.StdDevDB = math.Sqrt(squares / dof)
	if w.SoundDB > 0 {
		w.P = distuv.ChiSquared{K: dof}.Survival(squares / square(w.SoundDB))
		w.Shown = w.P < caseAlpha
	}
	return w
}
