package lotstat

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"

	"padproof/compare"
	"padproof/compare/uncertainty"
)

// Indices are the capability of a process with one measure of its spread. An
// index that there is none of is NaN, as is each of a process without spread.
type Indices struct {
	StdDev float64
	Dof    float64 // behind StdDev

	Cp          float64 // width of the limits over 6 StdDev; NaN unless both ends are set
	CpInterval  uncertainty.Interval
	Cpu, Cpl    float64 // distance of the mean from the upper, lower limit over 3 StdDev
	Cpk         float64 // the smaller of those that there are; negative with the mean outside
	CpkInterval uncertainty.Interval
}

// indicesOf works out the indices of n readings.
//
// Interval of Cp: Cp √(χ²/ν) at the two quantiles (exact; NIST/SEMATECH
// e-Handbook 6.1.6, from memory). Interval of Cpk, for one limit or two (Bissell,
// Applied Statistics 39, 1990, 331-340):
//
//	Cpk ± z √(1/(9n) + Cpk²/(2ν))
func indicesOf(mean, sd, dof float64, n int, limit compare.Limit, coverage float64) Indices {
	nan := math.NaN()
	x := Indices{StdDev: sd, Dof: dof, Cp: nan, Cpu: nan, Cpl: nan, Cpk: nan, CpInterval: unknown, CpkInterval: unknown}
	if !(sd > 0) || n < 2 {
		return x
	}
	hasLow, hasHigh := !math.IsInf(limit.Low, -1), !math.IsInf(limit.High, 1)
	if hasHigh {
		x.Cpu = (limit.High - mean) / (3 * sd)
	}
	if hasLow {
		x.Cpl = (mean - limit.Low) / (3 * sd)
	}
	switch {
	case hasLow && hasHigh:
		x.Cp = (limit.High - limit.Low) / (6 * sd)
		x.CpInterval = cpInterval(x.Cp, dof, coverage)
		x.Cpk = math.Min(x.Cpu, x.Cpl)
	case hasHigh:
		x.Cpk = x.Cpu
	case hasLow:
		x.Cpk = x.Cpl
	}
	x.CpkInterval = cpkInterval(x.Cpk, dof, n, coverage)
	return x
}

func cpInterval(cp, dof, coverage float64) uncertainty.Interval {
	f := stdDevFactors(dof, coverage)
	return uncertainty.Interval{Low: cp / f.High, High: cp / f.Low}
}

func cpkInterval(cpk, dof float64, n int, coverage float64) uncertainty.Interval {
	z := distuv.UnitNormal.Quantile((1 + coverage) / 2)
	half := z * math.Sqrt(1/(9*float64(n))+cpk*cpk/(2*dof))
	return uncertainty.Interval{Low: cpk - half, High: cpk + half}
}
