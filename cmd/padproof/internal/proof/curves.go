package proof

import (
	"math"

	"padproof/analysis"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/unit"
	"padproof/compare"
)

const (
	noisePerOctave = 24
	spectrumPoints = 1000
	levelPoints    = 1000 // each the lowest and the highest of a stretch
	lowestHz       = 20.0
	highestHz      = 24000.0
)

// curves are what pictures are drawn from: what the checks have measured already.
func (c *check) curves() *result.Curves {
	curves := &result.Curves{Noise: c.noiseCurves(), Legs: c.legLevels()}
	straight, through := c.takes.pair()
	for _, t := range []*take{through, c.takes.by[unit.Flex]} {
		if l, ok := levelOf(t); ok {
			curves.Level = append(curves.Level, l)
		}
	}
	after, ok := spectrumOf(through, unit.After)
	if !ok {
		return curves
	}
	curves.Spectrum = append(curves.Spectrum, after)
	if before, ok := spectrumOf(straight, unit.Before); ok {
		curves.Spectrum = append(curves.Spectrum, before)
	}
	return curves
}

// levelOf is the track of a take over what was judged of it.
func levelOf(t *take) (result.LevelCurve, bool) {
	if t == nil || t.measured == nil || t.steady.Blocks == 0 {
		return result.LevelCurve{}, false
	}
	tone, ok := t.mainTone()
	if !ok {
		return result.LevelCurve{}, false
	}
	role := t.role
	if role == second(unit.Both) {
		role = unit.After
	}
	l := result.LevelCurve{Role: role, NoiseDB: result.Number(t.steady.NoiseDB), Events: []result.Event{}}
	atSec, db := thinned(analysis.Departures(&t.measured.Track, tone, t.steady.FromSec, t.steady.ToSec))
	for i := range db {
		l.AtSec, l.DB = append(l.AtSec, result.Number(atSec[i])), append(l.DB, result.Number(db[i]))
	}
	for _, e := range t.steady.Events {
		l.Events = append(l.Events, result.Event{AtSec: result.Number(e.AtSec), DB: result.Number(e.DB), What: e.What})
	}
	return l, len(db) > 0
}

// thinned keeps the lowest and the highest of each stretch, in their order, where
// there are more points than a picture shows.
func thinned(x, y []float64) (keptX, keptY []float64) {
	if len(y) <= 2*levelPoints {
		return x, y
	}
	for k := range levelPoints {
		from, to := k*len(y)/levelPoints, (k+1)*len(y)/levelPoints
		low, high := from, from
		for i := from; i < to; i++ {
			if y[i] < y[low] {
				low = i
			}
			if y[i] > y[high] {
				high = i
			}
		}
		first, last := min(low, high), max(low, high)
		keptX, keptY = append(keptX, x[first], x[last]), append(keptY, y[first], y[last])
	}
	return keptX, keptY
}

// spectrumOf is what a take holds while its tone stands.
func spectrumOf(t *take, role string) (result.SpectrumCurve, bool) {
	if t == nil || t.measured == nil {
		return result.SpectrumCurve{}, false
	}
	tone, ok := t.mainTone()
	if !ok || tone.Spectrum == nil {
		return result.SpectrumCurve{}, false
	}
	sp := tone.Spectrum
	s := result.SpectrumCurve{Role: role, ToneHz: result.Number(tone.FreqHz), BandHz: result.Number(analysis.LineBins * sp.BinHz), Harmonics: []result.Harmonic{}}
	for _, p := range sp.Peaks(lowestHz, math.Min(highestHz, sp.RateHz/2), spectrumPoints) {
		level := analysis.DBFSFromMeanSquare(analysis.LineBins*p.MeanSquare) - tone.LevelDBFS
		s.FreqHz, s.DB = append(s.FreqHz, result.Number(p.FreqHz)), append(s.DB, result.Number(level))
	}
	for _, h := range tone.Harmonics() {
		one := result.Harmonic{Number: h.Number, FreqHz: result.Number(h.FreqHz), DB: decibels(h.Noise)}
		if h.Power > harmonicStands*h.StandardU {
			one.Stands, one.DB = true, decibels(h.Power)
		}
		s.Harmonics = append(s.Harmonics, one)
	}
	return s, true
}

// harmonicStands is how many standard uncertainties a harmonic lies above nothing
// to be shown as one: of nine, noise alone shows one in 10⁴ takes or so.
const harmonicStands = 4.0

// decibels is 10 lg of a power; missing for nothing.
func decibels(power float64) result.Number {
	if !(power > 0) {
		return result.Missing
	}
	return result.Number(10 * math.Log10(power))
}

// noiseCurves are the noise takes against frequency; nil without pad-noise.
func (c *check) noiseCurves() *result.NoiseCurves {
	pad, rig := c.takes.by[unit.PadNoise], c.takes.by[unit.RigNoise]
	if c.Circuit == nil || pad == nil || pad.noise == nil {
		return nil
	}
	k := c.noiseCase(pad, rig)
	n := &result.NoiseCurves{Unit: "dBu", Lines: []result.LinePair{}}
	known := !math.IsNaN(k.Bench.FullScaleDBu)
	if !known {
		n.Unit, k.Bench.FullScaleDBu = "dBFS", 0
	}
	level := func(voltsSquared float64) result.Number { return decibels(voltsSquared / 0.6) }
	points, lines := compare.NoiseCurve(k, noisePerOctave)
	for _, p := range points {
		n.FreqHz, n.Pad = append(n.FreqHz, result.Number(p.FreqHz)), append(n.Pad, level(p.Pad))
		if k.RigNoise != nil {
			n.Rig = append(n.Rig, level(p.Rig))
		}
		if known {
			n.Net, n.Thermal = append(n.Net, level(p.Unit)), append(n.Thermal, level(p.Thermal))
		}
	}
	for _, l := range lines {
		n.Lines = append(n.Lines, result.LinePair{FreqHz: result.Number(l.FreqHz), Pad: level(l.Pad), Rig: level(l.Rig), OfMains: l.OfMains})
	}
	return n
}

// legLevels are the two legs beside the drawing; nil without a take of them.
func (c *check) legLevels() *result.LegLevels {
	hot, cold := c.takes.by[unit.Legs], c.takes.by[second(unit.Legs)]
	if c.Circuit == nil || hot == nil {
		return nil
	}
	h, cd := legsOf(hot, cold)
	if h.NoTone && cd.NoTone {
		return nil
	}
	l := c.legsCase(h, cd, compare.Limit{}).Levels()
	from, raised := "mean", 0.0
	if l.FromStraight {
		from, raised = "straight", c.Gains.AfterDB
	}
	return &result.LegLevels{
		From: from, FreqHz: result.Number(l.FreqHz),
		HotDB: result.Number(l.HotDB - raised), ColdDB: result.Number(l.ColdDB - raised),
		DrawnHot: result.Number(l.DrawnHotDB), DrawnCold: result.Number(l.DrawnColdDB),
	}
}
