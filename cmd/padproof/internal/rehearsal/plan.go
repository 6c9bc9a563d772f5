package rehearsal

import (
	"fmt"
	"math"

	"padproof/analysis"
	"padproof/capture"
	"padproof/compare/network"
)

// Mark begins the comment inside every rehearsed take.
const Mark = "SIMULATED by padproof rehearse"

const (
	// SilenceSec lies before and after a steady tone.
	SilenceSec = 0.5

	// CalibrationHz is the tone of calibration: cheap meters are true there.
	CalibrationHz = 200.0
)

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
	Takes     []string         // roles, see [Takes]
	Signal    Signal
	LevelDBFS float64  // of the (first) tone in before: at most 0, at least -200
	NoiseDBFS float64  // see the package's manual; -Inf for none
	HumDBFS   float64  // of the mains line, in every take; -Inf for none
	NoiseSec  float64  // how long the noise takes last
	DriftPPM  float64  // how much faster the recorder's clock runs than the player's
	Flex      []string // what happens in flex, see [FlexEvents]
	Lies      []string // what is wrong with the recordings, see [Lies]
	Seed      uint64   // of all that is random
	RateHz    int      // 8000 to 384000
	Bits      int      // 16, 24 or 32
	Float     bool     // samples as floats, of 32 bits
	Note      string   // added to the mark in every take; may be empty

	Progress func(done, total int64) // told how many frames of all takes are written; may be nil
}

// mostSec is an hour: what goes on longer shows nothing more.
const mostSec = 3600.0

// offDBFS is so low that it counts as nothing.
const offDBFS = -300.0

// RecordedLossDB returns the loss that before and after hold at the tone, the stated gain of
// after taken off: the pad's on this bench less what the gain was off by, lies apart. It is
// +Inf where nothing comes through.
func (p Plan) RecordedLossDB() float64 {
	return p.Pad.LossDB(p.Bench.Ends, p.Signal.FreqHz()) - p.Bench.OffsetDB
}

// step is that of an integer sample.
func (p Plan) step() float64 { return math.Ldexp(1, 1-p.Bits) }

func (p Plan) format(r recipe) capture.Format {
	comment := Mark + ": " + r.role
	if p.Note != "" {
		comment += ", " + p.Note
	}
	return capture.Format{
		RateHz: p.RateHz, Channels: len(r.paths), Bits: p.Bits, Float: p.Float, Comment: comment,
		Frames: int64(math.Ceil(p.sec(r.role) * p.heardHz())),
	}
}

// frames is how many frames all takes have, near enough to tell how far they are.
func (p Plan) frames() int64 {
	var sum float64
	for _, role := range p.Takes {
		sum += p.sec(role) * p.heardHz()
	}
	return int64(sum)
}

// sec is how long a take is, by the player's clock.
func (p Plan) sec(role string) float64 {
	switch {
	case role == rigNoise || role == padNoise:
		return p.NoiseSec
	case p.Signal.Test && role != "flex" && role != "calibration":
		return analysis.SignalSec()
	}
	return p.steadySec(role) + 2*SilenceSec
}

// highestToneFrac is how far up a tone may lie, of the sample rate.
const highestToneFrac = 0.45

// Check returns what is wrong with a plan, or nil.
func (p Plan) Check() error {
	highest := highestToneFrac * float64(p.RateHz)
	switch {
	case p.Pad == nil:
		return fmt.Errorf("there is no pad to rehearse")
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
	case !(p.HumDBFS <= 0):
		return fmt.Errorf("the hum is at most 0 dBFS (-inf for none), not %v", p.HumDBFS)
	case !p.Signal.Test && !(p.Signal.ToneHz >= keptFromHz && p.Signal.ToneHz <= highest):
		return fmt.Errorf("a tone is %g Hz to 0.45 of the sample rate, %g Hz; not %v Hz", keptFromHz, highest, p.Signal.ToneHz)
	case !p.Signal.Test && !(p.Signal.Sec > 0 && p.Signal.Sec <= mostSec):
		return fmt.Errorf("a tone lasts up to %g s, not %v", mostSec, p.Signal.Sec)
	case !(math.Abs(p.DriftPPM) <= mostDriftPPM):
		return fmt.Errorf("two clocks differ by up to %d ppm, not %v", mostDriftPPM, p.DriftPPM)
	}
	if err := p.Bench.Ends.Check(); err != nil {
		return err
	}
	return p.checkTakes()
}

// mostDriftPPM is far beyond the clocks of any two machines that work.
const mostDriftPPM = 1000
