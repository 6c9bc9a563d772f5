package draw

import "padproof/cmd/padproof/internal/result"

// OfAnswer returns the pictures of an answer that there is something to show for,
// in the order in which a report shows them, the schematic first. The suspects'
// parts are marked in it.
func OfAnswer(a *result.Answer) []*Picture {
	all := []*Picture{Schematic(a.Drawing, SchematicOf(a))}
	for _, make := range []func(*result.Answer) *Picture{Response, Flatness, Noise, Level, Spectrum, Legs} {
		all = append(all, make(a))
	}
	return shown(all)
}

// OfPrediction returns the pictures of a prediction, the schematic first.
func OfPrediction(p *result.Prediction) []*Picture {
	return shown([]*Picture{Schematic(p.Drawing, SchematicOptions{Title: p.Pad, Bench: &p.Bench.Ends}), Predicted(p)})
}

func shown(all []*Picture) []*Picture {
	var there []*Picture
	for _, p := range all {
		if !p.nothing {
			there = append(there, p)
		}
	}
	return there
}
