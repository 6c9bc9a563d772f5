package network

import "slices"

// With returns a copy with one part's value changed. Any value from 0 to +Inf will do:
// 0 is a link for a resistor or inductor and open for a capacitor, +Inf the reverse; a
// negative or NaN value counts as 0. A ref that is not in the drawing changes nothing
// (see [Circuit.Part]). Whether the network is unbalanced does not change.
func (c *Circuit) With(ref string, value float64) *Circuit {
	return c.edited(func(parts []Part) {
		if i := c.index(ref); i >= 0 {
			parts[i].Value = atLeast(value, 0)
		}
	})
}

// Swapped returns a copy in which two parts sit in one another's places: kind, value and
// tolerance change over, refs and nodes stay. A ref that is not in the drawing changes
// nothing.
func (c *Circuit) Swapped(refA, refB string) *Circuit {
	return c.edited(func(parts []Part) {
		i, j := c.index(refA), c.index(refB)
		if i < 0 || j < 0 {
			return
		}
		p, q := &parts[i], &parts[j]
		p.Kind, q.Kind = q.Kind, p.Kind
		p.Value, q.Value = q.Value, p.Value
		p.TolFrac, q.TolFrac = q.TolFrac, p.TolFrac
	})
}

func (c *Circuit) edited(edit func(parts []Part)) *Circuit {
	d := *c
	d.parts = slices.Clone(c.parts)
	edit(d.parts)
	d.note()
	return &d
}
