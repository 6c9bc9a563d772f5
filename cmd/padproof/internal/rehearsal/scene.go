package rehearsal

// A source plays a signal block by block. The blocks are its own: emit keeps none.
type source func(emit func(block []float64) error) error

// An effect changes a signal on its way. What run returns may be shorter or longer than
// what it was given and is good until the next call; rest returns what was held back,
// once the signal has ended.
type effect interface {
	run(block []float64) []float64
	rest() []float64
}

// A scene is one take in the making: one source, and for each channel the effects that it
// passes.
type scene struct {
	source   source
	channels [][]effect
}

// play gives the frames of the take to emit, the samples of each in channel order; emit
// must keep none.
func (s scene) play(emit func(frames []float64) error) error {
	waiting := make([][]float64, len(s.channels)) // till the other channels have theirs
	var own, frames []float64
	pass := func(c int, block []float64, from int) {
		for _, e := range s.channels[c][from:] {
			block = e.run(block)
		}
		waiting[c] = append(waiting[c], block...)
	}
	flush := func() error {
		n := len(waiting[0])
		for _, w := range waiting {
			n = min(n, len(w))
		}
		frames = frames[:0]
		for i := range n {
			for _, w := range waiting {
				frames = append(frames, w[i])
			}
		}
		for c, w := range waiting {
			waiting[c] = w[:copy(w, w[n:])]
		}
		if n == 0 {
			return nil
		}
		return emit(frames)
	}
	err := s.source(func(block []float64) error {
		for c := range s.channels {
			own = append(own[:0], block...)
			pass(c, own, 0)
		}
		return flush()
	})
	if err != nil {
		return err
	}
	for c, effects := range s.channels {
		for i, e := range effects {
			pass(c, e.rest(), i+1)
		}
	}
	return flush()
}
