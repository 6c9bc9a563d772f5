package proof

import (
	"errors"
	"fmt"
	"math"

	"padproof/analysis"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/unit"
	"padproof/compare"
)

const picoamp = 1e-12

// plugTolFrac is the tolerance taken for a plug: that of a common metal-film
// part. rig.toml has no key for it.
const plugTolFrac = 0.01

// noise judges the unit's noise over thermal, and its level, from pad-noise and
// rig-noise.
func (c *check) noise() error {
	over, level := atMost(c.Limits.NoiseOverThermalDB), atMost(c.Limits.NoiseMaxDBu)
	pad, rig := c.takes.by[unit.PadNoise], c.takes.by[unit.RigNoise]
	if c.Circuit == nil || pad == nil && !over.IsSet() && !level.IsSet() {
		return nil
	}
	if pad == nil || pad.noise == nil {
		c.lacksNoise(over, level, pad)
		return nil
	}
	k := c.noiseCase(pad, rig)
	c.answer.Assumed = append(c.answer.Assumed, fmt.Sprintf("the plugs of the noise takes within ±%.0f %%", 100*plugTolFrac))
	n, err := compare.JudgeNoise(k)
	if err != nil {
		return err
	}
	c.findings.noise = &k
	if n.Problem.Name != "" {
		pad.problems = append(pad.problems, n.Problem)
	}
	if over.IsSet() || !level.IsSet() {
		verdict, reason := n.JudgeOver(c.Rule, over)
		c.addNoise("noise", "dB", n, n.Over, verdict, reason, over, 0)
	}
	if level.IsSet() {
		verdict, reason := n.JudgeLevel(c.Rule, level)
		c.addNoise("noise-level", "dBu", n, n.Level, verdict, reason, level, n.ExpectedDBu)
	}
	return nil
}

func (c *check) noiseCase(pad, rig *take) compare.NoiseCase {
	k := compare.NoiseCase{Circuit: c.Circuit, Bench: c.noiseBench(), PadNoise: pad.noise}
	if rig != nil {
		k.RigNoise = rig.noise
	}
	return k
}

// lacksNoise is where a limit is set and there is nothing to judge it by.
func (c *check) lacksNoise(over, level compare.Limit, pad *take) {
	for _, one := range []struct {
		check result.Check
		limit compare.Limit
	}{{emptyCheck("noise", "dB"), over}, {emptyCheck("noise-level", "dBu"), level}} {
		if one.limit.IsSet() {
			reason := "there is no noise of the unit to judge; record rig-noise.wav and pad-noise.wav, 60 s each"
			if pad != nil {
				reason = "pad-noise.wav holds no noise that can be judged; record it again, 60 s"
			}
			decide(&one.check, compare.Unproven, reason, one.limit, math.NaN())
			c.add(one.check, nil, pad)
		}
	}
}

func (c *check) addNoise(name, unitName string, n compare.UnitNoise, f compare.NoiseFigure, verdict compare.Verdict, reason string, limit compare.Limit, expected float64) {
	one := emptyCheck(name, unitName)
	one.Measured, one.Expected, one.Uncertainty = result.Number(f.Measured), result.Number(expected), result.Number(f.UDB)
	decide(&one, verdict, reason, limit, expected)
	one.Bound = result.NumberOf(f.Bound)
	one.MeasuredDBu, one.ExpectedDBu, one.RigDBu = result.NumberOf(n.Level.Measured), result.NumberOf(n.ExpectedDBu), result.NumberOf(n.RigDBu)
	pad := c.takes.by[unit.PadNoise]
	if !math.IsNaN(c.found.noiseDBu) {
		one.AWeighted = result.NumberOf(pad.noise.AWeightedDBFS + c.found.noiseDBu)
		if q := pad.noise.QuasiPeak; q != nil {
			one.QuasiPeak = result.NumberOf(q.MeanDBFS + c.found.noiseDBu)
		}
	}
	straight, through := c.takes.pair() // automatic gain there was at work here too
	c.add(one, scaledTerms(name, f.Budget, compare.DBPerPower), pad, c.takes.by[unit.RigNoise], riding(straight), riding(through))
}

// riding is the take if it shows that the rig as a whole lies: automatic gain at
// work, or takes swapped; else nil.
func riding(t *take) *take {
	for _, p := range t.problems {
		if p.Name == compare.GainRiding || p.Name == compare.SwappedTakes {
			return t
		}
	}
	return nil
}

// noiseBench is the rig as it recorded the noise takes.
func (c *check) noiseBench() compare.NoiseBench {
	cal := c.Sheet.Calibration
	padPlugTolFrac := plugTolFrac
	if c.Sheet.Assumes("calibration.pad_plug_ohms") {
		padPlugTolFrac = c.Rig.SourceTolFrac
	}
	return compare.NoiseBench{
		Ends: c.Rig.Ends, LoadTolFrac: c.Rig.LoadTolFrac, CableTolFarads: c.Rig.CableTolFarads,
		FullScaleDBu: c.found.noiseDBu, CalibrationUDB: c.found.uDB, GainDriftDB: cal.NoiseGainDriftDB,
		LowAmps:       (cal.NoiseCurrentPA - cal.NoiseCurrentHalfPA) * picoamp,
		HighAmps:      (cal.NoiseCurrentPA + cal.NoiseCurrentHalfPA) * picoamp,
		NoisePlugOhms: cal.NoisePlugOhms, PadPlugOhms: cal.PadPlugOhms,
		NoisePlugTolFrac: plugTolFrac, PadPlugTolFrac: padPlugTolFrac,
		TempC: c.Sheet.TemperatureC, TempHalfC: c.Sheet.TemperatureHalfC,
	}
}

// hum judges the mains hum: from pad-noise, else the silence of the test signal
// in after, else what lies beside after's tone.
func (c *check) hum() error {
	limit := atMost(c.Limits.HumMaxDBu)
	if !limit.IsSet() && (c.takes.by[unit.PadNoise] == nil || math.IsNaN(c.found.noiseDBu)) {
		return nil
	}
	straight, through := c.takes.pair()
	unitHum, err := c.humSources(through, unit.PadNoise, c.Gains.AfterDB)
	if err != nil {
		return err
	}
	rigHum, err := c.humSources(straight, unit.RigNoise, 0)
	if err != nil {
		return err
	}
	uDB := c.found.uDB
	if unitHum.Noise.Hum == nil { // read in after: its gain against before's is in doubt too
		g := c.Gains
		uDB = math.Hypot(uDB, 2/math.Sqrt(3)*math.Hypot(g.AfterDoubtDB, math.Hypot(g.DriftDB, g.LinearityDB)))
	}
	f, err := compare.JudgeHum(compare.HumCase{Unit: unitHum, Rig: rigHum, CalibrationUDB: uDB})
	if err != nil {
		return err
	}
	c.findings.hum = &f
	verdict, reason := f.Judge(c.Rule, limit)
	one := emptyCheck("hum", "dBu")
	one.Measured, one.Uncertainty = result.Number(f.Measured), result.Number(f.UDB)
	decide(&one, verdict, reason, limit, math.NaN())
	one.From, one.Bound, one.RigDBu, one.MainsHz = f.From, result.NumberOf(f.Bound), result.NumberOf(f.RigDBu), result.NumberOf(f.MainsHz)
	on := []*take{through}
	if f.From == compare.FromPadNoise {
		on = []*take{c.takes.by[unit.PadNoise], c.takes.by[unit.RigNoise], riding(straight), riding(through)}
	}
	c.add(one, scaledTerms("hum", f.Budget, compare.DBPerPower), on...)
	return nil
}

// humSources are the places where hum of one path may be read; gainDB was
// raised for the take that holds the tone.
func (c *check) humSources(tone *take, noiseRole string, gainDB float64) (compare.HumSources, error) {
	var s compare.HumSources
	dBu := c.found.dBu - gainDB
	if t := c.takes.by[noiseRole]; t != nil && t.noise != nil {
		s.Noise = compare.HumReading{Hum: t.noise.Hum, FullScaleDBu: c.found.noiseDBu}
	}
	if s.Noise.Hum == nil && tone.placed != nil {
		hum, err := recall(c.takes.shared, tone, fmt.Sprint("silence", c.Sheet.MainsHz), func() (*analysis.Hum, error) {
			return silenceHum(tone, c.Sheet.MainsHz)
		})
		if err != nil {
			return s, err
		}
		s.Silence = compare.HumReading{Hum: hum, FullScaleDBu: dBu}
	}
	if tone.judged != nil && tone.judged.Spectrum != nil {
		s.Tone = compare.HumReading{Hum: analysis.HumIn(tone.judged.Spectrum, c.Sheet.MainsHz, tone.judged.FreqHz), FullScaleDBu: dBu}
	}
	return s, nil
}

// silenceHum reads the hum in the test signal's silence; nil where that is cut
// off.
func silenceHum(t *take, mainsHz float64) (*analysis.Hum, error) {
	var longest analysis.Segment
	for _, stage := range analysis.Schedule(t.samples.RateHz()) {
		if stage.Kind == analysis.Silence && stage.LengthSec > longest.LengthSec {
			longest = stage
		}
	}
	const inset = 0.1
	from, to := t.placed.TakeSec(longest.StartSec+inset), t.placed.TakeSec(longest.StartSec+longest.LengthSec-inset)
	if from < 0 || to > t.facts.Seconds {
		return nil, nil
	}
	n, err := analysis.MeasureNoise(t.samples, from, to, mainsHz)
	switch {
	case errors.Is(err, analysis.ErrSilent) || errors.Is(err, analysis.ErrNoiseTooShort):
		return nil, nil // digital silence holds no hum
	case err != nil:
		return nil, fmt.Errorf("%s: %w", t.path, err)
	}
	return n.Hum, nil
}
