package rehearsal

import (
	"math/rand/v2"

	"padproof/analysis"
)

// The events of flex, by their words.
const (
	flexStep    = "step"    // 0.5 dB lower for half a second
	flexDropout = "dropout" // nothing for 50 ms
	flexCrackle = "crackle" // for 200 ms, one sample in fifty at a level of its own
)

// FlexEvents are the words for what may happen while the pad is flexed.
func FlexEvents() []string { return []string{flexStep, flexDropout, flexCrackle} }

// FlexSec returns when the events happen in the flex take, in seconds of the recorder's clock: evenly
// over its tone, in their order.
func (p Plan) FlexSec() []float64 {
	from, to := p.tone("flex")
	var at []float64
	for i := range p.Flex {
		part := float64(i+1) / float64(len(p.Flex)+1)
		at = append(at, (float64(from)+part*float64(to-from))/float64(p.RateHz))
	}
	return at
}

// flexing makes the events.
func (p Plan) flexing() (makers []func() effect) {
	for i, atSec := range p.FlexSec() {
		rng := randomFor(p.Seed, "flex: crackle")
		makers = append(makers, func() effect {
			from := int64(atSec * float64(p.RateHz))
			lastSec, change := flexEvent(p.Flex[i], rng)
			return &spell{from: from, to: from + int64(lastSec*float64(p.RateHz)), change: change}
		})
	}
	return makers
}

// flexEvent says how long an event lasts and what it does.
func flexEvent(word string, rng *rand.Rand) (lastSec float64, change func(x float64) float64) {
	switch word {
	case flexStep:
		lower := analysis.RatioFromDB(-0.5)
		return 0.5, func(x float64) float64 { return lower * x }
	case flexDropout:
		return 0.05, func(float64) float64 { return 0 }
	}
	return 0.2, func(x float64) float64 {
		if rng.IntN(50) == 0 {
			return x * rng.Float64()
		}
		return x
	}
}
