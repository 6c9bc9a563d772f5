package suspect

import (
	"math"
	"slices"
)

// An amount is one that was tried.
type amount struct {
	v, t     float64 // v is what the prior is level in, on one side of nil
	logScore float64
}

// A spread of amounts tried on one side of nil.
type side struct {
	amounts []amount
	toT     func(v float64) float64
}

const (
	firstAmounts = 20   // on each side
	mostAmounts  = 160  // on each side
	missedFrac   = 0.15 // largest step of the likelihood left between two that matter
	matters      = 12   // that far under the best, a likelihood no longer counts
)

// explore tries amounts closer and closer where the likelihood is high.
func (s *side) explore(low, high float64, score func(t float64) float64) {
	try := func(v float64) amount { t := s.toT(v); return amount{v, t, score(t)} }
	for i := range firstAmounts + 1 {
		s.amounts = append(s.amounts, try(low+(high-low)*float64(i)/firstAmounts))
	}
	for range 12 {
		var more []amount
		best := s.best()
		for i := 1; i < len(s.amounts) && len(s.amounts)+len(more) < mostAmounts; i++ {
			if s.unclear(i, best) {
				more = append(more, try((s.amounts[i-1].v+s.amounts[i].v)/2))
			}
		}
		if len(more) == 0 {
			return
		}
		s.amounts = append(s.amounts, more...)
		slices.SortFunc(s.amounts, func(a, b amount) int {
			if a.v < b.v {
				return -1
			}
			return 1
		})
	}
}

func (s *side) best() float64 {
	best := math.Inf(-1)
	for _, a := range s.amounts {
		best = math.Max(best, a.logScore)
	}
	return best
}

// unclear tells whether a peak may hide between amounts i-1 and i: beside one that stands out, or
// where the likelihood that matters rises or falls much.
func (s *side) unclear(i int, best float64) bool {
	at := func(k int) float64 {
		if k < 0 || k >= len(s.amounts) {
			return math.Inf(-1)
		}
		return s.amounts[k].logScore
	}
	between := func(j, k int) float64 {
		if d := math.Abs(at(j) - at(k)); !math.IsInf(d, 0) && !math.IsNaN(d) {
			return d
		}
		return 0
	}
	step := between(i, i-1)
	top := at(i-1) >= at(i-2) && at(i-1) >= at(i) || at(i) >= at(i+1) && at(i) >= at(i-1)
	if top { // a peak midway between two amounts gives both one score: the slopes beside tell of it
		steps := math.Max(step, math.Max(between(i-1, i-2), between(i, i+1)))
		return steps > missedFrac && math.Max(at(i), at(i-1)) > best-200
	}
	return step > 1 && math.Max(at(i), at(i-1)) > best-matters
}

// An integral is a likelihood summed over the prior of the amounts on both sides, with mean and
// standard deviation of t on the heavier one.
type integral struct {
	logScore  float64
	t, tStdU  float64
	bestT     float64
	bestScore float64
}

// integrate sums the likelihood over both sides, each with half the prior.
func integrate(sides []*side) integral {
	in := integral{logScore: math.Inf(-1), bestScore: math.Inf(-1)}
	for _, s := range sides {
		for _, a := range s.amounts {
			if a.logScore > in.bestScore {
				in.bestScore, in.bestT = a.logScore, a.t
			}
		}
	}
	if math.IsInf(in.bestScore, -1) {
		in.t = in.bestT
		return in
	}
	var total, heaviest float64
	for _, s := range sides {
		mass, mean, square := s.moments(in.bestScore)
		total += mass / float64(len(sides))
		if mass > heaviest {
			heaviest = mass
			in.t, in.tStdU = mean, math.Sqrt(math.Max(0, square-mean*mean))
		}
	}
	in.logScore = in.bestScore + math.Log(math.Max(total, 1e-300))
	return in
}

// moments are the mean likelihood over the prior, over exp(ref), and mean and mean square of t; by
// the trapezium rule.
func (s *side) moments(ref float64) (mass, mean, square float64) {
	n := len(s.amounts)
	var width float64
	for i := 1; i < n; i++ {
		a, b := s.amounts[i-1], s.amounts[i]
		dv := b.v - a.v
		fa, fb := math.Exp(a.logScore-ref)*dv/2, math.Exp(b.logScore-ref)*dv/2
		width += dv
		mass += fa + fb
		mean += fa*a.t + fb*b.t
		square += fa*a.t*a.t + fb*b.t*b.t
	}
	if mass > 0 {
		mean, square = mean/mass, square/mass
	}
	return mass / width, mean, square
}
