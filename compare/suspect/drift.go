package suspect

import (
	"math"
	"slices"

	"padproof/compare/network"
)

// A family is a fault of unknown amount t, the logarithm of a ratio. Between predictions at some
// amounts it is interpolated: figures by cubics that have the slopes too (Hermite; common practice, no
// source), the slopes themselves in a straight line.
type family struct {
	t     []float64
	preds []*prediction
	param int // whose slope is that by t
}

// find sets p to the prediction for an amount.
func (f *family) find(t float64, p *prediction) {
	i, _ := slices.BinarySearch(f.t, t)
	i = min(max(i, 1), len(f.t)-1)
	a, b := f.preds[i-1], f.preds[i]
	h := f.t[i] - f.t[i-1]
	u := (t - f.t[i-1]) / h
	v := 1 - u
	for k := range p.by {
		if a.by[k] != b.by[k] {
			p.by[k] = complex(v, 0)*a.by[k] + complex(u, 0)*b.by[k]
		} else {
			p.by[k] = a.by[k]
		}
	}
	params := len(p.stdU)
	h00, h01 := (1+2*u)*v*v, u*u*(3-2*u)
	h10, h11 := u*v*v*h, -u*u*v*h
	for k := range p.at {
		da, db := a.by[k*params+f.param], b.by[k*params+f.param]
		p.at[k] = complex(h00, 0)*a.at[k] + complex(h01, 0)*b.at[k] + complex(h10, 0)*da + complex(h11, 0)*db
	}
	copy(p.stdU, a.stdU)
	p.cross = v*a.cross + u*b.cross
	p.noise = network.Thermal{
		UnitVV: v*a.noise.UnitVV + u*b.noise.UnitVV,
		LoadVV: v*a.noise.LoadVV + u*b.noise.LoadVV,
		OhmsSq: v*a.noise.OhmsSq + u*b.noise.OhmsSq,
	}
}

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
	step := math.Abs(at(i) - at(i-1))
	if !(step > missedFrac) {
		return false
	}
	top := at(i-1) >= at(i-2) && at(i-1) >= at(i) || at(i) >= at(i+1) && at(i) >= at(i-1)
	if top {
		return math.Max(at(i), at(i-1)) > best-200
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

// driftFamily is a part that drifts: slopes by the part are those by the amount.
func (s *search) driftFamily(f Fault, param int, drawn *prediction, straights []network.Slope) *family {
	steps := 2
	if s.inductive() {
		steps = 8 // a resonance may turn the curves quickly
	}
	fam := &family{param: param}
	part, _ := s.e.Circuit.Part(f.Ref)
	for i := -steps; i <= steps; i++ {
		t := mostDrift * float64(i) / float64(steps)
		p := drawn.clone()
		if i != 0 {
			p = s.predict(s.e.Circuit.With(f.Ref, part.Value*math.Exp(t)), s.ends, straights)
		}
		p.stdU[param] = 0
		fam.t, fam.preds = append(fam.t, t), append(fam.preds, p)
	}
	return fam
}

func (p *prediction) clone() *prediction {
	c := *p
	c.stdU = slices.Clone(p.stdU)
	return &c
}

func (s *search) inductive() bool {
	return slices.ContainsFunc(s.e.Circuit.Parts(), func(p network.Part) bool { return p.Kind == network.Inductor })
}

// endFamily is an end of the bench that is other than stated.
func (s *search) endFamily(f Fault) *family {
	const steps = 6
	fam := &family{param: s.parts + sourceParam}
	if f.End == LoadEnd {
		fam.param = s.parts + loadParam
	}
	for i := -steps; i <= steps; i++ {
		f.Ratio = math.Exp(mostRatio * float64(i) / steps)
		c, e := f.Apply(s.e.Circuit, s.ends)
		p := s.predict(c, e, s.straights(e))
		p.stdU[fam.param] = 0
		fam.t, fam.preds = append(fam.t, mostRatio*float64(i)/steps), append(fam.preds, p)
	}
	return fam
}

// sides are the ranges of the amounts of a fault: of a drift level in the logarithm of its size, of
// an end level in the logarithm of its ratio, beyond its tolerance.
func (s *search) sides(f Fault, score func(t float64) float64) []*side {
	var all []*side
	add := func(low, high float64, toT func(v float64) float64) {
		one := &side{toT: toT}
		one.explore(low, high, score)
		all = append(all, one)
	}
	if f.End == NoEnd {
		add(math.Log(leastDrift), math.Log(mostDrift), math.Exp)
		add(math.Log(leastDrift), math.Log(mostDrift), func(v float64) float64 { return -math.Exp(v) })
		return all
	}
	tol := s.e.Rig.SourceTolFrac
	if f.End == LoadEnd {
		tol = s.e.Rig.LoadTolFrac
	}
	if !(tol > 0.01) {
		tol = 0.01
	}
	if above := math.Log(1 + math.Min(tol, 8)); above < mostRatio {
		add(above, mostRatio, func(v float64) float64 { return v })
	}
	if below := -math.Log(1 - math.Min(tol, 0.89)); below < mostRatio {
		add(below, mostRatio, func(v float64) float64 { return -v })
	}
	return all
}
