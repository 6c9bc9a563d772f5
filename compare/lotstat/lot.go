package lotstat

import (
	"errors"
	"fmt"
	"math"
)

// A Lot is what was measured of the units of one drawing on one bench.
type Lot struct {
	// DeviationsDB are the bench losses less that of the drawing, in order of testing. What could
	// not be measured, and units with an open or shorted part, are left out.
	DeviationsDB []float64
	// StdUDB are the standard uncertainties of the readings, independent from unit to unit; nil
	// counts as nil.
	StdUDB []float64
	// CommonStdUDB is the standard uncertainty of what is common to all units but the ends of the
	// bench: the gain between shared takes, the linearity.
	CommonStdUDB float64
	Names        []string // of the units, for sentences; nil counts them from 1
	Model        Model
}

func (l Lot) check() error {
	n := len(l.DeviationsDB)
	if l.StdUDB != nil && len(l.StdUDB) != n {
		return fmt.Errorf("%d deviations with %d uncertainties", n, len(l.StdUDB))
	}
	if l.Names != nil && len(l.Names) != n {
		return fmt.Errorf("%d deviations with %d names", n, len(l.Names))
	}
	for _, v := range l.DeviationsDB {
		if math.Abs(v) > mostDB {
			return fmt.Errorf("a deviation of %g dB: leave out units that are broken", v)
		}
	}
	if !finite(l.CommonStdUDB) || l.CommonStdUDB < 0 {
		return fmt.Errorf("a common uncertainty of %g dB: it must be a number, 0 or more", l.CommonStdUDB)
	}
	return errors.Join(checkFinite("deviation", l.DeviationsDB), checkUncertainties(l.StdUDB), l.Model.check())
}

// mostDB is the largest deviation that a loss can have at all.
const mostDB = 400

func (m Model) check() error {
	for _, p := range m.Parts {
		if !finite(p.BenchDB) || !(p.TolFrac >= 0 && p.TolFrac <= 1) {
			return fmt.Errorf("part %s with %g dB and a tolerance of %g: no such part", p.Ref, p.BenchDB, p.TolFrac)
		}
	}
	for _, e := range m.Ends {
		if !finite(e.BenchDB) || !finite(e.TolFrac) || e.TolFrac < 0 {
			return fmt.Errorf("a %s with %g dB and a tolerance of %g: no such end", e.Name, e.BenchDB, e.TolFrac)
		}
	}
	return nil
}

func (l Lot) name(i int) string {
	if l.Names != nil {
		return l.Names[i]
	}
	return fmt.Sprint(i + 1)
}

// A view is the units of a lot that are no outliers.
type view struct {
	at []int // their places in the lot
	db []float64
}

// without leaves out the outliers.
func (l Lot) without(outliers []int) view {
	out := make(map[int]bool)
	for _, i := range outliers {
		out[i] = true
	}
	var v view
	for i, db := range l.DeviationsDB {
		if !out[i] {
			v.at, v.db = append(v.at, i), append(v.db, db)
		}
	}
	return v
}

// stdUDB is the root mean square of the readings' own uncertainties.
func (l Lot) stdUDB() float64 {
	if len(l.StdUDB) == 0 {
		return 0
	}
	return rootMeanSquare(l.StdUDB)
}
