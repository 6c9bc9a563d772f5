package sheet

import (
	"fmt"
	"regexp"
	"slices"
	"strconv"
	"strings"

	"padproof/cmd/padproof/internal/nearest"
)

// MaxParts is how many parts a sheet may have. No pad comes near it; it bounds
// the work on the circuit.
const MaxParts = 64

// Kind is what a part is, the first letter of its ref.
type Kind string

// The kinds of parts.
const (
	Resistor  Kind = "R"
	Capacitor Kind = "C"
	Inductor  Kind = "L"
)

func (k Kind) word() string {
	return map[Kind]string{Resistor: "resistor", Capacitor: "capacitor", Inductor: "inductor"}[k]
}

// Part is one part of the drawing.
type Part struct {
	Ref     string  // "R1"; its first letter decides Kind
	Kind    Kind    // R, C or L
	Value   float64 // ohms, farads or henries; 0 is a link
	Code    string  // the value as it was written, "4R7"
	TolFrac float64 // 0 to 1, half-width of a rectangle
	// TolAssumed tells that no tolerance was written: 5 % for a resistor, 20 %
	// for the others.
	TolAssumed bool
	Between    [2]string // the nodes it joins; both "" where the network places it
	Line       int       // where it stands in the sheet
}

// Placed tells whether the part says itself where it sits.
func (p Part) Placed() bool { return p.Between != [2]string{} }

// parts reads the list of parts, those that can be read.
func (t *table) parts() []Part {
	var parts []Part
	for _, pt := range t.listed("part", `{ ref = "R1", value = "560" }`, "a pad", MaxParts) {
		part := pt.part()
		part.Line = t.doc.lines[pt.path]
		parts = append(parts, part)
	}
	return parts
}

// part reads one part.
func (t *table) part() Part {
	p := Part{Ref: t.ref()}
	if p.Ref != "" {
		t.label = "part " + p.Ref
		p.Kind = Kind(p.Ref[:1])
	}
	t.readValue(&p)
	p.Between = t.between()
	return p
}

var refForm = regexp.MustCompile(`^[RCL][A-Za-z0-9_-]{1,15}$`)

// ref reads a part's ref, "" if it is no good.
func (t *table) ref() string {
	ref := t.text("ref")
	if _, there := t.values["ref"]; !there {
		t.doc.fail(t.path, t.label+": ref is missing", `write ref = "R1"; R is a resistor, C a capacitor, L an inductor`)
		return ""
	}
	if _, isText := t.values["ref"].(string); !isText {
		return ""
	}
	if !refForm.MatchString(ref) {
		t.fail("ref", quoted(ref)+" is no part's ref", "begin it with R (resistor), C (capacitor) or L (inductor), a number or name behind it: R1, C1, Rterm")
		return ""
	}
	return ref
}

// readValue reads value and tolerance into p.
func (t *table) readValue(p *Part) {
	tol := t.tolerance("tolerance")
	a, ok := t.amount(p.Kind)
	if v, isText := t.values["value"].(string); isText {
		p.Code = v
	} else if x, isNumber := asFloat(t.values["value"]); isNumber {
		p.Code = strconv.FormatFloat(x, 'g', -1, 64)
	}
	p.Value = a.Value
	switch {
	case !ok:
	case tol != nil && a.HasTol && *tol != a.TolFrac:
		t.fail("tolerance", "and the letter behind "+quoted(p.Code)+" differ", "keep one of the two")
	case tol != nil:
		p.TolFrac = *tol
	case a.HasTol:
		p.TolFrac = a.TolFrac
	default:
		p.TolFrac, p.TolAssumed = usualTolFrac(p.Kind), true
	}
}

// usualTolFrac is the tolerance of a part whose drawing gives none.
func usualTolFrac(kind Kind) float64 {
	if kind == Resistor {
		return 0.05
	}
	return 0.20
}

// amount reads the value of a part, and whether it could be read. Without a
// good ref nobody knows what kind of value it is.
func (t *table) amount(kind Kind) (Amount, bool) {
	v, there := t.ask("value")
	if kind == "" {
		return Amount{}, false
	}
	if !there {
		t.doc.fail(t.path, t.label+": value is missing", examples[kind])
		return Amount{}, false
	}
	if x, isNumber := asFloat(v); isNumber {
		return t.plainAmount(x, kind)
	}
	s := t.text("value")
	if _, isText := v.(string); !isText || (s == "" && v != "") {
		return Amount{}, false
	}
	read := map[Kind]func(string) (Amount, error){Resistor: ParseOhms, Capacitor: ParseFarads, Inductor: ParseHenries}[kind]
	a, err := read(s)
	if err != nil {
		t.failWith("value", err)
		return Amount{}, false
	}
	return a, true
}

// plainAmount takes a TOML number for a value: ohms for a resistor. For the
// others it is refused unless 0, since nobody writes farads.
func (t *table) plainAmount(x float64, kind Kind) (Amount, bool) {
	text := strconv.FormatFloat(x, 'g', -1, 64)
	var err error
	switch {
	case x < 0 || x != x || (kind != Resistor && x != 0):
		err = noValue(text, kind)
	default:
		err = inRange(text, x, kind)
	}
	if err != nil {
		t.failWith("value", err)
		return Amount{}, false
	}
	return Amount{Value: x}, true
}

// Nodes returns the nodes that every drawing has; a custom network may name
// others, without "in." or "out." before them.
func Nodes() []string {
	return []string{"in.hot", "in.cold", "out.hot", "out.cold", "screen"}
}

var nodeForm = regexp.MustCompile(`^[A-Za-z0-9_-]{1,32}$`)

// between reads the two nodes that a part joins, empty if left out or no good.
func (t *table) between() [2]string {
	v, there := t.ask("between")
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
		t.fail("between", "is not two nodes", `write the two nodes that it joins: between = ["in.hot", "mid"]`)
		return [2]string{}
	}
	for _, node := range nodes {
		t.checkNode(node)
	}
	if nodes[0] == nodes[1] {
		t.fail("between", "joins "+quoted(nodes[0])+" to itself", "write two different nodes")
	}
	return nodes
}

// checkNode notes a node that is none and cannot be a name.
func (t *table) checkNode(node string) {
	if slices.Contains(Nodes(), node) {
		return
	}
	near, edits := nearest.Word(node, Nodes())
	switch {
	case edits == 0 || strings.Contains(node, "."):
		t.fail("between", quoted(node)+" is no node", fmt.Sprintf("did you mean %s? nodes are %s", near, list(Nodes())))
	case !nodeForm.MatchString(node):
		t.fail("between", quoted(node)+" is no node",
			"it can be "+list(Nodes())+", or a name of your own in plain letters and digits")
	}
}
