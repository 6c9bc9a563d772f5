package compare

import "padproof/analysis"

// JudgeBypass judges the loss in dB of the unit with its pad switched out, against before. The
// drawing gives 0 dB. g.AfterDB and its doubt hold for bypass as for after.
func JudgeBypass(before Twice, bypass analysis.Tone, g Gains, limit Limit, rule Rule) (Finding, error) {
	r := ReadLossTwice(before, Twice{First: bypass}, g)
	for i := range r.Terms {
		if r.Terms[i].Source == afterRepeats {
			r.Terms[i].Source = bypassRepeats
		}
	}
	f := nothingFound(limit, 0)
	f.Measured, f.Budget.Terms = r.LossDB, r.Terms
	return f, f.decide(rule)
}

// NoBypass is the finding where the limit is set and there is no tone of bypass to judge.
func NoBypass(limit Limit) Finding {
	f := nothingFound(limit, 0)
	f.leaveOpen("there is no tone with the pad switched out: record bypass.wav, the switch set to out, nothing else touched")
	return f
}
