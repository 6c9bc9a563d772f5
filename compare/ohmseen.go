package compare

import (
	"math"
	"slices"
	"strings"

	"padproof/compare/network"
)

// What a meter is taken to be good for where nobody says: common practice, no
// source. Handheld meters of three and a half digits state about as much.
const (
	MeterTolFrac  = 0.005
	MeterPlusOhms = 0.2
)

// An OhmSeen is an ohmmeter reading that was taken of the unit, unplugged. What
// the meter may be off by is a rectangle of TolFrac of the reading and PlusOhms.
type OhmSeen struct {
	PinA, PinB string
	Joined     [2]string // pins that were joined meanwhile; empty where none
	Ohms       float64   // +Inf where the meter showed over range
	TolFrac    float64   // 0 to 1
	PlusOhms   float64
}

// overRangeOhms is what counts as open. A resistance beyond it is over the range
// of some meters, and flux, fingers and damp may read as much where nothing is.
const overRangeOhms = 1e6

// Reading is the reading apart from what it gave.
func (s OhmSeen) Reading() OhmReading {
	return OhmReading{PinA: s.PinA, PinB: s.PinB, Joined: s.Joined}
}

// Same reports whether another reading was taken at the same pins of a circuit.
func (s OhmSeen) Same(c *network.Circuit, other OhmSeen) bool {
	return s.Reading().same(c, other.Reading())
}

func anyReading(c *network.Circuit, taken []OhmSeen, r OhmReading) bool {
	return slices.ContainsFunc(taken, func(s OhmSeen) bool { return s.Reading().same(c, r) })
}

// Good is what this meter may show on units whose parts keep to their
// tolerances, least and most; highOhms is +Inf where open is among it.
func (s OhmSeen) Good(c *network.Circuit) (lowOhms, highOhms float64) {
	return s.shown(s.Reading().Band(c))
}

// shown is what the meter may show of a resistance from low to high: the readings
// r of which one lies within r ± (TolFrac r + PlusOhms). Open begins at
// overRangeOhms.
func (s OhmSeen) shown(low, high float64) (lowOhms, highOhms float64) {
	lowOhms = (math.Min(low, overRangeOhms) - s.PlusOhms) / (1 + s.TolFrac)
	highOhms = (high + s.PlusOhms) / (1 - s.TolFrac)
	if high >= overRangeOhms {
		highOhms = math.Inf(1)
	}
	return math.Max(0, lowOhms), highOhms
}

// Fits reports whether units of a circuit, parts within tolerance, can show the
// reading.
func (s OhmSeen) Fits(c *network.Circuit) bool {
	low, high := s.Good(c)
	return low <= s.Ohms && s.Ohms <= high
}

// allFit reports whether a circuit can show every reading.
func allFit(c *network.Circuit, seen []OhmSeen) bool {
	return !slices.ContainsFunc(seen, func(s OhmSeen) bool { return !s.Fits(c) })
}

// Shown is what the meter showed: "33 Ω", "1.12 kΩ", "open".
func (s OhmSeen) Shown() string { return valueTo(network.Resistor, s.Ohms, 4) }

// Text says which pins, what was read there, and what a sound unit of the
// circuit reads on this meter.
func (s OhmSeen) Text(c *network.Circuit) string {
	low, high := s.Good(c)
	return s.Reading().How() + " shows " + s.Shown() + " on the ohmmeter, where a sound unit shows " + bandText(low, high)
}

// bandText is what a meter may show, least and most.
func bandText(low, high float64) string {
	figure := func(v float64) string { return valueTo(network.Resistor, v, 4) }
	switch {
	case math.IsInf(high, 1) && low >= 0.9*overRangeOhms:
		return "open"
	case math.IsInf(high, 1):
		return figure(low) + " or more"
	case figure(low) == figure(high):
		return figure(low)
	}
	return figure(low) + " to " + figure(high)
}

// OhmDoubt says why the ohmmeter readings leave a loss that keeps its limits
// unproven; "" where they do not. Some reading is not one of a sound unit: the
// unit is wrong, the reading is, or the drawing is another unit's. Or they are,
// and the loss on the bench is not.
func (k LossCase) OhmDoubt(l Loss) string {
	var texts []string
	for _, s := range k.Ohms {
		if !s.Fits(k.Circuit) {
			texts = append(texts, s.Text(k.Circuit))
		}
	}
	switch {
	case len(texts) > 0:
		return strings.Join(texts, "; ") + "; zero the meter and read it again, or mend the unit"
	case l.ReadOtherwise:
		return readOtherwise
	}
	return ""
}

const readOtherwise = "no part of the drawing alone explains both the loss on the bench and the ohmmeter readings; look at gain, source and load, and read again"

// OhmRemark says with a loss that breaks its limits that the ohmmeter readings
// speak against a wrong part, and so for a wrong bench; "" where they do not.
func (l Loss) OhmRemark() string {
	if l.ReadOtherwise {
		return readOtherwise
	}
	return ""
}
