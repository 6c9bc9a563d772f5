package sheet

import (
	"regexp"
	"strconv"
	"strings"
)

var perCent = regexp.MustCompile(`^(?:±|\+/-|\+-)?\s*(\d+(?:\.\d+)?|\.\d+)\s*%$`)

// ParseTolerance reads a tolerance such as "1%", "0.1 %" or "±5%" and returns it
// as a fraction, from 0 ("0%", nil) to under 1. Without the sign it is refused:
// 0.01 might be a fraction or a hundredth of a per cent. The error is an
// [*Error] with text and hint but no file.
func ParseTolerance(text string) (float64, error) {
	m := perCent.FindStringSubmatch(strings.TrimSpace(text))
	if m == nil {
		return 0, &Error{Text: quoted(text) + " is no tolerance", Hint: toleranceMend(text)}
	}
	x, err := strconv.ParseFloat(m[1]+"e-2", 64)
	if err != nil || x >= 1 {
		return 0, &Error{Text: quoted(text) + " is no tolerance", Hint: "write less than 100%"}
	}
	return x, nil
}

func toleranceMend(text string) string {
	text = strings.TrimSpace(text)
	switch {
	case strings.Contains(text, ","):
		return `a decimal has a point: "0.1%"`
	case perCent.MatchString(text + "%"):
		return `write it with its sign: "` + text + `%"`
	}
	return `write it in per cent with the sign: "1%"`
}

// tolerance reads a tolerance from a sheet; nil if it is left out or no good.
func (t *table) tolerance(key string) *float64 {
	v, there := t.ask(key)
	if !there {
		return nil
	}
	if x, isNumber := asFloat(v); isNumber {
		t.fail(key, "is a number without a sign", `write it in per cent, in quotes: `+key+` = "`+strconv.FormatFloat(x, 'f', -1, 64)+`%"`)
		return nil
	}
	s := t.text(key)
	if _, isText := v.(string); !isText {
		return nil
	}
	frac, err := ParseTolerance(s)
	if err != nil {
		t.failWith(key, err)
		return nil
	}
	return &frac
}

// failWith notes the fault that reading a single value found.
func (t *table) failWith(key string, err error) {
	hint := ""
	if e, ok := err.(*Error); ok {
		hint = e.Hint
	}
	t.doc.fail(join(t.path, key), t.subject(key)+" "+err.Error(), hint)
}

// subject begins a message about a value that the message itself quotes.
func (t *table) subject(key string) string {
	if t.label == "" {
		return join(t.path, key) + ":"
	}
	return t.label + ":"
}
