package rigcheck

import (
	"padproof/cmd/padproof/internal/result"
	"padproof/compare"
)

// Enter writes what the chart makes of its last reading into the answer of that
// reading: the loss held against its limits, and the verdict.
func Enter(a *result.Answer, c *result.RigCheck) {
	last := c.Readings[len(c.Readings)-1]
	a.Verdict, a.Reason = c.Verdict, ""
	if c.State != result.RigOK {
		a.Reason = c.Text
	}
	for i := range a.Checks {
		one := &a.Checks[i]
		if one.Name != "loss" {
			continue
		}
		one.Verdict, one.Reason = c.Verdict, ""
		if !last.OffDB.OK() {
			one.Reason = last.Text + ": see Problems for what to do"
		}
		one.Expected, one.Uncertainty = c.Reference.LossDB, last.Uncertainty
		if last.OffDB.OK() {
			one.Expected = last.LossDB - last.OffDB
		}
		one.Low, one.High = one.Expected+last.LowDB, one.Expected+last.HighDB
		limit := compare.Limit{Low: float64(one.Low), High: float64(one.High)}
		one.Ratio = result.Missing
		if ratio, ok := compare.ToleranceRatio(limit, float64(one.Expected), float64(one.Uncertainty)); ok {
			one.Ratio = result.Number(ratio)
		}
	}
}
