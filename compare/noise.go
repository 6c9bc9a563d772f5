package compare

import (
	"errors"
	"fmt"
	"math"

	"padproof/analysis"
	"padproof/compare/network"
	"padproof/compare/uncertainty"
)

// A NoiseBench is the rig as it recorded rig-noise and pad-noise. Tolerances are half-widths of a
// rectangle.
type NoiseBench struct {
	Ends           network.Ends // load, sense and cable of the rig's input; source and drive have no part
	LoadTolFrac    float64
	CableTolFarads float64

	FullScaleDBu   float64 // of a sine that reads 0 dBFS, gain as in the noise takes; NaN where not known
	CalibrationUDB float64 // expanded, k = 2
	GainDriftDB    float64 // between the two takes, half-width

	LowAmps, HighAmps float64 // the input's noise current, per root hertz, lies between these

	NoisePlugOhms, NoisePlugTolFrac float64 // what closed the input in rig-noise
	PadPlugOhms, PadPlugTolFrac     float64 // what closed the pad's input in pad-noise

	TempC, TempHalfC float64
}

// A NoiseCase is all that a unit's noise is judged by. RigNoise may be nil: then only a bound is
// shown.
type NoiseCase struct {
	Circuit            *network.Circuit
	Bench              NoiseBench
	PadNoise, RigNoise *analysis.Noise
}

// A UnitNoise is the unit's noise, the rig's subtracted, at the rig's input, over the band without
// the hum lines of either take. All figures come out of the takes as powers.
//
// The interval of each figure holds what the takes allow at 95 %: from the whole range that load and
// noise current may have, widened by U of all the rest. It is narrower above than below, in dB, and
// where it reaches down to nothing there is no reading, only the bound.
type UnitNoise struct {
	ExpectedDBu float64 // thermal, by the drawing
	RigDBu      float64 // the rig's own, as recorded; NaN without rig-noise

	Over  NoiseFigure // dB above expected thermal noise
	Level NoiseFigure // dBu

	Drowned  bool                 // the rig leaves more than half of the expected thermal noise in doubt
	Problem  Problem              // of pad-noise: below-thermal; without a name where there is none
	Bands    []analysis.FreqRange // what was summed
	seconds  float64              // of the shorter take
	reason   string               // why nothing can be judged; "" where something can
	noRig    bool
	rigRatio float64 // the rig's noise over the expected
}

// A NoiseFigure is one figure of a unit's noise with what is known of it.
type NoiseFigure struct {
	Measured  float64 // NaN where the interval reaches down to nothing
	Low, High float64 // the interval; Low is NaN where it reaches down to nothing
	UDB       float64 // the larger side of the interval; NaN as Measured
	Bound     float64 // the highest value that the takes allow at 95 %, a unit being never below thermal

	// Budget is in parts of the expected thermal power; all but its last terms, load and noise
	// current, which count with their full width.
	Budget uncertainty.Budget

	base  float64     // what stands for 1 expected thermal power
	value subtraction // in parts of the expected thermal power
	again func(noiseChange) subtraction
}

// A subtraction is the unit's noise in parts of the expected: a value, the range that load and
// current leave on either side, and U of the rest.
type subtraction struct{ value, ranging, u float64 }

func (s subtraction) low() float64  { return s.value - s.ranging - s.u }
func (s subtraction) high() float64 { return s.value + s.ranging + s.u }

// bound is the highest value allowed, no unit being quieter than thermal.
func (s subtraction) bound() float64 { return math.Max(s.value+s.ranging, 1) + s.u }

// doubtful says that more than half of the expected thermal noise is in doubt. Then the answer hangs
// on the rig's noise staying put between the takes to a few hundredths of a decibel, or the like.
func (s subtraction) doubtful() bool { return s.ranging+s.u > drownedPart }

// drowned says that it is the rig's noise that makes the figure doubtful.
func (f NoiseFigure) drowned() bool {
	switch t, _ := f.Budget.Dominant(); t.Source {
	case padTerm, rigTerm, driftTerm:
		return f.value.doubtful()
	}
	return false
}

const drownedPart = 0.5

// DBPerPower is how many decibels a small relative change of power is, in parts
// of it.
const DBPerPower = 10 / math.Ln10

// JudgeNoise subtracts the rig's noise from that of pad and rig, all at the rig's input terminals and
// in power:
//
//	unit² = pad-noise² - rig-noise² + [plug² + load² + i²|Z|²] with the plug - [load² + i²|Z|²] with the pad
//
// and holds it against the thermal noise of the drawing (H. Nyquist, Phys. Rev. 32, 1928), summed
// over the same frequencies. The terms of the budget follow JCGM 100:2008. Whether the load is a
// real resistor, which makes noise, or the input of an amplifier, which makes none, is not known but
// it is one or the other: so load², like the noise current, counts with its whole range, not as a
// rectangle of which 95 % would do.
//
// A unit that shows less noise than is thermal, by more than an interval of 99.7 %, is the problem
// below-thermal: at 95 % one sound unit in forty would be called that. A missing pad-noise is an
// error, a term that is no number too.
func JudgeNoise(k NoiseCase) (UnitNoise, error) {
	if k.PadNoise == nil {
		return UnitNoise{}, errors.New("there is no pad-noise to judge")
	}
	m := newNoiseModel(k)
	n := UnitNoise{
		ExpectedDBu: dbuOf(m.expected), RigDBu: math.NaN(), Bands: m.bands, noRig: k.RigNoise == nil,
		seconds: k.PadNoise.ToSec - k.PadNoise.FromSec, reason: m.cannot(),
		Over: noFigure(), Level: noFigure(),
	}
	if k.RigNoise != nil {
		n.seconds = math.Min(n.seconds, k.RigNoise.ToSec-k.RigNoise.FromSec)
		n.RigDBu = dbuOf(m.rig)
		n.rigRatio = m.rig / m.expected
	}
	if n.reason != "" {
		return n, nil
	}
	var err error
	if n.Over, err = m.figure(true, 0); err != nil {
		return n, err
	}
	if n.Level, err = m.figure(false, n.ExpectedDBu); err != nil {
		return n, err
	}
	n.Drowned = n.Over.drowned()
	if !n.noRig {
		n.Problem, err = m.belowThermal(n.Over)
	}
	return n, err
}

func dbuOf(voltsSquared float64) float64 { return decibels(voltsSquared / 0.6) }

// decibels returns 10 lg of a power; NaN of nothing.
func decibels(power float64) float64 {
	if !(power > 0) {
		return math.NaN()
	}
	return 10 * math.Log10(power)
}

func noFigure() NoiseFigure {
	nan := math.NaN()
	return NoiseFigure{Measured: nan, Low: nan, High: nan, UDB: nan, Bound: nan}
}

// figure fills in one figure; base is what 1 expected thermal power is on its scale.
func (m *noiseModel) figure(overThermal bool, base float64) (NoiseFigure, error) {
	f := noFigure()
	f.base = base
	f.Budget = m.budget(overThermal, noiseChange{})
	var err error
	if f.value, err = m.subtract(f.Budget, noiseChange{}); err != nil {
		return f, err
	}
	f.again = func(c noiseChange) subtraction {
		s, _ := m.subtract(m.budget(overThermal, c), c)
		return s
	}
	v := f.value
	f.Bound = base + decibels(v.bound())
	f.High = base + decibels(v.high())
	if low := v.low(); low > 0 && !m.noRig() {
		f.Low, f.Measured = base+decibels(low), base+decibels(v.value)
		f.UDB = math.Max(f.High-f.Measured, f.Measured-f.Low)
	}
	f.Budget.Terms = append(f.Budget.Terms, m.ranges()...)
	return f, nil
}

// belowThermal is the problem of a unit that shows less noise than physics allows.
func (m *noiseModel) belowThermal(f NoiseFigure) (Problem, error) {
	rest := uncertainty.Budget{Terms: f.Budget.Terms[:len(f.Budget.Terms)-len(m.ranges())]}
	wideU, err := rest.ExpandedU(sureCoverage)
	if err != nil || f.value.value+f.value.ranging+wideU >= m.leastThermal() {
		return Problem{}, err
	}
	shown := "less than nothing of"
	if v := f.value.value; v > 0 {
		shown = fmt.Sprintf("%.1f dB less than", -decibels(v))
	}
	return Problem{Name: BelowThermal, AtSec: math.NaN(), Text: fmt.Sprintf(
		"the rig's noise taken off, pad-noise shows %s the thermal noise of the drawing, which no unit can: check noise_full_scale_dbu and the gain, the plugs (noise_plug_ohms, pad_plug_ohms) and that both takes had the same gain",
		shown)}, nil
}

// leastThermal is the thermal noise of a unit whose resistors are all at the low
// end of their tolerances, in parts of the drawing's: an output resistance falls
// no faster than they do.
func (m *noiseModel) leastThermal() float64 {
	most := 0.0
	for _, p := range m.Circuit.Parts() {
		if p.Kind == network.Resistor {
			most = math.Max(most, p.TolFrac)
		}
	}
	return 1 - most
}

// sureCoverage is three standard uncertainties.
const sureCoverage = 0.9973

// NoiseProblem says what is wrong with a noise take by itself: a tone or a programme in it. It has
// no name where nothing is.
func NoiseProblem(n *analysis.Noise) Problem {
	what := n.Foreign()
	if what == "" {
		return Problem{}
	}
	return Problem{Name: ToneInNoise, AtSec: math.NaN(), Text: "this should be noise alone, but it holds " + what +
		"; stop whatever plays, close the input with the plug and record it again"}
}
