package proof

import (
	"math"
	"strings"

	"padproof/cmd/padproof/internal/result"
	"padproof/compare"
)

// A judgedLoss is the loss against the drawing as it was judged.
type judgedLoss struct {
	k     compare.LossCase
	loss  compare.Loss
	limit compare.Limit
}

// trimVolts is the level at which the heat in a trim is stated: +20 dBu, strong for a line. Common
// practice, no source.
var trimVolts = math.Sqrt(0.6) * 10

// whatToDo adds what would bring a unit in that fails, and what might be wrong with one that has no
// drawing.
func (c *check) whatToDo() {
	if c.mark == nil {
		c.rework()
	} else {
		c.withoutDrawing()
	}
}

// lossVerdict is that of the loss, problems of the takes weighed in.
func (c *check) lossVerdict() compare.Verdict {
	for _, one := range c.answer.Checks {
		if one.Name == "loss" {
			return compare.Verdict(one.Verdict)
		}
	}
	return compare.None
}

// rework looks for the resistor that brings in a loss that fails.
func (c *check) rework() {
	if c.judged == nil || c.lossVerdict() != compare.Fail {
		return
	}
	j := c.judged
	r := compare.FindRework(compare.ReworkCase{
		LossCase: j.k, Loss: j.loss, Limit: j.limit, Rule: c.Rule, Unit: c.likeliest(), InputVoltsRMS: trimVolts,
	})
	for _, t := range r.Trims {
		c.answer.Rework = append(c.answer.Rework, trimOf(t))
	}
	for _, m := range r.Mends {
		c.answer.Rework = append(c.answer.Rework, mendOf(m))
	}
	if r.Reason != "" {
		c.answer.Notes = append(c.answer.Notes, "rework: "+r.Reason)
	}
}

func trimOf(t compare.Trim) result.Rework {
	where := strings.Join(t.Refs, " and ")
	r := result.Rework{
		Where: where, How: "series", Part: where, Between: t.Across[:], Ohms: result.Number(t.Ohms), Series: string(t.Series), BothLegs: t.BothLegs,
		Bench:   result.ForetoldDB{Loss: result.Number(t.BenchLossDB), U: result.Number(t.BenchUDB)},
		Service: result.ForetoldDB{Loss: result.Number(t.ServiceLossDB), U: result.Number(t.ServiceUDB)},
		Checked: result.ForetoldDB{Loss: result.Number(t.CheckLossDB), U: result.Number(t.CheckUDB)},
		Watts:   result.NumberOf(t.Watts), Volts: result.NumberOf(t.InputVoltsRMS), Text: t.Text(),
	}
	if t.Parallel {
		r.How = "parallel"
	}
	if where == "" {
		r.Where = t.Across[0] + " to " + t.Across[1]
	}
	return r
}

func mendOf(m compare.Mend) result.Rework {
	where := strings.Join(m.Refs, " and ")
	return result.Rework{
		Where: where, How: "replace", Part: where, Between: []string{}, Ohms: result.Number(m.Ohms),
		Bench:   result.ForetoldDB{Loss: result.Number(m.BenchLossDB), U: result.Missing},
		Service: result.ForetoldDB{Loss: result.Number(m.ServiceLossDB), U: result.Missing},
		Checked: result.ForetoldDB{Loss: result.Number(m.ServiceLossDB), U: result.Missing},
		Text:    m.Text(),
	}
}
