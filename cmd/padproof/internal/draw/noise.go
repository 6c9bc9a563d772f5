package draw

import (
	"math"

	"padproof/cmd/padproof/internal/result"
)

// Noise draws the noise of rig and pad against frequency, the unit's own where it
// stands out, and the thermal noise that the drawing gives.
func Noise(a *result.Answer) *Picture {
	title := titleOf(a, "Noise")
	if a == nil || a.Curves == nil || a.Curves.Noise == nil {
		return nothing("noise", title, "there are no noise takes to draw from")
	}
	n := a.Curves.Noise
	hz := numbers(n.FreqHz)
	if !anyDrawable(hz, numbers(n.Pad)) {
		return nothing("noise", title, "there are no noise takes to draw from")
	}
	p := &Picture{Name: "noise", Title: title, Says: noiseSays(a), Simulated: a.Simulated, Width: usualWidth, Height: usualHeight + 20}
	p.paint = func(s *sheet) { noiseFrame(n, hz).paint(s) }
	return p
}

func noiseFrame(n *result.NoiseCurves, hz []float64) *frame {
	reach := nowhere()
	for _, ys := range [][]result.Number{n.Rig, n.Pad, n.Net, n.Thermal} {
		reach.take(numbers(ys)...)
	}
	floor := reach.low
	for _, l := range n.Lines {
		reach.take(float64(l.Pad))
		reach.take(float64(l.Rig))
	}
	// A line far below the noise, or none, must not stretch the axis.
	reach.low = math.Max(floor-5, reach.low)
	f := &frame{x: frequencies(), y: between(10*math.Floor((reach.low-3)/10), 10*math.Ceil((math.Max(reach.high, reach.low+12)+4)/10), n.Unit+" in each 1 Hz of band; lines at their own level")}
	var mains, other note
	for _, l := range n.Lines {
		at := note{x: float64(l.FreqHz), y: float64(l.Pad)}
		f.stems = append(f.stems, stem{at.x * 0.995, float64(l.Rig), asOther}, stem{at.x, at.y, asMeasured})
		if best := &mains; l.OfMains && (best.text == "" || at.y > best.y) {
			*best = note{x: at.x, y: at.y, text: "mains " + hertz(l.FreqHz)}
		} else if best := &other; !l.OfMains && (best.text == "" || at.y > best.y) {
			*best = note{x: at.x, y: at.y, text: hertz(l.FreqHz)}
		}
	}
	f.notes = []note{mains, other}
	for _, c := range []struct {
		ys    []result.Number
		look  look
		label string
	}{{n.Rig, asOther, "rig alone"}, {n.Pad, asMeasured, "with the pad"}, {n.Net, asThird, "pad alone"}, {n.Thermal, asDrawn, "thermal"}} {
		if ys := numbers(c.ys); anyDrawable(hz, ys) {
			f.curves = append(f.curves, curve{hz, ys, c.look, c.label})
		}
	}
	return f
}

func noiseSays(a *result.Answer) string {
	over, level := checkOf(a, "noise"), checkOf(a, "noise-level")
	says := "Noise of the rig alone, with the pad, and of the pad alone (the rig taken off), beside the thermal noise of the drawing"
	switch {
	case over != nil && over.Measured.OK():
		says += "; from 20 Hz to 20 kHz the pad lies " + aboveOrBelow(over) + " thermal (±" + figure(over.Uncertainty, over.Uncertainty) + " dB); " + verdictWords(over)
	case over != nil && over.Bound != nil && over.Bound.OK():
		says += "; from 20 Hz to 20 kHz the pad lies at most " + fixed(*over.Bound, 1) + " dB above thermal; " + verdictWords(over)
	case level != nil && level.Measured.OK():
		says += "; the pad makes " + figure(level.Measured, level.Uncertainty) + " dBu, 20 Hz to 20 kHz; " + verdictWords(level)
	case level != nil && level.Bound != nil && level.Bound.OK():
		says += "; the pad makes at most " + fixed(*level.Bound, 1) + " dBu, 20 Hz to 20 kHz; " + verdictWords(level)
	default:
		says += "."
	}
	return says
}

// aboveOrBelow is how far noise lies from thermal, in words.
func aboveOrBelow(c *result.Check) string {
	way := " dB above"
	if c.Measured < 0 {
		way = " dB below"
	}
	return atMost(c.Measured, c.Uncertainty) + way
}
