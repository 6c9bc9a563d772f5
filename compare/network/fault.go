package network

import (
	"fmt"
	"math"
	"regexp"
	"strconv"
	"strings"
)

// A FaultForm says what is wrong.
type FaultForm int

// The forms of a fault, each as it is written.
const (
	PartOpen     FaultForm = iota // "R3 open"
	PartShort                     // "R3 short"
	PartTimesTen                  // "R3 x10"
	PartTenth                     // "R3 /10"
	PartIs                        // "R3 is 360": a part of another value
	PartDrifted                   // "R3 drifted +12 %"
	PartsSwapped                  // "R1 and R3 swapped"
	LegOpen                       // "hot leg open at in": between the pin and what is wired to it
	LegToScreen                   // "hot leg to screen at in": the pin touches the screen
	LegsCrossed                   // "legs crossed": hot for cold, at the output
	EndsSwapped                   // "in and out swapped": the pad the wrong way round
)

// plainForms are the words of the forms that take nothing but a part.
var plainForms = map[string]FaultForm{
	"open": PartOpen, "short": PartShort, "x10": PartTimesTen, "/10": PartTenth,
}

// A Fault is one thing wrong with a unit, as an edit of its drawing.
type Fault struct {
	Form  FaultForm
	Ref   string  // the part; none for faults of legs and plugs
	Other string  // PartsSwapped: the second part
	Kind  Kind    // PartIs: the part's, which the value is written by
	Value float64 // PartIs: Ω, F or H; PartDrifted: relative change, 0.12 for +12 %
	Pin   string  // LegOpen, LegToScreen: in.hot, in.cold, out.hot or out.cold
}

// ParseFault reads a fault of a drawing: "R3 open", "R3 short", "R3 x10", "R3 /10",
// "R3 is 360", "R1 and R3 swapped" or "R3 drifted +12 %"; or one of legs and plugs: "hot leg
// open at in", "cold leg to screen at out" and so on, "legs crossed", "in and out swapped"
// (see [Circuit.LegFaults]). Blanks between words may be more than one, and the one before
// the per cent sign may be missing.
//
// A value is ohms, or a code of IEC 60062 (4R7, 1k5, 680), or a number with its prefix
// and unit (1.5 kΩ); for a capacitor 220p or 2n2, for an inductor 10m or 4m7. A drift has
// its sign, and lies above -100 %. The [*Error] of anything else names the forms, or the
// parts that there are.
func ParseFault(c *Circuit, text string) (Fault, error) {
	words := strings.Fields(text)
	if len(words) < 2 {
		return Fault{}, c.notUnderstood(text)
	}
	if f, ok := parseLegFault(words); ok {
		if err := c.checkLeg(f); err != nil {
			return Fault{}, err
		}
		return f, nil
	}
	f := Fault{Ref: words[0]}
	rest := strings.Join(words[2:], " ")
	plain, isPlain := plainForms[words[1]]
	switch {
	case isPlain && rest == "":
		f.Form = plain
	case words[1] == "is" && rest != "":
		f.Form = PartIs
	case words[1] == "drifted" && rest != "":
		f.Form = PartDrifted
	case words[1] == "and" && len(words) == 4 && words[3] == "swapped":
		f.Form, f.Other = PartsSwapped, words[2]
	default:
		return Fault{}, c.notUnderstood(text)
	}
	err := c.checkRefs(f)
	if err == nil {
		err = f.readValue(c, rest)
	}
	if err != nil {
		return Fault{}, err
	}
	return f, nil
}

// notUnderstood is the error for a text of no form. Its examples are of the drawing.
func (c *Circuit) notUnderstood(text string) error {
	p, other := c.parts[0], c.parts[len(c.parts)-1].Ref
	var forms []string
	for _, f := range []Fault{
		{Form: PartOpen, Ref: p.Ref}, {Form: PartShort, Ref: p.Ref},
		{Form: PartTimesTen, Ref: p.Ref}, {Form: PartTenth, Ref: p.Ref},
		{Form: PartIs, Ref: p.Ref, Kind: p.Kind, Value: p.Value},
		{Form: PartDrifted, Ref: p.Ref, Value: 0.12},
	} {
		forms = append(forms, f.String())
	}
	if other != p.Ref {
		forms = append(forms, Fault{Form: PartsSwapped, Ref: p.Ref, Other: other}.String())
	}
	for _, f := range c.LegFaults() {
		forms = append(forms, f.String())
	}
	return &Error{
		Text: fmt.Sprintf("%q is no fault that is understood", text),
		Hint: "write it like one of these: " + strings.Join(forms, "; "),
	}
}

// checkRefs looks for the fault's parts in the drawing.
func (c *Circuit) checkRefs(f Fault) error {
	for _, ref := range f.Parts() {
		if c.index(ref) < 0 {
			var refs []string
			for _, p := range c.parts {
				refs = append(refs, p.Ref)
			}
			return &Error{
				Ref:  ref,
				Text: fmt.Sprintf("the drawing has no part %q", ref),
				Hint: "its parts are " + strings.Join(refs, ", "),
			}
		}
	}
	if f.Form == PartsSwapped && f.Ref == f.Other {
		return &Error{Ref: f.Ref, Text: f.Ref + " cannot be swapped with itself", Hint: "name two parts"}
	}
	return nil
}

// readValue reads what follows "is" or "drifted".
func (f *Fault) readValue(c *Circuit, text string) (err error) {
	switch f.Form {
	case PartIs:
		f.Kind = c.parts[c.index(f.Ref)].Kind
		f.Value, err = parseValue(f.Ref, f.Kind, text)
	case PartDrifted:
		f.Value, err = parseDrift(f.Ref, text)
	}
	return err
}

var driftForm = regexp.MustCompile(`^([+-]\d+(?:\.\d+)?) ?%$`)

func parseDrift(ref, text string) (float64, error) {
	m := driftForm.FindStringSubmatch(strings.Replace(text, "−", "-", 1))
	if m == nil {
		return 0, &Error{Ref: ref, Text: fmt.Sprintf("%q is no drift", text), Hint: "write it in per cent with its sign: +12 % or -5 %"}
	}
	frac, err := strconv.ParseFloat(m[1]+"e-2", 64)
	if err != nil || !(frac > -1) {
		return 0, &Error{Ref: ref, Text: fmt.Sprintf("no part drifts by %s", text), Hint: "write more than -100 %, or: " + ref + " short"}
	}
	return frac, nil
}

// Parts returns the refs that the fault is about: one, two, or none for one of legs and plugs.
func (f Fault) Parts() []string {
	switch f.Form {
	case PartsSwapped:
		return []string{f.Ref, f.Other}
	case LegOpen, LegToScreen, LegsCrossed, EndsSwapped:
		return nil
	}
	return []string{f.Ref}
}

// String returns the fault as [ParseFault] reads it.
func (f Fault) String() string {
	switch f.Form {
	case PartIs:
		return f.Ref + " is " + valueCode(f.Kind, f.Value)
	case PartDrifted:
		sign := "+"
		if math.Signbit(f.Value) {
			sign = "-"
		}
		return f.Ref + " drifted " + sign + decimal(math.Abs(f.Value), 2) + " %"
	case PartsSwapped:
		return f.Ref + " and " + f.Other + " swapped"
	case LegOpen, LegToScreen, LegsCrossed, EndsSwapped:
		return f.legText()
	}
	for word, form := range plainForms {
		if form == f.Form {
			return f.Ref + " " + word
		}
	}
	return f.Ref + " unknown fault"
}

// Apply returns a copy of the drawing with the fault in it; tolerances stay with their
// parts. A part that is not in the drawing changes nothing, and neither does ten times
// or a tenth of a link, or a fault of legs that the drawing cannot have. "Leg to screen" adds
// a link as a part of its own, by the fault's words as its ref.
func (f Fault) Apply(c *Circuit) *Circuit {
	p, _ := c.Part(f.Ref)
	none, full := 0.0, math.Inf(1)
	if p.Kind == Capacitor {
		none, full = full, none
	}
	switch f.Form {
	case PartOpen:
		return c.With(f.Ref, full)
	case PartShort:
		return c.With(f.Ref, none)
	case PartTimesTen:
		return c.With(f.Ref, p.Value*10)
	case PartTenth:
		return c.With(f.Ref, p.Value/10)
	case PartIs:
		return c.With(f.Ref, f.Value)
	case PartDrifted:
		return c.With(f.Ref, p.Value*(1+f.Value))
	case PartsSwapped:
		return c.Swapped(f.Ref, f.Other)
	case LegOpen, LegToScreen, LegsCrossed, EndsSwapped:
		return f.applyLeg(c)
	}
	return c
}
