package uncertainty

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/stat/distuv"
)

// DominantShare is how much of the combined standard uncertainty one rectangle
// may make before Student's t no longer describes the sum. At this share the
// rectangle is about half of the variance.
const DominantShare = 0.70

// A Budget holds all terms of one figure, independent of one another.
type Budget struct {
	Terms []Term
}

// Check returns an error that names the first term which is no such: a NaN, a
// negative or infinite figure, less than one degree of freedom.
func (b Budget) Check() error {
	for _, t := range b.Terms {
		if err := t.check(); err != nil {
			return err
		}
	}
	return nil
}

// CombinedU returns the combined standard uncertainty (JCGM 100:2008, 5.1.2): 0
// for an empty budget, NaN for one that [Budget.Check] refuses.
func (b Budget) CombinedU() float64 {
	if b.Check() != nil {
		return math.NaN()
	}
	var u float64
	for _, t := range b.Terms {
		u = math.Hypot(u, t.Contribution())
	}
	return u
}

// EffectiveDof returns the effective degrees of freedom of Welch and
// Satterthwaite (JCGM 100:2008, G.2b), not yet cut down to a whole number: +Inf
// where no term that counts has finite ones, NaN for a budget that
// [Budget.Check] refuses.
func (b Budget) EffectiveDof() float64 {
	combined := b.CombinedU()
	if math.IsNaN(combined) {
		return combined
	}
	var sum float64
	for _, t := range b.Terms {
		if c := t.Contribution(); c > 0 {
			sum += math.Pow(c/combined, 4) / t.Dof
		}
	}
	return 1 / sum // +Inf for a sum of 0
}

// Dominant returns the term that contributes most and its share of the combined
// standard uncertainty, Contribution/CombinedU, 0 to 1. The shares of all terms
// do not add up to 1; their squares do. A share of 0 and an empty term stand for
// a budget without doubt, or one that [Budget.Check] refuses.
func (b Budget) Dominant() (t Term, share float64) {
	i, share := b.largest()
	if share == 0 {
		return Term{}, 0
	}
	return b.Terms[i], share
}

func (b Budget) largest() (index int, share float64) {
	combined := b.CombinedU()
	if !(combined > 0) {
		return 0, 0
	}
	for i, t := range b.Terms {
		if s := t.Contribution() / combined; s > share {
			index, share = i, s
		}
	}
	return index, share
}

// ExpandedU returns U, the half-width of the interval that holds the given
// coverage (0.95 for 95 %): Student's t at the effective degrees of freedom, cut
// down to a whole number, times the combined standard uncertainty; or, where one
// rectangle of infinite Dof makes more than [DominantShare] of it, the interval
// of the rectangle and the rest together. Repeatable to the last digit. A budget
// that is empty, or nil throughout, gives 0. The error is that of
// [Budget.Check], or names a coverage that is not between 0 and 1; U is then NaN.
func (b Budget) ExpandedU(coverage float64) (float64, error) {
	if !(coverage > 0 && coverage < 1) {
		return math.NaN(), fmt.Errorf("coverage %g is not between 0 and 1", coverage)
	}
	if err := b.Check(); err != nil {
		return math.NaN(), err
	}
	i, share := b.largest()
	if share > DominantShare && b.Terms[i].Shape == Rectangle && math.IsInf(b.Terms[i].Dof, 1) {
		rest := b.without(i)
		return rectangleHalfWidth(b.Terms[i].Contribution()*math.Sqrt(3),
			rest.CombinedU(), wholeDof(rest.EffectiveDof()), coverage), nil
	}
	combined := b.CombinedU()
	if combined == 0 {
		return 0, nil
	}
	return CoverageFactor(coverage, b.EffectiveDof()) * combined, nil
}

func (b Budget) without(index int) Budget {
	var rest Budget
	rest.Terms = append(rest.Terms, b.Terms[:index]...)
	rest.Terms = append(rest.Terms, b.Terms[index+1:]...)
	return rest
}

// CoverageFactor returns k: the half-width, in standard uncertainties, that
// holds the coverage of a Student's t with dof degrees of freedom, cut down to a
// whole number first (JCGM 100:2008, G.4.1 and Table G.2); of the normal
// distribution at +Inf. NaN for a coverage that is not between 0 and 1 or less
// than one degree of freedom.
func CoverageFactor(coverage, dof float64) float64 {
	if !(coverage > 0 && coverage < 1) || !(dof >= 1) {
		return math.NaN()
	}
	return quantileT((1+coverage)/2, wholeDof(dof))
}

// wholeDof cuts down to a whole number, but not a whole number to the one below
// for a rounding error: Welch and Satterthwaite give 6.9999999 for a lone 7.
func wholeDof(dof float64) float64 {
	if math.IsInf(dof, 1) {
		return dof
	}
	return math.Floor(dof * (1 + 1e-9))
}

// manyDof is where a Student's t is turned into a correction of the normal
// quantile. Beyond it the search in distuv loses digits and at last its way.
const manyDof = 10_000

// quantileT is the p quantile of Student's t. For many degrees of freedom it is
// the first term of the expansion about the normal quantile (Abramowitz and
// Stegun, 26.7.5), good to 1e-6 there for any p in use.
func quantileT(p, dof float64) float64 {
	if dof <= manyDof {
		return distuv.StudentsT{Sigma: 1, Nu: dof}.Quantile(p)
	}
	z := distuv.UnitNormal.Quantile(p)
	return z + z*(z*z+1)/(4*dof)
}
