package uncertainty

import (
	"fmt"
	"math"
	"math/rand/v2"

	"gonum.org/v1/gonum/stat/distuv"
)

// A Distribution is what an input of [MonteCarlo] is drawn from. The functions
// below make one; a Scale of 0 always gives Centre.
type Distribution struct {
	Shape  Shape
	Centre float64 // mean and middle, in the unit of the input
	Scale  float64 // Normal: standard deviation; StudentT: scale; else half-width
	Dof    float64 // StudentT only, 1 or more
}

// Gaussian is the normal distribution of a mean and standard deviation.
func Gaussian(mean, sd float64) Distribution { return Distribution{Normal, mean, sd, 0} }

// ScaledT is what a mean of few readings tells of its quantity (JCGM 101:2008,
// 6.4.9): Student's t moved to mean and widened by scale, the standard error of
// that mean. Its standard deviation is larger, scale·√(dof/(dof-2)), and for 2
// degrees of freedom or less not finite.
func ScaledT(mean, scale, dof float64) Distribution {
	return Distribution{StudentT, mean, scale, dof}
}

// ScaledTOfSD is a Student's t with the standard deviation sd, which needs more
// than 2 degrees of freedom: the reading of NIST TN 1900, Example E11. Not to be
// confused with [ScaledT], which is wider.
func ScaledTOfSD(mean, sd, dof float64) Distribution {
	if !(dof > 2) {
		return Distribution{StudentT, mean, math.NaN(), dof}
	}
	return Distribution{StudentT, mean, sd * math.Sqrt((dof-2)/dof), dof}
}

// Uniform is the rectangle mean ± halfWidth (JCGM 101:2008, 6.4.2).
func Uniform(mean, halfWidth float64) Distribution {
	return Distribution{Rectangle, mean, halfWidth, 0}
}

// UShaped is the arcsine distribution mean ± halfWidth (JCGM 101:2008, 6.4.6).
func UShaped(mean, halfWidth float64) Distribution {
	return Distribution{Arcsine, mean, halfWidth, 0}
}

// Triangular is the symmetric triangle mean ± halfWidth (JCGM 101:2008, 6.4.5).
func Triangular(mean, halfWidth float64) Distribution {
	return Distribution{Triangle, mean, halfWidth, 0}
}

// Draw returns the next value, NaN from a shape that is none.
func (d Distribution) Draw(rng *rand.Rand) float64 {
	switch d.Shape {
	case Normal:
		return d.Centre + d.Scale*rng.NormFloat64()
	case StudentT:
		return distuv.StudentsT{Mu: d.Centre, Sigma: d.Scale, Nu: d.Dof, Src: rng}.Rand()
	case Rectangle:
		return d.Centre + d.Scale*(2*rng.Float64()-1)
	case Arcsine:
		return d.Centre + d.Scale*math.Sin(2*math.Pi*rng.Float64())
	case Triangle:
		return d.Centre + d.Scale*(rng.Float64()-rng.Float64())
	}
	return math.NaN()
}

// check says what is wrong with the distribution, or nil.
func (d Distribution) check() error {
	switch {
	case d.Shape < Normal || d.Shape > Triangle:
		return fmt.Errorf("unknown %v", d.Shape)
	case math.IsNaN(d.Centre) || math.IsInf(d.Centre, 0):
		return fmt.Errorf("%v about %g, which is not finite", d.Shape, d.Centre)
	case !(d.Scale >= 0) || math.IsInf(d.Scale, 1):
		return fmt.Errorf("%v of width %g, which is not 0 or more and finite", d.Shape, d.Scale)
	case d.Shape == StudentT && (!(d.Dof >= 1) || math.IsInf(d.Dof, 1)):
		return fmt.Errorf("%v with %g degrees of freedom, a finite number of 1 or more needed", d.Shape, d.Dof)
	}
	return nil
}
