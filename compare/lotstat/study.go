package lotstat

import (
	"errors"
	"math"

	"padproof/compare"
	"padproof/compare/uncertainty"
)

// A StudyReading is one reading of a repeatability study.
type StudyReading struct {
	Operator, Unit string
	Value          float64
}

// A Component is one source of variation in a study.
type Component struct {
	Variance       float64 // never negative
	StdDev         float64
	StdDevInterval uncertainty.Interval
	OfVariance     float64 // share of the total variance
	OfStudy        float64 // share of the total StdDev; these shares do not add up to 1
	OfTolerance    float64 // 6 StdDev over the width of the limits; NaN without two limits
	// ToleranceInterval is that of OfTolerance.
	ToleranceInterval uncertainty.Interval
}

// A Study is the repeatability and reproducibility of a bench.
type Study struct {
	Operators, Units, Repeats int

	Table  []AnovaRow
	Pooled bool // the interaction is taken for repeatability

	Repeatability   Component // one operator, one unit, again
	Operator        Component // between operators
	Interaction     Component // operators differ on some units; unknown where pooled: all NaN
	Reproducibility Component // Operator and Interaction together
	Gauge           Component // Repeatability and Reproducibility together
	Unit            Component // between units
	Total           Component

	// Categories is how many kinds of unit the bench tells apart, 1.41 Unit over Gauge, before it is
	// cut down to a whole number; NaN where the gauge shows no spread.
	Categories float64
	Grade      Grade  // "" where the gauge shows no spread
	Text       string // what it means
}

// A Grade is what a study says of a bench.
type Grade string

// The grades, by the Gauge's share of the tolerance, of the study where there is
// no tolerance: under 10 % good, to 30 % usable, above that poor (AIAG,
// Measurement Systems Analysis, 4th ed. 2010).
const (
	Good   Grade = "good"
	Usable Grade = "usable"
	Poor   Grade = "poor"
)

// pooledAbove is the probability of the interaction above which it is taken for
// repeatability (AIAG, Measurement Systems Analysis, 4th ed. 2010).
const pooledAbove = 0.25

// StudyOf works out a study in which every operator measured every unit the same
// number of times, twice or more, by the two-way analysis of variance with
// operators and units at random (AIAG, Measurement Systems Analysis, 4th ed.
// 2010, appendix A). With p units, o operators, r repeats and the mean squares P,
// O, PO and E:
//
//	repeatability   E
//	interaction     (PO - E) / r
//	operator        (O - PO) / (p r)
//	unit            (P - PO) / (o r)
//
// Where the interaction is no more than chance (p > 0.25) it is pooled with the
// repeatability, which then stands in its place. What comes out negative is 0.
// Intervals are those of the modified large-sample method (Burdick, Borror and
// Montgomery, J. Quality Technology 35, 2003, 342-354, from memory): with two or
// three operators those of all that holds an operator are very wide, and that is
// so.
//
// The order of readings is free. An error names the operator and the unit where a
// reading is missing or one too many, and what a study needs at least: two
// operators, two units, two repeats.
func StudyOf(readings []StudyReading, limit compare.Limit, coverage float64) (Study, error) {
	if err := errors.Join(checkCoverage(coverage), checkLimit(limit)); err != nil {
		return Study{}, err
	}
	cells, err := crossed(readings)
	if err != nil {
		return Study{}, err
	}
	a := analysed(cells)
	if !finite(a.total.sumSquares) {
		return Study{}, errors.New("the readings are too large to add up")
	}
	s := Study{
		Operators: cells.operators(), Units: cells.units(), Repeats: cells.repeats(),
		Table: a.table(), Pooled: a.pooled,
	}
	m := measure{toleranceWidth: limit.High - limit.Low, coverage: coverage}
	s.components(a, m)
	s.judge()
	return s, nil
}

// A measure is what components are measured by.
type measure struct{ toleranceWidth, totalVariance, coverage float64 }

// component is a variance, with its interval from the mean squares that estimate
// it; without any it has none.
func (m measure) component(variance float64, shares []share) Component {
	c := Component{
		Variance: variance, StdDev: math.Sqrt(variance), StdDevInterval: unknown,
		OfVariance: math.NaN(), OfStudy: math.NaN(), OfTolerance: math.NaN(), ToleranceInterval: unknown,
	}
	if m.totalVariance > 0 {
		c.OfVariance = variance / m.totalVariance
		c.OfStudy = math.Sqrt(c.OfVariance)
	}
	if len(shares) > 0 {
		interval := varianceInterval(shares, m.coverage)
		c.StdDevInterval = uncertainty.Interval{Low: math.Sqrt(interval.Low), High: math.Sqrt(interval.High)}
	}
	if t := m.toleranceWidth; t > 0 && !math.IsInf(t, 0) {
		c.OfTolerance = 6 * c.StdDev / t
		c.ToleranceInterval = uncertainty.Interval{Low: 6 * c.StdDevInterval.Low / t, High: 6 * c.StdDevInterval.High / t}
	}
	return c
}
