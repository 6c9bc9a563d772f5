package network

import (
	"fmt"
	"slices"
)

// Added returns a copy with one part more between the two nodes that it names: a resistor across
// the output, say. Whether the network is unbalanced does not change. It is an [*Error] when the ref
// is there already, the value is none, a node is not there, or the drawing is full.
func (c *Circuit) Added(p Part) (*Circuit, error) {
	if err := checkPart(p); err != nil {
		return nil, err
	}
	if c.index(p.Ref) >= 0 {
		return nil, &Error{Ref: p.Ref, Text: p.Ref + " is there twice", Hint: "give each part a ref of its own"}
	}
	if len(c.parts) >= maxParts {
		return nil, &Error{Ref: p.Ref, Text: fmt.Sprintf("%s is one part too many: a drawing has at most %d", p.Ref, maxParts)}
	}
	for _, name := range []string{p.A, p.B} {
		if !slices.Contains(c.nodes, name) {
			return nil, &Error{Ref: p.Ref, Text: fmt.Sprintf("the drawing has no node %q", name)}
		}
	}
	d := c.edited(func([]Part) {})
	d.parts = append(d.parts, p)
	d.note()
	d.renumber()
	return d, nil
}
