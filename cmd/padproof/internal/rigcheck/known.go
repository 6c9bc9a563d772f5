package rigcheck

import (
	"math"

	"padproof/analysis"
	"padproof/cmd/padproof/internal/proof"
	"padproof/cmd/padproof/internal/sheet"
	"padproof/compare"
	"padproof/compare/uncertainty"
)

// A Known is what the reference pad of a bench is known to lose on it.
type Known struct {
	ref     *sheet.Reference
	drawing *proof.Drawing // nil where the sheet states the loss
}

// KnownOf is the known loss that a bench's sheet states; the sheet must have a
// reference. An error is one of its drawing's sheet.
func KnownOf(rig *sheet.Rig) (*Known, error) {
	k := &Known{ref: rig.Reference}
	if k.ref.PadFile == "" {
		return k, nil
	}
	var err error
	k.drawing, err = proof.Load(k.ref.PadFile, rig.File)
	return k, err
}

// lossDB is the known loss at a frequency; that of the test signal's tone where
// it is NaN.
func (k *Known) lossDB(freqHz float64) float64 {
	if k.drawing == nil {
		return *k.ref.LossDB
	}
	return k.drawing.Circuit.LossDB(k.drawing.Rig.Ends, orTone(freqHz))
}

// stdUDB is the standard uncertainty of the known loss: half of what the sheet
// states, or that of a drawing's parts and of the bench's ends.
func (k *Known) stdUDB(freqHz float64) (float64, error) {
	if k.drawing == nil {
		return k.ref.UncertaintyDB / 2, nil
	}
	d, freqHz := k.drawing, orTone(freqHz)
	ends, err := compare.JudgeLoss(compare.LossCase{Circuit: d.Circuit, Rig: d.Rig, Service: d.Rig.Ends,
		Reading: compare.LossReading{LossDB: k.lossDB(freqHz), FreqHz: freqHz}})
	if err != nil {
		return math.NaN(), err
	}
	all := ends.Budget
	sens := d.Circuit.Sensitivities(d.Rig.Ends, freqHz)
	for i, part := range d.Circuit.Parts() {
		all.Terms = append(all.Terms, uncertainty.FromRectangle(part.Ref, part.TolFrac, sens[i]))
	}
	return all.CombinedU(), nil
}

func orTone(freqHz float64) float64 {
	if math.IsNaN(freqHz) || freqHz <= 0 {
		return analysis.ToneHz
	}
	return freqHz
}
