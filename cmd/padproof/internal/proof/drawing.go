package proof

import (
	"errors"
	"math"
	"slices"

	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/sheet"
	"padproof/compare"
	"padproof/compare/network"
)

const picofarad = 1e-12

// A Drawing is a pad on a rig, as the model has them.
type Drawing struct {
	Name    string
	Circuit *network.Circuit
	// Alternative is another circuit that the same mark may mean; nil with a drawing.
	Alternative *network.Circuit
	Rig         compare.Rig
	Service     network.Ends
	Gains       compare.Gains
	Limits      sheet.Limits
	Rule        compare.Rule // how a figure is held against its limit
	Sheet       *sheet.Rig
	Pad         *sheet.Pad // nil without a drawing
}

// Load reads a pad's and a rig's sheet. With no rig's sheet (an empty path) the
// cautious defaults stand for it.
func Load(padFile, rigFile string) (*Drawing, error) {
	pad, err := sheet.ReadPad(padFile)
	if err != nil {
		return nil, err
	}
	rig, err := readRig(rigFile)
	if err != nil {
		return nil, err
	}
	return draw(pad, rig)
}

func readRig(path string) (*sheet.Rig, error) {
	if path == "" {
		return sheet.DefaultRig(), nil
	}
	return sheet.ReadRig(path)
}

func draw(pad *sheet.Pad, rig *sheet.Rig) (*Drawing, error) {
	circuit, err := circuitOf(pad)
	if err != nil {
		return nil, err
	}
	d := &Drawing{Name: pad.Name, Pad: pad, Circuit: circuit, Limits: pad.Limits}
	if d.Rule, err = compare.ParseRule(pad.Limits.Decision); err != nil {
		return nil, err
	}
	if err := d.onRig(rig); err != nil {
		return nil, err
	}
	d.Service, err = serviceOf(pad, d.Rig.Ends, circuit.Unbalanced())
	return d, err
}

// onRig takes the rig's figures into the model's form.
func (d *Drawing) onRig(rig *sheet.Rig) error {
	unbalanced := d.Circuit.Unbalanced()
	drive, err := network.ParseDrive(rig.Drive(unbalanced))
	if err != nil {
		return err
	}
	sense, err := network.ParseSense(rig.Sense(unbalanced))
	if err != nil {
		return err
	}
	d.Sheet = rig
	d.Rig = compare.Rig{
		Ends: network.Ends{
			SourceOhms: rig.Output.SourceOhms, Drive: drive,
			LoadOhms: rig.Input.LoadOhms, Sense: sense,
			CableFarads: rig.Input.CablePF * picofarad,
		},
		SourceTolFrac:  rig.Output.TolFrac,
		LoadTolFrac:    rig.Input.TolFrac,
		CableTolFarads: rig.Input.CableHalfPF * picofarad,
	}
	c := rig.Calibration
	d.Gains = compare.Gains{
		LinearityDB: c.LinearityDB, DriftDB: c.GainDriftDB,
		AfterDB: c.AfterGainDB, AfterDoubtDB: c.AfterGainUncertaintyDB,
	}
	return nil
}

// circuitOf builds the network that a pad's sheet draws.
func circuitOf(pad *sheet.Pad) (*network.Circuit, error) {
	kinds := map[sheet.Kind]network.Kind{
		sheet.Resistor: network.Resistor, sheet.Capacitor: network.Capacitor, sheet.Inductor: network.Inductor,
	}
	var parts []network.Part
	for _, p := range pad.Parts {
		parts = append(parts, network.Part{
			Ref: p.Ref, Kind: kinds[p.Kind], Value: p.Value, TolFrac: p.TolFrac, A: p.Between[0], B: p.Between[1],
		})
	}
	circuit, err := network.New(pad.Network, parts)
	var fault *network.Error
	if errors.As(err, &fault) {
		return nil, pad.Errorf(fault.Ref, fault.Hint, "%s", fault.Text)
	}
	return circuit, err
}

// serviceOf is the place where the pad will work: the bench, but for what the
// sheet says of it.
func serviceOf(pad *sheet.Pad, bench network.Ends, unbalanced bool) (network.Ends, error) {
	service := bench
	s := pad.Service
	if s == nil {
		return service, nil
	}
	if s.SourceOhms != nil {
		service.SourceOhms = *s.SourceOhms
	}
	if s.LoadOhms != nil {
		service.LoadOhms = *s.LoadOhms
	}
	if s.CablePF != nil {
		service.CableFarads = *s.CablePF * picofarad
	}
	var err error
	if service.Drive, err = network.ParseDrive(s.DriveFor(unbalanced)); err != nil {
		return service, err
	}
	service.Sense, err = network.ParseSense(s.SenseFor(unbalanced))
	return service, err
}

// lossLimit is the limit on the loss in service; false where none is set. The
// loss is held against the marked figure, or against the drawing's own.
func (d *Drawing) lossLimit(expectedDB float64) (compare.Limit, bool) {
	half := d.Limits.LossPlusMinusDB
	if half == nil {
		return compare.Limit{}, false
	}
	nominal := expectedDB
	if d.Limits.LossNominalDB != nil {
		nominal = *d.Limits.LossNominalDB
	}
	return compare.Limit{Low: nominal - *half, High: nominal + *half}, true
}

// endsOf turns a condition into the form of the result.
func endsOf(e network.Ends) *result.Ends {
	return &result.Ends{
		SourceOhms: result.Number(e.SourceOhms), Drive: e.Drive.String(),
		LoadOhms: result.Number(e.LoadOhms), Sense: e.Sense.String(),
		CablePF: result.Number(math.Round(e.CableFarads/picofarad*1e6) / 1e6),
	}
}

// lossKeys are the keys of a rig's sheet that a loss rests on.
var lossKeys = []string{
	"output.source_ohms", "output.tolerance", "output.drive",
	"input.load_ohms", "input.tolerance", "input.sense", "input.cable_pF",
	"calibration.linearity_db", "calibration.gain_drift_db", "calibration.after_gain_uncertainty_db",
}

// assumed are the cautious figures that the loss rests on, in plain words.
func (d *Drawing) assumed() []string {
	texts := []string{}
	for _, a := range d.Sheet.Assumed {
		text := a.Text
		switch a.Key {
		case "output.drive":
			text = d.Rig.Ends.Drive.String() + " drive"
		case "input.sense":
			text = d.Rig.Ends.Sense.String() + " sense"
		}
		if slices.Contains(lossKeys, a.Key) {
			texts = append(texts, text+" ("+a.Key+")")
		}
	}
	return texts
}
