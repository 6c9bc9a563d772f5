package report

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"padproof/cmd/padproof/internal/result"
)

const dash = "-"

// decimals is how many places a figure with expanded uncertainty u deserves.
func decimals(u result.Number) int { return result.Places(u) }

// fixed prints a figure with the given places, a dash where there is none.
func fixed(n result.Number, places int) string { return n.Fixed(places, dash) }

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

// ohms prints a resistance to three digits.
func ohms(n result.Number) string { return n.Ohms(3) }

// metered prints a resistance as a meter of four digits shows it.
func metered(n result.Number) string { return n.Ohms(4) }

// significant prints three significant digits.
func significant(v float64) string { return toDigits(v, 3) }

// toDigits prints so many significant digits.
func toDigits(v float64, digits int) string { return result.Digits(v, digits) }

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
