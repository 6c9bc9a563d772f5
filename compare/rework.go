package compare

import (
	"math"
	"slices"

	"padproof/compare/network"
)

// A ReworkCase is what a resistor to bring the loss in is sought by.
type ReworkCase struct {
	LossCase       // the drawing, the rig, the service, and the reading
	Loss     Loss  // as judged from it
	Limit    Limit // of the loss in service, both ends set
	Rule     Rule

	// Unit is the circuit that most likely explains the reading: the drawing with a fault in it. Nil
	// where it is not known: then every part of the drawing, moved alone, is thought of.
	Unit *network.Circuit

	TrimTolFrac   float64 // half-width of the tolerance of the resistor to add; 0 is 1 %
	InputVoltsRMS float64 // what stands at the input in service, for the heat in that resistor
}

// A Rework is what to do with a unit whose loss is out of its limits.
type Rework struct {
	Trims  []Trim // best first, at most three
	Mends  []Mend
	Reason string // why there is no trim; "" where there is one
}

// A Trim is a resistor to solder in, and the loss that should then be measured.
type Trim struct {
	Refs     []string // the part that it goes beside, or both of a pair; none for one across two pins
	Across   [2]string
	Parallel bool // else in series
	Ohms     float64
	Series   network.Series
	BothLegs bool // one such resistor in each leg

	// The bench figure is what the next check should read, so it holds the doubt of two readings.
	BenchLossDB, BenchUDB     float64
	ServiceLossDB, ServiceUDB float64

	// What a check by the drawing should then make of the loss in service. It differs from
	// ServiceLossDB where the trim is not at the part that is off: that part is still as it was, and the
	// drawing does not know.
	CheckLossDB, CheckUDB float64

	Watts         float64 // in the resistor, or in the hotter of two; NaN without InputVoltsRMS
	InputVoltsRMS float64 // at which it takes them
}

// A Mend is a part that is too far off to trim: it wants replacing by the one on the drawing.
type Mend struct {
	Refs                       []string // one part, or two that sit in one another's places
	Ohms                       float64  // of one part: what the drawing says
	BenchLossDB, ServiceLossDB float64  // what the drawing gives
}

// How far off a part may be and still be trimmed, as a factor either way. Beyond it the part is
// another part, or broken. Common practice, no source.
const trimFactor = 3

const commonTolFrac = 0.01 // of a metal-film resistor

// FindRework looks for the preferred resistor (E24 of IEC 60063, E96 where none of E24 will do) that
// brings the loss to the middle of its limits: in parallel with a part, in series with one, or across
// the output or the input. A trim is offered only where the loss then foretold would pass.
//
// The foretelling starts from the unit as it is: the parts that are off are moved until the model
// reads what the bench read, then the resistor is added. Every doubt (the reading, the rig, the other
// parts within tolerance, the resistor's own) goes through the same steps once more, so that what
// cancels between before and after the rework does cancel. Where several parts might be off, all
// are tried, and U holds the whole range.
//
// Nothing is offered for a part open or shorted, for legs and plugs, or while one of those might as
// well explain the reading: there the mend is another. The two legs of a balanced pad get the
// same resistor each, unless the one part that is off sits in one leg.
//
// Trims are ranked by how near the middle they land, in steps of a quarter of the limit's half-width;
// then by being at the part that is off, where that is known, and leaving the impedances at both ends
// as drawn within a fifth; by fewest resistors, by parallel
// before series (nothing to cut: common practice, no source), and by the least change of the impedances.
func FindRework(k ReworkCase) Rework {
	if k.TrimTolFrac <= 0 {
		k.TrimTolFrac = commonTolFrac
	}
	if !k.Limit.twoSided() || math.IsNaN(k.Loss.BenchDB) || math.IsInf(k.Loss.BenchDB, 0) {
		return Rework{Reason: "there is no loss to bring in"}
	}
	seen, r := k.explained()
	if len(seen) == 0 {
		return r
	}
	var nearest *Trim
	for _, series := range []network.Series{network.E24, network.E96} {
		var trims []ranked
		for _, s := range k.sites(seen) {
			t, ok := k.bestAt(s, series, seen)
			if ok {
				trims = append(trims, t)
			} else if nearest == nil || k.off(t.Trim) < k.off(*nearest) {
				nearest = &t.Trim
			}
		}
		if len(trims) > 0 {
			slices.SortStableFunc(trims, byRank)
			for _, t := range trims[:min(3, len(trims))] {
				r.Trims = append(r.Trims, t.Trim)
			}
			return r
		}
	}
	r.Reason = k.noTrim(nearest)
	return r
}

// off is how far a trim lands from the middle of the limit.
func (k ReworkCase) off(t Trim) float64 {
	return math.Abs(t.ServiceLossDB - (k.Limit.Low+k.Limit.High)/2)
}

// A ranked trim has what it is ranked by.
type ranked struct {
	Trim
	quarters float64 // of the half-width, off the middle
	strained float64 // 1 where an end's impedance is far from the drawing's, or the part that is off left as it is
	parts    int
	strain   float64 // of the impedances at both ends, as logarithms
}

func byRank(a, b ranked) int {
	less := func(x, y float64) int {
		switch {
		case x < y:
			return -1
		case x > y:
			return 1
		}
		return 0
	}
	for _, d := range []int{less(a.quarters, b.quarters), less(a.strained, b.strained)} {
		if d != 0 {
			return d
		}
	}
	if d := a.parts - b.parts; d != 0 {
		return d
	}
	if a.Parallel != b.Parallel {
		if a.Parallel {
			return -1
		}
		return 1
	}
	return less(a.strain, b.strain)
}

// bestAt is the preferred value that lands nearest the middle at a site, and whether the loss would
// then pass.
func (k ReworkCase) bestAt(s site, series network.Series, seen []explanation) (ranked, bool) {
	ohms := k.nearestOhms(s, series, seen)
	t := k.foretell(s, ohms, seen)
	t.Series = series
	verdict, _ := Decide(k.Rule, t.ServiceLossDB, t.ServiceUDB, k.Limit, k.Loss.ServiceExpectedDB)
	half := (k.Limit.High - k.Limit.Low) / 2
	r := ranked{
		Trim: t, parts: max(1, len(s.refs)),
		quarters: math.Round(4 * k.off(t) / half),
		strain:   k.strain(s.on(seen[0].unit, ohms)),
	}
	known := k.Unit != nil && len(seen) == 1
	if r.strain > farStrain || known && !slices.Equal(s.refs, seen[0].off) {
		r.strained = 1
	}
	return r, verdict == Pass && k.check(&r.Trim) != Fail
}

// check foretells what the next check makes of the loss, and its verdict.
func (k ReworkCase) check(t *Trim) Verdict {
	next := k.LossCase
	next.Reading.LossDB = t.BenchLossDB
	loss, err := JudgeLoss(next)
	if err != nil {
		return Unproven
	}
	t.CheckLossDB, t.CheckUDB = loss.ServiceDB, loss.UDB
	verdict, _ := Decide(k.Rule, loss.ServiceDB, loss.UDB, k.Limit, k.Loss.ServiceExpectedDB)
	return verdict
}

// farStrain is how far the impedances at both ends may be moved before a trim comes after all others
// that land as well: a fifth. Common practice, no source.
const farStrain = 0.2

// The values that are tried: below, a trim in series with any pad is no more than its tolerance, and
// above one in parallel.
const lowestTrimOhms, highestTrimOhms = 1, 1e7

// nearestOhms is the preferred value whose mean service loss over all explanations lands nearest the
// middle. The loss rises or falls all the way with the resistor but for rare circuits, so that it is
// enough to look at every sixth value and then beside the best.
func (k ReworkCase) nearestOhms(s site, series network.Series, seen []explanation) float64 {
	values := series.Values(lowestTrimOhms, highestTrimOhms)
	off := func(i int) float64 {
		sum := 0.0
		for _, x := range seen {
			sum += s.on(x.unit, values[i]).LossDB(k.Service, k.Reading.FreqHz) + x.leftDB
		}
		return math.Abs(sum/float64(len(seen)) - (k.Limit.Low+k.Limit.High)/2)
	}
	const stride = 6
	best, least := 0, math.Inf(1)
	look := func(from, to, step int) {
		for i := max(0, from); i <= min(to, len(values)-1); i += step {
			if d := off(i); d < least {
				best, least = i, d
			}
		}
	}
	look(0, len(values)-1, stride)
	look(best-stride+1, best+stride-1, 1)
	return values[best]
}
