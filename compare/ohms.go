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

// Band is what units read whose parts keep to their tolerances; see
// [network.Circuit.OhmExtremes].
func (r OhmReading) Band(c *network.Circuit) (lowOhms, highOhms float64) {
	least, most := c.OhmExtremes()
	return r.On(least), r.On(most)
}

// same reports whether two readings are one: the same pins, and the same joined.
func (r OhmReading) same(c *network.Circuit, s OhmReading) bool {
	return samePair(c, [2]string{r.PinA, r.PinB}, [2]string{s.PinA, s.PinB}) && samePair(c, r.Joined, s.Joined)
}

// Shorted reports whether the joined pins are those that the meter is on.
func (r OhmReading) Shorted(c *network.Circuit) bool {
	return r.Joined != [2]string{} && !c.OneNode(r.Joined[0], r.Joined[1]) && samePair(c, [2]string{r.PinA, r.PinB}, r.Joined)
}

// samePair reports whether two pairs of names mean the same two nodes, in either
// order. Two of one node join nothing, as if they were not there.
func samePair(c *network.Circuit, p, q [2]string) bool {
	if c.OneNode(p[0], p[1]) || c.OneNode(q[0], q[1]) {
		return c.OneNode(p[0], p[1]) && c.OneNode(q[0], q[1])
	}
	return c.OneNode(p[0], q[0]) && c.OneNode(p[1], q[1]) || c.OneNode(p[0], q[1]) && c.OneNode(p[1], q[0])
}

// bestReading is the ohmmeter reading that moves most, as a ratio, between the
// sound and the wrong circuit, of those not taken yet.
func bestReading(sound, wrong *network.Circuit, taken []OhmSeen) OhmReading {
	var best OhmReading
	most := 0.0
	for _, r := range Readings(sound) {
		if anyReading(sound, taken, r) {
			continue
		}
		r.GoodOhms, r.WrongOhms = r.On(sound), r.On(wrong)
		if change := ReadingChange(r.GoodOhms, r.WrongOhms); change > most {
			best, most = r, change
		}
	}
	return best
}

// eitherSide is what the reading gives nearest below and above a sound unit's on wrong circuits; NaN
// where none reads there.
func (r OhmReading) eitherSide(wrong []*network.Circuit) (belowOhms, aboveOhms float64) {
	belowOhms, aboveOhms = math.NaN(), math.NaN()
	if r.PinA == "" {
		return belowOhms, aboveOhms
	}
	for _, c := range wrong {
		switch ohms := r.On(c); {
		case ohms < r.GoodOhms && !(ohms <= belowOhms):
			belowOhms = ohms
		case ohms > r.GoodOhms && !(ohms >= aboveOhms):
			aboveOhms = ohms
		}
	}
	return belowOhms, aboveOhms
}

// OhmsText is a resistance with four digits, as a meter has them, and its unit; "open" where it has no
// end.
func OhmsText(ohms float64) string { return valueTo(network.Resistor, ohms, 4) }

// ReadingChange is how far two readings in ohms lie apart on a meter: the logarithm
// of their ratio, 0 or more, an open counting as 10 megohms and a short as 0.1 ohm.
func ReadingChange(a, b float64) float64 {
	const shortOhms, openOhms = 0.1, 1e7
	clamp := func(x float64) float64 { return math.Min(math.Max(x, shortOhms), openOhms) }
	return math.Abs(math.Log(clamp(a) / clamp(b)))
}

// Readings are the useful pairs of pins of a circuit, their ohms not filled in:
// across each end, along each leg and to screen with all else open, then again
// with the far end joined. A joined reading that goes by the same parts in the
// same way as one before it is left out. Inner nodes are not among them: nobody
// reaches them in a closed box.
func Readings(c *network.Circuit) []OhmReading {
	all, joined := plainReadings(c), joinedReadings(c)
	apart := scattered(c)
	for _, r := range joined {
		if !readsLikeOne(apart, r, all) {
			all = append(all, r)
		}
	}
	return all
}

// Pins, as the lists below name them.
const (
	hotIn, coldIn   = "in.hot", "in.cold"
	hotOut, coldOut = "out.hot", "out.cold"
	screenPin       = "screen"
)

func plainReadings(c *network.Circuit) []OhmReading {
	if !c.Balanced() {
		return []OhmReading{{PinA: hotIn, PinB: screenPin}, {PinA: hotOut, PinB: screenPin}, {PinA: hotIn, PinB: hotOut}}
	}
	return []OhmReading{
		{PinA: hotIn, PinB: coldIn}, {PinA: hotOut, PinB: coldOut},
		{PinA: hotIn, PinB: hotOut}, {PinA: coldIn, PinB: coldOut},
		{PinA: hotIn, PinB: screenPin}, {PinA: coldIn, PinB: screenPin},
		{PinA: hotOut, PinB: screenPin}, {PinA: coldOut, PinB: screenPin},
	}
}

func joinedReadings(c *network.Circuit) []OhmReading {
	if !c.Balanced() {
		return []OhmReading{
			{PinA: hotIn, PinB: screenPin, Joined: [2]string{hotOut, screenPin}},
			{PinA: hotOut, PinB: screenPin, Joined: [2]string{hotIn, screenPin}},
		}
	}
	return []OhmReading{
		{PinA: hotIn, PinB: coldIn, Joined: [2]string{hotOut, coldOut}},
		{PinA: hotOut, PinB: coldOut, Joined: [2]string{hotIn, coldIn}},
		{PinA: hotIn, PinB: screenPin, Joined: [2]string{hotOut, screenPin}},
		{PinA: coldIn, PinB: screenPin, Joined: [2]string{coldOut, screenPin}},
		{PinA: hotOut, PinB: screenPin, Joined: [2]string{hotIn, screenPin}},
		{PinA: coldOut, PinB: screenPin, Joined: [2]string{coldIn, screenPin}},
	}
}

// scattered are circuits of the same wiring whose values have nothing to do with
// one another, links included: readings that agree on both agree by the wiring.
func scattered(c *network.Circuit) [2]*network.Circuit {
	var apart [2]*network.Circuit
	for i, step := range []float64{math.Phi, math.Sqrt2} { // the fractions of their multiples never fall together
		d := c
		for n, p := range c.Parts() {
			if p.Kind == network.Resistor {
				_, frac := math.Modf(step * float64(n+1))
				d = d.With(p.Ref, 100*(1+frac))
			}
		}
		apart[i] = d
	}
	return apart
}

func readsLikeOne(apart [2]*network.Circuit, r OhmReading, others []OhmReading) bool {
	for _, o := range others {
		if equalOhms(r.On(apart[0]), o.On(apart[0])) && equalOhms(r.On(apart[1]), o.On(apart[1])) {
			return true
		}
	}
	return false
}

func equalOhms(a, b float64) bool {
	const rounding = 1e-9
	return a == b || !math.IsInf(a, 1) && !math.IsInf(b, 1) && math.Abs(a-b) <= rounding*math.Max(a, b)
}
