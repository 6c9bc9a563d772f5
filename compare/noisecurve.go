package compare

import (
	"math"

	"padproof/analysis"
	"padproof/compare/network"
)

// A NoisePoint is the noise about one frequency, in volts squared per hertz at the rig's input.
type NoisePoint struct {
	FreqHz  float64
	Pad     float64 // as recorded in pad-noise
	Rig     float64 // as recorded in rig-noise; NaN without it
	Unit    float64 // the unit's own, the rig's taken off as in [JudgeNoise]; NaN where nothing sure is left
	Thermal float64 // what the drawing gives
}

// A LinePower is a line in the noise, in volts squared: 0 in a take that does not show it.
type LinePower struct {
	FreqHz   float64
	Pad, Rig float64
	OfMains  bool
}

// sureTimes is how many standard uncertainties the unit's noise must stand above nothing to count as
// seen at one frequency.
const sureTimes = 2.0

// NoiseCurve returns the noise of a case in bands of a part of an octave, and the lines that stand in
// it, which are left out of the bands. FullScaleDBu must be known: with 0 in its place Pad and Rig are
// relative to full scale and the rest means nothing. Nothing without pad-noise.
func NoiseCurve(k NoiseCase, perOctave int) ([]NoisePoint, []LinePower) {
	if k.PadNoise == nil {
		return nil, nil
	}
	lines := linesOf(k)
	var spans []analysis.FreqRange
	for _, l := range lines {
		spans = append(spans, l.span)
	}
	m := &noiseModel{NoiseCase: k, lowSquare: k.Bench.LowAmps * k.Bench.LowAmps, highSquare: k.Bench.HighAmps * k.Bench.HighAmps}
	rig := map[float64]analysis.Density{}
	if k.RigNoise != nil {
		for _, d := range k.RigNoise.Spectrum.Densities(perOctave, k.RigNoise.Band, spans...) {
			rig[d.FreqHz] = d
		}
	}
	var points []NoisePoint
	for _, d := range k.PadNoise.Spectrum.Densities(perOctave, k.PadNoise.Band, spans...) {
		points = append(points, m.point(d, rig[d.FreqHz]))
	}
	return points, m.powers(lines)
}

// voltsSquared is a mean square of the takes in volts squared.
func (m *noiseModel) voltsSquared(meanSquare float64) float64 {
	return 0.6 * math.Pow(10, m.Bench.FullScaleDBu/10) * 2 * meanSquare
}

// point takes the rig's noise off at one frequency.
func (m *noiseModel) point(pad, rig analysis.Density) NoisePoint {
	withPad, withPlug := m.density(pad.FreqHz)
	p := NoisePoint{FreqHz: pad.FreqHz, Pad: m.voltsSquared(pad.MeanSquare), Rig: math.NaN(), Unit: math.NaN(), Thermal: withPad.UnitVV}
	if !(rig.Dof > 0) {
		return p
	}
	p.Rig = m.voltsSquared(rig.MeanSquare)
	left := p.Pad - p.Rig + m.given(withPad, withPlug)
	load := (withPlug.LoadVV - withPad.LoadVV) / 2
	current := (m.highSquare - m.lowSquare) / 2 * (withPlug.OhmsSq - withPad.OhmsSq)
	doubt := p.Pad * math.Sqrt(2/pad.Dof)
	for _, part := range []float64{
		p.Rig * math.Sqrt(2/rig.Dof), p.Rig * m.Bench.GainDriftDB / DBPerPower / math.Sqrt(3), load / math.Sqrt(3), current / math.Sqrt(3),
	} {
		doubt = math.Hypot(doubt, part)
	}
	if left > sureTimes*doubt {
		p.Unit = left
	}
	return p
}

// density is the thermal noise at one frequency, with the pad and with the noise plug on the input.
func (m *noiseModel) density(freqHz float64) (withPad, withPlug network.Thermal) {
	e := m.Bench.Ends
	e.Drive = network.DriveFloating
	kelvin := 273.15 + m.Bench.TempC
	e.SourceOhms = m.Bench.PadPlugOhms
	withPad = m.Circuit.ThermalDensity(e, freqHz, kelvin)
	e.SourceOhms = m.Bench.NoisePlugOhms
	return withPad, m.Circuit.StraightThermalDensity(e, freqHz, kelvin)
}

// A spanned is a line and the range that it takes up in either take.
type spanned struct {
	freqHz  float64
	span    analysis.FreqRange
	ofMains bool
}

// linesOf are the lines of both takes, each once.
func linesOf(k NoiseCase) []spanned {
	var all []spanned
	add := func(l spanned) {
		for i := range all {
			if had := &all[i].span; l.span.LowHz < had.HighHz && had.LowHz < l.span.HighHz {
				had.LowHz, had.HighHz = math.Min(had.LowHz, l.span.LowHz), math.Max(had.HighHz, l.span.HighHz)
				return
			}
		}
		all = append(all, l)
	}
	for _, n := range []*analysis.Noise{k.PadNoise, k.RigNoise} {
		if n == nil {
			continue
		}
		for _, c := range n.Cuts {
			freqHz := (c.LowHz + c.HighHz) / 2
			if n.Hum != nil && n.Hum.MainsHz > 0 {
				freqHz = math.Max(1, math.Round(freqHz/n.Hum.MainsHz)) * n.Hum.MainsHz
			}
			add(spanned{freqHz, c, true})
		}
		for _, l := range n.Lines {
			add(spanned{l.FreqHz, l.Span, false})
		}
	}
	return all
}

func (m *noiseModel) powers(lines []spanned) []LinePower {
	var all []LinePower
	for _, l := range lines {
		p := LinePower{FreqHz: l.freqHz, OfMains: l.ofMains, Pad: math.Max(0, m.voltsSquared(m.PadNoise.Spectrum.LineIn(l.span)))}
		if m.RigNoise != nil {
			p.Rig = math.Max(0, m.voltsSquared(m.RigNoise.Spectrum.LineIn(l.span)))
		}
		all = append(all, p)
	}
	return all
}
