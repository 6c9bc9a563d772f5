package suspect

import "padproof/compare/network"

// neighbours are the next values of E24 below and above a value (IEC 60063:2015); one that lies within
// half a per cent of the value is the value itself. Of 0 and of what is not finite there are none.
func neighbours(value float64) (below, above float64, ok bool) {
	if !(value > 1e-300) || value > 1e300 {
		return 0, 0, false
	}
	const same = 0.005
	const reach = 1.5 // no two values of the series lie further apart
	for _, v := range network.E24.Values(value/reach, value*reach) {
		switch {
		case v < value*(1-same):
			below = v
		case v > value*(1+same):
			return below, v, true
		}
	}
	return 0, 0, false
}
