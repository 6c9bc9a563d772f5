package report

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"padproof/cmd/padproof/internal/result"
)

const dash = "-"

// decimals is how many places a figure with expanded uncertainty u deserves:
// two significant digits of u, three places at most for decibels.
func decimals(u result.Number) int {
	if !u.OK() || u <= 0 {
		return 3
	}
	places := 1 - int(math.Floor(math.Log10(float64(u))))
	return max(0, min(3, places))
}

// fixed prints a figure with the given places, a dash where there is none.
func fixed(n result.Number, places int) string {
	if !n.OK() {
		return dash
	}
	text := strconv.FormatFloat(float64(n), 'f', places, 64)
	if strings.Trim(text, "-0.") == "" {
		text = strings.TrimPrefix(text, "-")
	}
	return text
}

// doubt prints an uncertainty; one that is there never looks like none.
func doubt(u result.Number, places int) string {
	text := fixed(u, places)
	if u > 0 && strings.Trim(text, "0.") == "" {
		return "<" + strconv.FormatFloat(math.Pow(10, -float64(places)), 'f', places, 64)
	}
	return text
}

// limits prints the ends of a limit that are there.
func limits(c result.Check, places int) string {
	if c.Unit != "" {
		places = max(places, 2)
	}
	switch {
	case c.Low.OK() && c.Low == c.High:
		return fixed(c.Low, places)
	case c.Low.OK() && c.High.OK():
		return fixed(c.Low, places) + " to " + fixed(c.High, places)
	case c.Low.OK():
		return "from " + fixed(c.Low, places)
	case c.High.OK():
		return "up to " + fixed(c.High, places)
	}
	return dash
}

// ohms prints a resistance as the trade writes it: 4.7 Ω, 330 Ω, 10 kΩ.
func ohms(n result.Number) string { return ohmsTo(n, 3) }

// metered prints a resistance as a meter of four digits shows it.
func metered(n result.Number) string { return ohmsTo(n, 4) }

func ohmsTo(n result.Number, digits int) string {
	v := float64(n)
	just := 1 - 0.5*math.Pow(10, -float64(digits)) // rounds up to the next prefix
	switch {
	case math.IsNaN(v) || math.IsInf(v, 0):
		return "open"
	case v >= just*1e6:
		return toDigits(v/1e6, digits) + " MΩ"
	case v >= just*1e3:
		return toDigits(v/1e3, digits) + " kΩ"
	}
	return toDigits(v, digits) + " Ω"
}

// significant prints three significant digits.
func significant(v float64) string { return toDigits(v, 3) }

// toDigits prints so many significant digits, all that stand before the point,
// and no zeros at the end.
func toDigits(v float64, digits int) string {
	if v == 0 {
		return "0"
	}
	places := max(0, digits-1-int(math.Floor(math.Log10(math.Abs(v)))))
	text := strconv.FormatFloat(v, 'f', places, 64)
	if strings.Contains(text, ".") {
		text = strings.TrimRight(strings.TrimRight(text, "0"), ".")
	}
	return text
}

// scaled prints a value with the SI prefix that suits it.
func scaled(n result.Number, unit string) string {
	if !n.OK() {
		return dash
	}
	v := float64(n)
	prefixes := []struct {
		scale float64
		name  string
	}{{1e6, "M"}, {1e3, "k"}, {1, ""}, {1e-3, "m"}, {1e-6, "µ"}, {1e-9, "n"}, {1e-12, "p"}}
	if v == 0 {
		return "0 " + unit
	}
	for _, p := range prefixes {
		if math.Abs(v) >= p.scale*0.9995 {
			return significant(v/p.scale) + " " + p.name + unit
		}
	}
	return significant(v/1e-12) + " p" + unit
}

// value prints a part's value with its unit.
func value(p result.PartLine) string {
	switch p.Kind {
	case "capacitor":
		return scaled(p.Value, "F")
	case "inductor":
		return scaled(p.Value, "H")
	}
	return ohms(p.Value)
}

// hertz prints a frequency with the given places.
func hertz(n result.Number, places int) string {
	if !n.OK() {
		return dash
	}
	return fixed(n, places) + " Hz"
}

// ends names the two impedances of a condition.
func ends(e result.Ends) string {
	text := fmt.Sprintf("%s source, %s; %s load, %s", ohms(e.SourceOhms), e.Drive, ohms(e.LoadOhms), e.Sense)
	if e.CablePF.OK() && e.CablePF > 0 {
		text += ", " + fixed(e.CablePF, 0) + " pF"
	}
	return text
}
