package network

import (
	"fmt"
	"math"
)

// An Error says what is wrong with a drawing.
type Error struct {
	Ref  string // the part at fault, or the one that is missing; empty for the whole drawing
	Node string // the node at fault, where it is one
	Text string // what is wrong
	Hint string // the mend, may be empty
}

// Error returns what is wrong, without the mend.
func (e *Error) Error() string { return e.Text }

// checkPart looks at one part by itself.
func checkPart(p Part) error {
	bad := func(hint, format string, args ...any) error {
		return &Error{Ref: p.Ref, Text: fmt.Sprintf(format, args...), Hint: hint}
	}
	switch {
	case p.Ref == "":
		return bad("give it a ref", "a part has no ref")
	case p.Kind < Resistor || p.Kind > Inductor:
		return bad("", "%s is neither resistor, capacitor nor inductor", p.Ref)
	case math.IsNaN(p.Value) || p.Value < 0:
		return bad("", "%s has a value of %g, which no part has", p.Ref, p.Value)
	case p.Kind == Capacitor && p.Value == 0:
		return bad("leave it out", "%s is a capacitor of 0 F, which is no part", p.Ref)
	case p.Kind != Resistor && math.IsInf(p.Value, 1):
		return bad("", "%s is an infinite %s", p.Ref, p.Kind)
	case !(p.TolFrac >= 0 && p.TolFrac <= 1):
		return bad("", "%s has a tolerance of %g %%; it lies between 0 and 100 %%", p.Ref, 100*p.TolFrac)
	case (p.A == "") != (p.B == ""):
		return bad("name two nodes", "%s has one node only", p.Ref)
	case p.A != "" && p.A == p.B:
		return bad("name two different nodes", "%s has both ends on node %s", p.Ref, p.A)
	}
	return nil
}

// checkLoose finds a node that hangs loose.
func (c *Circuit) checkLoose() error {
	var touches [maxNodes]int
	var tied links
	tied.reset(len(c.nodes))
	for t := range terminals {
		tied.join(screen, uint8(t))
	}
	for _, pin := range c.pins {
		touches[pin[0]]++
		touches[pin[1]]++
		tied.join(pin[0], pin[1])
	}
	for i, pin := range c.pins {
		for _, n := range pin {
			ref, node := c.parts[i].Ref, c.nodes[n]
			if n >= terminals && touches[n] == 1 {
				return &Error{
					Ref: ref, Node: node,
					Text: fmt.Sprintf("node %s hangs loose: only %s touches it", node, ref),
					Hint: "join another part to it, or use in.hot, in.cold, out.hot, out.cold or screen",
				}
			}
			if tied.root(n) != screen {
				return &Error{
					Ref: ref, Node: node,
					Text: fmt.Sprintf("node %s hangs loose: no chain of parts joins it to a pin", node),
					Hint: "join it to in.hot, in.cold, out.hot, out.cold or screen",
				}
			}
		}
	}
	return nil
}

// coldIdle reports whether a cold pin touches no part or is tied to screen by links.
func (c *Circuit) coldIdle(pin uint8) bool {
	used := false
	var tied links
	tied.reset(len(c.nodes))
	for i, p := range c.parts {
		used = used || c.pins[i][0] == pin || c.pins[i][1] == pin
		if p.Kind == Resistor && p.Value == 0 {
			tied.join(c.pins[i][0], c.pins[i][1])
		}
	}
	return !used || tied.root(pin) == screen
}
