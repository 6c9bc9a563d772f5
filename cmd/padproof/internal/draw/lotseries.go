package draw

import (
	"math"
	"slices"
	"strconv"
	"strings"

	"padproof/cmd/padproof/internal/result"
)

// A lotSeries is one figure of the units of one drawing, in the order of their
// serials.
type lotSeries struct {
	*result.LotFigure
	title     string // of pad and lot
	simulated bool
	units     []string
	values    []float64
	verdicts  []string      // of this figure
	u         result.Number // of one reading: the middle one of all
}

// OfLot returns the pictures of the units of one of a lot's drawings that there is
// something to show for: for each figure that scatters about a middle how it
// spreads, and its chart.
func OfLot(l *result.Lot, drawing int) []*Picture {
	if l == nil || drawing < 0 || drawing >= len(l.Drawings) {
		return nil
	}
	var all []*Picture
	for _, f := range l.Drawings[drawing].Figures {
		if f.Chart != nil {
			all = append(all, LotSpread(l, drawing, f.Check), LotChart(l, drawing, f.Check))
		}
	}
	return shown(all)
}

// seriesOf finds a figure of a lot; false where no unit has it.
func seriesOf(l *result.Lot, drawing int, check string) (lotSeries, bool) {
	if l == nil || drawing < 0 || drawing >= len(l.Drawings) {
		return lotSeries{}, false
	}
	d := l.Drawings[drawing]
	i := slices.IndexFunc(d.Figures, func(f result.LotFigure) bool { return f.Check == check })
	if i < 0 {
		return lotSeries{}, false
	}
	s := lotSeries{LotFigure: &d.Figures[i], title: strings.Trim(l.Lot+", "+d.Pad, ", "), simulated: l.Simulated}
	var us []float64
	for _, r := range l.Rows {
		for _, c := range r.Checks {
			if r.Drawing != drawing || c.Name != check || !c.Measured.OK() {
				continue
			}
			s.units, s.verdicts = append(s.units, r.Unit), append(s.verdicts, c.Verdict)
			s.values = append(s.values, kept(float64(c.Measured)))
			if c.Uncertainty.OK() {
				us = append(us, float64(c.Uncertainty))
			}
		}
	}
	slices.Sort(us)
	s.u = result.Missing
	if len(us) > 0 {
		s.u = result.Number(us[len(us)/2])
	}
	return s, len(s.values) > 0
}

// fileOf names a picture of a lot.
func fileOf(kind, check string, drawing int) string {
	name := kind + "-" + check
	if drawing > 0 {
		name += "-" + strconv.Itoa(drawing+1)
	}
	return name
}

// number writes a value of the series with its unit's digits.
func (s lotSeries) number(n result.Number) string { return figure(n, s.u) }

// count is how many units have a verdict.
func (s lotSeries) count(verdict string) int {
	n := 0
	for _, v := range s.verdicts {
		if v == verdict {
			n++
		}
	}
	return n
}

// quartiles are the values below which a quarter, half and three quarters lie.
func (s lotSeries) quartiles() (lower, middle, upper float64) {
	sorted := slices.Clone(s.values)
	slices.Sort(sorted)
	at := func(part float64) float64 {
		x := part * float64(len(sorted)-1)
		i := int(x)
		if i+1 >= len(sorted) {
			return sorted[len(sorted)-1]
		}
		return sorted[i] + (x-math.Floor(x))*(sorted[i+1]-sorted[i])
	}
	return at(0.25), at(0.5), at(0.75)
}
