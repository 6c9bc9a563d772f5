package lotstat

import (
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/gonum/stat/distuv"
)

// FindOutliers returns the places, from 0, of readings that do not belong with the
// rest, by the generalized extreme Studentized deviate of up to so many of them
// (Rosner, Technometrics 25, 1983, 165-172; NIST/SEMATECH e-Handbook 1.3.5.17.3):
// for i = 1 to most, the reading furthest from the mean of those left has
//
//	R = |reading - mean| / s,
//	λ = (m-1) t / √((m-2+t²) m),   m = n-i+1 left,  t(m-2) at 1 - α/(2m)
//
// and the outliers are the first i readings for the largest i with R > λ. One
// alone is the test of Grubbs (Technometrics 11, 1969, 1-21). The readings are
// normal otherwise; alpha is the chance of finding any where there is none. Fewer
// than seven readings, or all alike, have no outliers.
func FindOutliers(values []float64, most int, alpha float64) ([]int, error) {
	if err := checkFinite("reading", values); err != nil {
		return nil, err
	}
	if !(alpha > 0 && alpha < 1) {
		return nil, fmt.Errorf("a chance of %g: it lies between 0 and 1", alpha)
	}
	if len(values) < leastForOutliers {
		return nil, nil
	}
	left := countFrom(0, len(values))
	rest := slices.Clone(values)
	var taken []int
	found := 0
	for range min(most, len(values)-3) {
		far, r := furthest(rest)
		if !(r > 0) {
			break
		}
		if r > grubbsLimit(len(rest), alpha) {
			found = len(taken) + 1
		}
		taken = append(taken, left[far])
		left, rest = slices.Delete(left, far, far+1), slices.Delete(rest, far, far+1)
	}
	outliers := taken[:found]
	slices.Sort(outliers)
	return outliers, nil
}

// leastForOutliers is the fewest readings of which one may be called an outlier
// (common practice, no source).
const leastForOutliers = 7

// furthest is the reading furthest from the mean, in standard deviations.
func furthest(values []float64) (at int, stdDevs float64) {
	mean, sd := meanStdDev(values)
	if sd == 0 {
		return 0, 0
	}
	for i, v := range values {
		if d := math.Abs(v-mean) / sd; d > stdDevs {
			at, stdDevs = i, d
		}
	}
	return at, stdDevs
}

// grubbsLimit is λ for m readings.
func grubbsLimit(m int, alpha float64) float64 {
	n := float64(m)
	t := distuv.StudentsT{Mu: 0, Sigma: 1, Nu: n - 2}.Quantile(1 - alpha/(2*n))
	return (n - 1) * t / math.Sqrt((n-2+t*t)*n)
}
