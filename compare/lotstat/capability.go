package lotstat

import (
	"errors"
	"fmt"
	"math"

	"gonum.org/v1/gonum/stat/distuv"

	"padproof/compare"
)

// A Capability is how a process fits between its limits.
type Capability struct {
	Mean float64
	N    int

	// Overall is by the standard deviation of all readings: what a customer of the whole lot sees.
	// NIST calls its indices Cp and Cpk, car makers (AIAG) Pp and Ppk.
	Overall Indices
	// Within is by the mean moving range over 1.128: what the line could do if its level stayed put.
	// Car makers give the names Cp and Cpk to its indices. It needs the readings in order of making.
	Within Indices

	// DifferP is the chance that a steady line shows successive readings as much alike as these;
	// NaN of fewer than ten. Differ says that it is under 0.01: Within is then better than Overall
	// because the level wanders.
	DifferP float64
	Differ  bool

	Reason string // why there is no index, "" where there is one
}

// differsAt is the probability below which Within and Overall count as
// different: one false alarm in a hundred lots. Common practice, no source.
const differsAt = 0.01

// CapabilityOf holds readings, in order of making, against a limit. The indices
// and their intervals stand with [Indices]. Within has the degrees of freedom
//
//	ν = (n-1)² / (2 (0.8264 n - 1.0821))
//
// that give a chi the relative variance of a mean moving range (Cryer and Ryan,
// J. Quality Technology 22, 1990, 187-192, from memory; it follows from the
// moments of two correlated normal differences). Differ is by the ratio of the
// mean square successive difference to the variance (von Neumann, Ann. Math.
// Statist. 12, 1941, 367-395), as a normal variate.
//
// With fewer than two readings, readings all alike, or no limit set, the indices
// are NaN and Reason says why. Limits the wrong way round are an error.
func CapabilityOf(values []float64, limit compare.Limit, coverage float64) (Capability, error) {
	s, err := Summarise(values, coverage)
	if err := errors.Join(err, checkLimit(limit)); err != nil {
		return Capability{}, err
	}
	c := Capability{Mean: s.Mean, N: s.N, DifferP: math.NaN()}
	n := float64(s.N)
	within, dof := math.NaN(), math.NaN()
	if s.N > 1 {
		within, dof = meanOf(movingRanges(values))/rangeD2, rangeDof(s.N)
	}
	c.Overall = indicesOf(s.Mean, s.StdDev, n-1, s.N, limit, coverage)
	c.Within = indicesOf(s.Mean, within, dof, s.N, limit, coverage)
	if s.N >= 10 && s.StdDev > 0 {
		c.DifferP = successiveP(values, s)
		c.Differ = c.DifferP < differsAt
	}
	c.Reason = noIndex(s, limit)
	return c, nil
}

func noIndex(s Summary, limit compare.Limit) string {
	switch {
	case s.N < 2:
		return fmt.Sprintf("capability needs two readings or more, have %d", s.N)
	case s.StdDev == 0:
		return "all readings are alike: there is no spread to hold against the limits"
	case !limit.IsSet():
		return "no limit is set"
	}
	return ""
}

// rangeDof is the degrees of freedom behind a mean moving range of n readings. The
// two factors are V + 2C and V + 4C over 4/π, with V = 2 - 4/π the variance of one
// range of unit readings and C = 4/π (√3/2 + π/12 - 1) the covariance of neighbours.
func rangeDof(n int) float64 {
	m := float64(n)
	return (m - 1) * (m - 1) / (2 * (0.8264459100*m - 1.0820954931))
}

// successiveP is the one-sided probability of a von Neumann ratio as small as
// that of the readings, in a steady line.
func successiveP(values []float64, s Summary) float64 {
	n := float64(s.N)
	sum := 0.0
	for i := 1; i < s.N; i++ {
		d := (values[i] - values[i-1]) / s.StdDev
		sum += d * d
	}
	ratio := sum / (n - 1)
	z := (ratio/2 - 1) / math.Sqrt((n-2)/(n*n-1))
	return distuv.UnitNormal.CDF(z)
}
