package draw

import (
	"math"
	"slices"

	"padproof/cmd/padproof/internal/result"
)

// The pins of a pad.
const (
	inHot, inCold, outHot, outCold, screenPin = "in.hot", "in.cold", "out.hot", "out.cold", "screen"
)

// A graph is a circuit as nodes and the parts between them, in an unbalanced one
// with both cold pins and the screen as one node.
type graph struct {
	parts  []result.DrawnPart
	inner  []string           // nodes that are no pins, in the order in which the parts name them
	used   map[string]bool    // nodes that a part touches
	idle   []result.DrawnPart // parts with both ends on one node
	across map[string]float64 // where a node lies from the input, 0, to the output, 1
	height map[string]float64 // and from hot, 1, to cold, -1
}

func graphOf(d *result.Drawing) *graph {
	g := &graph{used: map[string]bool{}}
	name := func(node string) string {
		if d.Unbalanced && (node == inCold || node == outCold) {
			return screenPin
		}
		return node
	}
	for _, p := range d.Parts {
		p.A, p.B = name(p.A), name(p.B)
		if p.A == p.B {
			g.idle = append(g.idle, p)
			continue
		}
		g.parts = append(g.parts, p)
		for _, n := range []string{p.A, p.B} {
			if !g.used[n] && !isPin(n) {
				g.inner = append(g.inner, n)
			}
			g.used[n] = true
		}
	}
	cold := -1.0
	fixed := map[string]float64{inHot: 1, outHot: 1, inCold: cold, outCold: cold, screenPin: 0}
	if d.Unbalanced {
		fixed[screenPin] = cold
	}
	g.height = g.balanced(fixed, 0)
	g.across = g.balanced(map[string]float64{inHot: 0, inCold: 0, outHot: 1, outCold: 1}, 0.5)
	return g
}

func isPin(node string) bool {
	return slices.Contains([]string{inHot, inCold, outHot, outCold, screenPin}, node)
}

// balanced gives each inner node the mean of its neighbours, pins being fixed:
// where a weight would come to rest if the parts were springs of one stiffness (W.
// T. Tutte, "How to draw a graph", 1963; from memory). Pins that are not given pull
// at nothing; a node that nothing holds has the value for that.
func (g *graph) balanced(fixed map[string]float64, unheld float64) map[string]float64 {
	at := map[string]float64{}
	for n, v := range fixed {
		at[n] = v
	}
	for range 500 {
		moved := 0.0
		for _, n := range g.inner {
			sum, count := 0.0, 0
			for _, p := range g.parts {
				if other := otherEnd(p, n); other != "" {
					if v, known := at[other]; known {
						sum, count = sum+v, count+1
					}
				}
			}
			if count > 0 {
				moved = math.Max(moved, math.Abs(sum/float64(count)-at[n]))
				at[n] = sum / float64(count)
			}
		}
		if moved < 1e-6 {
			break
		}
	}
	for n := range g.used {
		if _, known := at[n]; !known {
			at[n] = unheld
		}
	}
	return at
}

// otherEnd is a part's other node; "" where it does not touch the node.
func otherEnd(p result.DrawnPart, node string) string {
	switch node {
	case p.A:
		return p.B
	case p.B:
		return p.A
	}
	return ""
}

// degree is how many parts touch a node.
func (g *graph) degree(node string) int {
	n := 0
	for _, p := range g.parts {
		if otherEnd(p, node) != "" {
			n++
		}
	}
	return n
}
