package suspect

import (
	"math"
	"math/cmplx"
)

// A leg on which no tone stands lies by so much under one straight through.
const (
	deadDB      = 60
	deadDoubtDB = 8
)

func (s *search) legs() {
	l := s.e.Legs
	if l == nil || !(l.FreqHz >= 0) || math.IsInf(l.FreqHz, 1) || s.e.Circuit.Unbalanced() {
		return
	}
	if l.DeadHot && l.DeadCold {
		straight, _ := s.e.Circuit.LegVolts(s.ends, l.LoadOhms, l.FreqHz)
		level := 20 * math.Log10(math.Max(cmplx.Abs(straight.Hot), cmplx.Abs(straight.Cold)))
		for leg := range 2 {
			s.rows = append(s.rows, row{kind: deadRow, at: leg, observed: level - deadDB, variance: deadDoubtDB * deadDoubtDB, bound: -1})
		}
		return
	}
	if l.Before {
		s.straightLegs = s.straightLegsDB()
	}
	over := row{kind: legsRow, observed: l.OverDB, variance: variance(l.StdUDB, leastStdUDB)}
	switch {
	case l.DeadHot:
		over.bound = -1
	case l.DeadCold:
		over.bound = 1
	}
	if !math.IsNaN(l.OverDB) && !math.IsInf(l.OverDB, 0) {
		s.rows = append(s.rows, over)
	}
	if over.bound == 0 && !math.IsNaN(l.PhaseDeg) && !math.IsInf(l.PhaseDeg, 0) {
		s.rows = append(s.rows, row{kind: phaseRow, observed: l.PhaseDeg, variance: variance(l.PhaseStdUDeg, leastStdUDeg)})
	}
}

// straightLegsDB are what the ends do to hot over cold straight through; nil where one leg is not fed.
func (s *search) straightLegsDB() []float64 {
	hot, cold := s.e.Circuit.StraightLegSlopes(s.ends, s.e.Legs.LoadOhms, s.e.Legs.FreqHz)
	if h, c := cmplx.Abs(hot.At), cmplx.Abs(cold.At); !(h > c/10 && c > h/10) {
		return nil
	}
	all := make([]float64, endParams)
	db := func(a, b complex128) float64 { return dbPerNeper * (real(a/hot.At) - real(b/cold.At)) }
	all[sourceParam], all[cableParam] = db(hot.Source, cold.Source), db(hot.Cable, cold.Cable)
	all[hotLoadParam], all[coldLoadParam] = db(hot.Load, cold.Load), db(hot.ColdLoad, cold.ColdLoad)
	return all
}
