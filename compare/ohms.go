package compare

import (
	"math"

	"padproof/compare/network"
)

// An OhmReading is one that tells a part from a wrong one, unit unplugged.
type OhmReading struct {
	PinA, PinB string
	Joined     [2]string // pins to join meanwhile; empty where none
	GoodOhms   float64   // what a sound unit reads
	WrongOhms  float64   // what it reads with the part at the value that breaks the limit
}

// On is what the reading gives on a circuit: ohms, +Inf where open.
func (r OhmReading) On(c *network.Circuit) float64 {
	if r.Joined == [2]string{} {
		return c.Ohms(r.PinA, r.PinB)
	}
	return c.Ohms(r.PinA, r.PinB, r.Joined)
}

// bestReading is the ohmmeter reading that moves most, as a ratio, between the
// sound and the wrong circuit: between two pins, all others open, or with the
// far end's pins joined.
func bestReading(sound, wrong *network.Circuit) OhmReading {
	var best OhmReading
	most := 0.0
	for _, r := range Readings(sound) {
		r.GoodOhms, r.WrongOhms = r.On(sound), r.On(wrong)
		if change := readingChange(r.GoodOhms, r.WrongOhms); change > most {
			best, most = r, change
		}
	}
	return best
}

// OhmsText is a resistance with three digits and its unit; "open" where it has no
// end.
func OhmsText(ohms float64) string { return partValue(network.Resistor, ohms) }

// readingChange is how far two readings lie apart on a meter: the logarithm of
// their ratio, an open counting as 10 megohms and a short as 0.1 ohm.
func readingChange(a, b float64) float64 {
	const shortOhms, openOhms = 0.1, 1e7
	clamp := func(x float64) float64 { return math.Min(math.Max(x, shortOhms), openOhms) }
	return math.Abs(math.Log(clamp(a) / clamp(b)))
}

// Readings are the useful pairs of pins of a circuit, their ohms not filled in.
func Readings(c *network.Circuit) []OhmReading {
	hotIn, coldIn, hotOut, coldOut := "in.hot", "in.cold", "out.hot", "out.cold"
	if !c.Balanced() {
		return []OhmReading{
			{PinA: hotIn, PinB: "screen"},
			{PinA: hotOut, PinB: "screen"},
			{PinA: hotIn, PinB: hotOut},
			{PinA: hotIn, PinB: "screen", Joined: [2]string{hotOut, "screen"}},
			{PinA: hotOut, PinB: "screen", Joined: [2]string{hotIn, "screen"}},
		}
	}
	return []OhmReading{
		{PinA: hotIn, PinB: coldIn},
		{PinA: hotOut, PinB: coldOut},
		{PinA: hotIn, PinB: hotOut},
		{PinA: coldIn, PinB: coldOut},
		{PinA: hotIn, PinB: coldIn, Joined: [2]string{hotOut, coldOut}},
		{PinA: hotOut, PinB: coldOut, Joined: [2]string{hotIn, coldIn}},
		{PinA: hotIn, PinB: "screen"},
		{PinA: coldIn, PinB: "screen"},
		{PinA: hotOut, PinB: "screen"},
		{PinA: coldOut, PinB: "screen"},
	}
}
