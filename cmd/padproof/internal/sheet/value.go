package sheet

import (
	"fmt"
	"regexp"
	"strconv"
	"strings"
)

// Amount is a part's value as its code gives it.
type Amount struct {
	Value   float64 // ohms, farads or henries
	TolFrac float64 // from a tolerance letter, else 0
	HasTol  bool    // a tolerance letter was there
}

// toleranceLetters are the tolerances of IEC 60062, as fractions (F and K
// confirmed in stored copies of tables, the others from memory).
var toleranceLetters = map[string]float64{
	"L": 0.0001, "P": 0.0002, "W": 0.0005, "B": 0.001, "C": 0.0025, "D": 0.005,
	"F": 0.01, "G": 0.02, "J": 0.05, "K": 0.10, "M": 0.20, "N": 0.30,
}

// exponents are the powers of ten of the letters that stand for the decimal
// point (IEC 60062) or before the unit.
var exponents = map[string]string{
	"": "", "R": "", "r": "", "L": "e-3", "k": "e3", "K": "e3", "M": "e6", "G": "e9",
	"p": "e-12", "n": "e-9", "u": "e-6", "µ": "e-6", "μ": "e-6", "m": "e-3",
}

var (
	ohmUnit    = regexp.MustCompile(`(?i)\s*(?:Ω|Ω|ohms?)$`)
	ohmCode    = regexp.MustCompile(`^(\d*)([LRrKkMG])(\d*)([A-Z]?)$`)
	ohmDecimal = regexp.MustCompile(`^(\d+(?:\.\d+)?|\.\d+)\s*([RrkKMG]?)$`)
	ohmMilli   = regexp.MustCompile(`^(\d+(?:\.\d+)?|\.\d+)\s*(m)$`)
	ohmSmallM  = regexp.MustCompile(`^(?:\d+m\d*|m\d+)[A-Z]?$`)
)

// ParseOhms reads a resistor's value: a code of IEC 60062 ("4R7", "1k5", "R47",
// "470R"), with a tolerance letter after it where the maker printed one ("4R7K"
// is 4.7 Ω, 10 %); or a decimal number, with a prefix
// or not ("560", "4.7k", "0.5"); either with the unit behind it ("560 Ω",
// "560 ohm"). A number by itself is always ohms: "680" is no three-digit code.
//
// The letters that stand for the decimal point are R, k or K, M and G for one
// ohm, a thousand, a million and a thousand million, and L for a thousandth:
// "L10" is 0.10 mΩ. A small r or k is the same as a large one; a
// small m is not: "4m7" is refused, since some mean 4.7 MΩ by it and some
// 4.7 mΩ, while "4.7 mΩ" with the unit is plainly milli.
//
// 0 is a link. What is neither 0 nor within 1 µΩ to 1 TΩ is refused, as is all
// else, with an [*Error] that has text and hint but no file.
func ParseOhms(text string) (Amount, error) {
	s := strings.TrimSpace(text)
	bare := ohmUnit.ReplaceAllString(s, "")
	if m := ohmMilli.FindStringSubmatch(bare); m != nil && bare != s {
		return amount(text, m[1], "m", "", Resistor)
	}
	if ohmSmallM.MatchString(bare) || ohmMilli.MatchString(bare) {
		return Amount{}, &Error{Text: quoted(text) + " is unclear: a small m is milli to some and mega to others",
			Hint: "write a large M for megohms (4M7), or milliohms with the unit (4.7 mΩ)"}
	}
	if m := ohmCode.FindStringSubmatch(bare); m != nil {
		return amount(text, m[1]+"."+m[3], m[2], m[4], Resistor)
	}
	if m := ohmDecimal.FindStringSubmatch(bare); m != nil {
		return amount(text, m[1], m[2], "", Resistor)
	}
	return Amount{}, noValue(text, Resistor)
}

// amount turns digits with a decimal point, a letter and a tolerance letter into
// numbers, and checks the range of the kind.
func amount(text, digits, letter, tolerance string, kind Kind) (Amount, error) {
	value, err := strconv.ParseFloat(strings.TrimSuffix(digits, ".")+exponents[letter], 64)
	if err != nil {
		return Amount{}, noValue(text, kind)
	}
	tol, known := toleranceLetters[tolerance]
	if tolerance != "" && !known {
		return Amount{}, noValue(text, kind)
	}
	if err := inRange(quoted(text), value, kind); err != nil {
		return Amount{}, err
	}
	return Amount{Value: value, TolFrac: tol, HasTol: known}, nil
}

// ranges are the values that a part can have, in ohms, farads and henries. They
// are wide: they catch a slip of the prefix, not a rare part.
var ranges = map[Kind]struct {
	from, to float64
	words    string
}{
	Resistor:  {1e-6, 1e12, "1 µΩ to 1 TΩ, or 0 for a link"},
	Capacitor: {1e-15, 0.1, "1 fF to 100 mF"},
	Inductor:  {1e-9, 1e4, "1 nH to 10 kH, or 0 for a link"},
}

// inRange returns an error for a value that no part of the kind has.
func inRange(text string, value float64, kind Kind) error {
	r := ranges[kind]
	if value >= r.from && value <= r.to || (value == 0 && kind != Capacitor) {
		return nil
	}
	if value == 0 {
		return &Error{Text: text + " is no capacitor: one of 0 F is an open circuit",
			Hint: "leave the part out; for a link write a resistor of 0"}
	}
	return &Error{Text: fmt.Sprintf("%s is beyond any %s", text, kind.word()),
		Hint: "is the prefix right? it can be " + r.words}
}

// examples of values, for the hint of an error.
var examples = map[Kind]string{
	Resistor:  "write ohms, or an IEC 60062 code such as 330, 1k5, 4R7",
	Capacitor: "write it with its prefix, such as 220p, 2n2, 4u7",
	Inductor:  "write it with its prefix, such as 10m, 4m7, 100u",
}

// noValue is the error for a text that cannot be read as a value.
func noValue(text string, kind Kind) error {
	hint := examples[kind]
	switch {
	case strings.HasPrefix(strings.TrimSpace(text), "-"):
		hint = "a part's value is not negative; " + hint
	case strings.Contains(text, ","):
		hint = "a decimal has a point, not a comma; " + hint
	}
	return &Error{Text: fmt.Sprintf("%s is no %s value", quoted(text), kind.word()), Hint: hint}
}
