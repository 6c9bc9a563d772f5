package lotstat

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"

	"padproof/compare"
	"padproof/compare/uncertainty"
)

// A Shift is how far a whole lot lies from its drawing.
type Shift struct {
	MeanDB   float64              // + is more loss than drawn; NaN of no units
	Interval uncertainty.Interval // of the lot's mean by its own scatter, 95 %
	P        float64              // Student's t test of a mean of 0; NaN of less than two units
	// BenchUDB is what the bench may add to all units alike: expanded, of gain, source, load and cable.
	BenchUDB float64
	// Foremost is the largest term of BenchUDB: "gain" or the name of an end; "" where it is nil.
	Foremost string
	Shown    bool // P is under 0.05
	// BeyondBench says that the shift is shown and larger than U of the mean and the bench together
	// (JCGM 100): only then is anything suspected.
	BeyondBench bool

	interval uncertainty.Interval // of the mean, the gain's doubt in it
}

const gainTerm = "gain"

func shiftOf(l Lot, v view) (Shift, error) {
	s := Shift{MeanDB: math.NaN(), Interval: unknown, P: math.NaN(), interval: unknown}
	bench := l.benchBudget()
	var err error
	if s.BenchUDB, err = bench.ExpandedU(compare.Coverage); err != nil {
		return Shift{}, err
	}
	if t, share := bench.Dominant(); share > 0 {
		s.Foremost = t.Source
	}
	if len(v.db) == 0 {
		return s, nil
	}
	sum, err := Summarise(v.db, compare.Coverage)
	if err != nil {
		return Shift{}, err
	}
	s.MeanDB, s.Interval = sum.Mean, sum.MeanInterval
	if sum.N < 2 {
		return s, nil
	}
	return s.tested(l, sum, bench)
}

// tested fills in whether the shift is one.
func (s Shift) tested(l Lot, sum Summary, bench uncertainty.Budget) (Shift, error) {
	n := float64(sum.N)
	mean := uncertainty.Term{Source: "units", StandardU: sum.StdDev / math.Sqrt(n), Sensitivity: 1, Dof: n - 1}
	switch {
	case mean.StandardU > 0:
		t := distuv.StudentsT{Mu: 0, Sigma: 1, Nu: n - 1}
		s.P = 2 * t.CDF(-math.Abs(sum.Mean)/mean.StandardU)
	case sum.Mean != 0:
		s.P = 0
	default:
		s.P = 1
	}
	s.Shown = s.P < 1-compare.Coverage
	gain := uncertainty.FromNormal(gainTerm, l.CommonStdUDB, 1)
	own, err := uncertainty.Budget{Terms: []uncertainty.Term{mean, gain}}.ExpandedU(compare.Coverage)
	if err != nil {
		return Shift{}, err
	}
	s.interval = uncertainty.Interval{Low: sum.Mean - own, High: sum.Mean + own}
	all, err := uncertainty.Budget{Terms: append(bench.Terms, mean)}.ExpandedU(compare.Coverage)
	if err != nil {
		return Shift{}, err
	}
	s.BeyondBench = s.Shown && math.Abs(sum.Mean) > all
	return s, nil
}

// benchBudget is what the bench may add to all units alike.
func (l Lot) benchBudget() uncertainty.Budget {
	terms := []uncertainty.Term{uncertainty.FromNormal(gainTerm, l.CommonStdUDB, 1)}
	for _, e := range l.Model.Ends {
		terms = append(terms, uncertainty.FromRectangle(e.Name, e.TolFrac, e.BenchDB))
	}
	return uncertainty.Budget{Terms: terms}
}
