package lotstat

import (
	"errors"
	"fmt"
	"math"

	"padproof/compare/uncertainty"
)

// A Split is the spread of a lot parted into that of the units and that of the
// measurement: standard deviations in the unit of the readings.
type Split struct {
	Observed         float64
	ObservedInterval uncertainty.Interval
	Measurement      float64 // root mean square of the readings' own standard uncertainties
	Units            float64 // never negative
	UnitsInterval    uncertainty.Interval
	MeasurementFrac  float64 // share of the observed variance, 0 to 1; NaN of readings all alike
	Text             string  // what it means
}

// SplitSpread takes the measurement out of the spread of a lot:
//
//	units² = observed² - mean of stdU²,  0 where that is negative
//
// stdU are the standard uncertainties of the readings, only as far as they are
// independent from unit to unit (repeatability, plugging): what is common to all
// units (the gain between shared takes, the source, the load) shifts a lot but
// does not widen it. They count as known. The interval is that of the observed
// variance (chi-square, n-1), shifted by the same; common practice, no source.
//
// Where the interval begins at 0 the units may be all alike, and Text says that
// measurement alone explains the spread; where even the upper end of the
// observed spread lies under Measurement, that the uncertainties are overstated.
// Less than two readings leave all NaN but Measurement.
func SplitSpread(values, stdU []float64, coverage float64) (Split, error) {
	if len(values) != len(stdU) {
		return Split{}, fmt.Errorf("%d readings with %d uncertainties", len(values), len(stdU))
	}
	s, err := Summarise(values, coverage)
	if err := errors.Join(err, checkUncertainties(stdU)); err != nil {
		return Split{}, err
	}
	p := Split{
		Observed: s.StdDev, ObservedInterval: s.StdDevInterval,
		Measurement: rootMeanSquare(stdU),
		Units:       math.NaN(), UnitsInterval: unknown, MeasurementFrac: math.NaN(),
		Text: "one unit has no spread",
	}
	if s.N < 2 {
		return p, nil
	}
	less := func(v float64) float64 { return math.Sqrt(math.Max(0, v*v-p.Measurement*p.Measurement)) }
	p.Units = less(p.Observed)
	p.UnitsInterval = uncertainty.Interval{Low: less(p.ObservedInterval.Low), High: less(p.ObservedInterval.High)}
	if p.Observed > 0 {
		ratio := p.Measurement / p.Observed
		p.MeasurementFrac = math.Min(1, ratio*ratio)
	}
	p.Text = p.text()
	return p, nil
}

func (p Split) text() string {
	switch {
	case p.Observed == 0:
		return "all readings are alike"
	case p.ObservedInterval.High < p.Measurement:
		return "the spread is smaller than the measurement's own uncertainties allow for: they are overstated"
	case p.UnitsInterval.Low == 0:
		return "measurement alone explains the spread: the units may be all alike"
	}
	return fmt.Sprintf("measurement makes %s of the variance, the units the rest", percent(p.MeasurementFrac))
}

func rootMeanSquare(values []float64) float64 {
	sum := 0.0
	for _, v := range values {
		sum += v * v
	}
	return math.Sqrt(sum / float64(len(values)))
}
