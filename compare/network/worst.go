package network

import (
	"math"
	"slices"
)

// maxCornerParts is the most parts for which every corner of the tolerances is tried:
// 4096 corners.
const maxCornerParts = 12

// WorstCase returns the lowest and the highest loss that parts within their tolerances
// can give.
//
// As one part goes from one end of its tolerance to the other, the loss rises or falls
// all the way or turns, twice at most, where [Bilinear] says. Up to 12
// parts with a tolerance, every corner is tried; beyond, the corner that the signs of
// the sensitivities point to. From the best corner each part in turn is moved to its
// extreme until none moves any more. All of it goes through the full model.
func (c *Circuit) WorstCase(e Ends, freqHz float64) (lowDB, highDB float64) {
	w := c.worst(e, freqHz)
	low, high := w.corners()
	return -w.settle(low, -1), w.settle(high, 1)
}

// A worst looks for extremes of the loss.
type worst struct {
	c        *Circuit
	e        Ends
	omega    float64
	straight complex128
	sens     []float64
	moving   []int // parts that have a tolerance and matter
}

func (c *Circuit) worst(e Ends, freqHz float64) worst {
	w := worst{c: c, e: e.bounded(), omega: angular(freqHz), sens: c.Sensitivities(e, freqHz)}
	w.straight = c.loadVolts(nil, w.e, w.omega)
	for i, p := range c.parts {
		if low, high := p.limits(); low < high {
			w.moving = append(w.moving, i)
		}
	}
	return w
}

// limits returns the least and the most value of the part's tolerance.
func (p Part) limits() (low, high float64) {
	if p.Value == 0 || math.IsInf(p.Value, 1) {
		return p.Value, p.Value
	}
	return p.Value * (1 - p.TolFrac), p.Value * (1 + p.TolFrac)
}

func (w worst) loss(values []float64) float64 {
	return lossOf(w.c.loadVolts(values, w.e, w.omega) / w.straight)
}

// corners returns the values that give the lowest and the highest loss among the
// corners.
func (w worst) corners() (low, high []float64) {
	values := slices.Clone(w.c.values)
	if len(w.moving) > maxCornerParts {
		return w.pointed(-1), w.pointed(1)
	}
	low, high = slices.Clone(values), slices.Clone(values)
	lowDB, highDB := w.loss(values), w.loss(values)
	for corner := range 1 << len(w.moving) {
		for bit, i := range w.moving {
			least, most := w.c.parts[i].limits()
			values[i] = least
			if corner>>bit&1 == 1 {
				values[i] = most
			}
		}
		lossDB := w.loss(values)
		if lossDB < lowDB {
			lowDB, low = lossDB, append(low[:0], values...)
		}
		if lossDB > highDB {
			highDB, high = lossDB, append(high[:0], values...)
		}
	}
	return low, high
}

// pointed returns the corner to which the sensitivities point: up for sign 1.
func (w worst) pointed(sign float64) []float64 {
	values := slices.Clone(w.c.values)
	for _, i := range w.moving {
		low, high := w.c.parts[i].limits()
		values[i] = low
		if sign*w.sens[i] > 0 {
			values[i] = high
		}
	}
	return values
}

// settle moves one part after another until the loss times sign rises no more, and
// returns it.
func (w worst) settle(values []float64, sign float64) float64 {
	best := sign * w.loss(values)
	for range 20 {
		before := best
		for _, i := range w.moving {
			at := values[i]
			for _, x := range w.candidates(values, i) {
				values[i] = x
				if l := sign * w.loss(values); l > best {
					best, at = l, x
				}
			}
			values[i] = at
		}
		if !(best > before+1e-12) {
			break
		}
	}
	return best
}

// candidates returns where an extreme of the loss may lie along one part: the ends of
// its tolerance and the turning points between them.
func (w worst) candidates(values []float64, i int) []float64 {
	low, high := w.c.parts[i].limits()
	xs := []float64{low, high}
	for _, x := range w.c.dependence(values, i, w.e, w.omega).turns() {
		if x > low && x < high {
			xs = append(xs, x)
		}
	}
	return xs
}

// turns returns the values at which the size of the transfer is least or greatest.
func (b Bilinear) turns() []float64 {
	// |T|² = (n2·x² + 2·n1·x + n0) / (x² + 2·d1·x + d0); the derivative is a quadratic.
	top := b.AtZero * b.Knee
	n2, n1, n0 := square(b.AtInf), real(top)*real(b.AtInf)+imag(top)*imag(b.AtInf), square(top)
	d1, d0 := real(b.Knee), square(b.Knee)
	return roots(n2*d1-n1, (n2*d0-n0)/2, n1*d0-n0*d1)
}
