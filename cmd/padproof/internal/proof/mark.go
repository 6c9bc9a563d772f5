package proof

import (
	"fmt"
	"math"

	"padproof/analysis"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/sheet"
	"padproof/cmd/padproof/internal/unit"
	"padproof/compare"
	"padproof/compare/generic"
	"padproof/compare/network"
	"padproof/compare/uncertainty"
)

// A Mark is what stands on a pad that has no drawing. Figures left out are 0.
type Mark struct {
	LossDB      float64
	WithinDB    float64 // how far off the mark is still good
	Ohms        float64 // the impedance the mark holds for, at both ends
	OnThisBench bool    // the mark is what this bench should read
}

// drawingOf is the unit's drawing, or what its mark says of it. Without either
// the Drawing has no circuit.
func drawingOf(u *unit.Unit, mark *Mark) (*Drawing, error) {
	if u.PadFile != "" {
		if mark != nil {
			return nil, &result.Error{File: u.PadFile, Text: "there is a drawing, and a mark was given too", Hint: "leave out --marked-loss-db, or name the takes with --before and --after and no --pad"}
		}
		return Load(u.PadFile, u.RigFile)
	}
	rig, err := readRig(u.RigFile)
	if err != nil {
		return nil, err
	}
	d := &Drawing{Name: "no drawing"}
	d.Circuit, _, err = matchedPad(rig, 600, 10) // any pad: it tells the wiring
	if err != nil {
		return nil, err
	}
	if err := d.onRig(rig); err != nil {
		return nil, err
	}
	d.Circuit, d.Service = nil, d.Rig.Ends
	if mark == nil {
		return d, nil
	}
	d.Name = fmt.Sprintf("marked %.4g dB, no drawing", mark.LossDB)
	d.Limits.LossNominalDB = &mark.LossDB
	if mark.WithinDB > 0 {
		d.Limits.LossPlusMinusDB = &mark.WithinDB
	}
	if !(mark.Ohms > 0) {
		return d, nil
	}
	d.Name = fmt.Sprintf("marked %.4g dB and %.4g Ω, no drawing", mark.LossDB, mark.Ohms)
	d.Service.SourceOhms, d.Service.LoadOhms, d.Service.CableFarads = mark.Ohms, mark.Ohms, 0
	d.Circuit, d.Alternative, err = matchedPad(rig, mark.Ohms, mark.LossDB)
	return d, err
}

// matchedPad is the symmetrical matched pad of an impedance and a loss: a T and a pi, or an H and an O
// where both ends of the rig are balanced or floating.
func matchedPad(rig *sheet.Rig, ohms, lossDB float64) (t, pi *network.Circuit, err error) {
	return generic.Matched(rig.Drive(false) == "unbalanced" || rig.Sense(false) == "unbalanced", ohms, lossDB)
}

// eitherCheck judges a mark as both kinds of matched pad: what holds for one
// alone proves nothing, since nobody has looked inside.
func (c *check) eitherCheck(reading compare.LossReading) (result.Check, []result.Term, error) {
	first, terms, err := c.drawnCheck(reading)
	if err != nil {
		return first, nil, err
	}
	other := *c
	drawing := *c.Drawing
	drawing.Circuit, drawing.Alternative = c.Alternative, nil
	other.Drawing, other.answer = &drawing, &result.Answer{}
	second, _, err := other.drawnCheck(reading)
	if err != nil {
		return second, nil, err
	}
	a := c.answer
	for i := range a.Unseen {
		a.Unseen[i].Part += " of the " + c.Circuit.Name()
	}
	for _, u := range other.answer.Unseen {
		u.Part += " of the " + other.Circuit.Name()
		a.Unseen = append(a.Unseen, u)
	}
	a.Assumed = append(a.Assumed, fmt.Sprintf("a symmetrical matched pad, %s or %s, parts within ±%.0f %% (no drawing)", c.Circuit.Name(), other.Circuit.Name(), generic.PartTolFrac*100))
	if first.Verdict != second.Verdict {
		first.Reason = fmt.Sprintf("as a %s pad it would be %s, as a %s pad %s; give a drawing, or use a bench of the impedance marked",
			c.Circuit.Name(), first.Verdict, other.Circuit.Name(), second.Verdict)
		first.Verdict = string(compare.Unproven)
	}
	apart := math.Abs(float64(first.Measured-second.Measured)) / 2
	first.Measured = (first.Measured + second.Measured) / 2
	first.Uncertainty = result.Number(math.Max(float64(first.Uncertainty), float64(second.Uncertainty)) + apart)
	if limit, set := c.lossLimit(c.mark.LossDB); set && first.Verdict == string(compare.Pass) {
		verdict, reason := compare.Decide(c.Rule, float64(first.Measured), float64(first.Uncertainty), limit, c.mark.LossDB)
		decide(&first, verdict, reason, limit, c.mark.LossDB)
	}
	return first, terms, nil
}

// benchCheck is the loss of a pad of which no model is known: what this bench
// read, against the mark where the mark is for this bench.
func (c *check) benchCheck(reading compare.LossReading) (result.Check, []result.Term, error) {
	budget := uncertainty.Budget{Terms: reading.Terms}
	u, err := budget.ExpandedU(compare.Coverage)
	if err != nil {
		return result.Check{}, nil, err
	}
	one := emptyCheck("loss", "dB")
	one.Measured, one.Uncertainty = result.Number(reading.LossDB), result.Number(u)
	if c.mark == nil || !c.mark.OnThisBench {
		err = c.withoutMark(&one)
		return one, termsOf("loss", budget), err
	}
	one.Expected = result.Number(c.mark.LossDB)
	if limit, set := c.lossLimit(c.mark.LossDB); set {
		verdict, reason := compare.Decide(c.Rule, reading.LossDB, u, limit, c.mark.LossDB)
		decide(&one, verdict, reason, limit, c.mark.LossDB)
	}
	return one, termsOf("loss", budget), nil
}

// withoutMark shows the loss beside what pads of common impedances would read.
func (c *check) withoutMark(one *result.Check) error {
	one.Verdict = string(compare.Unproven)
	one.Reason = "no drawing says what this pad should read; give a pad.toml, or --marked-loss-db with --marked-ohms or --on-this-bench, and --within-db"
	lossDB := float64(one.Measured)
	if c.mark != nil {
		lossDB = c.mark.LossDB
		one.Reason = "the mark holds for an impedance that was not given; add --marked-ohms, or --on-this-bench if it is what this bench should read"
	}
	if lossDB < 0.1 {
		return nil // no pad reads like this
	}
	for _, ohms := range generic.CommonOhms {
		pad, _, err := matchedPad(c.Sheet, ohms, lossDB)
		if err != nil {
			return err
		}
		c.answer.Notes = append(c.answer.Notes, fmt.Sprintf("a matched %.4g Ω pad of %.2f dB would read %.2f dB on this bench", ohms, lossDB, pad.LossDB(c.Rig.Ends, analysis.ToneHz)))
	}
	return nil
}
