package network

import (
	"fmt"
	"math"
	"regexp"
	"slices"
	"strconv"
	"strings"
)

// A prefix is a letter of a value's code and its power of ten.
type prefix struct {
	letter string
	power  int
}

// valuePrefixes are those of each kind, smallest first (IEC 60062).
var valuePrefixes = map[Kind][]prefix{
	Resistor:  {{"R", 0}, {"k", 3}, {"M", 6}, {"G", 9}},
	Capacitor: {{"p", -12}, {"n", -9}, {"u", -6}, {"m", -3}},
	Inductor:  {{"n", -9}, {"u", -6}, {"m", -3}},
}

var (
	valueForm    = regexp.MustCompile(`^(\d*)(\.\d+)?\s*([pnumRkMG]?)(\d*)\s*(Ω|ohms?|F|H)?$`)
	valueUnits   = map[Kind]string{Resistor: "Ω", Capacitor: "F", Inductor: "H"}
	valueExample = map[Kind]string{Resistor: "360, 4R7 or 1k5", Capacitor: "220p, 2n2 or 4u7", Inductor: "10m, 4m7 or 100u"}
	sameLetters  = strings.NewReplacer("µ", "u", "μ", "u", "K", "k", "r", "R", "\u2126", "Ω")
)

// parseValue reads a value of a part of the kind. Capacitors and inductors need their
// prefix or unit.
func parseValue(ref string, kind Kind, text string) (float64, error) {
	bad := &Error{Ref: ref, Text: fmt.Sprintf("%q is no value of a %s", text, kind), Hint: "write it like " + valueExample[kind]}
	m := valueForm.FindStringSubmatch(sameLetters.Replace(text))
	if m == nil || m[1]+m[2]+m[4] == "" || (m[4] != "" && (m[2] != "" || m[3] == "")) {
		return 0, bad
	}
	unit := strings.Replace(strings.TrimSuffix(m[5], "s"), "ohm", "Ω", 1)
	if (unit != "" && unit != valueUnits[kind]) || (kind != Resistor && m[3] == "" && unit == "") {
		return 0, bad
	}
	power := 0
	if m[3] != "" {
		i := slices.IndexFunc(valuePrefixes[kind], func(p prefix) bool { return p.letter == m[3] })
		if i < 0 {
			return 0, bad
		}
		power = valuePrefixes[kind][i].power
	}
	decimals := strings.TrimPrefix(m[2], ".") + m[4]
	value, err := strconv.ParseFloat(fmt.Sprintf("0%s.%se%d", m[1], decimals, power), 64)
	if err != nil || (value == 0 && kind == Capacitor) {
		return 0, bad
	}
	return value, nil
}

// valueCode writes a value as its code, the letter in place of the decimal point.
func valueCode(kind Kind, value float64) string {
	prefixes := valuePrefixes[kind]
	best := prefixes[0]
	for _, p := range prefixes {
		if value >= math.Pow10(p.power) {
			best = p
		}
	}
	digits := decimal(value, -best.power)
	switch {
	case strings.Contains(digits, "."):
		return strings.Replace(digits, ".", best.letter, 1)
	case best.power == 0:
		return digits
	}
	return digits + best.letter
}

// decimal writes x times a power of ten with the fewest digits that give x again.
func decimal(x float64, power int) string {
	mantissa, exponent, _ := strings.Cut(strconv.FormatFloat(x, 'e', -1, 64), "e")
	e, _ := strconv.Atoi(exponent)
	shifted, _ := strconv.ParseFloat(fmt.Sprintf("%se%d", mantissa, e+power), 64)
	return strconv.FormatFloat(shifted, 'f', -1, 64)
}
