package proof

import (
	"padproof/analysis"
	"padproof/cmd/padproof/internal/result"
	"padproof/compare"
	"padproof/compare/generic"
	"padproof/compare/uncertainty"
)

// withoutDrawing says what textbook pads of the mark would read here with something wrong, where the
// loss does not pass.
func (c *check) withoutDrawing() {
	if c.lossVerdict() == compare.Pass {
		return
	}
	k, ok := c.markCase()
	if !ok {
		return
	}
	for _, l := range generic.Likelihoods(k) {
		c.answer.WithoutDrawing = append(c.answer.WithoutDrawing, result.Likelihood{
			Fault: l.Fault, Networks: l.Networks, WouldReadDB: result.Number(l.WouldReadDB),
			WouldReadLowDB: result.Number(l.LowDB), WouldReadHighDB: result.Number(l.HighDB),
			Likelihood: result.Number(l.Likelihood), Measure: l.Measure,
		})
	}
}

// markCase is the mark and what was read; false where the takes tell nothing.
func (c *check) markCase() (generic.Case, bool) {
	k := generic.Case{MarkDB: c.mark.LossDB, Ohms: c.mark.Ohms, OnBench: c.mark.OnThisBench, Rig: c.Rig}
	straight, through := c.takes.pair()
	for _, t := range c.lossTakes() {
		if c.voidedBut(t, compare.NoTone) {
			return k, false
		}
	}
	if c.judgedPair() {
		if c.voided(through) {
			return k, false
		}
		r := c.reading()
		k.FreqHz, k.LossDB, k.StdUDB = r.FreqHz, r.LossDB, uncertainty.Budget{Terms: r.Terms}.CombinedU()
		return k, true
	}
	if straight.measured == nil || through.measured == nil {
		return k, false
	}
	tone, ok := straight.mainTone()
	if !ok || len(through.measured.Tones) > 0 {
		return k, false
	}
	// The tone cannot be stronger than all that was recorded.
	k.FreqHz, k.AtLeast = analysis.ToneHz, true
	k.LossDB = tone.LevelDBFS - through.measured.RMSDBFS + c.Gains.AfterDB
	return k, k.LossDB > 0
}

// voidedBut reports whether a problem other than the named one keeps a take's level from being used.
func (c *check) voidedBut(t *take, name string) bool {
	if t == nil {
		return false
	}
	for _, p := range t.problems {
		if p.Name != name && compare.Voids(p.Name, "loss") {
			return true
		}
	}
	return false
}
