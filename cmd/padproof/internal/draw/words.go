package draw

import (
	"math"
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"

	"padproof/cmd/padproof/internal/result"
)

// checkOf is the check of a name, nil where the answer has none.
func checkOf(a *result.Answer, name string) *result.Check {
	if a == nil {
		return nil
	}
	for i := range a.Checks {
		if a.Checks[i].Name == name {
			return &a.Checks[i]
		}
	}
	return nil
}

// titleOf is what a picture is of.
func titleOf(a *result.Answer, what string) string {
	if a == nil {
		return what
	}
	name := strings.TrimSpace(a.Unit)
	if pad := strings.TrimSpace(a.Pad); pad != "" {
		name = strings.TrimPrefix(name+", "+pad, ", ")
	}
	if name == "" {
		return what
	}
	return what + ": " + name
}

// figure writes a number to the digits that its uncertainty leaves: two of the
// uncertainty's own, three places at the most.
func figure(n, u result.Number) string { return fixed(n, places(u)) }

// atMost writes a size that may round to nothing: 0.43, or less than 0.001.
func atMost(n, u result.Number) string {
	if n < 0 {
		n = -n
	}
	text := figure(n, u)
	if n.OK() && strings.Trim(text, "0.") == "" {
		return "less than " + strconv.FormatFloat(math.Pow(10, -float64(places(u))), 'f', places(u), 64)
	}
	return text
}

// largest is a departure that no other exceeds.
func largest(n, u result.Number) string {
	text := atMost(n, u) + " dB"
	if strings.HasPrefix(text, "less") {
		return text
	}
	return text + " at the most"
}

func places(u result.Number) int { return result.Places(u) }

func fixed(n result.Number, places int) string { return n.Fixed(places, "not known") }

// give writes a number with as many digits as it was set with.
func give(n result.Number) string { return strconv.FormatFloat(float64(n), 'g', 6, 64) }

// hertz writes a frequency as the axis does: 63 Hz, 1.25 kHz.
func hertz(n result.Number) string {
	switch f := float64(n); {
	case !n.OK():
		return "an unknown frequency"
	case f >= 999.5:
		return strconv.FormatFloat(math.Round(f/10)/100, 'g', 4, 64) + " kHz"
	default:
		return strconv.FormatFloat(f, 'g', 3, 64) + " Hz"
	}
}

// verdictWords end a sentence: the limits and what was found.
func verdictWords(c *result.Check) string {
	unit := c.Unit
	limits := ""
	switch {
	case c.Low.OK() && c.High.OK() && c.Low == -c.High:
		limits = "±" + give(c.High)
	case c.Low.OK() && c.High.OK():
		limits = give(c.Low) + " to " + give(c.High)
	case c.High.OK():
		limits = "up to " + give(c.High)
	case c.Low.OK():
		limits = "from " + give(c.Low)
	default:
		return "no limit is set."
	}
	return "limit " + limits + " " + unit + ": " + c.Verdict + "." + reasonOf(c)
}

// reasonOf is the reason of a verdict as a sentence of its own.
func reasonOf(c *result.Check) string {
	reason := strings.TrimRight(clean(c.Reason), ".")
	if reason == "" || c.Verdict == "PASS" {
		return ""
	}
	first, size := utf8.DecodeRuneInString(reason)
	return " " + string(unicode.ToUpper(first)) + reason[size:] + "."
}

// numbers are figures as they are drawn.
func numbers(from []result.Number) []float64 {
	out := make([]float64, len(from))
	for i, n := range from {
		out[i] = float64(n)
	}
	return out
}

// added adds one list to another, or takes it off with a sign of -1.
func added(a, b []float64, sign float64) []float64 {
	out := make([]float64, min(len(a), len(b)))
	for i := range out {
		out[i] = a[i] + sign*b[i]
	}
	return out
}

// anyDrawable reports whether there is a point to draw.
func anyDrawable(xs, ys []float64) bool {
	for i := range min(len(xs), len(ys)) {
		if drawable(xs[i], ys[i]) {
			return true
		}
	}
	return false
}

// join writes a list with commas.
func join(words []string) string { return strings.Join(words, ", ") }
