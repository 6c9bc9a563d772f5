package compare

import "padproof/compare/network"

// A Spread is what units with sound parts may show, in dB of loss.
type Spread struct {
	WorstLowDB, WorstHighDB float64 // every part at its worst
	Low95DB, High95DB       float64 // 95 % of units, parts rectangular within tolerance
}

// The draws of [SoundSpread]: enough that its 95 % limits scatter by about 2 %
// of themselves; the seed is any number that stays the same.
const (
	spreadUnits = 5000
	spreadSeed  = 1
)

// SoundSpread is the loss that sound units of a drawing show between the given
// ends: worst case, and 95 % of units by Monte Carlo (JCGM 101), always the
// same for the same drawing.
func SoundSpread(c *network.Circuit, e network.Ends, freqHz float64) Spread {
	drawn := c.Spread(e, freqHz, spreadUnits, spreadSeed)
	s := Spread{Low95DB: drawn.LowDB, High95DB: drawn.HighDB}
	s.WorstLowDB, s.WorstHighDB = c.WorstCase(e, freqHz)
	return s
}
