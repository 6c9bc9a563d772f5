package sheet

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"
)

// Ohms is an ohms.toml: what an ohmmeter read on one unit.
type Ohms struct {
	File          string   // as it was given to [ReadOhms]
	MeterTolFrac  *float64 // of the reading, half-width of a rectangle; nil if left out
	MeterPlusOhms *float64 // beside it; nil if left out
	Simulated     bool     // the readings are of no real unit
	Readings      []Reading
}

// Reading is one reading of an ohmmeter.
type Reading struct {
	Pins   [2]string // the nodes that the meter was on
	Joined [2]string // the nodes that were joined meanwhile; both "" for none
	Ohms   float64   // 0 or more; +Inf for "open", over the meter's range
	Line   int       // where it stands in the sheet; 0 for one that stands in none
}

// mostReadings bounds the readings of a sheet; all pairs of pins, the others
// joined or not, come nowhere near it.
const mostReadings = 100

// ReadOhms reads an ohms.toml. Every error is an [*Error]. Whether the drawing
// has the nodes, and whether two readings are one, is for whoever knows it:
// [Ohms.Errorf] makes the error.
func ReadOhms(path string) (*Ohms, error) {
	data, err := read(path)
	if err != nil {
		return nil, err
	}
	return ParseOhmsSheet(path, data)
}

const readingExample = `{ pins = ["out.hot", "out.cold"], ohms = 330 }`

// ParseOhmsSheet reads the text of an ohms.toml; file is its name for errors and
// for Ohms.File.
func ParseOhmsSheet(file string, data []byte) (*Ohms, error) {
	d, err := parse(file, data, "write readings = [ "+readingExample+", ... ]")
	if err != nil {
		return nil, err
	}
	d.foreign = map[string]string{"network": "pad.toml", "parts": "pad.toml", "service": "pad.toml", "limits": "pad.toml",
		"output": "rig.toml", "input": "rig.toml", "calibration": "rig.toml"}
	top := d.table("", d.root)
	o := &Ohms{
		File: file, MeterTolFrac: top.tolerance("meter_tolerance"), MeterPlusOhms: top.number("meter_plus_ohms", plusOhmsSpan),
		Simulated: top.truth("simulated"), Readings: top.readings(),
	}
	d.unknown()
	if err := d.first(); err != nil {
		return nil, err
	}
	d.wholeReadings(o)
	if err := d.first(); err != nil {
		return nil, err
	}
	return o, nil
}

// wholeReadings notes each reading that lacks something, once every key is good
// by itself.
func (d *document) wholeReadings(o *Ohms) {
	if d.lines["readings"] == 0 {
		d.fail("readings", "readings is missing", "write readings = [ "+readingExample+", ... ]")
	}
	for i, r := range o.Readings {
		path, label := item("readings", i), fmt.Sprintf("reading %d", i+1)
		switch {
		case r.Pins == [2]string{}:
			d.fail(path, label+": pins is missing", "write "+readingExample)
		case math.IsNaN(r.Ohms):
			d.fail(path, label+": ohms is missing", `write what the meter read, ohms = 330, or ohms = "open"`)
		}
	}
}

// plusOhmsSpan is what a meter may be off by beside its tolerance.
var plusOhmsSpan = span{from: 0, to: 1000, mend: "write ohms, as the meter's maker states them: 0.2"}

// Errorf is an error at the line of a reading; see [Pad.Errorf].
func (o *Ohms) Errorf(r Reading, hint, format string, args ...any) *Error {
	return &Error{File: o.File, Line: r.Line, Text: fmt.Sprintf(format, args...), Hint: hint}
}

// readings reads the list of readings, those that can be read.
func (t *table) readings() []Reading {
	var all []Reading
	for _, rt := range t.listed("reading", readingExample, "a unit", mostReadings) {
		all = append(all, rt.reading())
	}
	return all
}

// reading reads one reading.
func (t *table) reading() Reading {
	r := Reading{Line: t.doc.lines[t.path], Pins: t.pair("pins"), Joined: t.pair("joined")}
	if r.Pins != [2]string{} && samePins(r.Pins, r.Joined) {
		t.fail("joined", "are the pins that the meter is on", "it can read nothing there but the join; name the pins of the other end")
	}
	r.Ohms = t.readOhms()
	return r
}

// samePins reports whether two pairs are one, in either order.
func samePins(a, b [2]string) bool { return a == b || a == [2]string{b[1], b[0]} }

// pair reads two different nodes, both "" if left out or no good.
func (t *table) pair(key string) [2]string {
	v, there := t.ask(key)
	if !there {
		return [2]string{}
	}
	ends, _ := v.([]any)
	var nodes [2]string
	if len(ends) == 2 {
		nodes[0], _ = ends[0].(string)
		nodes[1], _ = ends[1].(string)
	}
	if nodes[0] == "" || nodes[1] == "" {
		t.fail(key, "is not two pins", fmt.Sprintf(`write two: %s = ["out.hot", "out.cold"]`, key))
		return [2]string{}
	}
	if nodes[0] == nodes[1] {
		t.fail(key, "names "+quoted(nodes[0])+" twice", "write two different pins")
		return [2]string{}
	}
	return nodes
}

// readOhms reads what the meter showed, NaN if it is left out.
func (t *table) readOhms() float64 {
	v, there := t.ask("ohms")
	if !there {
		return math.NaN()
	}
	text, isText := v.(string)
	if x, isNumber := asFloat(v); isNumber {
		text, isText = strconv.FormatFloat(x, 'f', -1, 64), true
	}
	if !isText {
		t.fail("ohms", "is "+kindOf(v)+", not a reading", `write ohms = 330, ohms = "1k12" or ohms = "open"`)
		return 0
	}
	ohms, err := parseShown(text)
	if err != nil {
		t.failWith("ohms", err)
	}
	return ohms
}

// parseShown reads what a meter showed: ohms as [ParseOhms] reads them, "open",
// or "OL" as meters write it.
func parseShown(text string) (float64, error) {
	if word := strings.TrimSpace(text); slices.ContainsFunc([]string{"open", "ol", "+inf", "inf"}, func(w string) bool { return strings.EqualFold(w, word) }) {
		return math.Inf(1), nil
	}
	a, err := ParseOhms(text)
	switch {
	case strings.HasPrefix(strings.TrimSpace(text), "-"):
		return 0, &Error{Text: quoted(text) + " is below nothing", Hint: "zero the meter with its leads together, discharge the unit, and read again"}
	case err != nil:
		return 0, &Error{Text: quoted(text) + " is no reading", Hint: `write ohms, or a code of IEC 60062 such as 330, 1k12, 4R7; or open where the meter is over range`}
	case a.HasTol:
		return 0, &Error{Text: quoted(text) + " has a tolerance letter", Hint: "write what the meter read; its own tolerance is meter_tolerance"}
	}
	return a.Value, nil
}
