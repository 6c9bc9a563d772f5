package lot

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/unit"
	"padproof/compare"
)

// AlikeDB is how far the computed losses of one drawing may lie apart from take to
// take: they are computed at the tone as it was recorded, which no two takes hold
// alike to the last digit. The check of one unit lets a tone that differs between
// its takes change the designed loss by as much.
const AlikeDB = 0.01

// limits are all that an answer's checks are held against.
type limits struct {
	lossLowDB, lossHighDB, drawnDB float64 // NaN where there is none
	others                         string
}

func limitsOf(a *result.Answer) limits {
	l := limits{lossLowDB: math.NaN(), lossHighDB: math.NaN(), drawnDB: math.NaN()}
	var b strings.Builder
	for _, c := range a.Checks {
		switch {
		case c.Name == "loss":
			l.lossLowDB, l.lossHighDB, l.drawnDB = float64(c.Low), float64(c.High), float64(c.Expected)
		case c.Low.OK() || c.High.OK():
			fmt.Fprintf(&b, "%s %.9g %.9g;", c.Name, float64(c.Low), float64(c.High))
		}
	}
	l.others = b.String()
	return l
}

// alike reports whether two sets of limits are those of one drawing.
func (l limits) alike(m limits) bool {
	return l.others == m.others && AlikeLoss(l.lossLowDB, m.lossLowDB) && AlikeLoss(l.lossHighDB, m.lossHighDB) && AlikeLoss(l.drawnDB, m.drawnDB)
}

// AlikeLoss reports whether two computed losses, or limits about them, are those of
// one drawing, to within [AlikeDB]. One that is not there (NaN, or infinite) is like
// another that is not there.
func AlikeLoss(a, b float64) bool {
	return a == b || math.IsNaN(a) && math.IsNaN(b) || math.Abs(a-b) <= AlikeDB
}

// add takes a check of one unit in.
func (g *group) add(c result.Check, a *result.Answer, o Outcome) {
	if !c.Measured.OK() || c.Unit == "" {
		return
	}
	i := slices.IndexFunc(g.figures, func(f *figure) bool { return f.name == c.Name })
	if i < 0 {
		i = len(g.figures)
		g.figures = append(g.figures, &figure{name: c.Name, unit: c.Unit, limit: LimitOf(c), expected: float64(c.Expected)})
	}
	f := g.figures[i]
	f.units, f.values = append(f.units, a.Unit), append(f.values, float64(c.Measured))
	f.stdU = append(f.stdU, ownStdU(c.Name, a.Budget, o.Unit))
	if c.Bench != nil && c.Bench.Measured.OK() && c.Bench.Expected.OK() {
		f.deviations = append(f.deviations, deviationOf(c, a, o.Unit))
	}
	if c.AtHz != nil {
		f.freqHz = float64(*c.AtHz)
	}
}

// LimitOf is the limit of a check; an end that is not set is infinite.
func LimitOf(c result.Check) compare.Limit {
	limit := compare.NoLimit()
	if c.Low.OK() {
		limit.Low = float64(c.Low)
	}
	if c.High.OK() {
		limit.High = float64(c.High)
	}
	return limit
}

// ownStdU is what of a figure's standard uncertainty differs from unit to unit:
// how well its own takes repeat. What is common to all units (a shared take, the
// gains, the rig) shifts a lot and does not widen it.
func ownStdU(check string, budget []result.Term, u *unit.Unit) float64 {
	var sum float64
	for _, t := range budget {
		role := repeated(t.Source)
		if t.Check != check || role == "" || u.Inherited[u.Files[role]] {
			continue
		}
		if c := float64(t.StandardU * t.Sensitivity); !math.IsNaN(c) && !math.IsInf(c, 0) {
			sum += c * c
		}
	}
	return math.Sqrt(sum)
}

// repeated is the take whose scatter a term of a budget is, "" for other terms.
func repeated(source string) string {
	for _, r := range []struct{ source, role string }{
		{"repeatability of before-loaded", ""},
		{"repeatability of before", unit.Before}, {"repeatability of after", unit.After},
		{"repeatability of bypass", unit.Bypass}, {"before against before-again", unit.Before},
		{"after against after-again", unit.After},
		{"repeatability of the hot leg", unit.Legs}, {"repeatability of the cold leg", unit.Legs},
	} {
		if r.source == source {
			return r.role
		}
	}
	return ""
}
