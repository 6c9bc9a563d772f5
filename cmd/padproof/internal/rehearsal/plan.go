package rehearsal

import (
	"errors"
	"fmt"
	"math"
	"math/cmplx"

	"padproof/analysis"
	"padproof/capture"
	"padproof/compare/network"
)

// Mark begins the comment inside every rehearsed take.
const Mark = "SIMULATED by padproof rehearse"

// SilenceSec lies before and after a steady tone.
const SilenceSec = 0.5

// A Signal is what is played.
type Signal struct {
	Test   bool    // the test signal; else a steady tone between two silences
	ToneHz float64 // of a steady tone: 10 Hz to 0.45 of the sample rate
	Sec    float64 // of a steady tone, without its silences: above 0
}

// FreqHz returns the frequency of the tone that the loss is read at.
func (s Signal) FreqHz() float64 {
	if s.Test {
		return analysis.ToneHz
	}
	return s.ToneHz
}

// A Plan is what to rehearse.
type Plan struct {
	Pad       *network.Circuit // as built
	Bench     Bench            // as it is
	Signal    Signal
	LevelDBFS float64 // of the (first) tone in before: at most 0, at least -200
	NoiseDBFS float64 // see the package's manual; -Inf for none
	Seed      uint64  // of the noise
	RateHz    int     // 8000 to 384000
	Bits      int     // 16, 24 or 32
	Float     bool    // samples as floats, of 32 bits
	Note      string  // added to the mark in every take; may be empty
}

// Check returns what is wrong with a plan's figures, or nil.
func (p Plan) Check() error {
	highest := keptToFrac * float64(p.RateHz)
	switch {
	case p.Pad == nil:
		return errors.New("there is no pad to rehearse")
	case p.RateHz < 8000 || p.RateHz > 384000:
		return fmt.Errorf("a sample rate is 8000 to 384000 Hz, not %d", p.RateHz)
	case p.Bits != 16 && p.Bits != 24 && p.Bits != 32:
		return fmt.Errorf("a sample has 16, 24 or 32 bits, not %d", p.Bits)
	case p.Float && p.Bits != 32:
		return fmt.Errorf("a float sample has 32 bits, not %d", p.Bits)
	case !(p.LevelDBFS <= 0 && p.LevelDBFS >= -200):
		return fmt.Errorf("the tone's level is -200 to 0 dBFS, not %v", p.LevelDBFS)
	case !(p.NoiseDBFS <= 0):
		return fmt.Errorf("the noise is at most 0 dBFS (-inf for none), not %v", p.NoiseDBFS)
	case !p.Signal.Test && !(p.Signal.ToneHz >= keptFromHz && p.Signal.ToneHz <= highest):
		return fmt.Errorf("a tone is %g Hz to 0.45 of the sample rate, %g Hz; not %v Hz", keptFromHz, highest, p.Signal.ToneHz)
	case !p.Signal.Test && !(p.Signal.Sec > 0 && p.Signal.Sec <= mostSec):
		return fmt.Errorf("a tone lasts up to %g s, not %v", mostSec, p.Signal.Sec)
	}
	return p.Bench.Ends.Check()
}

// mostSec is an hour: a tone that goes on longer shows nothing more.
const mostSec = 3600.0

// RecordedLossDB returns the loss that the takes hold at the tone, the stated gain of after
// taken off: the pad's on this bench less what the gain was off by. It is +Inf where nothing
// comes through.
func (p Plan) RecordedLossDB() float64 {
	return p.Pad.LossDB(p.Bench.Ends, p.Signal.FreqHz()) - p.Bench.OffsetDB
}

// A role is a take that the plan makes.
type role struct {
	name   string
	gainDB float64
	volts  func(straight, withPad complex128) complex128 // which of the load's voltages it records
}

func (p Plan) roles() []role {
	return []role{
		{"before", 0, func(straight, _ complex128) complex128 { return straight }},
		{"after", p.Bench.AfterGainDB + p.Bench.OffsetDB, func(_, withPad complex128) complex128 { return withPad }},
	}
}

// scene sets up one take.
func (p Plan) scene(r role) (scene, error) {
	straight, _ := p.Pad.LoadVolts(p.Bench.Ends, p.Signal.FreqHz())
	full := cmplx.Abs(straight) // its size alone: at 0 Hz the response must stay real
	if !(full > 0) {
		return scene{}, errors.New("nothing comes through this bench even without the pad")
	}
	rate := float64(p.RateHz)
	taps, err := kernel(rate, func(freqHz float64) complex128 {
		return r.volts(p.Pad.LoadVolts(p.Bench.Ends, freqHz)) / complex(full, 0)
	})
	if err != nil {
		return scene{}, err
	}
	return scene{p.source(), append([]effect{
		gain(analysis.RatioFromDB(p.LevelDBFS + r.gainDB)),
		newFilter(taps),
	}, p.recorder(r)...)}, nil
}

// source plays the signal, its first tone at full scale.
func (p Plan) source() source {
	rate := float64(p.RateHz)
	if p.Signal.Test {
		return testSignal(rate)
	}
	quiet := silence(rate, SilenceSec)
	return inTurn(quiet, tone(rate, p.Signal.ToneHz, p.Signal.Sec), quiet)
}

// recorder is what the recorder itself adds.
func (p Plan) recorder(r role) []effect {
	n := noise{noiseRMS(p.NoiseDBFS, float64(p.RateHz)), randomFor(p.Seed, r.name+": noise")}
	step := math.Ldexp(1, 1-p.Bits)
	if p.Float || n.rms >= step/2 {
		return []effect{n}
	}
	return []effect{n, dither{step, randomFor(p.Seed, r.name+": dither")}}
}

func (p Plan) format(r role) capture.Format {
	comment := Mark + ": " + r.name
	if p.Note != "" {
		comment += ", " + p.Note
	}
	return capture.Format{RateHz: p.RateHz, Channels: 1, Bits: p.Bits, Float: p.Float, Comment: comment, Frames: p.frames()}
}

// frames is how long each take is.
func (p Plan) frames() int64 {
	rate := float64(p.RateHz)
	if p.Signal.Test {
		return int64(math.Round(analysis.SignalSec() * rate))
	}
	return 2*int64(math.Round(SilenceSec*rate)) + int64(math.Round(p.Signal.Sec*rate))
}
