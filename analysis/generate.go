package analysis

import (
	"errors"
	"fmt"
	"math"
)

const (
	generateBlock = 4096

	// Edges are raised cosines. A marker's are long, for a clean correlation peak; the tone's only
	// keep it from clicking; the sweep's let it start within one period of its lowest frequency.
	markerEdgeSec = 0.025
	toneEdgeSec   = 0.005
	sweepRiseSec  = 0.1
	sweepFallSec  = 0.02

	highestToneFrac = 0.48 // of the rate
)

// Generate writes the test signal of [Schedule] for a sample rate of 8 to 384 kHz, block by block;
// emit must not keep the slice. The same rate gives the same samples. A stage begins at the sample
// nearest to its start; the tone runs through its step without a jump in phase. An error from emit
// ends it and is returned.
func Generate(rateHz float64, emit func(block []float64) error) error {
	if err := checkRate(rateHz); err != nil {
		return err
	}
	segments := Schedule(rateHz)
	e := &emitter{emit: emit}
	for i, g := range segments {
		first, next := g.frames(rateHz)
		voice := stageVoice(segments, i, rateHz)
		if err := e.write(int(next-first), func(n int) float64 { return voice(float64(n)) }); err != nil {
			return err
		}
	}
	return e.flush()
}

// GenerateTone writes a plain steady sine, starting at phase 0 without an edge, of round(sec·rate)
// samples. freqHz must lie above 0 and at or below 0.48 of the rate, levelDBFS at or below 0.
func GenerateTone(rateHz, freqHz, levelDBFS, sec float64, emit func(block []float64) error) error {
	switch {
	case checkRate(rateHz) != nil:
		return checkRate(rateHz)
	case !(freqHz > 0 && freqHz <= highestToneFrac*rateHz):
		return fmt.Errorf("a tone of %g Hz does not fit a sample rate of %g Hz", freqHz, rateHz)
	case !(levelDBFS <= 0):
		return fmt.Errorf("a tone of %g dBFS lies above full scale", levelDBFS)
	case !(sec >= 0 && sec*rateHz < math.MaxInt32):
		return fmt.Errorf("a tone cannot last %g s", sec)
	}
	peak := PeakFromDBFS(levelDBFS)
	e := &emitter{emit: emit}
	err := e.write(int(math.Round(sec*rateHz)), func(n int) float64 {
		return peak * math.Sin(2*math.Pi*turns(freqHz, n, rateHz))
	})
	if err != nil {
		return err
	}
	return e.flush()
}

// frames returns the first sample of a stage and the first after it.
func (g Segment) frames(rateHz float64) (first, next int64) {
	return int64(math.Round(g.StartSec * rateHz)), int64(math.Round((g.StartSec + g.LengthSec) * rateHz))
}

// stageVoice returns what gives sample n of stage i, n counted from its first.
func stageVoice(segments []Segment, i int, rateHz float64) func(n float64) float64 {
	if segments[i].Kind == SteadyTone {
		return toneVoice(segments, i, rateHz)
	}
	first, next := segments[i].frames(rateHz)
	return segments[i].voice(rateHz, float64(next-first))
}

// voice returns what gives sample n of a stage that is total samples long.
func (g Segment) voice(rateHz, total float64) func(n float64) float64 {
	peak := PeakFromDBFS(g.LevelDBFS)
	switch g.Kind {
	case Chirp:
		return func(n float64) float64 {
			t := n / rateHz
			phase := 2 * math.Pi * (g.FromHz*t + (g.ToHz-g.FromHz)*t*t/(2*g.LengthSec))
			return peak * edges(n, total, markerEdgeSec*rateHz, markerEdgeSec*rateHz) * math.Sin(phase)
		}
	case Sweep: // exponential: the octaves all last equally long
		steep := math.Log(g.ToHz/g.FromHz) / g.LengthSec
		return func(n float64) float64 {
			phase := 2 * math.Pi * g.FromHz / steep * math.Expm1(steep*n/rateHz)
			return peak * edges(n, total, sweepRiseSec*rateHz, sweepFallSec*rateHz) * math.Sin(phase)
		}
	}
	return func(float64) float64 { return 0 }
}

// toneVoice is the tone's: its phase counts from where the tone begins, its edges stand only where
// no tone follows or went before.
func toneVoice(segments []Segment, i int, rateHz float64) func(n float64) float64 {
	begin := i
	for begin > 0 && segments[begin-1].Kind == SteadyTone {
		begin--
	}
	origin, _ := segments[begin].frames(rateHz)
	first, next := segments[i].frames(rateHz)
	rise, fall := 0.0, 0.0
	if begin == i {
		rise = toneEdgeSec * rateHz
	}
	if i+1 == len(segments) || segments[i+1].Kind != SteadyTone {
		fall = toneEdgeSec * rateHz
	}
	peak, skip, total := PeakFromDBFS(segments[i].LevelDBFS), float64(first-origin), float64(next-first)
	return func(n float64) float64 {
		return peak * edges(n, total, rise, fall) * math.Sin(2*math.Pi*math.Mod(segments[i].FromHz*(n+skip), rateHz)/rateHz)
	}
}

// turns returns how far a sine of freqHz has come after n samples, in turns, whole ones left out.
func turns(freqHz float64, n int, rateHz float64) float64 {
	return math.Mod(freqHz*float64(n), rateHz) / rateHz
}

// edges returns the raised cosine that lets sample n of total in over rise samples and out over
// fall samples: 1 between, 0 at the very ends.
func edges(n, total, rise, fall float64) float64 {
	gain := 1.0
	if rise > 0 && n < rise {
		gain *= 0.5 - 0.5*math.Cos(math.Pi*n/rise)
	}
	if left := total - 1 - n; fall > 0 && left < fall {
		gain *= 0.5 - 0.5*math.Cos(math.Pi*left/fall)
	}
	return gain
}

// An emitter gathers samples into blocks of one size.
type emitter struct {
	emit  func([]float64) error
	block []float64
}

func (e *emitter) write(count int, voice func(n int) float64) error {
	if e.emit == nil {
		return errors.New("nowhere to write the signal to")
	}
	for n := range count {
		e.block = append(e.block, voice(n))
		if len(e.block) == generateBlock {
			if err := e.flush(); err != nil {
				return err
			}
		}
	}
	return nil
}

func (e *emitter) flush() error {
	if len(e.block) == 0 {
		return nil
	}
	err := e.emit(e.block)
	e.block = e.block[:0]
	return err
}
