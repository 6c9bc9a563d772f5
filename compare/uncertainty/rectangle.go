package uncertainty

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"
)

// rectangleHalfWidth returns the h for which the sum of a rectangle ±a and a
// Student's t of the given scale and whole dof (normal at +Inf) lies within ±h
// with probability coverage. a is above 0; the scale may be 0. The sum is
// symmetric with one peak, so that this interval is at once the shortest and
// the probabilistically symmetric one of JCGM 101:2008, 5.3.
//
// With H the integral of the rest's upper tail from x to infinity,
//
//	P(|sum| ≤ h) = 1 - (H(h-a) - H(h+a)) / a
//
// whose slope is (Q(h-a) - Q(h+a)) / a, Q the tail itself: Newton's method, kept
// inside a bracket.
func rectangleHalfWidth(a, scale, dof, coverage float64) float64 {
	if scale <= 1e-12*a { // too small to move the last digits, and x² must not overflow
		return coverage * a
	}
	// The sum spreads wider than either part alone.
	factor := quantileT((1+coverage)/2, dof) * scale
	low, high := math.Max(coverage*a, factor), a+factor
	t := tail{dof}
	h := low
	for range 100 {
		near, far := (h-a)/scale, (h+a)/scale
		excess := 1 - coverage - (t.integral(near)-t.integral(far))*scale/a
		if excess < 0 {
			low = h
		} else {
			high = h
		}
		next := h - excess*a/(t.above(near)-t.above(far))
		if !(next > low && next < high) {
			next = (low + high) / 2
		}
		if math.Abs(next-h) <= 1e-13*h {
			return next
		}
		h = next
	}
	return h
}

// A tail is the upper tail of a Student's t of scale 1, normal at +Inf dof.
type tail struct{ dof float64 }

// above is the probability of more than x.
func (t tail) above(x float64) float64 {
	if t.dof > manyDof {
		return math.Erfc(x/math.Sqrt2) / 2
	}
	return distuv.StudentsT{Sigma: 1, Nu: t.dof}.Survival(x)
}

// integral is that of above from x to infinity, by parts:
//
//	∫ Q = -x Q(x) + ∫ u f(u) du
//
// At dof 1 it diverges; a constant is left out there, which drops out of the
// difference of two.
func (t tail) integral(x float64) float64 {
	var moment float64
	switch {
	case t.dof > manyDof:
		moment = math.Exp(-x*x/2) / math.Sqrt(2*math.Pi)
	case t.dof == 1:
		moment = -math.Log(math.Hypot(1, x)) / math.Pi
	default:
		moment = distuv.StudentsT{Sigma: 1, Nu: t.dof}.Prob(x) * (t.dof + x*x) / (t.dof - 1)
	}
	return moment - x*t.above(x)
}
