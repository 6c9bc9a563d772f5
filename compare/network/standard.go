package network

import (
	"fmt"
	"slices"
	"strings"
)

// Custom is the name of the network in which every part says where it sits.
const Custom = "custom"

// A standard is a named network: its refs in signal order, hot before cold, and
// where each sits.
type standard struct {
	unbalanced bool
	places     []seat
}

type seat struct{ ref, a, b string }

var standards = map[string]standard{
	"L": {true, []seat{
		{"R1", "in.hot", "out.hot"},
		{"R2", "out.hot", "screen"},
	}},
	"U": {false, []seat{
		{"R1", "in.hot", "out.hot"},
		{"R2", "in.cold", "out.cold"},
		{"R3", "out.hot", "out.cold"},
	}},
	"T": {true, []seat{
		{"R1", "in.hot", "mid"},
		{"R2", "mid", "out.hot"},
		{"R3", "mid", "screen"},
	}},
	"H": {false, []seat{
		{"R1", "in.hot", "mid.hot"},
		{"R2", "in.cold", "mid.cold"},
		{"R3", "mid.hot", "out.hot"},
		{"R4", "mid.cold", "out.cold"},
		{"R5", "mid.hot", "mid.cold"},
	}},
	"pi": {true, []seat{
		{"R1", "in.hot", "screen"},
		{"R2", "in.hot", "out.hot"},
		{"R3", "out.hot", "screen"},
	}},
	"O": {false, []seat{
		{"R1", "in.hot", "in.cold"},
		{"R2", "in.hot", "out.hot"},
		{"R3", "in.cold", "out.cold"},
		{"R4", "out.hot", "out.cold"},
	}},
	"bridged-T": {true, []seat{
		{"R1", "in.hot", "mid"},
		{"R2", "mid", "out.hot"},
		{"R3", "in.hot", "out.hot"},
		{"R4", "mid", "screen"},
	}},
	Custom: {},
}

// Networks returns the names that [New] knows, simplest first.
func Networks() []string {
	return []string{"L", "U", "T", "H", "pi", "O", "bridged-T", Custom}
}

// Refs returns the refs that a named network needs, in signal order; none for a
// custom network and for a name that is no network.
func Refs(name string) []string {
	var refs []string
	for _, s := range standards[name].places {
		refs = append(refs, s.ref)
	}
	return refs
}

func unknownNetwork(name string) error {
	return &Error{
		Text: fmt.Sprintf("no network is called %q", name),
		Hint: "use one of " + strings.Join(Networks(), ", "),
	}
}

// place checks each part by itself and fills in the nodes of those that have a seat.
func place(name string, std standard, parts []Part) ([]Part, error) {
	placed := make([]Part, 0, len(parts))
	seen := map[string]bool{}
	for _, p := range parts {
		if err := checkPart(p); err != nil {
			return nil, err
		}
		if seen[p.Ref] {
			return nil, &Error{Ref: p.Ref, Text: p.Ref + " is there twice", Hint: "give each part a ref of its own"}
		}
		seen[p.Ref] = true
		p, err := std.seated(name, p)
		if err != nil {
			return nil, err
		}
		placed = append(placed, p)
	}
	for _, s := range std.places {
		if !seen[s.ref] {
			return nil, &Error{
				Ref:  s.ref,
				Text: fmt.Sprintf("%s is missing: the network %s has %s", s.ref, name, strings.Join(Refs(name), ", ")),
				Hint: "add " + s.ref + "; 0 is a link",
			}
		}
	}
	if len(placed) == 0 {
		return nil, &Error{Text: "the drawing has no parts"}
	}
	return placed, nil
}

// seated returns the part with its nodes.
func (s standard) seated(name string, p Part) (Part, error) {
	i := slices.IndexFunc(s.places, func(q seat) bool { return q.ref == p.Ref })
	hasNodes := p.A != "" || p.B != ""
	switch {
	case i < 0 && hasNodes:
		return p, nil
	case i < 0:
		hint := "say between which nodes it sits"
		if refs := Refs(name); refs != nil {
			hint += ", or use one of " + strings.Join(refs, ", ")
		}
		return p, &Error{Ref: p.Ref, Text: fmt.Sprintf("%s has no place in the network %s", p.Ref, name), Hint: hint}
	case hasNodes:
		return p, &Error{
			Ref:  p.Ref,
			Text: fmt.Sprintf("%s has its place in the network %s already", p.Ref, name),
			Hint: "leave its nodes out, or call an added part by another ref",
		}
	case p.Kind != Resistor:
		return p, &Error{Ref: p.Ref, Text: fmt.Sprintf("%s of the network %s is a resistor, not a %s", p.Ref, name, p.Kind)}
	}
	p.A, p.B = s.places[i].a, s.places[i].b
	return p, nil
}
