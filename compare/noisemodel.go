package compare

import (
	"math"

	"padproof/analysis"
	"padproof/compare/network"
	"padproof/compare/uncertainty"
)

// A noiseModel is a noise case with what it is worked out from: volts squared at the rig's input.
type noiseModel struct {
	NoiseCase
	bands    []analysis.FreqRange
	thermals []network.Band

	pad, rig              float64 // as recorded
	padPart, rigPart      float64 // relative standard uncertainty of each by averaging
	withPad, withPlug     network.Thermal
	expected              float64
	lowSquare, highSquare float64 // of the noise current
	moves                 []benchMove
}

// A noiseChange is what another recording would change, for a unit of thermal noise.
type noiseChange struct {
	used       bool
	rigLowerDB float64
	longer     float64 // times the length
}

func newNoiseModel(k NoiseCase) *noiseModel {
	m := &noiseModel{NoiseCase: k, bands: commonBands(k.PadNoise, k.RigNoise)}
	for _, b := range m.bands {
		m.thermals = append(m.thermals, network.Band(b))
	}
	m.pad, m.padPart = m.volts(k.PadNoise)
	if k.RigNoise != nil {
		m.rig, m.rigPart = m.volts(k.RigNoise)
	}
	m.withPad, m.withPlug = m.thermal(k.Bench)
	m.expected = m.withPad.UnitVV
	m.lowSquare, m.highSquare = k.Bench.LowAmps*k.Bench.LowAmps, k.Bench.HighAmps*k.Bench.HighAmps
	if m.cannot() == "" && !m.noRig() {
		m.moveBench()
	}
	return m
}

// commonBands is the band that both takes cover, the hum lines of either left out. A line of
// another kind that stands in rig-noise and not as strongly in pad-noise would count as noise that
// the unit takes away: it is left out too. One that stands in pad-noise alone stays.
func commonBands(pad, rig *analysis.Noise) []analysis.FreqRange {
	if rig == nil {
		return pad.Kept()
	}
	const sameWithin = 1.26 // 1 dB
	band := analysis.FreqRange{LowHz: math.Max(pad.Band.LowHz, rig.Band.LowHz), HighHz: math.Min(pad.Band.HighHz, rig.Band.HighHz)}
	out := append(append([]analysis.FreqRange(nil), pad.Cuts...), rig.Cuts...)
	for _, l := range rig.Lines {
		in := 0.0
		for _, p := range pad.Lines {
			if p.FreqHz > l.Span.LowHz && p.FreqHz < l.Span.HighHz {
				in = math.Max(in, p.MeanSquare)
			}
		}
		if in*sameWithin < l.MeanSquare {
			out = append(out, l.Span)
		}
	}
	return band.Without(out...)
}

// volts is what a take holds in the bands, in volts squared, and its relative standard uncertainty.
func (m *noiseModel) volts(n *analysis.Noise) (squared, part float64) {
	meanSquare, dof := n.Spectrum.PowerIn(m.bands)
	// A full-scale sine has a mean square of a half; 0 dBu is the root of 0.6 V².
	return 0.6 * math.Pow(10, m.Bench.FullScaleDBu/10) * 2 * meanSquare, math.Sqrt(2 / dof)
}

// thermal is the thermal noise with the pad and with the noise plug on the input.
func (m *noiseModel) thermal(b NoiseBench) (withPad, withPlug network.Thermal) {
	e := b.Ends
	e.Drive = network.DriveFloating
	kelvin := 273.15 + b.TempC
	e.SourceOhms = b.PadPlugOhms
	withPad = m.Circuit.ThermalNoise(e, kelvin, m.thermals)
	e.SourceOhms = b.NoisePlugOhms
	return withPad, m.Circuit.StraightThermalNoise(e, kelvin, m.thermals)
}

func (m *noiseModel) noRig() bool { return m.RigNoise == nil }

// cannot says why nothing can be judged.
func (m *noiseModel) cannot() string {
	switch {
	case math.IsNaN(m.Bench.FullScaleDBu) || math.IsInf(m.Bench.FullScaleDBu, 0):
		return "what level a reading stands for is not known: write noise_full_scale_dbu or full_scale_dbu, or record calibration.wav"
	case m.PadNoise.Coarse || m.RigNoise != nil && m.RigNoise.Coarse:
		return "the noise is smaller than the steps of the recording: record with 24 bits or more gain"
	case len(m.bands) == 0:
		return "the two takes have no frequencies in common"
	case !(m.expected > 0):
		return "the drawing makes no thermal noise at its output"
	}
	return ""
}

// given is what lies beside the unit: at the middle of the ranges of load and current.
func (m *noiseModel) given(withPad, withPlug network.Thermal) float64 {
	amps := (m.lowSquare + m.highSquare) / 2
	return withPlug.UnitVV + (withPlug.LoadVV-withPad.LoadVV)/2 + amps*(withPlug.OhmsSq-withPad.OhmsSq)
}

// recorded is the power of the two takes: as it was, or as a change would make it.
func (m *noiseModel) recorded(c noiseChange) (pad, rig float64) {
	if !c.used {
		return m.pad, m.rig
	}
	rig = m.rig * math.Pow(10, -c.rigLowerDB/10)
	return m.expected + rig - m.given(m.withPad, m.withPlug), rig
}

// budget holds all terms but the ranges, in parts of the expected thermal power. For the figure over
// thermal what moves the expected counts as well.
func (m *noiseModel) budget(overThermal bool, c noiseChange) uncertainty.Budget {
	pad, rig := m.recorded(c)
	shorter := 1.0
	if c.longer > 0 {
		shorter = math.Sqrt(1 / c.longer)
	}
	unit := pad - rig + m.given(m.withPad, m.withPlug)
	var terms []uncertainty.Term
	add := func(t uncertainty.Term) {
		if t.Contribution() > 0 {
			terms = append(terms, t)
		}
	}
	add(uncertainty.FromNormal(padTerm, m.padPart*shorter, pad/m.expected))
	if m.noRig() {
		add(uncertainty.FromNormal(calibrationTerm, m.Bench.CalibrationUDB/2, pad/m.expected/DBPerPower))
		return uncertainty.Budget{Terms: terms}
	}
	add(uncertainty.FromNormal(rigTerm, m.rigPart*shorter, -rig/m.expected))
	add(uncertainty.FromRectangle(driftTerm, m.Bench.GainDriftDB, -rig/m.expected/DBPerPower))
	add(uncertainty.FromNormal(calibrationTerm, m.Bench.CalibrationUDB/2, (pad-rig)/m.expected/DBPerPower))

	for _, v := range m.moves {
		ratio := func(at [2]network.Thermal) float64 {
			expected := m.expected
			if overThermal {
				expected = at[0].UnitVV
			}
			return (unit + m.given(at[0], at[1]) - m.given(m.withPad, m.withPlug)) / expected
		}
		add(uncertainty.FromRectangle(v.source, v.half, (ratio(v.above)-ratio(v.below))/(2*v.half)))
	}
	return uncertainty.Budget{Terms: terms}
}

// A benchMove is a figure of the bench that is in doubt, and the thermal noise, with the pad and
// with the noise plug, at both its ends.
type benchMove struct {
	source       string
	half         float64
	below, above [2]network.Thermal
}

// moveBench works out what each doubtful figure of the bench does.
func (m *noiseModel) moveBench() {
	moved := func(source string, half float64, move func(b *NoiseBench, by float64)) {
		if !(half > 0) || math.IsInf(half, 1) {
			return
		}
		at := func(by float64) (t [2]network.Thermal) {
			b := m.Bench
			move(&b, by)
			t[0], t[1] = m.thermal(b)
			return t
		}
		m.moves = append(m.moves, benchMove{source, half, at(-half), at(half)})
	}
	moved("noise plug", m.Bench.NoisePlugTolFrac*m.Bench.NoisePlugOhms, func(b *NoiseBench, by float64) { b.NoisePlugOhms += by })
	moved("pad plug", m.Bench.PadPlugTolFrac*m.Bench.PadPlugOhms, func(b *NoiseBench, by float64) { b.PadPlugOhms += by })
	moved("load impedance", m.Bench.LoadTolFrac*m.Bench.Ends.LoadOhms, func(b *NoiseBench, by float64) { b.Ends.LoadOhms += by })
	moved("cable capacitance", m.Bench.CableTolFarads, func(b *NoiseBench, by float64) { b.Ends.CableFarads = math.Max(0, b.Ends.CableFarads+by) })
	moved("temperature", m.Bench.TempHalfC, func(b *NoiseBench, by float64) { b.TempC += by })
}

// Names of terms that an answer names a remedy for.
const (
	padTerm         = "averaging of pad-noise"
	rigTerm         = "averaging of rig-noise"
	calibrationTerm = "calibration"
	driftTerm       = "noise gain drift"
	loadTerm        = "noise of the load"
	currentTerm     = "noise current"
)

// ranges are load and current as terms: half the width of their ranges.
func (m *noiseModel) ranges() []uncertainty.Term {
	if m.noRig() {
		return nil
	}
	load := math.Abs(m.withPlug.LoadVV-m.withPad.LoadVV) / 2 / m.expected
	current := math.Abs(m.withPlug.OhmsSq-m.withPad.OhmsSq) * (m.highSquare - m.lowSquare) / 2 / m.expected
	return []uncertainty.Term{
		uncertainty.FromRectangle(loadTerm, load, 1),
		uncertainty.FromRectangle(currentTerm, current, 1),
	}
}

// subtract works out the unit's noise under a change, in parts of the expected. Without rig-noise
// all of pad-noise may be the unit's.
func (m *noiseModel) subtract(b uncertainty.Budget, c noiseChange) (subtraction, error) {
	pad, rig := m.recorded(c)
	u, err := b.ExpandedU(Coverage)
	if m.noRig() {
		return subtraction{value: pad / m.expected, u: u}, err
	}
	s := subtraction{value: (pad - rig + m.given(m.withPad, m.withPlug)) / m.expected, u: u}
	for _, t := range m.ranges() {
		s.ranging += t.Contribution() * math.Sqrt(3)
	}
	return s, err
}

// NoisePowers are the two noise takes as powers at the rig's input terminals, in volts squared, with
// their relative standard uncertainties by averaging. RigVV is NaN without rig-noise.
type NoisePowers struct {
	Bands              []analysis.FreqRange // what was summed
	PadVV, PadStdUFrac float64
	RigVV, RigStdUFrac float64
}

// Powers are what the takes hold; false where nothing can be told from them.
func (k NoiseCase) Powers() (NoisePowers, bool) {
	if k.PadNoise == nil {
		return NoisePowers{}, false
	}
	m := newNoiseModel(k)
	if m.cannot() != "" {
		return NoisePowers{}, false
	}
	p := NoisePowers{Bands: m.bands, PadVV: m.pad, PadStdUFrac: m.padPart, RigVV: math.NaN(), RigStdUFrac: math.NaN()}
	if !m.noRig() {
		p.RigVV, p.RigStdUFrac = m.rig, m.rigPart
	}
	return p, true
}
