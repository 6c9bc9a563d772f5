package uncertainty

import (
	"fmt"
	"math"
)

// A Shape is the form of a probability distribution, always symmetric.
type Shape int

const (
	Normal    Shape = iota // the bell curve
	StudentT               // scaled and shifted t: few readings
	Rectangle              // anywhere within two limits, no place more likely
	Arcsine                // U-shaped: a sine of unknown phase, a mismatch
	Triangle               // two equal rectangles added
)

// String gives the shape in words.
func (s Shape) String() string {
	switch s {
	case Normal:
		return "normal"
	case StudentT:
		return "Student's t"
	case Rectangle:
		return "rectangle"
	case Arcsine:
		return "arcsine"
	case Triangle:
		return "triangle"
	}
	return fmt.Sprintf("shape %d", int(s))
}

// A Term is one source of doubt. Made by one of the From functions it is
// complete; made by hand, every field counts, and a Dof of 0 is an error.
type Term struct {
	Source      string  // what it is, in words
	StandardU   float64 // in the unit of the source, 0 or more
	Sensitivity float64 // turns it into the unit of the result; either sign
	Dof         float64 // degrees of freedom of StandardU, 1 or more; +Inf where it is not in doubt
	Shape       Shape
}

// FromNormal is a term whose standard uncertainty is known as such.
func FromNormal(source string, standardU, sensitivity float64) Term {
	return Term{source, standardU, sensitivity, math.Inf(1), Normal}
}

// FromExpanded is a term that a certificate states as an expanded uncertainty
// with its coverage factor k: u = expandedU/k (JCGM 100:2008, 4.3.3). A k that
// is not above 0 makes a term that [Budget.Check] refuses.
func FromExpanded(source string, expandedU, k, sensitivity float64) Term {
	u := expandedU / k
	if !(k > 0) {
		u = math.NaN()
	}
	return Term{source, u, sensitivity, math.Inf(1), Normal}
}

// FromSample is the standard error of a mean, with its degrees of freedom: one
// less than the number of readings (JCGM 100:2008, 4.2).
func FromSample(source string, stdErr, dof, sensitivity float64) Term {
	return Term{source, stdErr, sensitivity, dof, StudentT}
}

// FromRectangle is a term known only to lie within ±halfWidth:
// u = halfWidth/√3 (JCGM 100:2008, 4.3.7).
func FromRectangle(source string, halfWidth, sensitivity float64) Term {
	return Term{source, halfWidth / math.Sqrt(3), sensitivity, math.Inf(1), Rectangle}
}

// FromArcsine is a term that swings as a sine of peak halfWidth whose phase is
// not known: u = halfWidth/√2 (JCGM 101:2008, 6.4.6).
func FromArcsine(source string, halfWidth, sensitivity float64) Term {
	return Term{source, halfWidth / math.Sqrt2, sensitivity, math.Inf(1), Arcsine}
}

// FromTriangle is a term within ±halfWidth and likelier near the middle:
// u = halfWidth/√6 (JCGM 100:2008, 4.3.9).
func FromTriangle(source string, halfWidth, sensitivity float64) Term {
	return Term{source, halfWidth / math.Sqrt(6), sensitivity, math.Inf(1), Triangle}
}

// Contribution returns |Sensitivity|·StandardU, in the unit of the result.
func (t Term) Contribution() float64 { return math.Abs(t.Sensitivity) * t.StandardU }

// Distribution returns what [MonteCarlo] draws for the source, about centre. A
// normal term with finite Dof becomes a Student's t with StandardU as its scale
// (JCGM 101:2008, 6.4.9); the bounded shapes have no use for their Dof.
func (t Term) Distribution(centre float64) Distribution {
	switch t.Shape {
	case Rectangle:
		return Uniform(centre, t.StandardU*math.Sqrt(3))
	case Arcsine:
		return UShaped(centre, t.StandardU*math.Sqrt2)
	case Triangle:
		return Triangular(centre, t.StandardU*math.Sqrt(6))
	}
	if math.IsInf(t.Dof, 1) {
		return Gaussian(centre, t.StandardU)
	}
	return ScaledT(centre, t.StandardU, t.Dof)
}

// check says what is wrong with the term, or nil.
func (t Term) check() error {
	switch {
	case math.IsNaN(t.StandardU) || t.StandardU < 0:
		return fmt.Errorf("%s: standard uncertainty %g is not 0 or more", t.name(), t.StandardU)
	case math.IsNaN(t.Contribution()) || math.IsInf(t.Contribution(), 0):
		return fmt.Errorf("%s: standard uncertainty %g times sensitivity %g is not finite", t.name(), t.StandardU, t.Sensitivity)
	case !(t.Dof >= 1):
		return fmt.Errorf("%s: %g degrees of freedom, at least 1 needed", t.name(), t.Dof)
	case t.Shape < Normal || t.Shape > Triangle:
		return fmt.Errorf("%s: unknown %v", t.name(), t.Shape)
	}
	return nil
}

func (t Term) name() string {
	if t.Source == "" {
		return "uncertainty term without a name"
	}
	return "uncertainty term " + t.Source
}
