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
