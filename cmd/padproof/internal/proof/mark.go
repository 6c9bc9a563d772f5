package proof

import (
	"fmt"
	"math"

	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/sheet"
	"padproof/cmd/padproof/internal/unit"
	"padproof/compare"
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

// matchedTolFrac is the tolerance taken for the parts of a pad without a
// drawing: that of a drawing that gives none.
const matchedTolFrac = 0.05

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
	bare, err := matchedPad(rig, 600, 10) // any pad: it tells the wiring
	if err != nil {
		return nil, err
	}
	d.Circuit = bare
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
	d.Circuit, err = matchedPad(rig, mark.Ohms, mark.LossDB)
	return d, err
}

// matchedPad is the symmetrical matched pad of an impedance and a loss: a T
// where either end of the rig is unbalanced, else an H. With K the voltage ratio
// its series arms are R0 (K-1)/(K+1), its shunt 2 R0 K/(K^2-1) (Bird, Electrical
// Circuit Theory and Technology, ch. 41).
func matchedPad(rig *sheet.Rig, ohms, lossDB float64) (*network.Circuit, error) {
	k := math.Pow(10, lossDB/20)
	arm, shunt := ohms*(k-1)/(k+1), 2*ohms*k/(k*k-1)
	name, values := "H", []float64{arm / 2, arm / 2, arm / 2, arm / 2, shunt}
	if rig.Drive(false) == "unbalanced" || rig.Sense(false) == "unbalanced" {
		name, values = "T", []float64{arm, arm, shunt}
	}
	var parts []network.Part
	for i, v := range values {
		parts = append(parts, network.Part{Ref: network.Refs(name)[i], Value: v, TolFrac: matchedTolFrac})
	}
	return network.New(name, parts)
}

// benchCheck is the loss of a pad of which no model is known: what this bench
// read, against the mark where the mark is for this bench.
func (a answer) benchCheck(d *Drawing, reading compare.LossReading, mark *Mark) (result.Check, error) {
	budget := uncertainty.Budget{Terms: reading.Terms}
	u, err := budget.ExpandedU(0.95)
	if err != nil {
		return result.Check{}, err
	}
	a.Budget = append(a.Budget, termsOf("loss", budget)...)
	check := lossOf()
	check.Measured, check.Uncertainty = result.Number(reading.LossDB), result.Number(u)
	if mark == nil || !mark.OnThisBench {
		return a.withoutMark(check, d, mark)
	}
	check.Expected = result.Number(mark.LossDB)
	if limit, set := d.lossLimit(mark.LossDB); set {
		verdict, reason := compare.Decide(compare.Guarded, reading.LossDB, u, limit, mark.LossDB)
		decide(&check, verdict, reason, limit, mark.LossDB)
	}
	return check, nil
}

// commonOhms are impedances that pads are often marked for: common practice, no
// source.
var commonOhms = []float64{50, 75, 150, 200, 600}

// withoutMark shows the loss beside what pads of common impedances would read.
func (a answer) withoutMark(check result.Check, d *Drawing, mark *Mark) (result.Check, error) {
	check.Verdict = string(compare.Unproven)
	check.Reason = "no drawing says what this pad should read; give a pad.toml, or --marked-loss-db with --marked-ohms or --on-this-bench, and --within-db"
	lossDB := float64(check.Measured)
	if mark != nil {
		lossDB = mark.LossDB
		check.Reason = "the mark holds for an impedance that was not given; add --marked-ohms, or --on-this-bench if it is what this bench should read"
	}
	for _, ohms := range commonOhms {
		c, err := matchedPad(d.Sheet, ohms, math.Max(lossDB, 0.1))
		if err != nil {
			return check, err
		}
		a.Notes = append(a.Notes, fmt.Sprintf("a matched %.4g Ω pad of %.2f dB would read %.2f dB on this bench", ohms, math.Max(lossDB, 0.1), c.LossDB(d.Rig.Ends, 997)))
	}
	return check, nil
}
