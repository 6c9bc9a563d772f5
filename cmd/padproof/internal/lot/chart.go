package lot

import (
	"math"

	"padproof/cmd/padproof/internal/result"
	"padproof/compare/lotstat"
)

// chart is the figure's chart of single readings. Its limits are made without units
// that lie far from all others: one pad with a broken part among two hundred would
// widen them until nothing else showed. All units are then held against them.
func (f *figure) chart() (*result.Chart, error) {
	apart, err := lotstat.FindOutliers(f.values, max(1, min(len(f.values)/10, 10)), 0.01)
	if err != nil {
		return nil, err
	}
	line, leftOut := f.without(apart)
	limits, err := lotstat.FindChartLimits(line)
	if err != nil {
		return nil, err
	}
	read, err := lotstat.ReadChart(f.values, limits, rules)
	if err != nil {
		return nil, err
	}
	chart := &result.Chart{
		Centre: result.Number(limits.Centre), Low: result.Number(limits.Low), High: result.Number(limits.High),
		MeanRange: result.Number(limits.MeanRange), RangeHigh: result.Number(limits.RangeHigh),
		Provisional: limits.Provisional, LeftOut: leftOut, Steady: steady(f.values, read),
		Rules: string(rules), FalseBreaks: result.Number(read.FalseBreaks), Breaks: []result.Break{},
	}
	for _, b := range read.Breaks {
		one := result.Break{Rule: b.Rule, Text: b.Text, Units: []string{}}
		for _, i := range b.Points {
			one.Units = append(one.Units, f.units[i])
		}
		chart.Breaks = append(chart.Breaks, one)
	}
	return chart, nil
}

// without parts the figure's values from those at some places, and names the
// units there in their order.
func (f *figure) without(places []int) (values []float64, units []string) {
	at := map[int]bool{}
	for _, i := range places {
		at[i] = true
	}
	units = []string{}
	for i, v := range f.values {
		if at[i] {
			units = append(units, f.units[i])
		} else {
			values = append(values, v)
		}
	}
	return values, units
}

// steady reports whether a chart shows no more than chance may: at most two
// standard deviations (of a Poisson count) over what a steady line shows, and no
// point so far off, five standard deviations, that no line in use shows it by
// chance (common practice, no source).
func steady(values []float64, c lotstat.Chart) bool {
	if float64(len(c.Breaks)) > c.FalseBreaks+2*math.Sqrt(c.FalseBreaks) {
		return false
	}
	for _, v := range values {
		if math.Abs(v-c.Limits.Centre) > 5*c.Limits.StdDev+1e-12*math.Abs(c.Limits.Centre) {
			return false
		}
	}
	return true
}
