package lotstat

import (
	"fmt"
	"math"
)

// The mean squares that estimate each variance, one coefficient a mean square.
type estimates struct{ repeatability, operator, interaction, reproducibility, gauge, unit, total []share }

func (a anova) estimates() estimates {
	ofUnit, ofOperator, ofRepeats := 1/(a.operators*a.repeats), 1/(a.units*a.repeats), 1/a.repeats
	of := func(s source, coef float64) share { return share{s.meanSquare(), float64(s.dof), coef} }
	again, against := a.repeatability(), a.against()
	e := estimates{
		repeatability: []share{of(again, 1)},
		operator:      []share{of(a.operator, ofOperator), of(against, -ofOperator)},
		unit:          []share{of(a.unit, ofUnit), of(against, -ofUnit)},
	}
	if a.pooled {
		e.reproducibility = e.operator
		e.gauge = []share{of(a.operator, ofOperator), of(again, 1-ofOperator)}
		e.total = []share{of(a.unit, ofUnit), of(a.operator, ofOperator), of(again, 1-ofUnit-ofOperator)}
		return e
	}
	crossing := of(a.interaction, ofRepeats-ofOperator)
	e.interaction = []share{of(a.interaction, ofRepeats), of(again, -ofRepeats)}
	e.reproducibility = []share{of(a.operator, ofOperator), crossing, of(again, -ofRepeats)}
	e.gauge = []share{of(a.operator, ofOperator), crossing, of(again, 1-ofRepeats)}
	e.total = []share{of(a.unit, ofUnit), of(a.operator, ofOperator), of(a.interaction, ofRepeats-ofUnit-ofOperator), of(again, 1-ofRepeats)}
	return e
}

// components fills in the components of a study.
func (s *Study) components(a anova, m measure) {
	e := a.estimates()
	kept := func(shares []share) float64 { return math.Max(0, sumOf(shares)) }
	again, operator, interaction, unit := kept(e.repeatability), kept(e.operator), kept(e.interaction), kept(e.unit)
	m.totalVariance = again + operator + interaction + unit

	s.Repeatability = m.component(again, e.repeatability)
	s.Operator = m.component(operator, e.operator)
	s.Interaction = m.component(interaction, e.interaction)
	if a.pooled {
		s.Interaction = m.component(math.NaN(), nil)
	}
	s.Reproducibility = m.component(operator+interaction, e.reproducibility)
	s.Gauge = m.component(again+operator+interaction, e.gauge)
	s.Unit = m.component(unit, e.unit)
	s.Total = m.component(m.totalVariance, e.total)
}

// The number of kinds of unit that AIAG asks a bench to tell apart.
const enoughCategories = 5

// judge grades the study.
func (s *Study) judge() {
	if s.Gauge.StdDev == 0 {
		s.Categories = math.NaN()
		s.Text = "no reading differs from its repeats: the readings are too coarse for a study"
		return
	}
	s.Categories = 1.41 * s.Unit.StdDev / s.Gauge.StdDev
	frac, of := s.Gauge.OfTolerance, "tolerance"
	if math.IsNaN(frac) {
		frac, of = s.Gauge.OfStudy, "spread of this study"
	}
	switch {
	case frac < 0.10:
		s.Grade = Good
	case frac <= 0.30:
		s.Grade = Usable
	default:
		s.Grade = Poor
	}
	s.Text = s.text(frac, of)
}

func (s *Study) text(frac float64, of string) string {
	text := fmt.Sprintf("the bench takes %s of the %s: %s", percent(frac), of, s.Grade)
	if s.Categories < enoughCategories {
		text += fmt.Sprintf("; it tells %d kinds of unit apart, %d are asked for", int(s.Categories), enoughCategories)
	}
	if s.Grade == Good {
		return text
	}
	if s.Repeatability.Variance >= s.Reproducibility.Variance {
		return text + "; most of it is repeatability: cables, plugs, noise"
	}
	return text + "; most of it lies between operators: how the unit is plugged and the take is made"
}
