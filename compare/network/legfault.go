package network

import (
	"fmt"
	"slices"
	"strings"
)

// legWords are the faults of legs and plugs as they are written, with the pin that each is at.
var legWords = func() (all []Fault) {
	for _, form := range []FaultForm{LegOpen, LegToScreen} {
		for _, pin := range []string{"in.hot", "out.hot", "in.cold", "out.cold"} {
			all = append(all, Fault{Form: form, Pin: pin})
		}
	}
	return append(all, Fault{Form: LegsCrossed}, Fault{Form: EndsSwapped})
}()

// LegFaults returns the faults of legs and plugs that the drawing can have. In an unbalanced network
// the cold leg is the screen: there the hot leg may be open or down to screen, and in and out may be
// swapped. A drawing with as many parts or nodes as there may be has no room for some of them.
func (c *Circuit) LegFaults() []Fault {
	var all []Fault
	for _, f := range legWords {
		if c.checkLeg(f) == nil {
			all = append(all, f)
		}
	}
	return all
}

// parseLegFault reads a fault of legs or plugs; false if the text is none.
func parseLegFault(words []string) (Fault, bool) {
	text := strings.Join(words, " ")
	i := slices.IndexFunc(legWords, func(f Fault) bool { return f.legText() == text })
	if i < 0 {
		return Fault{}, false
	}
	return legWords[i], true
}

// checkLeg says why the drawing cannot have a fault of legs or plugs, or nothing.
func (c *Circuit) checkLeg(f Fault) error {
	cold := strings.HasSuffix(f.Pin, ".cold") || f.Form == LegsCrossed
	switch {
	case cold && c.unbalanced:
		return &Error{
			Text: fmt.Sprintf("%q needs a balanced network; in this one the cold leg is the screen", f.legText()),
			Hint: "it can have: hot leg open at in; hot leg to screen at in; the same at out; in and out swapped",
		}
	case f.Form == LegOpen && len(c.nodes) >= maxNodes, f.Form == LegToScreen && len(c.parts) >= maxParts:
		return &Error{Text: fmt.Sprintf("the drawing is too large for %q", f.legText())}
	}
	return nil
}

// legText is a fault of legs or plugs as it is written.
func (f Fault) legText() string {
	end, leg, _ := strings.Cut(f.Pin, ".")
	switch f.Form {
	case LegOpen:
		return leg + " leg open at " + end
	case LegToScreen:
		return leg + " leg to screen at " + end
	case LegsCrossed:
		return "legs crossed"
	}
	return "in and out swapped"
}

// applyLeg returns a copy of the drawing with the fault in it.
func (f Fault) applyLeg(c *Circuit) *Circuit {
	if c.checkLeg(f) != nil {
		return c
	}
	switch f.Form {
	case LegOpen:
		return c.rewired(map[string]string{f.Pin: f.Pin + " behind the break"})
	case LegToScreen:
		return c.linked(f.legText(), f.Pin, terminalNames[screen])
	case LegsCrossed:
		return c.rewired(map[string]string{"out.hot": "out.cold", "out.cold": "out.hot"})
	}
	return c.rewired(map[string]string{"in.hot": "out.hot", "out.hot": "in.hot", "in.cold": "out.cold", "out.cold": "in.cold"})
}

// rewired returns a copy whose parts sit on other nodes, by the names in moved. Whether it is
// unbalanced does not change.
func (c *Circuit) rewired(moved map[string]string) *Circuit {
	d := c.edited(func(parts []Part) {
		for i := range parts {
			for _, at := range []*string{&parts[i].A, &parts[i].B} {
				if to, ok := moved[*at]; ok {
					*at = to
				}
			}
		}
	})
	d.renumber()
	return d
}

// linked returns a copy with a link between two nodes more.
func (c *Circuit) linked(ref, a, b string) *Circuit {
	d := c.edited(func([]Part) {})
	d.parts = append(d.parts, Part{Ref: ref, A: a, B: b})
	d.note()
	d.renumber()
	return d
}

// renumber finds the pins of the parts again after their nodes were changed. Nodes that are left
// without a part stay, so that their names are still known.
func (c *Circuit) renumber() {
	c.nodes, c.pins = slices.Clone(c.nodes), make([][2]uint8, len(c.parts))
	for i, p := range c.parts {
		for k, name := range []string{p.A, p.B} {
			n := slices.Index(c.nodes, name)
			if n < 0 {
				n = len(c.nodes)
				c.nodes = append(c.nodes, name)
			}
			c.pins[i][k] = uint8(n)
		}
	}
}
