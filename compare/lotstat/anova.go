package lotstat

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"
)

// An AnovaRow is one line of the analysis of variance. F and P are NaN where the
// row has none, or nothing to be held against.
type AnovaRow struct {
	Source                 string // "unit", "operator", "interaction", "repeatability", "total"
	SumSquares, MeanSquare float64
	Dof                    int
	F, P                   float64
}

// A source is a sum of squares and its degrees of freedom.
type source struct {
	sumSquares float64
	dof        int
}

func (s source) meanSquare() float64 { return s.sumSquares / float64(s.dof) }

func (s source) and(t source) source {
	return source{s.sumSquares + t.sumSquares, s.dof + t.dof}
}

// anova is the analysis of a study.
type anova struct {
	units, operators, repeats                  float64
	unit, operator, interaction, within, total source
	interactionF, interactionP                 float64
	pooled                                     bool
}

// analysed parts the squares about the means.
func analysed(c cells) anova {
	p, o, r := c.units(), c.operators(), c.repeats()
	a := anova{units: float64(p), operators: float64(o), repeats: float64(r)}
	cell, byUnit, byOperator, grand := c.means()
	for i := range o {
		a.operator.sumSquares += a.units * a.repeats * square(byOperator[i]-grand)
		for j := range p {
			a.interaction.sumSquares += a.repeats * square(cell[i][j]-byOperator[i]-byUnit[j]+grand)
			for _, v := range c[i][j] {
				a.within.sumSquares += square(v - cell[i][j])
				a.total.sumSquares += square(v - grand)
			}
		}
	}
	for j := range p {
		a.unit.sumSquares += a.operators * a.repeats * square(byUnit[j]-grand)
	}
	a.unit.dof, a.operator.dof, a.interaction.dof = p-1, o-1, (p-1)*(o-1)
	a.within.dof, a.total.dof = p*o*(r-1), p*o*r-1
	a.interactionF, a.interactionP = ratioOf(a.interaction, a.within)
	a.pooled = !(a.interactionP <= pooledAbove)
	return a
}

// means of cells, of units, of operators and of all.
func (c cells) means() (cell [][]float64, byUnit, byOperator []float64, grand float64) {
	cell = make([][]float64, c.operators())
	byUnit = make([]float64, c.units())
	for i := range c {
		cell[i] = make([]float64, c.units())
		for j := range c[i] {
			cell[i][j], _ = meanStdDev(c[i][j])
			byUnit[j] += cell[i][j] / float64(c.operators())
		}
		byOperator = append(byOperator, meanOf(cell[i]))
	}
	return cell, byUnit, byOperator, meanOf(byOperator)
}

// ratioOf is the ratio of two mean squares and its probability by chance: 0 and
// an infinite ratio's NaN where the second is nil, both NaN where both are.
func ratioOf(s, against source) (f, p float64) {
	top, bottom := s.meanSquare(), against.meanSquare()
	switch {
	case bottom > 0:
		f = top / bottom
		return f, distuv.F{D1: float64(s.dof), D2: float64(against.dof)}.Survival(f)
	case top > 0:
		return math.NaN(), 0
	}
	return math.NaN(), math.NaN()
}

// against is the mean square that units and operators are held against.
func (a anova) against() source {
	if a.pooled {
		return a.interaction.and(a.within)
	}
	return a.interaction
}

// repeatability is the mean square within, with the interaction where pooled.
func (a anova) repeatability() source {
	if a.pooled {
		return a.against()
	}
	return a.within
}

func (a anova) table() []AnovaRow {
	row := func(name string, s source) AnovaRow {
		return AnovaRow{Source: name, SumSquares: s.sumSquares, MeanSquare: s.meanSquare(), Dof: s.dof, F: math.NaN(), P: math.NaN()}
	}
	tested := func(name string, s source) AnovaRow {
		r := row(name, s)
		r.F, r.P = ratioOf(s, a.against())
		return r
	}
	interaction := row("interaction", a.interaction)
	interaction.F, interaction.P = a.interactionF, a.interactionP
	return []AnovaRow{
		tested("unit", a.unit), tested("operator", a.operator), interaction,
		row("repeatability", a.within), row("total", a.total),
	}
}
