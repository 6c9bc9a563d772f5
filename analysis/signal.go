package analysis

import "math"

// A Kind says what a [Segment] of the test signal holds.
type Kind int

const (
	Silence    Kind = iota
	Chirp           // frequency runs evenly from FromHz to ToHz
	SteadyTone      // FromHz and ToHz are the same
	Sweep           // frequency runs exponentially from FromHz to ToHz
)

// A Segment is one stage of the test signal.
type Segment struct {
	Name      string
	Kind      Kind
	StartSec  float64
	LengthSec float64
	LevelDBFS float64 // of the sine between its edges; FloorDBFS in silence
	FromHz    float64 // 0 in silence
	ToHz      float64
}

const (
	// ToneHz is the frequency of the steady tone (AES17).
	ToneHz = 997.0

	// SignalPeakDBFS is the level of the loudest stages of the test signal: a sine whose peak is
	// 10^(-6/20), 0.5012 of full scale. No sample lies higher.
	SignalPeakDBFS = -6.0

	// SignalStepDB is how far the second stage of the tone lies under the first.
	SignalStepDB = 10.0

	markerLowHz, markerHighHz = 1000.0, 5000.0
	sweepLowHz, sweepHighHz   = 10.0, 40000.0
)

// Schedule returns the stages of the test signal in order, for a sample rate in Hz. They follow
// one another without gap. The rate matters at the top only: the sweep ends at the lower of 0.48
// of the rate and 40 kHz, the marker's chirp at the lower of 0.45 of the rate and 5 kHz.
func Schedule(rateHz float64) []Segment {
	markerHz := math.Min(markerHighHz, 0.45*rateHz)
	quiet := func(name string, sec float64) Segment {
		return Segment{Name: name, LengthSec: sec, LevelDBFS: FloorDBFS}
	}
	segments := []Segment{
		quiet("lead-in", 1),
		{Name: "opening marker", Kind: Chirp, LengthSec: 0.25, LevelDBFS: SignalPeakDBFS, FromHz: markerLowHz, ToHz: markerHz},
		quiet("after opening marker", 0.5),
		{Name: "tone", Kind: SteadyTone, LengthSec: 4, LevelDBFS: SignalPeakDBFS, FromHz: ToneHz, ToHz: ToneHz},
		{Name: "tone, stepped down", Kind: SteadyTone, LengthSec: 2, LevelDBFS: SignalPeakDBFS - SignalStepDB, FromHz: ToneHz, ToHz: ToneHz},
		quiet("after tone", 0.5),
		{Name: "sweep", Kind: Sweep, LengthSec: 6, LevelDBFS: SignalPeakDBFS, FromHz: sweepLowHz, ToHz: math.Min(sweepHighHz, 0.48*rateHz)},
		quiet("after sweep", 0.5),
		quiet("noise and hum", 8),
		{Name: "closing marker", Kind: Chirp, LengthSec: 0.25, LevelDBFS: SignalPeakDBFS, FromHz: markerHz, ToHz: markerLowHz},
		quiet("lead-out", 0.5),
	}
	at := 0.0
	for i := range segments {
		segments[i].StartSec = at
		at += segments[i].LengthSec
	}
	return segments
}

// SignalSec returns how long the test signal is, in seconds.
func SignalSec() float64 {
	all := Schedule(lowestRateHz)
	last := all[len(all)-1]
	return last.StartSec + last.LengthSec
}
