package network

import (
	"fmt"
	"math"
	"strings"
)

// An EndFault is an end of the bench that is not what the bench's sheet says: nothing is
// wrong with the unit, and it may look as if there were.
type EndFault struct {
	Load bool    // the load; else the source
	Ohms float64 // what it is; NaN where nobody says
}

// NotStatedTimes is how far off an end of no stated size is taken to be: the source twice,
// the load half of what the sheet says, as with a second output resistor, or a second input
// on the same line (common practice, no source).
const NotStatedTimes = 2

// ParseEndFault reads "source not as stated", "load not as stated", "source is 300" or "load
// is 1k5"; ok is false for a text of none of these forms. The value is as in [ParseFault].
func ParseEndFault(text string) (f EndFault, ok bool, err error) {
	words := strings.Fields(text)
	if len(words) < 3 || words[0] != "source" && words[0] != "load" {
		return EndFault{}, false, nil
	}
	f = EndFault{Load: words[0] == "load", Ohms: math.NaN()}
	rest := strings.Join(words[1:], " ")
	value, is := strings.CutPrefix(rest, "is ")
	switch {
	case rest == "not as stated":
		return f, true, nil
	case !is:
		return EndFault{}, false, nil
	}
	if f.Ohms, err = parseValue(words[0], Resistor, value); err != nil {
		return EndFault{}, true, err
	}
	if f.Load && f.Ohms == 0 {
		return EndFault{}, true, &Error{Text: "a load of 0 Ω takes everything", Hint: "write its ohms: load is 600"}
	}
	return f, true, nil
}

// String returns the fault as [ParseEndFault] reads it.
func (f EndFault) String() string {
	end := "source"
	if f.Load {
		end = "load"
	}
	if math.IsNaN(f.Ohms) {
		return end + " not as stated"
	}
	return fmt.Sprintf("%s is %s", end, valueCode(Resistor, f.Ohms))
}

// Apply returns the ends with the fault in them; see [NotStatedTimes] for one of no stated
// size. That changes nothing of a source of 0 Ω.
func (f EndFault) Apply(e Ends) Ends {
	source, load := e.SourceOhms*NotStatedTimes, e.LoadOhms/NotStatedTimes
	if !math.IsNaN(f.Ohms) {
		source, load = f.Ohms, f.Ohms
	}
	if f.Load {
		e.LoadOhms = load
	} else {
		e.SourceOhms = source
	}
	return e
}
