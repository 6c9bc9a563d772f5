package proof

import (
	"fmt"
	"math"
	"strings"

	"padproof/compare"
)

// judgeLoss holds a loss against its limit and then asks what the ohmmeter speaks
// against and what the bench could not have seen: a PASS stands only where nothing
// is left open.
func (d *Drawing) judgeLoss(k compare.LossCase, loss compare.Loss, limit compare.Limit) (compare.Verdict, string, []compare.Unseen) {
	if loss.AtLeastDB > limit.High {
		return compare.Fail, fmt.Sprintf("every part that would explain the reading, moved alone, gives %.2f dB or more in service", loss.AtLeastDB), nil
	}
	if math.IsNaN(loss.ServiceDB) {
		return compare.Unproven, "no single part of the drawing, and no swap of two, explains what was read on the bench; look at gain, source and load, or measure the parts", nil
	}
	verdict, reason := compare.Decide(d.Rule, loss.ServiceDB, loss.UDB, limit, loss.ServiceExpectedDB)
	if verdict == compare.Unproven {
		reason += compare.Settles(loss.Budget)
	}
	if verdict == compare.Fail {
		if reason == "" {
			reason = loss.OhmRemark()
		}
		return verdict, reason, nil
	}
	unseen := compare.FindUnseen(k, loss.BenchDB, loss.BenchUDB, limit)
	if doubt := k.OhmDoubt(loss); verdict == compare.Pass && doubt != "" {
		return compare.Unproven, doubt, unseen
	}
	if verdict == compare.Pass && len(unseen) > 0 {
		var names []string
		for _, u := range unseen {
			names = append(names, u.Name())
		}
		return compare.Unproven, "this bench could not have seen " + strings.Join(names, ", ") + " wrong; see below for what settles it", unseen
	}
	return verdict, reason, unseen
}
