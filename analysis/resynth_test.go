package analysis

import (
	"math"
	"testing"
)

// A player gives the test signal at any second: the design's table by its formulas, not by the
// generator, so that a recorder with a clock of its own can be imitated exactly.
type player struct{ playedHz float64 }

func raised(t, long, rise, fall float64) float64 {
	switch {
	case t <= 0 || t >= long:
		return 0
	case t < rise:
		return (1 - math.Cos(math.Pi*t/rise)) / 2
	case t > long-fall:
		return (1 - math.Cos(math.Pi*(long-t)/fall)) / 2
	}
	return 1
}

func (p player) at(t float64) float64 {
	const loud = 0.50118723362727229 // 10^(-6/20)
	switch {
	case t < 1 || t > 23:
		return 0
	case t < 1.25, t > 22.75:
		a, top := t-1, math.Min(5000, 0.45*p.playedHz)
		from, slope := 1000.0, (top-1000)/0.25
		if t > 22.75 {
			a, from, slope = t-22.75, top, -slope
		}
		return loud * raised(a, 0.25, 0.025, 0.025) * math.Sin(2*math.Pi*(from+slope*a/2)*a)
	case t < 1.75:
		return 0
	case t < 7.75:
		v := loud * raised(t-1.75, 6, 0.005, 0.005) * math.Sin(2*math.Pi*997*(t-1.75))
		if t >= 5.75 {
			v *= 0.31622776601683794
		}
		return v
	case t > 8.25 && t < 14.25:
		a, k := t-8.25, math.Log(math.Min(40000, 0.48*p.playedHz)/10)/6
		return loud * raised(a, 6, 0.1, 0.02) * math.Sin(2*math.Pi*10/k*(math.Exp(k*a)-1))
	}
	return 0
}

// take records it: startSec before it begins, the recorder ratio times too fast, the sweep no
// further than the recorder's filter lets through, which here is a brick wall.
func (p player) take(rateHz, startSec, ratio, sec, gainDB float64) *clip {
	c := newClip(rateHz, sec)
	gain := math.Pow(10, gainDB/20)
	played := math.Min(40000, 0.48*p.playedHz)
	top := math.Min(5000, 0.45*p.playedHz)
	slope := (top - 1000) / 0.25
	stopSec := 14.25
	if limit := 0.49 * rateHz; limit < played {
		stopSec = 8.25 + 6*math.Log(limit/10)/math.Log(played/10)
	}
	for n := range c.x {
		t := (float64(n)/rateHz - startSec) / ratio
		if t > stopSec && t < 14.5 {
			continue
		}
		if t > 1 && t < 1.25 && 1000+slope*(t-1) > 0.49*rateHz || t > 22.75 && t < 23 && top-slope*(t-22.75) > 0.49*rateHz {
			continue
		}
		c.x[n] = gain * p.at(t)
	}
	return c
}

// The formulas here and the generator give the same samples, the edges' ends aside.
func TestPlayerIsTheGenerator(t *testing.T) {
	for _, rateHz := range []float64{8000, 48000, 96000} {
		want := generated(t, rateHz)
		got := player{rateHz}.take(rateHz, 0, 1, 23.5, 0)
		worst := 0.0
		for n, v := range want.x {
			worst = math.Max(worst, math.Abs(v-got.x[n]))
		}
		near(t, "largest difference", worst, 0, 50.4/rateHz) // one sample of the steepest edge, the tone's end
	}
}
