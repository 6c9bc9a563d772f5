package lot

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"padproof/cmd/padproof/internal/proof"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/unit"
	"padproof/compare/lotstat"
)

// A benchDeviation is how far one unit's loss on the bench lies from the drawing.
type benchDeviation struct {
	name                string
	db                  float64
	ownStdU, commonStdU float64 // of the unit alone; of all units alike, the ends of the bench apart
}

// deviationOf reads a unit's deviation and its doubts from its loss check.
func deviationOf(c result.Check, a *result.Answer, u *unit.Unit) benchDeviation {
	d := benchDeviation{name: a.Unit, db: float64(c.Bench.Measured - c.Bench.Expected)}
	var own, common float64
	sharedBefore := u.Inherited[u.Files[unit.Before]]
	for _, t := range a.Budget {
		s := float64(t.StandardU)
		if t.Check != "loss" || math.IsNaN(s) || math.IsInf(s, 0) {
			continue
		}
		switch role := repeated(t.Source); {
		case role != "" && u.Inherited[u.Files[role]], gainTerms[t.Source] && (sharedBefore || t.Source != "gain drift"):
			common += s * s
		case role != "" || gainTerms[t.Source]:
			own += s * s
		}
	}
	d.ownStdU, d.commonStdU = math.Sqrt(own), math.Sqrt(common)
	return d
}

// gainTerms are the sources of doubt that a gain brings.
var gainTerms = map[string]bool{
	"gain drift": true, "linearity": true, "gain raised for after": true,
	"channel match of the outputs": true, "channel match of the inputs": true,
}

// says is what the losses of a group mean, in sentences. Units that lie far beyond
// what tolerances bring are faulty each by itself, and tell nothing of the line.
func (g *group) says() ([]string, error) {
	i := slices.IndexFunc(g.figures, func(f *figure) bool { return f.name == "loss" })
	if i < 0 || g.first.PadFile == "" || len(g.figures[i].deviations) < 2 {
		return []string{}, nil
	}
	f := g.figures[i]
	d, err := proof.Load(g.first.PadFile, g.first.RigFile)
	if err != nil {
		return nil, err
	}
	low, high := d.Circuit.WorstCase(d.Rig.Ends, f.freqHz)
	line, apart := together(f.deviations, high-low)
	l := lotstat.Lot{Model: lotstat.ModelOf(d.Circuit, d.Rig, f.freqHz)}
	for _, one := range line {
		l.DeviationsDB, l.StdUDB, l.Names = append(l.DeviationsDB, one.db), append(l.StdUDB, one.ownStdU), append(l.Names, one.name)
		l.CommonStdUDB = math.Max(l.CommonStdUDB, one.commonStdU)
	}
	found, err := lotstat.Diagnose(l)
	if err != nil {
		return nil, err
	}
	if len(apart) > 0 {
		found.Sentences = append(found.Sentences, fmt.Sprintf("left out of this, being far from the rest: %s", strings.Join(apart, ", ")))
	}
	return found.Sentences, nil
}

// together parts the units that lie near one another, within a width about their
// median, from the names of those that do not.
func together(all []benchDeviation, width float64) (line []benchDeviation, apart []string) {
	var dbs []float64
	for _, d := range all {
		dbs = append(dbs, d.db)
	}
	slices.Sort(dbs)
	median := dbs[len(dbs)/2]
	for _, d := range all {
		if math.Abs(d.db-median) <= width+3*d.ownStdU {
			line = append(line, d)
		} else {
			apart = append(apart, d.name)
		}
	}
	return line, apart
}
