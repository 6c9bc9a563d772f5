package result

import (
	"math"
	"strconv"
	"strings"
)

// Places is how many places a figure with expanded uncertainty u deserves: two
// significant digits of u, three places at most. With no uncertainty it is three.
func Places(u Number) int {
	const most = 3
	if !u.OK() || u <= 0 {
		return most
	}
	return max(0, min(most, 1-int(math.Floor(math.Log10(float64(u))))))
}

// Fixed is the figure with so many places, never "-0", and missing where there is
// no figure.
func (n Number) Fixed(places int, missing string) string {
	if !n.OK() {
		return missing
	}
	text := strconv.FormatFloat(float64(n), 'f', places, 64)
	if strings.Trim(text, "-0.") == "" {
		text = strings.TrimPrefix(text, "-")
	}
	return text
}

// Ohms is the figure as a resistance with up to so many significant digits, as the
// trade writes it: 4.7 Ω, 330 Ω, 10 kΩ; "open" where there is no figure.
func (n Number) Ohms(digits int) string {
	v := float64(n)
	just := 1 - 0.5*math.Pow(10, -float64(digits)) // rounds up to the next prefix
	switch {
	case !n.OK():
		return "open"
	case v >= just*1e6:
		return Digits(v/1e6, digits) + " MΩ"
	case v >= just*1e3:
		return Digits(v/1e3, digits) + " kΩ"
	}
	return Digits(v, digits) + " Ω"
}

// Digits writes so many significant digits, all that stand before the point, and
// no zeros at the end. What is no finite number is written as Go writes it.
func Digits(v float64, digits int) string {
	if v == 0 {
		return "0"
	}
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return strconv.FormatFloat(v, 'g', -1, 64)
	}
	places := max(0, digits-1-int(math.Floor(math.Log10(math.Abs(v)))))
	text := strconv.FormatFloat(v, 'f', places, 64)
	if strings.Contains(text, ".") {
		text = strings.TrimRight(strings.TrimRight(text, "0"), ".")
	}
	return text
}
