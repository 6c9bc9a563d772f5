package lotstat

import (
	"fmt"
	"math"
)

// An EWMA is the exponentially weighted moving average of readings, which finds a
// slow drift that no single reading shows.
type EWMA struct {
	Values    []float64 // one a reading
	Low, High float64
	Beyond    []int // averages outside the limits, from 0
}

// The weight of the newest reading and the limits, in standard deviations of the
// average, where nothing else is asked for: a weight of 0.2 to 0.3 is usual
// (NIST/SEMATECH e-Handbook 6.3.2.4).
const (
	EWMAWeight  = 0.2
	EWMAStdDevs = 3.0
)

// ReadEWMA makes the chart of S. W. Roberts (Technometrics 1, 1959, 239-250) as
// NIST/SEMATECH e-Handbook 6.3.2.4 has it: from the centre,
//
//	average = weight reading + (1 - weight) average before
//	limits  = centre ± stdDevs stdDev √(weight / (2 - weight))
//
// The weight lies between 0 and 1, 1 counted; stdDev is that of one reading.
func ReadEWMA(values []float64, centre, stdDev, weight, stdDevs float64) (EWMA, error) {
	if err := checkFinite("reading", values); err != nil {
		return EWMA{}, err
	}
	if !(weight > 0 && weight <= 1) {
		return EWMA{}, fmt.Errorf("a weight of %g: it is more than 0 and at most 1", weight)
	}
	if !finite(centre) || !finite(stdDev) || stdDev < 0 || !(stdDevs > 0) {
		return EWMA{}, fmt.Errorf("limits of %g times %g about %g are none", stdDevs, stdDev, centre)
	}
	half := stdDevs * stdDev * math.Sqrt(weight/(2-weight))
	e := EWMA{Values: make([]float64, len(values)), Low: centre - half, High: centre + half}
	average := centre
	for i, v := range values {
		average = weight*v + (1-weight)*average
		e.Values[i] = average
		if average < e.Low || average > e.High {
			e.Beyond = append(e.Beyond, i)
		}
	}
	return e, nil
}
