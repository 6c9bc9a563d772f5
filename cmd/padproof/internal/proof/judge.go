package proof

import (
	"fmt"
	"math"
	"strings"

	"padproof/cmd/padproof/internal/result"
	"padproof/compare"
	"padproof/compare/uncertainty"
)

// judgeLoss holds a loss against its limit and then asks what the bench could
// not have seen: a PASS stands only where nothing is left open.
func (d *Drawing) judgeLoss(k compare.LossCase, loss compare.Loss, limit compare.Limit) (compare.Verdict, string, []compare.Unseen) {
	rule, err := compare.ParseRule(d.Limits.Decision)
	if err != nil {
		return compare.Unproven, err.Error(), nil
	}
	if loss.AtLeastDB > limit.High {
		return compare.Fail, fmt.Sprintf("every part that would explain the reading, moved alone, gives %.2f dB or more in service", loss.AtLeastDB), nil
	}
	if math.IsNaN(loss.ServiceDB) {
		return compare.Unproven, "no single part of the drawing, and no swap of two, explains what was read on the bench; look at gain, source and load, or measure the parts", nil
	}
	verdict, reason := compare.Decide(rule, loss.ServiceDB, loss.UDB, limit, loss.ServiceExpectedDB)
	if verdict == compare.Unproven {
		reason += settles(loss.Budget)
	}
	if verdict == compare.Fail {
		return verdict, reason, nil
	}
	unseen := compare.FindUnseen(k, loss.BenchDB, loss.BenchUDB, limit)
	if verdict == compare.Pass && len(unseen) > 0 {
		var names []string
		for _, u := range unseen {
			names = append(names, u.Name())
		}
		return compare.Unproven, "this bench could not have seen " + strings.Join(names, ", ") + " wrong; see below for what settles it", unseen
	}
	return verdict, reason, unseen
}

// settles names what would shrink the largest term of a budget.
func settles(b uncertainty.Budget) string {
	largest, share := b.Dominant()
	if !(share > 0) {
		return ""
	}
	mend := map[string]string{
		"source impedance":                "measure the source impedance and state it with its tolerance in rig.toml, [output] source_ohms and tolerance",
		"load impedance":                  "measure the load and state it with its tolerance in rig.toml, [input] load_ohms and tolerance",
		"cable capacitance":               "state [input] cable_pF in rig.toml",
		"source, load and cable together": "measure source and load and state them with their tolerances in rig.toml",
		"linearity":                       "state [calibration] linearity_db in rig.toml as the interface's maker gives it",
		"gain drift":                      "touch no knob between the takes and state [calibration] gain_drift_db in rig.toml",
		"gain raised for after":           "measure the gain step and state [calibration] after_gain_uncertainty_db in rig.toml, or keep the gain",
		"carry-over":                      "use parts of a closer tolerance, or a bench with the source and load of the service",
		"other parts":                     "use a bench with the source and load of the service",
		"repeatability of after":          "record after again, longer or with more level, nothing moving",
	}[largest.Source]
	if mend == "" {
		mend = "record before again, longer or with more level, nothing moving"
	}
	return fmt.Sprintf("; the largest doubt is %s: %s", largest.Source, mend)
}

func termsOf(check string, b uncertainty.Budget) []result.Term {
	terms := []result.Term{}
	for _, t := range b.Terms {
		terms = append(terms, result.Term{
			Check: check, Source: t.Source, StandardU: result.Number(t.StandardU),
			Sensitivity: result.Number(t.Sensitivity), DOF: result.Number(t.Dof),
		})
	}
	return terms
}

func unseenOf(all []compare.Unseen) []result.Unseen {
	list := []result.Unseen{}
	for _, u := range all {
		list = append(list, result.Unseen{Part: u.Name(), Text: u.Text()})
	}
	return list
}
