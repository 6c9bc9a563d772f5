package suspect

import (
	"math"

	"padproof/compare/network"
)

// Faults returns every single fault of a drawing that is looked for, but for drifts, which may have
// any amount, and the ends of the bench. What leaves the drawing as it is, is no fault: x10 of a link,
// a swap of equal parts, legs that the drawing has not. Some of them may be the same circuit.
func Faults(c *network.Circuit) []Fault {
	var all []Fault
	parts := c.Parts()
	for _, p := range parts {
		for _, f := range partFaults(p) {
			all = append(all, Fault{Fault: f})
		}
	}
	for i, b := range parts {
		for _, a := range parts[:i] {
			if a.Kind == b.Kind && a.Value != b.Value && (len(parts) <= fewParts || neighbouring(c, a, b)) {
				all = append(all, Fault{Fault: network.Fault{Form: network.PartsSwapped, Ref: a.Ref, Other: b.Ref}})
			}
		}
	}
	for _, f := range c.LegFaults() {
		all = append(all, Fault{Fault: f})
	}
	return all
}

// In a drawing of so few parts any two may have been taken for one another; in a larger one those
// that share a node. Common practice, no source.
const fewParts = 6

// partFaults are those of one part.
func partFaults(p network.Part) []network.Fault {
	var all []network.Fault
	add := func(form network.FaultForm, value float64) {
		all = append(all, network.Fault{Form: form, Ref: p.Ref, Kind: p.Kind, Value: value})
	}
	link, open := p.Value == 0, math.IsInf(p.Value, 1)
	if p.Kind == network.Capacitor {
		link, open = open, link
	}
	if !open {
		add(network.PartOpen, 0)
	}
	if !link {
		add(network.PartShort, 0)
	}
	if link || open {
		return all
	}
	add(network.PartTimesTen, 0)
	add(network.PartTenth, 0)
	if below, above, ok := neighbours(p.Value); ok {
		add(network.PartIs, below)
		add(network.PartIs, above)
	}
	return all
}

// neighbouring tells whether two parts share a node.
func neighbouring(c *network.Circuit, a, b network.Part) bool {
	node := func(name string) string {
		if c.Unbalanced() && (name == "in.cold" || name == "out.cold") {
			return "screen"
		}
		return name
	}
	aa, ab, ba, bb := node(a.A), node(a.B), node(b.A), node(b.B)
	return aa == ba || aa == bb || ab == ba || ab == bb
}

// drifts are the parts that may drift.
func drifts(c *network.Circuit) []Fault {
	var all []Fault
	for _, p := range c.Parts() {
		if p.Value > 0 && !math.IsInf(p.Value, 1) {
			all = append(all, Fault{Fault: network.Fault{Form: network.PartDrifted, Ref: p.Ref, Kind: p.Kind}})
		}
	}
	return all
}

// endFaults are the ends of the bench that may be other than stated.
func endFaults(e network.Ends) []Fault {
	var all []Fault
	if e.SourceOhms > 0 && !math.IsInf(e.SourceOhms, 1) {
		all = append(all, Fault{End: SourceEnd, Ratio: 1})
	}
	if e.LoadOhms > 0 && !math.IsInf(e.LoadOhms, 1) {
		all = append(all, Fault{End: LoadEnd, Ratio: 1})
	}
	return all
}
