package lotstat

import (
	"errors"
	"fmt"
	"math"
)

// ChartLimits are the lines of an individuals and moving-range chart.
type ChartLimits struct {
	Centre    float64
	StdDev    float64 // of one reading, within: mean moving range over 1.128
	Low, High float64 // Centre ± 3 StdDev
	MeanRange float64
	RangeHigh float64 // 3.267 MeanRange; the lower limit of a moving range is 0
	// Provisional says that fewer than 20 readings made the limits: read the chart, but make them
	// again when there are more (common practice, no source).
	Provisional bool
}

// enoughForLimits is how many readings make limits that stay.
const enoughForLimits = 20

// FindChartLimits makes the limits from the readings themselves, in order of
// making (NIST/SEMATECH e-Handbook 6.3.2.2; Western Electric, Statistical Quality
// Control Handbook, 1956):
//
//	centre = mean,  limits = centre ± 3 mean range / 1.128
//	range limit = 3.267 mean range
//
// It needs two readings or more. Readings all alike give limits without width.
func FindChartLimits(values []float64) (ChartLimits, error) {
	if err := checkFinite("reading", values); err != nil {
		return ChartLimits{}, err
	}
	if len(values) < 2 {
		return ChartLimits{}, fmt.Errorf("a chart needs two readings or more, have %d", len(values))
	}
	mean, _ := meanStdDev(values)
	l := limitsAbout(mean, meanOf(movingRanges(values))/rangeD2)
	if !finite(l.Low) || !finite(l.High) || !finite(l.RangeHigh) {
		return ChartLimits{}, errors.New("the readings are too large for a chart")
	}
	l.Provisional = len(values) < enoughForLimits
	return l, nil
}

// KnownChartLimits makes the limits from a centre and a standard deviation known
// from elsewhere, 0 or more: an earlier chart, say.
func KnownChartLimits(centre, stdDev float64) (ChartLimits, error) {
	if !finite(centre) || !finite(stdDev) || stdDev < 0 {
		return ChartLimits{}, fmt.Errorf("a chart about %g with a standard deviation of %g: both must be numbers, the second 0 or more", centre, stdDev)
	}
	l := limitsAbout(centre, stdDev)
	if !finite(l.Low) || !finite(l.High) || !finite(l.RangeHigh) {
		return ChartLimits{}, errors.New("the figures are too large for a chart")
	}
	return l, nil
}

func limitsAbout(centre, stdDev float64) ChartLimits {
	meanRange := rangeD2 * stdDev
	return ChartLimits{
		Centre: centre, StdDev: stdDev, Low: centre - 3*stdDev, High: centre + 3*stdDev,
		MeanRange: meanRange, RangeHigh: rangeD4 * meanRange,
	}
}

// A Chart is an individuals and moving-range chart, read.
type Chart struct {
	Limits       ChartLimits
	Values       []float64
	MovingRanges []float64 // entry i lies between values i and i+1
	Breaks       []Break   // in order of rule, then of place; none where all is steady
	// FalseBreaks is about how many breaks a steady line of as many points shows by chance: one in
	// RunLength of the book, and one in 109 moving ranges. Fewer breaks than that say nothing.
	FalseBreaks float64
}

// ReadChart holds readings against limits by the rules of a book, and the moving
// ranges against their own limit. Limits without width are broken by any reading
// that is not the centre.
func ReadChart(values []float64, limits ChartLimits, book Book) (Chart, error) {
	if err := checkFinite("reading", values); err != nil {
		return Chart{}, err
	}
	rules, err := book.rules()
	if err != nil {
		return Chart{}, err
	}
	if limits.StdDev == 0 {
		rules = rules[:1] // nothing lies within a deviation that is none
	}
	c := Chart{
		Limits: limits, Values: values, MovingRanges: movingRanges(values),
		FalseBreaks: float64(len(values))/book.RunLength() + float64(len(values))*falseRange,
	}
	z := standardised(values, limits)
	for _, r := range rules {
		for _, s := range r.find(z) {
			c.Breaks = append(c.Breaks, r.broken(s))
		}
	}
	c.Breaks = append(c.Breaks, rangeBreaks(c.MovingRanges, limits)...)
	return c, nil
}

// standardised is how many standard deviations each value lies above the centre.
func standardised(values []float64, l ChartLimits) []float64 {
	z := make([]float64, len(values))
	for i, v := range values {
		if v != l.Centre {
			z[i] = (v - l.Centre) / l.StdDev
		}
	}
	return z
}

// falseRange is the chance of a moving range over its limit in a steady line: that
// of a normal variate beyond 3.267 × 1.128 / √2 standard deviations, closed form.
const falseRange = 0.00918

// rangeBreaks are the moving ranges over their limit.
func rangeBreaks(ranges []float64, l ChartLimits) []Break {
	var breaks []Break
	for i, r := range ranges {
		if r > l.RangeHigh+1e-12*math.Abs(l.RangeHigh) {
			breaks = append(breaks, Break{
				Rule: "moving range 1", Points: []int{i, i + 1},
				Text: fmt.Sprintf("points %d to %d: a jump beyond the limit of the moving range", i+1, i+2),
			})
		}
	}
	return breaks
}
