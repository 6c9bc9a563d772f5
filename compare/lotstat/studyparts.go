package lotstat

import (
	"fmt"
	"math"
)

// components fills in the components of a study.
func (s *Study) components(a anova, m measure) {
	p, o, r := a.units, a.operators, a.repeats
	of := func(x source, coef float64) share { return share{x.meanSquare(), float64(x.dof), coef} }
	against, error := a.against(), a.repeatability()

	unit := []share{of(a.unit, 1/(o*r)), of(against, -1/(o*r))}
	operator := []share{of(a.operator, 1/(p*r)), of(against, -1/(p*r))}
	interaction := []share{of(a.interaction, 1/r), of(a.within, -1/r)}
	kept := func(v float64) float64 { return math.Max(0, v) }

	// The shares of both, reduced to one coefficient a mean square.
	reproducibility := operator
	gauge := []share{of(a.operator, 1/(p*r)), of(error, 1-1/(p*r))}
	total := []share{of(a.unit, 1/(o*r)), of(a.operator, 1/(p*r)), of(error, 1-1/(o*r)-1/(p*r))}
	if !a.pooled {
		reproducibility = []share{of(a.operator, 1/(p*r)), of(a.interaction, 1/r-1/(p*r)), of(a.within, -1/r)}
		gauge = []share{of(a.operator, 1/(p*r)), of(a.interaction, 1/r-1/(p*r)), of(a.within, 1-1/r)}
		total = []share{of(a.unit, 1/(o*r)), of(a.operator, 1/(p*r)), of(a.interaction, 1/r-1/(p*r)-1/(o*r)), of(a.within, 1-1/r)}
	}

	within, crossed := error.meanSquare(), 0.0
	if !a.pooled {
		crossed = kept(sumOf(interaction))
	}
	between := kept(sumOf(operator))
	m.totalVariance = within + between + crossed + kept(sumOf(unit))
	fill := func(variance float64, shares []share) Component {
		c := m.component(shares)
		interval, tolerance := c.StdDevInterval, c.ToleranceInterval
		c = m.sized(variance)
		c.StdDevInterval, c.ToleranceInterval = interval, tolerance
		return c
	}
	s.Repeatability = fill(within, []share{of(error, 1)})
	s.Operator = fill(between, operator)
	s.Interaction = m.sized(math.NaN())
	if !a.pooled {
		s.Interaction = fill(crossed, interaction)
	}
	s.Reproducibility = fill(between+crossed, reproducibility)
	s.Gauge = fill(within+between+crossed, gauge)
	s.Unit = fill(kept(sumOf(unit)), unit)
	s.Total = fill(m.totalVariance, total)
}

// The number of kinds of unit that AIAG asks a bench to tell apart.
const enoughCategories = 5

// judge grades the study.
func (s *Study) judge() {
	s.Categories = math.NaN()
	if s.Gauge.StdDev > 0 {
		s.Categories = 1.41 * s.Unit.StdDev / s.Gauge.StdDev
	}
	frac, of := s.Gauge.OfTolerance, "tolerance"
	if math.IsNaN(frac) {
		frac, of = s.Gauge.OfStudy, "spread of this study"
	}
	switch {
	case math.IsNaN(frac) || frac < 0.10:
		s.Grade = Good
	case frac <= 0.30:
		s.Grade = Usable
	default:
		s.Grade = Poor
	}
	s.Text = s.text(frac, of)
}

func (s *Study) text(frac float64, of string) string {
	if s.Gauge.StdDev == 0 {
		return "no reading differs from its repeats: the readings are too coarse to tell repeatability"
	}
	text := fmt.Sprintf("the bench takes %.2g %% of the %s: %s", 100*frac, of, s.Grade)
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
