package suspect

import (
	"math"
	"math/cmplx"
)

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

func square(z complex128) float64 { return real(z)*real(z) + imag(z)*imag(z) }
