package lotstat

import (
	"fmt"

	"gonum.org/v1/gonum/stat/distuv"

	"padproof/compare/uncertainty"
)

// A Yield is the share of units that passed.
type Yield struct {
	Passed, Units int
	Frac          float64              // Passed / Units; NaN of no units
	Interval      uncertainty.Interval // of the line's true yield
}

// YieldOf returns the yield of a lot, with the interval of Clopper and Pearson
// (Biometrika 26, 1934, 404-413): for x of n units and a = 1 - coverage
//
//	low  = Beta quantile at a/2 of (x, n-x+1), 0 where x is 0
//	high = Beta quantile at 1-a/2 of (x+1, n-x), 1 where x is n
//
// The interval never holds less than the coverage, and for few units more. No
// units at all give a Frac of NaN and the interval from 0 to 1.
//
// What counts as a unit is the caller's: with every unit checked, one that is
// UNPROVEN counts as not passed; to leave such units out, leave them out of both
// counts and say so.
func YieldOf(passed, units int, coverage float64) (Yield, error) {
	if err := checkCoverage(coverage); err != nil {
		return Yield{}, err
	}
	if passed < 0 || passed > units {
		return Yield{}, fmt.Errorf("%d of %d units passed: no such yield", passed, units)
	}
	x, n, tail := float64(passed), float64(units), (1-coverage)/2
	y := Yield{Passed: passed, Units: units, Frac: x / n, Interval: uncertainty.Interval{Low: 0, High: 1}}
	if passed > 0 {
		y.Interval.Low = distuv.Beta{Alpha: x, Beta: n - x + 1}.Quantile(tail)
	}
	if passed < units {
		y.Interval.High = distuv.Beta{Alpha: x + 1, Beta: n - x}.Quantile(1 - tail)
	}
	return y, nil
}
