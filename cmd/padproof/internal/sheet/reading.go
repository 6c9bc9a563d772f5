package sheet

import (
	"fmt"
	"math"
	"regexp"
	"strconv"
	"strings"
)

const pinPair = `([A-Za-z0-9_.-]+)(?:\s*,\s*|\s+to\s+|\s+and\s+)([A-Za-z0-9_.-]+)`

var readingForm = regexp.MustCompile(`^\s*` + pinPair + `(?:,?\s+with\s+` + pinPair + `\s+joined)?\s*=\s*(.*?)\s*$`)

// ParseReading reads a reading as a user types it: "out.hot,out.cold=330",
// "in.hot,screen=open", "in.hot,in.cold with out.hot,out.cold joined=1k12". "to"
// and "and" serve for the commas. The error is an [*Error] with text and hint
// but no file.
func ParseReading(text string) (Reading, error) {
	m := readingForm.FindStringSubmatch(text)
	if m == nil {
		return Reading{}, &Error{Text: quoted(text) + " is no ohmmeter reading",
			Hint: "write two pins and the ohms: out.hot,out.cold=330, or in.hot,in.cold with out.hot,out.cold joined=1k12"}
	}
	r := Reading{Pins: [2]string{m[1], m[2]}, Joined: [2]string{m[3], m[4]}}
	for _, pair := range [][2]string{r.Pins, r.Joined} {
		if pair[0] == pair[1] && pair[0] != "" {
			return Reading{}, &Error{Text: quoted(text) + " names " + pair[0] + " twice", Hint: "write two different pins"}
		}
	}
	if samePins(r.Pins, r.Joined) {
		return Reading{}, &Error{Text: quoted(text) + " joins the pins that the meter is on", Hint: "name the pins of the other end"}
	}
	var err error
	if r.Ohms, err = parseShown(m[5]); err != nil {
		e := err.(*Error)
		return Reading{}, &Error{Text: quoted(text) + ": " + e.Text, Hint: e.Hint}
	}
	return r, nil
}

// Text is the sheet as [ParseOhmsSheet] reads it, under comments, a line each.
func (o *Ohms) Text(comments ...string) string {
	var b strings.Builder
	for _, c := range comments {
		fmt.Fprintf(&b, "# %s\n", c)
	}
	if o.Simulated {
		b.WriteString("simulated = true\n")
	}
	if o.MeterTolFrac != nil {
		fmt.Fprintf(&b, "meter_tolerance = \"%s%%\"\n", strconv.FormatFloat(math.Round(*o.MeterTolFrac*1e8)/1e6, 'f', -1, 64))
	}
	if o.MeterPlusOhms != nil {
		fmt.Fprintf(&b, "meter_plus_ohms = %s\n", strconv.FormatFloat(*o.MeterPlusOhms, 'f', -1, 64))
	}
	b.WriteString("readings = [\n")
	for _, r := range o.Readings {
		joined, ohms := "", `"open"`
		if r.Joined != [2]string{} {
			joined = fmt.Sprintf(" joined = [%q, %q],", r.Joined[0], r.Joined[1])
		}
		if !math.IsInf(r.Ohms, 1) {
			ohms = strconv.FormatFloat(r.Ohms, 'f', -1, 64)
		}
		fmt.Fprintf(&b, "  { pins = [%q, %q],%s ohms = %s },\n", r.Pins[0], r.Pins[1], joined, ohms)
	}
	b.WriteString("]\n")
	return b.String()
}
