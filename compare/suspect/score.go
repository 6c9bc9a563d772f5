package suspect

import (
	"math"
	"math/cmplx"
)

// A scorer works one hypothesis after another; each goroutine has its own.
type scorer struct {
	*search
	mean  []float64 // of each row
	raw   []float64 // slopes, rows × params, per relative change
	j     []float64 // the same times the standard uncertainty
	extra []float64 // variance of each row beside its own and j
	cov   []float64 // known × known, then its factor
	left  []float64
	blurs []blurred // of transfers and legs
	spare *prediction
	seconds

	nilDB               float64 // standard deviation of a row whose figures are nil but for tolerances
	lastChi, lastLogDet float64
}

func newScorer(s *search) *scorer {
	n := len(s.rows)
	return &scorer{
		search: s, mean: make([]float64, n), raw: make([]float64, n*s.params), j: make([]float64, n*s.params), extra: make([]float64, n),
		cov: make([]float64, s.known*s.known), left: make([]float64, s.known), spare: s.newPrediction(),
		seconds: newSeconds(s.known), blurs: make([]blurred, len(s.freqs)+2),
	}
}

// covariance fills in that of the measured rows: what they share through parts and ends, what all
// losses share, and what is their own.
func (w *scorer) covariance() {
	n := w.known
	gain := w.e.GainStdUDB * w.e.GainStdUDB
	if !(gain >= 0 && gain < 1e6) {
		gain = 0
	}
	for a := range n {
		ja := w.j[a*w.params : (a+1)*w.params]
		for b := range a + 1 {
			jb := w.j[b*w.params : (b+1)*w.params]
			var sum float64
			for k, v := range ja {
				sum += v * jb[k]
			}
			if w.rows[a].kind == lossRow && w.rows[b].kind == lossRow {
				sum += gain
			}
			w.cov[a*n+b] = sum
		}
		w.cov[a*n+a] += w.rows[a].variance + w.extra[a]
	}
}

// factor replaces the covariance by its Cholesky factor and returns ln det.
func (w *scorer) factor() float64 {
	n := w.known
	var logDet float64
	for a := range n {
		for b := range a + 1 {
			sum := w.cov[a*n+b]
			ra, rb := w.cov[a*n:a*n+b], w.cov[b*n:b*n+b]
			for k, v := range ra {
				sum -= v * rb[k]
			}
			if a != b {
				w.cov[a*n+b] = sum / w.cov[b*n+b]
				continue
			}
			if sum < 1e-12 {
				sum = 1e-12
			}
			w.cov[a*n+a] = math.Sqrt(sum)
			logDet += math.Log(sum)
		}
	}
	return logDet
}

// chi returns the square of the departure in terms of the factor.
func (w *scorer) chi() float64 {
	n := w.known
	var chi float64
	for a := range n {
		sum := w.departure(a)
		for k := range a {
			sum -= w.cov[a*n+k] * w.left[k]
		}
		w.left[a] = sum / w.cov[a*n+a]
		chi += w.left[a] * w.left[a]
	}
	return chi
}

// departure is observed less predicted; of a phase the shorter way round.
func (w *scorer) departure(row int) float64 {
	d := w.rows[row].observed - w.mean[row]
	if w.rows[row].kind == phaseRow {
		return math.Remainder(d, 360)
	}
	return d
}

// gaussian is the logarithm of the density of the measured rows.
func (w *scorer) gaussian() float64 {
	w.covariance()
	w.lastLogDet = w.factor()
	w.lastChi = w.chi()
	return -(w.lastChi + w.lastLogDet + float64(w.known)*math.Log(2*math.Pi)) / 2
}

// leastChance keeps a single bound, which may be misread, from ruling anything out for good.
const leastChance = 1e-5

// bounds is the logarithm of the chance of all bounds.
func (w *scorer) bounds() float64 {
	var sum float64
	for i := w.known; i < len(w.rows); i++ {
		sum += math.Log(math.Max(leastChance, w.boundChance(i)))
	}
	return sum
}

// boundChance is the chance that a bound holds.
func (w *scorer) boundChance(i int) float64 {
	v := w.extra[i] + w.rows[i].variance
	for _, x := range w.j[i*w.params : (i+1)*w.params] {
		v += x * x
	}
	return chanceBelow(float64(w.rows[i].bound) * (w.mean[i] - w.rows[i].observed) / math.Sqrt(v))
}

// chanceBelow is the normal distribution.
func chanceBelow(z float64) float64 { return math.Erfc(-z/math.Sqrt2) / 2 }

// polarity is the logarithm of the chance of the polarity that was seen.
func (w *scorer) polarity(p *prediction) float64 {
	if w.e.Polarity == 0 || w.toneAt < 0 {
		return 0
	}
	v := p.at[w.toneAt]
	size := cmplx.Abs(v)
	const wrong = 1e-4 // a marker misread
	if size < 10*leak {
		return math.Log(0.5)
	}
	agree := real(v) / size
	if w.e.Polarity < 0 {
		agree = -agree
	}
	// A phase more than 45° from the axis leaves it open.
	return math.Log(math.Min(1, math.Max(wrong, 0.5+agree/math.Sqrt2)))
}

// score is the logarithm of the likelihood of all that was taken.
func (w *scorer) score(p *prediction) float64 {
	w.fill(p)
	sum := w.gaussian() + w.bounds() + w.polarity(p)
	if w.noise != nil {
		sum += w.noise.score(p.noise)
	}
	if math.IsNaN(sum) {
		return math.Inf(-1)
	}
	return sum
}
