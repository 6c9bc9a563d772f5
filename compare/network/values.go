package network

import (
	"math"
	"math/cmplx"
	"slices"
)

// Interval is the values of a part from Low to High, both counted. High may be +Inf.
type Interval struct {
	Low, High float64
}

// ValuesForLoss returns all values from 0 to +Inf of one part for which
// lowDB ≤ LossDB ≤ highDB, everything else as it is: sorted intervals that do not
// touch, none if no value will do, all of [0, +Inf] if the part has no effect and the
// loss is in the range. It answers which value of this part alone would explain a
// reading. The limits may be infinite; if either is NaN the answer is none. An end of 0
// or +Inf means link or open (see [Circuit.With]).
//
// The loss is that of [Bilinear], so each limit gives a quadratic in the value.
func (c *Circuit) ValuesForLoss(e Ends, freqHz float64, ref string, lowDB, highDB float64) []Interval {
	b := c.Dependence(e, freqHz, ref)
	fits := func(x float64) bool {
		loss := lossOf(b.At(x))
		return loss >= lowDB && loss <= highDB
	}
	zero, inf := fits(0), fits(math.Inf(1))
	if b.AtZero == b.AtInf {
		if zero {
			return []Interval{{0, math.Inf(1)}}
		}
		return nil
	}
	low, high := finiteRange(c.parts[c.index(ref)].Kind, angular(freqHz))
	switch knee := cmplx.Abs(b.Knee); {
	case knee == 0:
		return pieces([]float64{0, low, math.Inf(1)}, []bool{zero && inf, inf}, zero, inf)
	case math.IsInf(knee, 1):
		return pieces([]float64{0, high, math.Inf(1)}, []bool{zero, zero && inf}, zero, inf)
	}
	cuts := append(b.crossings(lowDB), b.crossings(highDB)...)
	slices.Sort(cuts)
	cuts = append(append([]float64{0}, slices.Compact(cuts)...), math.Inf(1))
	within := make([]bool, len(cuts)-1)
	for i := range within {
		within[i] = fits(middle(cuts[i], cuts[i+1], cmplx.Abs(b.Knee)))
	}
	return pieces(cuts, within, zero, inf)
}

// crossings returns the positive finite values at which the loss is lossDB.
func (b Bilinear) crossings(lossDB float64) []float64 {
	size := sizeOf(lossDB)
	if size == 0 || math.IsInf(size, 1) || math.IsNaN(size) {
		return nil
	}
	knee := cmplx.Abs(b.Knee)
	turn := b.Knee / complex(knee, 0)
	// In t = x/|Knee|: |AtZero·turn + AtInf·t|² = size²·|turn + t|²
	zero, inf := b.AtZero*turn/complex(size, 0), b.AtInf/complex(size, 0)
	a := (cmplx.Abs(inf) - 1) * (cmplx.Abs(inf) + 1)
	half := real(zero*cmplx.Conj(inf)) - real(turn)
	c := (cmplx.Abs(zero) - 1) * (cmplx.Abs(zero) + 1)
	var xs []float64
	for _, t := range roots(a, half, c) {
		if x := t * knee; x > 0 && !math.IsInf(x, 1) {
			xs = append(xs, x)
		}
	}
	return xs
}

// roots returns the real roots of a·t² + 2·half·t + c = 0.
func roots(a, half, c float64) []float64 {
	d := half*half - a*c
	if d < 0 {
		return nil
	}
	q := -(half + math.Copysign(math.Sqrt(d), half))
	var ts []float64
	if a != 0 {
		ts = append(ts, q/a)
	}
	if q != 0 {
		ts = append(ts, c/q)
	}
	return ts
}

// middle returns a value between two cuts, of which the first may be 0 and the last
// +Inf.
func middle(low, high, knee float64) float64 {
	switch {
	case low == 0 && math.IsInf(high, 1):
		return knee
	case low == 0:
		return high / 2
	case math.IsInf(high, 1):
		return low * 2
	}
	return math.Sqrt(low) * math.Sqrt(high)
}

// pieces joins the gaps between cuts that are within to intervals, and adds 0 and +Inf
// by themselves where those fit but the gap beside them does not.
func pieces(cuts []float64, within []bool, zero, inf bool) []Interval {
	var found []Interval
	if zero && !within[0] {
		found = append(found, Interval{0, 0})
	}
	for i, in := range within {
		if !in {
			continue
		}
		if n := len(found); n > 0 && found[n-1].High == cuts[i] {
			found[n-1].High = cuts[i+1]
			continue
		}
		found = append(found, Interval{cuts[i], cuts[i+1]})
	}
	if inf && !within[len(within)-1] {
		found = append(found, Interval{math.Inf(1), math.Inf(1)})
	}
	return found
}
