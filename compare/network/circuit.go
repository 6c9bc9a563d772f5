package network

import "slices"

// Kind is what a part is made of.
type Kind int

// The kinds of part.
const (
	Resistor Kind = iota
	Capacitor
	Inductor
)

// String returns "resistor", "capacitor" or "inductor".
func (k Kind) String() string {
	switch k {
	case Resistor:
		return "resistor"
	case Capacitor:
		return "capacitor"
	case Inductor:
		return "inductor"
	}
	return "unknown kind"
}

// A Part is one component of the drawing.
type Part struct {
	Ref     string  // as on the drawing: R1, C1
	Kind    Kind    // what it is
	Value   float64 // Ω, F or H; a resistor of 0 is a link, of +Inf open
	TolFrac float64 // half-width of the tolerance, 0 to 1: 0.01 is 1 %
	A, B    string  // nodes; both empty for a part that has its place in a named network
}

// A Circuit is a pad as drawn. It is made by [New] and does not change.
type Circuit struct {
	name       string
	unbalanced bool
	parts      []Part    // A and B filled in
	values     []float64 // of the parts, in the same order
	pins       [][2]uint8
	nodes      []string // by node number; the terminals come first
	inductive  bool
}

// Node numbers of the terminals. The solver removes nodes from the highest number
// down, so the output stays longest and its voltage is the most exact.
const (
	screen = iota
	outCold
	outHot
	inCold
	inHot
	terminals
)

var terminalNames = [terminals]string{"screen", "out.cold", "out.hot", "in.cold", "in.hot"}

// Most parts and nodes that a drawing may have.
const (
	maxParts = 64
	maxNodes = 64
)

// New makes a circuit of a named network (see [Networks]) and its parts. A part
// without nodes takes the place that its ref has in the network; a part with both
// nodes set is added there, in any network. In a custom network every part needs
// its nodes.
//
// The error, an [*Error], names the part at fault. It is an error when a ref of the
// network is missing, a ref is unknown or there twice, a value or tolerance is no
// value, a capacitor has 0 F or an inductor or capacitor is infinite (an inductor of
// 0 H is a link), or a node hangs loose: one that is no terminal and is touched by a
// single part end, or that no chain of parts joins to a terminal.
func New(name string, parts []Part) (*Circuit, error) {
	std, ok := standards[name]
	if !ok {
		return nil, unknownNetwork(name)
	}
	if len(parts) > maxParts {
		return nil, &Error{Text: "the drawing has more than 64 parts"}
	}
	placed, err := place(name, std, parts)
	if err != nil {
		return nil, err
	}
	c := &Circuit{name: name, parts: placed, nodes: slices.Clone(terminalNames[:])}
	if err := c.number(); err != nil {
		return nil, err
	}
	if err := c.checkLoose(); err != nil {
		return nil, err
	}
	c.unbalanced = std.unbalanced
	if name == Custom {
		c.unbalanced = c.coldIdle(inCold) && c.coldIdle(outCold)
	}
	c.note()
	return c, nil
}

// number gives every node of the parts its number.
func (c *Circuit) number() error {
	known := map[string]uint8{}
	for i, n := range c.nodes {
		known[n] = uint8(i)
	}
	for _, p := range c.parts {
		var pins [2]uint8
		for i, n := range []string{p.A, p.B} {
			at, ok := known[n]
			if !ok {
				if len(c.nodes) == maxNodes {
					return &Error{Ref: p.Ref, Node: n, Text: "the drawing has more than 64 nodes"}
				}
				at = uint8(len(c.nodes))
				known[n] = at
				c.nodes = append(c.nodes, n)
			}
			pins[i] = at
		}
		c.pins = append(c.pins, pins)
	}
	return nil
}

// note copies out of the parts what the solver needs at hand.
func (c *Circuit) note() {
	c.values = make([]float64, len(c.parts))
	c.inductive = false
	for i, p := range c.parts {
		c.values[i] = p.Value
		c.inductive = c.inductive || p.Kind == Inductor
	}
}

// Name returns the network's name, one of [Networks].
func (c *Circuit) Name() string { return c.name }

// Balanced reports whether the pad has two signal legs beside the screen.
func (c *Circuit) Balanced() bool { return !c.unbalanced }

// Unbalanced reports whether in.cold, out.cold and screen are one node, with the pad
// in circuit and straight through.
func (c *Circuit) Unbalanced() bool { return c.unbalanced }

// Parts returns the parts in the order given to [New], each with its nodes.
func (c *Circuit) Parts() []Part { return slices.Clone(c.parts) }

// Part returns the part of that ref, and whether there is one.
func (c *Circuit) Part(ref string) (Part, bool) {
	if i := c.index(ref); i >= 0 {
		return c.parts[i], true
	}
	return Part{}, false
}

// Nodes returns the names of all nodes: the five pins first, then the inner nodes in
// the order in which the parts name them.
func (c *Circuit) Nodes() []string { return slices.Clone(c.nodes) }

// index returns the place of a ref among the parts, -1 if there is none.
func (c *Circuit) index(ref string) int {
	return slices.IndexFunc(c.parts, func(p Part) bool { return p.Ref == ref })
}
