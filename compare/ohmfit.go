package compare

import (
	"math"

	"padproof/compare/network"
)

// A values is a range of values of one part, both ends counted.
type values struct {
	low, high float64 // low above high: none
}

func (v values) holds(x float64) bool { return v.low <= x && x <= v.high }

// readAllows is the range of values of one resistor, moved alone, that the
// ohmmeter readings leave open: every other part may lie where it will within its
// tolerance, and the meter may be off by what it states. As a reading never falls
// when a resistor rises, there is one such range. Of other kinds of part it is
// everything: see [LossCase.readAllowsAt].
func (k LossCase) readAllows(part network.Part) values {
	v := values{0, math.Inf(1)}
	if part.Kind != network.Resistor {
		return v
	}
	least, most := k.Circuit.OhmExtremes()
	for _, s := range k.Ohms {
		r := s.Reading()
		tooLow := func(x float64) bool {
			_, high := s.shown(0, r.On(most.With(part.Ref, x)))
			return s.Ohms > high
		}
		tooHigh := func(x float64) bool {
			low, _ := s.shown(r.On(least.With(part.Ref, x)), math.Inf(1))
			return s.Ohms < low
		}
		v.low, v.high = math.Max(v.low, firstNot(tooLow)), math.Min(v.high, lastNot(tooHigh))
	}
	return v
}

// The values between which an end of a range is sought: beyond lie 0 and open.
const leastOhms, mostOhms = 1e-6, 1e12

// firstNot is the least value that is not too low: +Inf where only an open part
// is not, NaN, so that the range holds nothing, where even that is.
func firstNot(tooLow func(ohms float64) bool) float64 {
	switch {
	case !tooLow(0):
		return 0
	case tooLow(math.Inf(1)):
		return math.NaN()
	case tooLow(mostOhms):
		return math.Inf(1)
	}
	_, high := halve(leastOhms, mostOhms, tooLow)
	return high
}

// lastNot is the greatest value that is not too high, or NaN.
func lastNot(tooHigh func(ohms float64) bool) float64 {
	switch {
	case !tooHigh(math.Inf(1)):
		return math.Inf(1)
	case tooHigh(0):
		return math.NaN()
	case tooHigh(leastOhms):
		return 0
	}
	low, _ := halve(leastOhms, mostOhms, func(x float64) bool { return !tooHigh(x) })
	return low
}

// halve finds where a condition that holds from low on ends, on a scale of ratios.
func halve(low, high float64, holds func(float64) bool) (last, first float64) {
	for range 60 { // to a part in 10^16 of 18 decades
		mid := math.Sqrt(low * high)
		if holds(mid) {
			low = mid
		} else {
			high = mid
		}
	}
	return low, high
}

// readAllowsAt reports whether the readings allow a part at a value.
func (k LossCase) readAllowsAt(part network.Part, value float64) bool {
	if part.Kind == network.Resistor {
		return true // as the range says
	}
	return allFit(k.Circuit.With(part.Ref, value), k.Ohms)
}
