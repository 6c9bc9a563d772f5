package lot

import (
	"fmt"
	"math"
	"slices"

	"padproof/cmd/padproof/internal/result"
	"padproof/compare"
	"padproof/compare/lotstat"
	"padproof/compare/uncertainty"
)

// rules is the book of run rules that a lot's chart is read by.
const rules = lotstat.WesternElectric

// Lot works out what the units show together. Figures that make no statistics are
// named in the warnings, and cost the lot nothing else.
func (t *Tally) Lot() (*result.Lot, error) {
	lot := t.lot
	lot.Warnings = append(slices.Clip(lot.Warnings), t.copies()...)
	yield, err := lotstat.YieldOf(lot.Passed, lot.Units, compare.Coverage)
	if err != nil {
		return nil, err
	}
	lot.Yield = result.Share{Value: result.Number(yield.Frac), Low: result.Number(yield.Interval.Low), High: result.Number(yield.Interval.High)}
	lot.Verdict = lot.Worst()
	for _, g := range t.groups {
		d := result.LotDrawing{Pad: g.pad, Rig: g.rig, Units: len(g.rows), Figures: []result.LotFigure{}, Says: []string{}}
		for _, f := range g.figures {
			one, err := f.statistics()
			if err != nil {
				lot.Warnings = append(lot.Warnings, fmt.Sprintf("%s of %s has no statistics: %v", f.name, g.pad, err))
				continue
			}
			d.Figures = append(d.Figures, one)
		}
		if says, err := g.says(); err != nil {
			lot.Warnings = append(lot.Warnings, fmt.Sprintf("what the losses of %s mean together cannot be told: %v", g.pad, err))
		} else {
			d.Says = says
		}
		lot.Drawings = append(lot.Drawings, d)
	}
	return &lot, nil
}

// charted are the checks that a process makes and that spread like one.
var charted = map[string]bool{"loss": true, "legs": true, "noise": true, "noise-level": true, "bypass": true}

// statistics are those of one figure. Spread and capability are of figures that
// scatter about a middle; of the others, which are the worst of something, mean
// and ends are told.
func (f *figure) statistics() (result.LotFigure, error) {
	one := result.LotFigure{
		Check: f.name, Unit: f.unit, N: len(f.values), Expected: result.Number(f.expected),
		Low: result.Number(f.limit.Low), High: result.Number(f.limit.High),
	}
	s, err := lotstat.Summarise(f.values, compare.Coverage)
	if err != nil {
		return one, err
	}
	one.Mean, one.SD = ranged(s.Mean, s.MeanInterval), ranged(s.StdDev, s.StdDevInterval)
	one.Least, one.Greatest = result.Number(s.Min), result.Number(s.Max)
	if !charted[f.name] || len(f.values) < 2 {
		return one, nil
	}
	split, err := lotstat.SplitSpread(f.values, f.stdU, compare.Coverage)
	if err != nil {
		return one, err
	}
	units := ranged(split.Units, split.UnitsInterval)
	one.SpreadOfUnits, one.SpreadOfReading = &units, result.NumberOf(split.Measurement)
	one.ReadingShare = result.NumberOf(split.MeasurementFrac)
	if f.limit.IsSet() {
		c, err := lotstat.CapabilityOf(f.values, f.limit, compare.Coverage)
		if err != nil {
			return one, err
		}
		one.Overall, one.Within, one.Differ = capability(c.Overall), capability(c.Within), c.Differ
	}
	one.Chart, err = f.chart()
	return one, err
}

func ranged(v float64, i uncertainty.Interval) result.Ranged {
	return result.Ranged{Value: result.Number(v), Low: result.Number(i.Low), High: result.Number(i.High)}
}

func capability(i lotstat.Indices) *result.Capability {
	if math.IsNaN(i.Cpk) {
		return nil
	}
	return &result.Capability{SD: result.Number(i.StdDev), Cp: ranged(i.Cp, i.CpInterval), Cpk: ranged(i.Cpk, i.CpkInterval)}
}
