package network

import "math"

// e24 are the preferred values of the series E24 within a decade (IEC 60063). They do not all follow
// the geometric formula of the finer series.
var e24 = []float64{
	1.0, 1.1, 1.2, 1.3, 1.5, 1.6, 1.8, 2.0, 2.2, 2.4, 2.7, 3.0,
	3.3, 3.6, 3.9, 4.3, 4.7, 5.1, 5.6, 6.2, 6.8, 7.5, 8.2, 9.1,
}

// A Series is a list of preferred values, the same in every decade (IEC 60063).
type Series string

// The series that resistors are commonly kept in.
const (
	E24 Series = "E24"
	E96 Series = "E96"
)

// Values returns the preferred values from low to high, both counted, rising; none where there are
// none, or where low is not above 0 or high is not finite. Those of E96 are 10^(i/96) rounded to
// three digits, which is exact for that series.
func (s Series) Values(low, high float64) []float64 {
	if !(low > 0) || math.IsInf(high, 0) || math.IsNaN(high) {
		return nil
	}
	var values []float64
	for decade := math.Floor(math.Log10(low)); decade <= math.Log10(high); decade++ {
		for _, hundreds := range s.hundreds() {
			// From whole numbers, so that 4.7 kΩ is 4700 and nothing beside it.
			v := hundreds * math.Pow(10, decade-2)
			if decade < 2 {
				v = hundreds / math.Pow(10, 2-decade)
			}
			if v >= low && v <= high {
				values = append(values, v)
			}
		}
	}
	return values
}

// hundreds are the values from 100 to 1000.
func (s Series) hundreds() []float64 {
	var values []float64
	if s == E24 {
		for _, v := range e24 {
			values = append(values, math.Round(100*v))
		}
		return values
	}
	for i := range 96 {
		values = append(values, math.Round(100*math.Pow(10, float64(i)/96)))
	}
	return values
}
