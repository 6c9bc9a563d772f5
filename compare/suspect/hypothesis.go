package suspect

import (
	"math"
	"runtime"
	"slices"
	"sync"
	"sync/atomic"

	"padproof/compare/network"
)

// A hypothesis is a fault, scored.
type hypothesis struct {
	fault    Fault
	family   bool
	param    int // of a drift: the part
	prior    float64
	circuit  *network.Circuit // with the fault in it; of a family at its likeliest amount
	ends     network.Ends
	logScore float64
	second   float64 // logarithm of the likelihood of the fault with a part off beside it
	weight   float64
	in       integral  // of a family
	mean     []float64 // of each row, of a family at its likeliest amount
	stdU     []float64
	print    print
}

// hypotheses are all faults that are not the drawing itself, with priors that add up to faultPrior.
func (s *search) hypotheses() []*hypothesis {
	var all []*hypothesis
	drawn, _ := s.printOf(s.e.Circuit, nil)
	for _, f := range Faults(s.e.Circuit) {
		c := f.Fault.Apply(s.e.Circuit)
		if _, same := s.printOf(c, drawn); same {
			continue
		}
		all = append(all, &hypothesis{fault: f, circuit: c, ends: s.ends})
	}
	for _, f := range drifts(s.e.Circuit) {
		i := slices.IndexFunc(s.e.Circuit.Parts(), func(p network.Part) bool { return p.Ref == f.Ref })
		all = append(all, &hypothesis{fault: f, family: true, param: i})
	}
	for _, f := range endFaults(s.ends) {
		all = append(all, &hypothesis{fault: f, family: true})
	}
	var sum float64
	for _, h := range all {
		sum += h.fault.share()
	}
	for _, h := range all {
		h.prior = faultPrior * h.fault.share() / sum
	}
	return all
}

// scoreAll scores all hypotheses, on all processors.
func (s *search) scoreAll(all []*hypothesis, drawn *prediction, straights []network.Slope) {
	// What takes longest comes first, so that no processor is left with it at the end.
	var next atomic.Int64
	var wait sync.WaitGroup
	for range min(runtime.GOMAXPROCS(0), len(all)) {
		wait.Go(func() {
			w := newScorer(s)
			for {
				i := int(next.Add(1)) - 1
				if i >= len(all) {
					return
				}
				w.hypothesis(all[len(all)-1-i], drawn, straights)
			}
		})
	}
	wait.Wait()
}

func (w *scorer) hypothesis(h *hypothesis, drawn *prediction, straights []network.Slope) {
	if h.family {
		w.familyOf(h, drawn, straights)
		return
	}
	h.logScore, h.second = math.Inf(-1), math.Inf(-1)
	if w.farOff(h, straights) {
		return
	}
	p := w.predict(h.circuit, h.ends, straights)
	hum := w.e.Hum.score(h.fault.loose(w.e.Circuit, h.circuit))
	h.logScore = w.score(p) + hum
	h.second = w.withSecond(p) + hum
	w.keep(h)
}

// hopeless is so many standard deviations that nothing else can make good.
const hopeless = 30

// farOff tells whether the loss at the tone alone rules a hypothesis out.
func (w *scorer) farOff(h *hypothesis, straights []network.Slope) bool {
	i := slices.IndexFunc(w.rows[:w.known], func(r row) bool { return r.kind == lossRow })
	if i < 0 {
		return false
	}
	r, p := w.rows[i], w.spare
	clear(p.by)
	w.through(p, r.at, h.circuit, h.ends, straights[r.at], nil)
	w.doubts(p, h.circuit)
	raw, j := w.raw[:w.params], w.j[:w.params]
	clear(raw)
	w.extra[0], w.nilDB = 0, 0
	b := w.blurred(p, r.at)
	d := r.observed - w.addDB(&b, -1, raw, 0)
	w.bounded(j, raw, p.stdU)
	v := r.variance + w.extra[0] + w.nilDB*w.nilDB + w.e.GainStdUDB*w.e.GainStdUDB + 0.1
	for _, x := range j {
		v += x * x
	}
	return d*d > hopeless*hopeless*v
}

// keep notes what the hypothesis gives for each row.
func (w *scorer) keep(h *hypothesis) {
	h.mean = slices.Clone(w.mean)
	h.stdU = make([]float64, len(w.rows))
	for i, r := range w.rows {
		v := r.variance + w.extra[i]
		for _, x := range w.j[i*w.params : (i+1)*w.params] {
			v += x * x
		}
		h.stdU[i] = math.Sqrt(v)
	}
}

func (w *scorer) familyOf(h *hypothesis, drawn *prediction, straights []network.Slope) {
	var fam *family
	if h.fault.End == NoEnd {
		fam = w.driftFamily(h.fault, h.param, drawn, straights)
	} else {
		fam = w.endFamily(h.fault)
	}
	h.in = integrate(w.sides(h.fault, func(t float64) float64 {
		fam.find(t, w.spare)
		return w.score(w.spare)
	}))
	hum := w.e.Hum.score(false)
	h.logScore, h.second = h.in.logScore+hum, w.secondOf(fam)+hum
	h.fault = h.fault.by(h.in.t, h.in.tStdU)
	c, e := h.fault.exactly(h.in.bestT).Apply(w.e.Circuit, w.ends)
	h.circuit, h.ends = c, e
	fam.find(h.in.bestT, w.spare)
	w.fill(w.spare)
	w.keep(h)
}

// by sets the amount of a drift, to no more digits than its doubt allows, or of an end.
func (f Fault) by(t, tStdU float64) Fault {
	f = f.exactly(t)
	if f.End == NoEnd {
		digit := 0.01
		if tStdU < 0.003 {
			digit = 0.001
		}
		f.Value = math.Round(f.Value/digit) * digit
		f.Value = math.Round(f.Value*1e6) / 1e6
	}
	return f
}

// exactly sets the amount as it is.
func (f Fault) exactly(t float64) Fault {
	if f.End != NoEnd {
		f.Ratio = math.Exp(t)
	} else {
		f.Value = math.Expm1(t)
	}
	return f
}
