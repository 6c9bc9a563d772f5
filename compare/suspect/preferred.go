package suspect

import (
	"math"
	"strconv"
)

// e24 are the preferred values of one decade, 24 of them (IEC 60063:2015).
var e24 = [...]float64{
	1.0, 1.1, 1.2, 1.3, 1.5, 1.6, 1.8, 2.0, 2.2, 2.4, 2.7, 3.0,
	3.3, 3.6, 3.9, 4.3, 4.7, 5.1, 5.6, 6.2, 6.8, 7.5, 8.2, 9.1,
}

// neighbours are the next values of E24 below and above a value; one that lies within half a per cent of
// the value is the value itself. Of 0 and of what is not finite there are none.
func neighbours(value float64) (below, above float64, ok bool) {
	if !(value > 1e-300) || value > 1e300 {
		return 0, 0, false
	}
	const same = 0.005
	decade := int(math.Floor(math.Log10(value)))
	for d := decade - 1; d <= decade+1; d++ {
		for _, digits := range e24 {
			v := preferred(digits, d)
			switch {
			case v < value*(1-same):
				below = v
			case v > value*(1+same):
				return below, v, true
			}
		}
	}
	return 0, 0, false
}

// preferred is the number nearest to what the decimal digits say, as a sheet would give it.
func preferred(digits float64, decade int) float64 {
	v, _ := strconv.ParseFloat(strconv.FormatFloat(digits, 'f', 1, 64)+"e"+strconv.Itoa(decade), 64)
	return v
}
