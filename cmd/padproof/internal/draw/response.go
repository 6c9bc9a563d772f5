package draw

import (
	"math"

	"padproof/cmd/padproof/internal/result"
)

// Response draws the measured response with its uncertainty, the drawing's own on
// this bench, and the limits about it.
func Response(a *result.Answer) *Picture {
	return response(a, "response", "Response", "drawing")
}

// Flatness draws the response in service against a level line.
func Flatness(a *result.Answer) *Picture {
	return response(a, "flatness", "Flatness in service", "level line")
}

// A responsePlot is a check's points as levels: a loss relative to the tone's,
// turned over, so that what is louder stands higher.
type responsePlot struct {
	check                       *result.Check
	hz, measured, expected, uDB []float64
	bottom, top                 []float64 // the limits
}

func response(a *result.Answer, name, title, expected string) *Picture {
	title = titleOf(a, title)
	c := checkOf(a, name)
	if c == nil {
		return nothing(name, title, "no takes give a "+name)
	}
	r := responseOf(c)
	if !anyDrawable(r.hz, r.measured) {
		return nothing(name, title, "no takes give a "+name)
	}
	p := &Picture{Name: name, Title: title, Says: r.says(name), Simulated: a.Simulated, Width: usualWidth, Height: usualHeight}
	p.paint = func(s *sheet) { r.frame(expected).paint(s) }
	return p
}

func responseOf(c *result.Check) responsePlot {
	r := responsePlot{check: c}
	for _, p := range c.Points {
		if !(p.FreqHz >= lowestDrawn && p.FreqHz <= highestDrawn) {
			continue
		}
		r.hz = append(r.hz, float64(p.FreqHz))
		r.measured = append(r.measured, -float64(p.Measured))
		r.expected = append(r.expected, -float64(p.Expected))
		r.uDB = append(r.uDB, float64(p.Uncertainty))
		r.bottom = append(r.bottom, -float64(p.Expected+c.High))
		r.top = append(r.top, -float64(p.Expected+c.Low))
	}
	return r
}

func (r responsePlot) frame(expected string) *frame {
	reach := span{-1, 1}
	for _, ys := range [][]float64{r.measured, r.expected, r.bottom, r.top} {
		reach.take(ys...)
	}
	f := &frame{x: frequencies(r.hz), y: evenly(reach.low, reach.high, "dB, 0 at the tone; up is louder")}
	f.bands = []band{{r.hz, added(r.measured, r.uDB, -1), added(r.measured, r.uDB, 1), blueWash, "± uncertainty (95 %)"}}
	if r.check.High.OK() {
		f.curves = append(f.curves, curve{r.hz, r.top, asLimit, "limit +" + give(-r.check.Low)}, curve{r.hz, r.bottom, asLimit, "limit -" + give(r.check.High)})
	}
	f.curves = append(f.curves, curve{r.hz, r.measured, asMeasured, "measured"}, curve{r.hz, r.expected, asDrawn, expected})
	if n, ok := r.worst(); ok {
		f.notes = []note{n}
	}
	return f
}

// worst points at the largest deviation, where it is more than its uncertainty.
func (r responsePlot) worst() (note, bool) {
	c := r.check
	if c.AtHz == nil || !c.Measured.OK() || math.Abs(float64(c.Measured)) <= float64(c.Uncertainty) {
		return note{}, false
	}
	for i, hz := range r.hz {
		if math.Abs(hz/float64(*c.AtHz)-1) < 1e-6 {
			return note{x: hz, y: r.measured[i], text: signed(-c.Measured, c.Uncertainty) + " dB at " + hertz(*c.AtHz), mark: true}, true
		}
	}
	return note{}, false
}

func signed(n, u result.Number) string {
	if text := figure(n, u); n > 0 {
		return "+" + text
	} else {
		return text
	}
}

func (r responsePlot) says(name string) string {
	c := r.check
	if !c.Measured.OK() || c.AtHz == nil {
		return "The measured " + name + "; " + verdictWords(c)
	}
	against := "the drawing's curve on this bench"
	if name == "flatness" {
		against = "a level line"
	}
	doubt := atMost(c.Uncertainty, c.Uncertainty) + " dB"
	if math.Abs(float64(c.Measured)) <= float64(c.Uncertainty) {
		return "The " + name + " keeps to " + against + " within what can be measured, " + doubt + "; " + verdictWords(c)
	}
	way := "louder"
	if c.Measured > 0 {
		way = "quieter"
	}
	return "The " + name + " departs from " + against + " by " + largest(c.Measured, c.Uncertainty) + " (" + way + ", at " +
		hertz(*c.AtHz) + ", ±" + doubt + "); " + verdictWords(c)
}
