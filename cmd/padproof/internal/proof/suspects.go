package proof

import (
	"math"
	"strings"

	"padproof/cmd/padproof/internal/result"
	"padproof/compare"
	"padproof/compare/suspect"
)

// soundRisk is how improbable a sound unit must be before suspects of an unproven
// unit are listed.
const soundRisk = 0.05

// seek looks for the fault that explains what was measured, where the unit does
// not pass. A unit that is only unproven is suspected where a sound one would
// hardly read like it.
func (c *check) seek(verdict compare.Verdict) {
	if c.Circuit == nil || c.Alternative != nil || verdict == compare.Pass {
		return
	}
	e := c.evidence()
	if len(e.Loss) == 0 && e.Legs == nil && len(e.Ohms) == 0 {
		return
	}
	ranking := suspect.Rank(e)
	if verdict != compare.Fail && ranking.SoundP >= soundRisk {
		return
	}
	c.ranking = &ranking
	c.answer.Unexplained = result.NumberOf(ranking.NoneWeight)
	for _, s := range ranking.Suspects {
		c.answer.Suspects = append(c.answer.Suspects, c.suspectOf(s))
	}
}

// suspectOf is a suspect in the form of the result.
func (c *check) suspectOf(s suspect.Suspect) result.Suspect {
	var names []string
	one := result.Suspect{Weight: result.Number(s.Weight), Parts: []string{}, Predicted: map[string]result.Number{}}
	for _, f := range s.Faults {
		names = append(names, f.String())
		one.Parts = append(one.Parts, f.Parts()...)
	}
	one.Fault, one.Parts = strings.Join(names, " or "), unrepeated(one.Parts)
	if one.Parts == nil {
		one.Parts = []string{}
	}
	one.Predicted["loss_db"] = result.Number(s.BenchLossDB)
	if c.Service != c.Rig.Ends {
		one.Predicted["service_loss_db"] = result.Number(s.ServiceLossDB)
	}
	if !math.IsNaN(s.LegsOverDB) {
		one.Predicted["legs_db"] = result.Number(s.LegsOverDB)
	}
	if !math.IsNaN(s.DriftFrac) {
		one.ByPercent, one.ByPercentU = result.NumberOf(100*s.DriftFrac), result.NumberOf(200*s.DriftStdU)
	}
	one.Confirm = confirmOf(s, c.Circuit, len(c.answer.Ohms) > 0)
	return one
}
