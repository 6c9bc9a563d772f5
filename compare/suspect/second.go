package suspect

import "math"

// secondSizes are how far a second part may be off, as standard deviations of the logarithm of its
// value: a drift, and any other value.
var secondSizes = [...]float64{0.2, 0.6, 1.5}

// seconds is room to work out what a second part that is off would explain.
type seconds struct {
	reach []float64 // of one part, in terms of the factor of the covariance
}

func newSeconds(known int) seconds {
	return seconds{reach: make([]float64, known)}
}

// withSecond is the logarithm of the likelihood of all that was taken where, beside the fault that was
// scored last, any one part is off by an unknown amount. A part that is off by a normally distributed
// amount adds the square of its slopes to the covariance; what that does to a normal density follows
// from the factor at hand (matrix determinant lemma and Sherman-Morrison; common practice, no source).
func (w *scorer) withSecond(p *prediction) float64 {
	n := w.known
	rest := w.bounds() + w.polarity(p)
	if w.noise != nil {
		rest += math.Max(w.noise.score(p.noise), w.noise.anything())
	}
	base := -(w.lastChi + w.lastLogDet + float64(n)*math.Log(2*math.Pi)) / 2
	best, sum, count := math.Inf(-1), 0.0, 0
	for part := range w.parts {
		along, size := w.reachOf(part)
		for _, s := range secondSizes {
			grown := 1 + s*s*size
			l := base - math.Log(grown)/2 + s*s*along*along/grown/2
			count++
			if l > best {
				sum = sum*math.Exp(best-l) + 1
				best = l
			} else {
				sum += math.Exp(l - best)
			}
		}
	}
	if count == 0 || math.IsNaN(best) || math.IsInf(best, -1) {
		return math.Inf(-1)
	}
	return best + math.Log(sum/float64(count)) + rest
}

// reachOf gives what the part, off by a factor of e, moves all measured rows by: its square in terms
// of the covariance, and its share along the departure.
func (w *scorer) reachOf(part int) (along, size float64) {
	n := w.known
	for a := range n {
		sum := w.raw[a*w.params+part]
		for k := range a {
			sum -= w.cov[a*n+k] * w.reach[k]
		}
		w.reach[a] = sum / w.cov[a*n+a]
		size += w.reach[a] * w.reach[a]
		along += w.reach[a] * w.left[a]
	}
	return along, size
}

// secondOf is withSecond for a fault of unknown amount, over the amounts that were predicted.
func (w *scorer) secondOf(f *family) float64 {
	best, sum, count := math.Inf(-1), 0.0, 0
	for i, p := range f.preds {
		if f.t[i] == 0 {
			continue
		}
		w.score(p)
		l := w.withSecond(p)
		count++
		switch {
		case math.IsInf(l, -1) || math.IsNaN(l):
		case l > best:
			sum = sum*math.Exp(best-l) + 1
			best = l
		default:
			sum += math.Exp(l - best)
		}
	}
	if math.IsInf(best, -1) {
		return best
	}
	return best + math.Log(sum/float64(count))
}
