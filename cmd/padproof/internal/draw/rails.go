package draw

import (
	"slices"
	"sort"

	"gonum.org/v1/plot/vg"

	"padproof/cmd/padproof/internal/result"
)

// railsOf sets out any circuit at all: each node is a rail, hot on top and the
// screen at the bottom, and each part stands upright between two rails, from left
// to right by its distance from the input. A part crosses the rails between its
// ends without a dot.
func railsOf(d *result.Drawing, marked map[string]bool) *plan {
	g := graphOf(d)
	nodes := g.inOrder()
	p := &plan{}
	y := map[string]vg.Length{}
	at := vg.Length(20)
	for _, n := range nodes {
		y[n] = at
		at += railHeight
	}
	p.height = at - railHeight + 20
	ends := map[string][]vg.Length{}
	x := vg.Length(railNames + 14)
	for _, part := range g.leftToRight() {
		a, b := vg.Point{X: x, Y: y[part.A]}, vg.Point{X: x, Y: y[part.B]}
		middle := vg.Point{X: x, Y: min(a.Y, b.Y) + railHeight/2}
		p.symbols = append(p.symbols, symbol{part: part, a: a, b: b, middle: middle, upright: true, marked: marked[part.Ref]})
		p.dots = append(p.dots, a, b)
		ends[part.A], ends[part.B] = append(ends[part.A], x), append(ends[part.B], x)
		x += max(railPitch, textWidth(part, marked[part.Ref])+bodyWidth+18)
	}
	p.width = x + 10
	for _, n := range nodes {
		from, to := minMax(ends[n])
		if isPin(n) {
			from = railNames
			p.pins = append(p.pins, pin{name: "", at: vg.Point{X: railNames, Y: y[n]}})
		}
		p.wire(vg.Point{X: from, Y: y[n]}, vg.Point{X: to, Y: y[n]})
		p.words = append(p.words, planWord{railName(n, d.Unbalanced), vg.Point{X: min(from, railNames) - 7, Y: y[n] + 3.5}, fromRight, plain})
	}
	return p
}

const (
	railHeight = 62
	railNames  = 84 // room for the names of the nodes
	railPitch  = 52
)

func railName(node string, unbalanced bool) string {
	if unbalanced && node == screenPin {
		node = "cold, screen"
	}
	return plain.clip(node, railNames-12)
}

// inOrder are the nodes that parts touch, hot first.
func (g *graph) inOrder() []string {
	var nodes []string
	for n := range g.used {
		nodes = append(nodes, n)
	}
	slices.Sort(nodes)
	low := func(n string) float64 {
		if n == screenPin {
			return -2
		}
		return g.height[n]
	}
	sort.SliceStable(nodes, func(i, j int) bool {
		if a, b := low(nodes[i]), low(nodes[j]); a != b {
			return a > b
		}
		return g.across[nodes[i]] < g.across[nodes[j]]
	})
	return nodes
}

// leftToRight are the parts by the mean place of their ends.
func (g *graph) leftToRight() []result.DrawnPart {
	parts := slices.Clone(g.parts)
	at := func(p result.DrawnPart) float64 { return g.across[p.A] + g.across[p.B] }
	sort.SliceStable(parts, func(i, j int) bool { return at(parts[i]) < at(parts[j]) })
	return parts
}
