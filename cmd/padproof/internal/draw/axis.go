package draw

import (
	"math"
	"strconv"

	"gonum.org/v1/plot"
)

// An axis is one direction of a frame.
type axis struct {
	min, max float64
	log      bool
	ticks    []plot.Tick
	caption  string
}

// octavesHz are the octaves of ISO 266 (its table 1), and how they are written.
var octavesHz = []struct {
	hz   float64
	text string
}{
	{16, "16"}, {31.5, "31.5"}, {63, "63"}, {125, "125"}, {250, "250"}, {500, "500"}, {1000, "1k"}, {2000, "2k"},
	{4000, "4k"}, {8000, "8k"}, {16000, "16k"}, {31500, "31.5k"}, {63000, "63k"}, {125000, "125k"},
}

// The frequencies that an axis takes in at the least, and at the most.
const (
	bandLowHz, bandHighHz     = 20.0, 20000.0
	lowestDrawn, highestDrawn = 1.0, 200e3
)

// frequencies is an axis that takes in the band and all of the frequencies given.
func frequencies(hz ...[]float64) axis {
	a := axis{min: bandLowHz, max: bandHighHz, log: true, caption: "frequency, Hz"}
	for _, list := range hz {
		for _, f := range list {
			if f >= lowestDrawn && f <= highestDrawn {
				a.min, a.max = math.Min(a.min, f), math.Max(a.max, f)
			}
		}
	}
	for _, o := range octavesHz {
		if o.hz >= a.min && o.hz <= a.max {
			a.ticks = append(a.ticks, plot.Tick{Value: o.hz, Label: o.text})
		}
	}
	return a
}

// furthestDB is the furthest that a level is drawn from 0.
const furthestDB = 300.0

// evenly is an axis from low to high, widened to whole steps of 1, 2 or 5.
func evenly(low, high float64, caption string) axis {
	low, high = math.Max(-1e6, low), math.Min(1e6, high)
	if !(low < high) {
		low, high = -1, 1
	}
	step := niceStep((high - low) / 5)
	a := axis{min: math.Floor(low/step+1e-9) * step, max: math.Ceil(high/step-1e-9) * step, caption: caption}
	a.ticks = steps(a.min, a.max, step)
	return a
}

// between is an axis from low to high exactly, with steps of 1, 2 or 5.
func between(low, high float64, caption string) axis {
	if !(low < high) {
		high = low + 1
	}
	a := axis{min: low, max: high, caption: caption}
	step := niceStep((high - low) / 9)
	a.ticks = steps(math.Ceil(low/step-1e-9)*step, high, step)
	return a
}

func steps(from, to, step float64) []plot.Tick {
	var ticks []plot.Tick
	places := max(0, -int(math.Floor(math.Log10(step)+1e-9)))
	for i := 0; from+float64(i)*step <= to+step*1e-6; i++ {
		v := from + float64(i)*step
		if math.Abs(v) < step*1e-6 {
			v = 0
		}
		ticks = append(ticks, plot.Tick{Value: v, Label: strconv.FormatFloat(v, 'f', places, 64)})
	}
	return ticks
}

// niceStep is the least of 1, 2 or 5 times a power of ten that is at least so much.
func niceStep(least float64) float64 {
	power := math.Pow(10, math.Floor(math.Log10(least)))
	for _, m := range []float64{1, 2, 5} {
		if m*power >= least*(1-1e-9) {
			return m * power
		}
	}
	return 10 * power
}

// negated writes each tick without its sign: what is drawn downwards as a level is
// read as a loss.
func (a axis) negated() axis {
	for i, t := range a.ticks {
		if len(t.Label) > 1 && t.Label[0] == '-' {
			a.ticks[i].Label = t.Label[1:]
		} else if t.Value > 0 {
			a.ticks[i].Label = "-" + t.Label
		}
	}
	return a
}

// A span grows to take in values.
type span struct{ low, high float64 }

func nowhere() span { return span{math.Inf(1), math.Inf(-1)} }

func (s *span) take(values ...float64) {
	for _, v := range values {
		if !math.IsNaN(v) && !math.IsInf(v, 0) {
			v = math.Max(-furthestDB, math.Min(furthestDB, v))
			s.low, s.high = math.Min(s.low, v), math.Max(s.high, v)
		}
	}
}
