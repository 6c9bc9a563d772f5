package analysis

import (
	"fmt"
	"math"
	"math/cmplx"

	"gonum.org/v1/gonum/mat"
)

const (
	// A block lasts two hops: 100 ms, one every 50 ms.
	hopSec = 0.05

	// The phasor table is this long, to stay in the first cache; a hop turns it on from piece to
	// piece.
	phasorPiece = 512
)

func hopSamples(rateHz float64) int { return int(math.Round(hopSec * rateHz)) }

type phasor struct{ cos, sin float64 }

// A blockFit is the three-parameter sine fit of IEEE Std 1057 at one frequency, on blocks of two
// hops, weighted by a Hann window: weighted least squares on 1, cos, sin. The weights keep what
// lies 20 Hz and more away (DC, hum, other lines, noise in between) from leaking in, and bias
// nothing. Each block's phase starts at its own first sample, so one inverse serves all.
type blockFit struct {
	freqHz, rateHz float64
	rise           []float64    // first half of the window; the second is what it lacks to 1
	piece          []phasor     // cos, sin of the first samples
	turns          []complex128 // exp(-jωn) at the start of each piece
	turnHop        complex128   // exp(-jω hop)
	block, hop     [3][3]float64
}

// hopSums are the sums over one hop that everything else is made of.
type hopSums struct {
	x, square float64    // Σx, Σx²
	low, high float64    // least and largest x
	weighted  float64    // Σwx, w the rising half of the window
	line      complex128 // Σx exp(-jωn)
	wLine     complex128 // Σwx exp(-jωn)
}

func newBlockFit(rateHz, freqHz float64) (*blockFit, error) {
	hop := hopSamples(rateHz)
	omega := 2 * math.Pi * freqHz / rateHz
	f := &blockFit{freqHz: freqHz, rateHz: rateHz, rise: make([]float64, hop), piece: make([]phasor, phasorPiece)}
	for i := range f.rise {
		f.rise[i] = 0.5 - 0.5*math.Cos(math.Pi*float64(i)/float64(hop))
	}
	for i := range f.piece {
		f.piece[i].sin, f.piece[i].cos = math.Sincos(omega * float64(i))
	}
	for at := 0; at < hop; at += phasorPiece {
		f.turns = append(f.turns, cmplx.Rect(1, -omega*float64(at)))
	}
	f.turnHop = cmplx.Rect(1, -omega*float64(hop))
	if err := f.invert(); err != nil {
		return nil, fmt.Errorf("no fit at %g Hz: %w", freqHz, err)
	}
	return f, nil
}

// invert makes the two inverses: a column of a fit's matrix is what its sums are for a block that
// holds just one of 1, cos, sin.
func (f *blockFit) invert() error {
	hop := len(f.rise)
	columns := [3][]float64{make([]float64, 2*hop), make([]float64, 2*hop), make([]float64, 2*hop)}
	for n := range 2 * hop {
		columns[0][n] = 1
		columns[2][n], columns[1][n] = math.Sincos(2 * math.Pi * turns(f.freqHz, n, f.rateHz))
	}
	block, one := mat.NewDense(3, 3, nil), mat.NewDense(3, 3, nil)
	for c, x := range columns {
		first, second := f.sums(x[:hop]), f.sums(x[hop:])
		for r, v := range f.join(first, second) {
			block.Set(r, c, v)
		}
		for r, v := range [3]float64{first.x, real(first.line), -imag(first.line)} {
			one.Set(r, c, v)
		}
	}
	for _, m := range []struct {
		from *mat.Dense
		to   *[3][3]float64
	}{{block, &f.block}, {one, &f.hop}} {
		var inverse mat.Dense
		if err := inverse.Inverse(m.from); err != nil {
			return err
		}
		for r := range 3 {
			copy(m.to[r][:], inverse.RawRowView(r))
		}
	}
	return nil
}

// sums goes once through a hop.
func (f *blockFit) sums(x []float64) hopSums {
	s := hopSums{low: math.Inf(1), high: math.Inf(-1)}
	for k, turn := range f.turns {
		from := k * phasorPiece
		to := min(from+phasorPiece, len(x))
		p := sumPiece(x[from:to], f.rise[from:to], f.piece)
		s.x += p.x
		s.square += p.square
		s.low, s.high = math.Min(s.low, p.low), math.Max(s.high, p.high)
		s.weighted += p.weighted
		s.line += p.line * turn
		s.wLine += p.wLine * turn
	}
	return s
}

func sumPiece(x, rise []float64, piece []phasor) hopSums {
	rise, piece = rise[:len(x)], piece[:len(x)]
	var sx, sxx, swx, c, s, wc, ws float64
	for i, v := range x {
		p := &piece[i]
		w := v * rise[i]
		sx += v
		sxx += v * v
		swx += w
		c += v * p.cos
		s += v * p.sin
		wc += w * p.cos
		ws += w * p.sin
	}
	low, high := extremes(x)
	return hopSums{sx, sxx, low, high, swx, complex(c, -s), complex(wc, -ws)}
}

func extremes(x []float64) (low, high float64) {
	low, high = math.Inf(1), math.Inf(-1)
	for _, v := range x {
		if v < low {
			low = v
		}
		if v > high {
			high = v
		}
	}
	return low, high
}

// join returns the block's weighted sums against 1, cos, sin from those of its two hops.
func (f *blockFit) join(a, b hopSums) [3]float64 {
	line := a.wLine + (b.line-b.wLine)*f.turnHop
	return [3]float64{a.weighted + b.x - b.weighted, real(line), -imag(line)}
}

// estimate returns the sine in the block of two hops as a complex amplitude at the block's middle:
// there the signal is the real part of it.
func (f *blockFit) estimate(a, b hopSums) complex128 {
	p := apply(&f.block, f.join(a, b))
	return complex(p[1], -p[2]) * cmplx.Conj(f.turnHop)
}

// leftover returns the mean square of what an unweighted fit of 1, cos, sin leaves of one hop.
func (f *blockFit) leftover(s hopSums) float64 {
	r := [3]float64{s.x, real(s.line), -imag(s.line)}
	p := apply(&f.hop, r)
	left := s.square - r[0]*p[0] - r[1]*p[1] - r[2]*p[2]
	return math.Max(0, left) / float64(len(f.rise)-3)
}

func apply(m *[3][3]float64, v [3]float64) (p [3]float64) {
	for r := range p {
		p[r] = m[r][0]*v[0] + m[r][1]*v[1] + m[r][2]*v[2]
	}
	return p
}

// hannFall returns how far the estimate of a block falls, as a factor, when the tone is offHz away
// from the frequency that is fitted.
func hannFall(offHz, blockSec float64) float64 {
	d := offHz * blockSec
	if math.Abs(d) < 1e-6 {
		return 1
	}
	return math.Sin(math.Pi*d) / (math.Pi * d * (1 - d*d))
}
