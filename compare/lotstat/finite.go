package lotstat

import (
	"fmt"
	"math"

	"padproof/compare"
	"padproof/compare/uncertainty"
)

// unknown is the interval that there is none of.
var unknown = uncertainty.Interval{Low: math.NaN(), High: math.NaN()}

func finite(v float64) bool { return !math.IsNaN(v) && !math.IsInf(v, 0) }

// checkFinite refuses the first reading that is no finite number.
func checkFinite(what string, values []float64) error {
	for i, v := range values {
		if !finite(v) {
			return fmt.Errorf("%s %d is %g: leave out what was not measured", what, i+1, v)
		}
	}
	return nil
}

// checkUncertainties refuses the first that is none.
func checkUncertainties(stdU []float64) error {
	for i, u := range stdU {
		if !finite(u) || u < 0 {
			return fmt.Errorf("uncertainty %d is %g: it must be a number, 0 or more", i+1, u)
		}
	}
	return nil
}

func checkCoverage(coverage float64) error {
	if !(coverage > 0 && coverage < 1) {
		return fmt.Errorf("a coverage of %g: it lies between 0 and 1", coverage)
	}
	return nil
}

// checkLimit refuses a limit whose ends are the wrong way round or not numbers.
func checkLimit(l compare.Limit) error {
	if math.IsNaN(l.Low) || math.IsNaN(l.High) || l.Low > l.High {
		return fmt.Errorf("limits of %g to %g: the first must be the lower", l.Low, l.High)
	}
	return nil
}
