package sheet

import (
	"regexp"
	"strings"
)

var (
	faradCode    = regexp.MustCompile(`^(\d*)([pnuµμm])(\d+)([JKM]?)\s*F?$`)
	faradDecimal = regexp.MustCompile(`^(\d+(?:\.\d+)?|\.\d+)\s*([pnuµμm])([JKM]?)\s*F?$`)
	henryCode    = regexp.MustCompile(`^(\d*)([nuµμm])(\d+)([JKM]?)\s*H?$`)
	henryDecimal = regexp.MustCompile(`^(\d+(?:\.\d+)?|\.\d+)\s*([nuµμm])([JKM]?)\s*H?$`)
	henryWhole   = regexp.MustCompile(`^(\d+(?:\.\d+)?|\.\d+)\s*H$`)
)

// ParseFarads reads a capacitor's value: "220p", "2n2", "4u7", "1µ", "0.1 µF".
// The prefix (p, n, u or µ, m, in small letters) cannot be left out, since a
// bare number means picofarads to some and microfarads to others. The tolerance
// letters J, K and M may follow (5, 10, 20 %, IEC 60062); the others mean
// picofarads on small capacitors and are refused. F is always the farad. What
// is not within 1 fF to 100 mF is refused, 0 too: it would be an open circuit.
func ParseFarads(text string) (Amount, error) {
	return prefixed(text, Capacitor, faradCode, faradDecimal)
}

// ParseHenries reads an inductor's value: "10m", "4m7", "100u", "1.5 mH", "1H".
// The prefix (n, u or µ, m, in small letters) or the unit must be there. The
// tolerance letters J, K and M may follow (5, 10, 20 %). 0 is a link; what is
// neither 0 nor within 1 nH to 10 kH is refused.
func ParseHenries(text string) (Amount, error) {
	s := strings.TrimSpace(text)
	if s == "0" {
		return Amount{}, nil
	}
	if m := henryWhole.FindStringSubmatch(s); m != nil {
		return amount(text, m[1], "", "", Inductor)
	}
	return prefixed(text, Inductor, henryCode, henryDecimal)
}

// prefixed reads a value whose prefix stands for the decimal point or behind the
// number.
func prefixed(text string, kind Kind, code, decimal *regexp.Regexp) (Amount, error) {
	s := strings.TrimSpace(text)
	if m := code.FindStringSubmatch(s); m != nil {
		return amount(text, m[1]+"."+m[3], m[2], m[4], kind)
	}
	if m := decimal.FindStringSubmatch(s); m != nil {
		return amount(text, m[1], m[2], m[3], kind)
	}
	return Amount{}, noValue(text, kind)
}
