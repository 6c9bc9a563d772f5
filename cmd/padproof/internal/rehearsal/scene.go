package rehearsal

import (
	"math"

	"padproof/analysis"
)

// A source plays a signal block by block. The blocks are its own: emit keeps none.
type source func(emit func(block []float64) error) error

// An effect changes a signal on its way. What run returns may be shorter or longer than
// what it was given and is good until the next call; rest returns what was held back,
// once the signal has ended.
type effect interface {
	run(block []float64) []float64
	rest() []float64
}

// A scene is one take in the making.
type scene struct {
	source  source
	effects []effect
}

// play gives the blocks of the take to emit, which must keep none.
func (s scene) play(emit func(block []float64) error) error {
	var own []float64
	err := s.source(func(block []float64) error {
		own = append(own[:0], block...)
		return s.pass(own, 0, emit)
	})
	for i := 0; err == nil && i < len(s.effects); i++ {
		err = s.pass(s.effects[i].rest(), i+1, emit)
	}
	return err
}

// pass sends a block through the effects from one on.
func (s scene) pass(block []float64, from int, emit func([]float64) error) error {
	for _, e := range s.effects[from:] {
		block = e.run(block)
	}
	if len(block) == 0 {
		return nil
	}
	return emit(block)
}

// inTurn plays sources one after another.
func inTurn(sources ...source) source {
	return func(emit func([]float64) error) error {
		for _, s := range sources {
			if err := s(emit); err != nil {
				return err
			}
		}
		return nil
	}
}

// silence is nothing for some seconds.
func silence(rateHz, sec float64) source {
	return func(emit func([]float64) error) error {
		block := make([]float64, 4096)
		for left := int(math.Round(rateHz * sec)); left > 0; {
			n := min(left, len(block))
			if err := emit(block[:n]); err != nil {
				return err
			}
			left -= n
		}
		return nil
	}
}

// tone is a steady sine of full scale.
func tone(rateHz, freqHz, sec float64) source {
	return func(emit func([]float64) error) error {
		return analysis.GenerateTone(rateHz, freqHz, 0, sec, emit)
	}
}

// testSignal is the test signal, its first tone at full scale.
func testSignal(rateHz float64) source {
	raise := gain(analysis.RatioFromDB(-analysis.SignalPeakDBFS))
	return func(emit func([]float64) error) error {
		signal := func(emit func([]float64) error) error { return analysis.Generate(rateHz, emit) }
		return scene{signal, []effect{raise}}.play(emit)
	}
}

// gain multiplies.
type gain float64

func (g gain) run(block []float64) []float64 {
	for i := range block {
		block[i] *= float64(g)
	}
	return block
}

func (gain) rest() []float64 { return nil }
