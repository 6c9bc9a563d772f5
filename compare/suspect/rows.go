package suspect

import (
	"math"
)

const dbPerNeper = 20 / math.Ln10

// leak is what comes over beside a pad through which nothing comes, of what there is straight
// through: the order of a good cable's crosstalk. Known within a factor or two.
const (
	leak      = 1e-6
	leakDoubt = 2
)

// mostRowStdU bounds what slopes may say of a row: near a null they say nothing.
const mostRowStdU = 12

// fill turns a prediction into rows.
func (w *scorer) fill(p *prediction) {
	_, legs, meters := w.figures()
	clear(w.extra)
	for i := range w.blurs {
		w.blurs[i] = w.blurred(p, i)
	}
	for i, r := range w.rows {
		j := w.raw[i*w.params : (i+1)*w.params]
		clear(j)
		w.nilDB = 0
		switch r.kind {
		case lossRow:
			w.mean[i] = w.addDB(&w.blurs[r.at], -1, j, i)
		case responseRow: // what doubts leave of a figure is much the same at all frequencies
			w.mean[i] = w.addDB(&w.blurs[r.at], -1, j, i) + w.addDB(&w.blurs[r.ref], 1, j, i)
		case legsRow:
			w.mean[i] = w.legsOver(p, legs, j, i)
		case phaseRow:
			w.mean[i] = w.legsPhase(p, legs, j, i)
		case deadRow:
			w.mean[i] = w.addDB(&w.blurs[legs+r.at], 1, j, i)
		case ohmsRow:
			o := w.meters[r.at]
			ohms := real(p.at[meters+r.at])
			w.mean[i] = o.scale(ohms)
			for k := range w.parts {
				j[k] = real(p.by[(meters+r.at)*w.params+k]) / (ohms + o.scaleOhms())
			}
		}
		w.bounded(w.j[i*w.params:(i+1)*w.params], j, p.stdU)
		w.extra[i] += w.nilDB * w.nilDB
		if r.kind == lossRow {
			w.extra[i] += p.cross * p.cross / 9
		}
	}
}

// bounded sets j to the slopes of a row times the standard uncertainties.
func (w *scorer) bounded(j, raw, stdU []float64) {
	var sum float64
	for k := range j {
		j[k] = raw[k] * stdU[k]
		sum += j[k] * j[k]
	}
	if sum > mostRowStdU*mostRowStdU {
		f := mostRowStdU / math.Sqrt(sum)
		for k := range j {
			j[k] *= f
		}
	}
}

// before takes off what the ends do to legs straight through, where that was recorded.
func (w *scorer) before(j []float64) {
	for k, by := range w.straightLegs {
		j[w.parts+k] -= by
	}
}
