package main

import (
	"errors"

	"padproof/cmd/padproof/internal/proof"
	"padproof/cmd/padproof/internal/rehearsal"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/sheet"
	"padproof/compare"
	"padproof/compare/network"
)

// A fault is one of the unit, or of an end of the bench.
type fault struct {
	text  string
	apply func(*network.Circuit, network.Ends) (*network.Circuit, network.Ends)
}

func parseFaults(d *proof.Drawing, texts []string) ([]fault, error) {
	var faults []fault
	for _, text := range texts {
		one, err := parseFault(d, text)
		var bad *network.Error
		if errors.As(err, &bad) {
			hint := bad.Hint
			if bad.Ref == "" { // no part's: the whole list is shown
				hint += "; or of the bench: source not as stated; load not as stated; source is 300; load is 600"
			}
			return nil, &result.Error{Text: "--fault: " + bad.Text, Hint: hint}
		}
		if err != nil {
			return nil, err
		}
		faults = append(faults, one)
	}
	return faults, nil
}

func parseFault(d *proof.Drawing, text string) (fault, error) {
	end, isEnd, err := network.ParseEndFault(text)
	switch {
	case err != nil:
		return fault{}, err
	case isEnd && end.Apply(d.Rig.Ends) == d.Rig.Ends:
		return fault{}, &result.Error{Text: "--fault: " + end.String() + " changes nothing on this bench", Hint: "name another size, such as source is 300"}
	case isEnd:
		return fault{end.String(), func(c *network.Circuit, e network.Ends) (*network.Circuit, network.Ends) { return c, end.Apply(e) }}, nil
	}
	f, err := network.ParseFault(d.Circuit, text)
	return fault{f.String(), func(c *network.Circuit, e network.Ends) (*network.Circuit, network.Ends) { return f.Apply(c), e }}, err
}

// ohmsText is the ohms.toml of the simulated unit; with --vary the meter is off
// too, within what the sheet says of it.
func (f *rehearseFlags) ohmsText(p rehearsal.Plan) string {
	tolFrac, plusOhms := compare.MeterTolFrac, compare.MeterPlusOhms
	var meter rehearsal.Meter
	if f.vary {
		meter = rehearsal.DrawMeter(tolFrac, plusOhms, p.Seed)
	}
	o := sheet.Ohms{MeterTolFrac: &tolFrac, MeterPlusOhms: &plusOhms, Simulated: true}
	for _, s := range p.Read(meter) {
		o.Readings = append(o.Readings, sheet.Reading{Pins: [2]string{s.PinA, s.PinB}, Joined: s.Joined, Ohms: s.Ohms})
	}
	return o.Text(rehearsal.Mark + ": " + p.Note + "; these readings are of no real unit.")
}
