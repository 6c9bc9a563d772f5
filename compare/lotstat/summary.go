package lotstat

import (
	"errors"
	"math"

	"gonum.org/v1/gonum/floats"
	"gonum.org/v1/gonum/stat"
	"gonum.org/v1/gonum/stat/distuv"

	"padproof/compare/uncertainty"
)

// A Summary is what readings come to.
type Summary struct {
	N              int
	Mean           float64
	StdDev         float64 // n-1 in the divisor; NaN of one reading
	Min, Max       float64
	MeanInterval   uncertainty.Interval // of the true mean; unknown of one reading
	StdDevInterval uncertainty.Interval // of the true standard deviation; unknown of one reading
}

// Summarise returns mean and standard deviation of readings, the latter by two
// passes (Chan, Golub and LeVeque, Am. Statistician 37, 1983, 242-247), so that a
// large mean costs no digits, with the intervals of normal readings:
//
//	mean ± t(n-1) s / √n
//	s √((n-1)/χ²)      at the upper and the lower quantile of n-1 degrees
//
// (NIST/SEMATECH e-Handbook 1.3.5.2 and 7.2.3.1, from memory). Readings all alike
// have a StdDev of 0 and intervals without width. An error comes from no
// readings, from one that is no number, and from figures too large to add up.
func Summarise(values []float64, coverage float64) (Summary, error) {
	if err := errors.Join(checkCoverage(coverage), checkFinite("reading", values)); err != nil {
		return Summary{}, err
	}
	if len(values) == 0 {
		return Summary{}, errors.New("no readings to sum up")
	}
	mean, sd := meanStdDev(values)
	s := Summary{
		N: len(values), Mean: mean, StdDev: sd,
		Min: floats.Min(values), Max: floats.Max(values),
		MeanInterval: unknown, StdDevInterval: unknown,
	}
	if s.N < 2 {
		return s, nil
	}
	if !finite(mean) || !finite(sd) {
		return Summary{}, errors.New("the readings are too large to add up")
	}
	half := meanHalfWidth(s, coverage)
	s.MeanInterval = uncertainty.Interval{Low: mean - half, High: mean + half}
	f := stdDevFactors(float64(s.N-1), coverage)
	s.StdDevInterval = uncertainty.Interval{Low: sd * f.Low, High: sd * f.High}
	return s, nil
}

// meanStdDev is the mean and the standard deviation, NaN of one value.
func meanStdDev(values []float64) (mean, sd float64) {
	if len(values) < 2 {
		return stat.Mean(values, nil), math.NaN()
	}
	if floats.Min(values) == floats.Max(values) {
		return values[0], 0 // no rounding of the mean shows
	}
	return stat.MeanStdDev(values, nil)
}

// meanHalfWidth is t(n-1) s / √n.
func meanHalfWidth(s Summary, coverage float64) float64 {
	t := distuv.StudentsT{Mu: 0, Sigma: 1, Nu: float64(s.N - 1)}.Quantile((1 + coverage) / 2)
	return t * s.StdDev / math.Sqrt(float64(s.N))
}

// stdDevFactors turns a standard deviation of so many degrees of freedom into
// the ends of its interval.
func stdDevFactors(dof, coverage float64) uncertainty.Interval {
	chi := distuv.ChiSquared{K: dof}
	return uncertainty.Interval{
		Low:  math.Sqrt(dof / chi.Quantile((1+coverage)/2)),
		High: math.Sqrt(dof / chi.Quantile((1-coverage)/2)),
	}
}
