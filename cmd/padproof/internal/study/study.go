package study

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"time"

	"padproof/cmd/padproof/internal/result"
	"padproof/compare"
	"padproof/compare/lotstat"
	"padproof/compare/uncertainty"
)

// noTime is for readings whose time does not matter.
var noTime time.Time

// Of works a study out. An error is that of readings that make none: an operator
// who has not measured a unit as often as the others, say.
func Of(d *Data) (*result.Study, error) {
	var readings []lotstat.StudyReading
	for _, r := range d.Readings {
		readings = append(readings, lotstat.StudyReading{Operator: r.Operator, Unit: r.Unit, Value: r.Value})
	}
	s, err := lotstat.StudyOf(readings, d.Limit, compare.Coverage)
	if err != nil {
		return nil, &result.Error{File: d.Name, Text: err.Error(), Hint: "measure what is missing, or leave that unit or operator out altogether"}
	}
	out := &result.Study{
		Schema: result.StudySchema, Study: d.Name, Simulated: d.Simulated, Figure: d.Figure, Unit: d.Unit,
		Operators: distinct(d, func(r Reading) string { return r.Operator }), Units: distinct(d, func(r Reading) string { return r.Unit }),
		Repeats: s.Repeats, Low: result.Number(d.Limit.Low), High: result.Number(d.Limit.High),
		Pooled: s.Pooled, Categories: result.Number(s.Categories), Grade: string(s.Grade), Warnings: append([]string{}, d.Warnings...),
	}
	for _, row := range s.Table {
		out.Table = append(out.Table, result.VarianceRow{Source: row.Source, SumSquares: result.Number(row.SumSquares),
			DOF: row.Dof, MeanSquare: result.Number(row.MeanSquare), F: result.Number(row.F), P: result.Number(row.P)})
	}
	for _, one := range []struct {
		name string
		c    lotstat.Component
	}{
		{"repeatability", s.Repeatability}, {"operator", s.Operator}, {"interaction", s.Interaction},
		{"reproducibility", s.Reproducibility}, {"gauge", s.Gauge}, {"unit", s.Unit}, {"total", s.Total},
	} {
		out.Components = append(out.Components, componentOf(one.name, one.c))
	}
	out.Says = says(s, d.Unit)
	return out, nil
}

func componentOf(name string, c lotstat.Component) result.StudyComponent {
	return result.StudyComponent{
		Component: name, Variance: result.Number(c.Variance), SD: ranged(c.StdDev, c.StdDevInterval),
		OfVariance: result.Number(c.OfVariance), OfStudy: result.Number(c.OfStudy), OfTolerance: ranged(c.OfTolerance, c.ToleranceInterval),
	}
}

func ranged(v float64, i uncertainty.Interval) result.Ranged {
	return result.Ranged{Value: result.Number(v), Low: result.Number(i.Low), High: result.Number(i.High)}
}

// distinct are the different names in the readings, in order.
func distinct(d *Data, of func(Reading) string) []string {
	var names []string
	for _, r := range d.Readings {
		names = append(names, of(r))
	}
	slices.SortFunc(names, compareNames)
	return slices.Compact(names)
}

// compareNames puts numbers in their order, before words.
func compareNames(a, b string) int {
	m, errA := strconv.Atoi(a)
	n, errB := strconv.Atoi(b)
	switch {
	case errA == nil && errB == nil && m != n:
		return m - n
	case (errA == nil) != (errB == nil):
		if errA == nil {
			return -1
		}
		return 1
	case a < b:
		return -1
	case a > b:
		return 1
	}
	return 0
}

// differ is how far two readings lie apart at most in 95 % of cases, in their
// standard deviation: 1.96 √2 (ISO 5725-6, repeatability and reproducibility
// limits, from memory).
var differ = 1.96 * math.Sqrt2

// fewOperators is how many leave the spread between them hardly known.
const fewOperators = 5

// says are what a study means, in sentences.
func says(s lotstat.Study, unit string) []string {
	all := []string{s.Text}
	if s.Grade == "" {
		return all
	}
	if unit != "" {
		unit = " " + unit
	}
	all = append(all, fmt.Sprintf("two readings of one unit differ by up to %s%s where one operator takes both, by up to %s%s where two do (95 %% of cases)",
		short(differ*s.Repeatability.StdDev), unit, short(differ*s.Gauge.StdDev), unit))
	for _, row := range s.Table {
		switch {
		case row.Source != "interaction" || math.IsNaN(row.P):
		case s.Pooled:
			all = append(all, fmt.Sprintf("operators do not differ more on some units than on others (p = %.2f): what there is of it counts as repeatability", row.P))
		default:
			all = append(all, fmt.Sprintf("operators differ more on some units than on others (p = %.2g): look how those units are plugged", row.P))
		}
	}
	if s.Operators < fewOperators && s.Reproducibility.StdDevInterval.High > 0 {
		all = append(all, fmt.Sprintf("%d operators tell little: the standard deviation between operators may be anything from %s to %s%s (95 %%)",
			s.Operators, short(s.Reproducibility.StdDevInterval.Low), short(s.Reproducibility.StdDevInterval.High), unit))
	}
	return all
}

// short prints two significant digits, all that stand before the point.
func short(v float64) string {
	if v >= 100 {
		return strconv.FormatFloat(v, 'f', 0, 64)
	}
	return strconv.FormatFloat(v, 'g', 2, 64)
}
