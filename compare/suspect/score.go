package suspect

import (
	"math"
	"math/cmplx"
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

// A blurred figure is one with what its doubts leave of it.
type blurred struct {
	v     complex128
	by    []complex128
	blur  float64 // variance by parts and ends
	share float64 // of blur in all there is: near 1 where the figure is nil but for the doubts
	size  float64 // effective square
}

// Where a figure is nothing but what the tolerances leave of it, as across a bridge in balance, slopes
// say nothing: it is then of the size of their sum. The logarithm of a normal variable of mean nil has
// a mean of -0.635 under that of its standard deviation, and a standard deviation of 1.11, in nepers.
const (
	nilShare = 0.281
	nilStdU  = 1.11 * dbPerNeper
)

func (w *scorer) blurred(p *prediction, figure int) blurred {
	b := blurred{v: p.at[figure], by: p.by[figure*w.params : (figure+1)*w.params]}
	for k, by := range b.by {
		b.blur += square(by) * p.stdU[k] * p.stdU[k]
	}
	size := square(b.v) + leak*leak
	b.share = b.blur / (b.blur + size)
	b.size = size + nilShare*b.blur*b.share
	return b
}

// addDB returns sign times 20 lg of a figure and adds its slopes.
func (w *scorer) addDB(b *blurred, sign float64, j []float64, row int) float64 {
	w.nilDB += sign * nilStdU * math.Sqrt(b.share*b.share*b.share)
	w.extra[row] += dbPerNeper * dbPerNeper * leakDoubt * leakDoubt * leak * leak / b.size
	f := sign * dbPerNeper / b.size
	for k, by := range b.by {
		if by != 0 {
			j[k] += f * (real(by)*real(b.v) + imag(by)*imag(b.v))
		}
	}
	return sign * dbPerNeper / 2 * math.Log(b.size)
}

// together is the coherence of what the doubts leave of two figures, 0 to 1, and their product.
func together(p *prediction, a, b *blurred) (coherence float64, product complex128) {
	if a.blur == 0 || b.blur == 0 {
		return 0, 0
	}
	for k := range a.by {
		u := p.stdU[k]
		product += a.by[k] * cmplx.Conj(b.by[k]) * complex(u*u, 0)
	}
	return math.Min(1, cmplx.Abs(product)/math.Sqrt(a.blur*b.blur)), product
}

// legsOver is hot over cold. Where both are nil but for the same doubts, their ratio is none the less
// known.
func (w *scorer) legsOver(p *prediction, legs int, j []float64, row int) float64 {
	hot, cold := &w.blurs[legs], &w.blurs[legs+1]
	coherence, _ := together(p, hot, cold)
	db := w.addDB(hot, 1, j, row)
	nilHot := w.nilDB
	db += w.addDB(cold, -1, j, row)
	w.extra[row] += 2 * (1 - coherence) * nilHot * (nilHot - w.nilDB)
	w.before(j)
	return db
}

// legsPhase is the phase of hot over that of cold, in degrees.
func (w *scorer) legsPhase(p *prediction, legs int, j []float64, row int) float64 {
	const degrees, anyPhase = 180 / math.Pi, 104 // standard deviation of a phase of which nothing is known
	hot, cold := &w.blurs[legs], &w.blurs[legs+1]
	coherence, product := together(p, hot, cold)
	unknown := 0.0
	for i, b := range []*blurred{hot, cold} {
		sign := float64(1 - 2*i)
		unknown += b.share * b.share * b.share * (1 - coherence)
		w.extra[row] += math.Min(anyPhase*anyPhase, degrees*degrees*leakDoubt*leakDoubt*leak*leak/b.size)
		f := sign * degrees / b.size
		for k, by := range b.by {
			if by != 0 {
				j[k] += f * (imag(by)*real(b.v) - real(by)*imag(b.v))
			}
		}
	}
	w.extra[row] += anyPhase * anyPhase * unknown
	turn := hot.v*cmplx.Conj(cold.v) + product*complex(hot.share*cold.share, 0)
	return degrees * cmplx.Phase(turn)
}

// before takes off what the ends do to legs straight through, where that was recorded.
func (w *scorer) before(j []float64) {
	for k, by := range w.straightLegs {
		j[w.parts+k] -= by
	}
}

func square(z complex128) float64 { return real(z)*real(z) + imag(z)*imag(z) }

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
