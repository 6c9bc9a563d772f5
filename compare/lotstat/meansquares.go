package lotstat

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"

	"padproof/compare/uncertainty"
)

// A share is one mean square in a sum of several: coef may be negative.
type share struct{ meanSquare, dof, coef float64 }

func (s share) size() float64 { return math.Abs(s.coef) * s.meanSquare }

// sumOf is the sum of mean squares that estimates a variance; it may be negative.
func sumOf(shares []share) float64 {
	sum := 0.0
	for _, s := range shares {
		sum += s.coef * s.meanSquare
	}
	return sum
}

// varianceInterval is the modified large-sample interval of a sum of mean squares
// (sums: Graybill and Wang, J. Am. Statist. Assoc. 75, 1980, 869-873; differences:
// Ting, Burdick, Graybill, Jeyaratnam and Lu, J. Statist. Comput. Simul. 35, 1990,
// 135-143; as in Burdick, Borror and Montgomery, J. Quality Technology 35, 2003,
// 342-354; from memory). With one mean square it is the exact chi-square interval.
// An end below 0 becomes 0.
func varianceInterval(shares []share, coverage float64) uncertainty.Interval {
	var plus, minus []share
	for _, s := range shares {
		switch {
		case s.coef > 0:
			plus = append(plus, s)
		case s.coef < 0:
			minus = append(minus, s)
		}
	}
	tail := (1 - coverage) / 2
	middle := sumOf(shares)
	below := roomBelow(plus, minus, tail)
	above := roomBelow(minus, plus, tail) // the sum turned over
	return uncertainty.Interval{
		Low:  math.Max(0, middle-math.Sqrt(below)),
		High: math.Max(0, middle+math.Sqrt(above)),
	}
}

// roomBelow is the square of how far the true sum may lie below its estimate, at
// the given tail.
func roomBelow(plus, minus []share, tail float64) float64 {
	room := 0.0
	for _, s := range plus {
		room += square(fallsBy(s.dof, tail) * s.size())
	}
	for _, s := range minus {
		room += square(risesBy(s.dof, tail) * s.size())
	}
	for _, p := range plus {
		for _, m := range minus {
			room += across(p, m, tail) * p.size() * m.size()
		}
	}
	if len(minus) > 0 {
		for i, p := range plus {
			for _, q := range plus[i+1:] {
				room += beside(p, q, tail) / float64(len(plus)-1) * p.size() * q.size()
			}
		}
	}
	return math.Max(0, room)
}

// fallsBy and risesBy are how far, in parts of a mean square, its expectation may
// lie below and above it.
func fallsBy(dof, tail float64) float64 {
	return 1 - dof/distuv.ChiSquared{K: dof}.Quantile(1-tail)
}

func risesBy(dof, tail float64) float64 {
	return dof/distuv.ChiSquared{K: dof}.Quantile(tail) - 1
}

// across makes the bound of a difference exact where it is 0.
func across(p, m share, tail float64) float64 {
	f := distuv.F{D1: p.dof, D2: m.dof}.Quantile(1 - tail)
	g, h := fallsBy(p.dof, tail), risesBy(m.dof, tail)
	return (square(f-1) - square(g*f) - square(h)) / f
}

// beside makes the bound of a sum exact where both expectations are one.
func beside(p, q share, tail float64) float64 {
	n := p.dof + q.dof
	return square(fallsBy(n, tail))*n*n/(p.dof*q.dof) -
		square(fallsBy(p.dof, tail))*p.dof/q.dof -
		square(fallsBy(q.dof, tail))*q.dof/p.dof
}

func square(x float64) float64 { return x * x }
