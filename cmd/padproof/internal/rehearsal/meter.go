package rehearsal

import (
	"math"

	"padproof/compare"
)

// A Meter is an ohmmeter as it is: what it shows is off by a share of the reading and by a
// constant, the same in every reading.
type Meter struct {
	Frac, Ohms float64
}

// DrawMeter is a meter drawn from what it states, each figure a rectangle, by the seed.
func DrawMeter(tolFrac, plusOhms float64, seed uint64) Meter {
	rng := randomFor(seed, "ohmmeter")
	return Meter{tolFrac * (2*rng.Float64() - 1), plusOhms * (2*rng.Float64() - 1)}
}

// overRangeOhms is where a handheld meter of the usual kind ends.
const overRangeOhms = 20e6

// shows is the reading of a resistance to a ten-thousandth of itself, or to a hundredth of an
// ohm; +Inf over range.
func (m Meter) shows(ohms float64) float64 {
	shown := math.Max(0, ohms*(1+m.Frac)+m.Ohms)
	if shown > overRangeOhms {
		return math.Inf(1)
	}
	places := max(0, 3-int(math.Floor(math.Log10(math.Max(shown, 10)))))
	scale := math.Pow10(places)
	return math.Round(shown*scale) / scale
}

// Read is what a meter shows of the plan's unit at every useful pair of pins.
func (p Plan) Read(m Meter) []compare.OhmSeen {
	var seen []compare.OhmSeen
	for _, r := range compare.Readings(p.Pad) {
		seen = append(seen, compare.OhmSeen{PinA: r.PinA, PinB: r.PinB, Joined: r.Joined, Ohms: m.shows(r.On(p.Pad))})
	}
	return seen
}
