package suspect

import (
	"padproof/compare"
	"padproof/compare/network"
)

// Evidence is all that was measured of one unit. What was not taken is left out: empty, nil or 0. A
// figure that is NaN counts as not taken.
type Evidence struct {
	Circuit *network.Circuit // the drawing
	Rig     compare.Rig      // the bench; its source as found, where before-loaded was taken
	Service network.Ends     // where the pad will work; the zero value: the bench

	Loss       []Point // bench insertion loss, absolute, at one or more tones
	Response   []Point // bench loss less that at ToneHz
	ToneHz     float64 // 0: the tone of Loss nearest 1 kHz
	GainStdUDB float64 // standard uncertainty common to all of Loss: gain drift, linearity
	Legs       *Legs
	Polarity   int // 1 as drawn straight through, -1 turned over, 0 not known
	Noise      *Noise
	Hum        *Hum
	Ohms       []Ohms
}

// A Point is a loss at one frequency.
type Point struct {
	FreqHz, LossDB float64
	StdUDB         float64 // its own standard uncertainty, apart from what all points share
	AtLeast        bool    // nothing came through: the loss is LossDB or more
}

// Legs is hot over cold at the output, each leg loaded to screen, as measured: the two channels' own
// difference taken off, the drawing not.
type Legs struct {
	FreqHz   float64
	LoadOhms float64 // each leg to screen; each within the rig's load tolerance by itself
	OverDB   float64 // hot over cold
	StdUDB   float64
	// Before says that the channels' own difference is known from the same two channels straight
	// through: what the legs' loads do to them there is then off as well.
	Before bool

	PhaseDeg     float64 // hot against cold; NaN not known
	PhaseStdUDeg float64

	// No tone stands on a leg. OverDB is then a bound: with DeadCold hot lies OverDB or more over
	// cold, with DeadHot OverDB or less. With both dead OverDB says nothing.
	DeadHot, DeadCold bool
}

// Noise is the noise of pad and rig at the rig's input terminals, summed over Bands (see [NoiseOf]).
type Noise struct {
	Bench        compare.NoiseBench
	Bands        []network.Band
	PadVV, RigVV float64 // volts squared as recorded; RigVV NaN where not taken: then PadVV is a bound
	PadStdUFrac  float64 // relative standard uncertainty of PadVV by averaging
	RigStdUFrac  float64
}

// Hum is the hum at the rig's input with the unit, and the rig's own.
type Hum struct {
	UnitDBu float64 // NaN: none is seen
	RigDBu  float64 // NaN: not known
	UDB     float64 // expanded, of the difference
}

// Ohms is one reading of an ohmmeter on the unit alone.
type Ohms struct {
	PinA, PinB        string
	Joined            [2]string // pins joined meanwhile; empty where none
	Ohms              float64   // +Inf: over range
	TolFrac, PlusOhms float64   // half-width of the meter: TolFrac of the reading and PlusOhms; both 0: 0.5 % and 0.2 Ω
}
