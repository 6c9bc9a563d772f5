package analysis

import (
	"fmt"
	"math"
)

// GenerateHeard writes the test signal of [Generate] for a player at rateHz as a recorder takes it
// whose clock counts ratio samples for each of the player's: 1.00015 for one that runs 150 ppm fast,
// 48000.0/44100 for what was played at 44.1 kHz and recorded at 48. Each sample is the closed form at its own
// instant, nothing is interpolated; with a ratio of 1 they are those of Generate. The ratio must lie
// between 0.5 and 2. What was played above half the recorder's rate is not filtered away, so that a
// ratio much under 1 folds the sweep's top.
func GenerateHeard(rateHz, ratio float64, emit func(block []float64) error) error {
	if err := checkRate(rateHz); err != nil {
		return err
	}
	if !(ratio >= 0.5 && ratio <= 2) {
		return fmt.Errorf("a clock ratio of %g does not lie between 0.5 and 2", ratio)
	}
	segments := Schedule(rateHz)
	e := &emitter{emit: emit}
	begin := 0
	for i, g := range segments {
		first, next := g.frames(rateHz)
		voice := stageVoice(segments, i, rateHz)
		end := int(math.Ceil(float64(next) * ratio)) // the first sample that is heard after the stage
		err := e.write(end-begin, func(n int) float64 {
			return voice(float64(begin+n)/ratio - float64(first))
		})
		if err != nil {
			return err
		}
		begin = end
	}
	return e.flush()
}
