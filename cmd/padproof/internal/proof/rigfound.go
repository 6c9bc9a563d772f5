package proof

import (
	"fmt"
	"math"
	"strings"

	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/unit"
	"padproof/compare"
)

// loadedTolFrac is the tolerance taken for the known resistor of before-loaded:
// that of a common metal-film part.
const loadedTolFrac = 0.01

// A scale ties dBFS to dBu at the rig's input.
type scale struct {
	dBu      float64 // of a sine that reads 0 dBFS, gain as in before; NaN where not known
	noiseDBu float64 // the same, gain as in the noise takes
	uDB      float64 // expanded
}

// findRig takes what before-loaded and calibration tell of the rig: it serves
// in place of what rig.toml states.
func (c *check) findRig() error {
	cal := c.Sheet.Calibration
	c.found = scale{dBu: valueOr(cal.FullScaleDBu), noiseDBu: valueOr(cal.NoiseFullScaleDBu), uDB: cal.UncertaintyDB}
	none := result.Missing
	found := &result.Found{SourceOhms: none, SourceOhmsU: none, FullScaleDBu: none, FullScaleDBuU: none}
	source, err := c.findSource(found)
	if err != nil {
		return err
	}
	scaled, err := c.findScale(found)
	if err != nil {
		return err
	}
	if source || scaled {
		c.answer.Found = found
	}
	return nil
}

func valueOr(p *float64) float64 {
	if p == nil {
		return math.NaN()
	}
	return *p
}

// findSource measures the source impedance from before-loaded.
func (c *check) findSource(found *result.Found) (bool, error) {
	loaded, ok := c.takes.tone(unit.BeforeLoaded)
	if !ok || !c.judgedPair() {
		return false, nil
	}
	straight, _ := c.takes.pair()
	if c.voided(c.takes.by[unit.BeforeLoaded]) || c.voided(straight) || c.voided(c.takes.by[unit.BeforeAgain]) {
		c.answer.Warnings = append(c.answer.Warnings, "before-loaded was left out: see Problems")
		return false, nil
	}
	ohms := valueOr(c.Sheet.Calibration.LoadedOhms)
	f, err := compare.FindSource(compare.SourceCase{
		Before: c.before(), Loaded: loaded, LoadedOhms: ohms, LoadedTolFrac: loadedTolFrac, Rig: c.Rig, Gains: c.Gains,
	})
	if err != nil {
		c.answer.Warnings = append(c.answer.Warnings, "before-loaded: "+err.Error())
		return false, nil
	}
	found.SourceOhms, found.SourceOhmsU = result.Number(f.Ohms), result.Number(f.UOhms)
	c.answer.Budget = append(c.answer.Budget, termsOf("source_ohms", f.Budget)...)
	c.say("the source impedance", fmt.Sprintf("%.4g ± %.2g Ω", f.Ohms, f.UOhms), f.Lines())
	c.answer.Assumed = append(c.answer.Assumed, fmt.Sprintf("the resistor of before-loaded within ±%.0f %%", 100*loadedTolFrac))
	c.Rig = f.On(c.Rig)
	if c.Service.SourceOhms == c.Sheet.Output.SourceOhms && c.answer.ServiceEnds == nil {
		c.answer.ServiceEnds = endsOf(c.Service) // service stays where the sheets say it is
	}
	c.answer.BenchEnds = endsOf(c.Rig.Ends)
	return true, nil
}

// voided reports whether a problem keeps a take's level from being used.
func (c *check) voided(t *take) bool {
	if t == nil {
		return false
	}
	for _, p := range t.problems {
		if compare.Voids(p.Name, "loss") {
			return true
		}
	}
	return false
}

// findScale measures what full scale is in dBu from the calibration take.
func (c *check) findScale(found *result.Found) (bool, error) {
	t := c.takes.by[unit.Calibration]
	tone, ok := c.takes.tone(unit.Calibration)
	if !ok {
		return false, nil
	}
	if c.voided(t) {
		c.answer.Warnings = append(c.answer.Warnings, "calibration was left out: see Problems")
		return false, nil
	}
	cal := c.Sheet.Calibration
	f, err := compare.FindFullScale(tone, valueOr(cal.CalibrationVolts), cal.UncertaintyDB, cal.LinearityDB)
	if err != nil {
		c.answer.Warnings = append(c.answer.Warnings, "calibration: "+err.Error())
		return false, nil
	}
	if f.Warning != "" {
		c.answer.Warnings = append(c.answer.Warnings, f.Warning)
	}
	found.FullScaleDBu, found.FullScaleDBuU = result.Number(f.DBu), result.Number(f.UDB)
	c.answer.Budget = append(c.answer.Budget, termsOf("full_scale_dbu", f.Budget)...)
	c.say("full scale", fmt.Sprintf("%.2f ± %.2g dBu", f.DBu, f.UDB), f.Lines())
	// The noise takes' own gain, where one is written, is as far from before's as it was.
	if math.IsNaN(c.found.noiseDBu) || c.Sheet.Assumes("calibration.noise_full_scale_dbu") {
		c.found.noiseDBu = f.DBu
	} else if !math.IsNaN(c.found.dBu) {
		c.found.noiseDBu += f.DBu - c.found.dBu
	}
	c.found.dBu, c.found.uDB = f.DBu, f.UDB
	return true, nil
}

// say tells what a take found of the rig, and how to keep it.
func (c *check) say(what, figure string, lines []string) {
	c.answer.Notes = append(c.answer.Notes, fmt.Sprintf("%s, as measured: %s; to keep it, write into rig.toml, under %s: %s", what, figure, lines[0], strings.Join(lines[1:], " and ")))
}
