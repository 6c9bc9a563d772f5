package draw

import (
	"math"
	"slices"
	"testing"

	"gonum.org/v1/plot/vg"

	"padproof/cmd/padproof/internal/result"
)

// A wiring reads a plan as an eye does: a line's end that lies on another line
// joins it, lines that cross with no end and no dot do not.
type wiring struct {
	lines [][2]vg.Point
	root  []int
}

func (w *wiring) find(i int) int {
	for w.root[i] != i {
		i = w.root[i]
	}
	return i
}

func (w *wiring) add(a, b vg.Point) int {
	w.lines, w.root = append(w.lines, [2]vg.Point{a, b}), append(w.root, len(w.root))
	return len(w.root) - 1
}

func touches(at vg.Point, l [2]vg.Point) bool {
	const near = 0.01
	x, y := float64(at.X), float64(at.Y)
	return x >= math.Min(float64(l[0].X), float64(l[1].X))-near && x <= math.Max(float64(l[0].X), float64(l[1].X))+near &&
		y >= math.Min(float64(l[0].Y), float64(l[1].Y))-near && y <= math.Max(float64(l[0].Y), float64(l[1].Y))+near
}

func (w *wiring) join() {
	for i, a := range w.lines {
		for j, b := range w.lines {
			if i != j && (touches(a[0], b) || touches(a[1], b)) {
				w.root[w.find(i)] = w.find(j)
			}
		}
	}
}

// readPlan gives each part of a plan, and each pin, the net that its ends lie on.
func readPlan(p *plan) (parts map[string][2]int, pins map[string][]int) {
	w := &wiring{}
	for _, line := range append(slices.Clone(p.wires), p.dashed...) {
		for k := 1; k < len(line); k++ {
			w.add(line[k-1], line[k])
		}
	}
	leads := map[string][2]int{}
	for _, s := range p.symbols {
		leads[s.part.Ref] = [2]int{w.add(s.a, s.middle), w.add(s.b, s.middle)}
		// The leads do not reach into the body.
		pull := func(at vg.Point) vg.Point { return at.Add(s.middle.Sub(at).Scale(0.9)) }
		w.lines[len(w.lines)-2][1], w.lines[len(w.lines)-1][1] = pull(s.a), pull(s.b)
	}
	w.join()
	parts, pins = map[string][2]int{}, map[string][]int{}
	for ref, l := range leads {
		parts[ref] = [2]int{w.find(l[0]), w.find(l[1])}
	}
	for _, q := range p.pins {
		for i, l := range w.lines {
			if touches(q.at, l) {
				pins[q.name] = append(pins[q.name], w.find(i))
			}
		}
	}
	return parts, pins
}

// The picture is the circuit: two ends of parts lie on one net of wires if, and
// only if, the drawing gives them one node; pins lie on the net of their name.
func checkPlan(t *testing.T, name string, d *result.Drawing, p *plan, named bool) {
	t.Helper()
	node := func(n string) string {
		if d.Unbalanced && (n == inCold || n == outCold) {
			return screenPin
		}
		return n
	}
	parts, pins := readPlan(p)
	netOf := map[string]int{} // node → net
	nodeOf := map[int]string{}
	for _, part := range d.Parts {
		if node(part.A) == node(part.B) {
			continue
		}
		nets, drawn := parts[part.Ref]
		if !drawn {
			t.Errorf("%s: %s is not drawn", name, part.Ref)
			continue
		}
		a, b := node(part.A), node(part.B)
		if i := slices.IndexFunc(p.symbols, func(s symbol) bool { return s.part.Ref == part.Ref }); p.symbols[i].part.A != a {
			nets[0], nets[1] = nets[1], nets[0]
		}
		for i, n := range []string{a, b} {
			if had, known := netOf[n]; known && had != nets[i] {
				t.Errorf("%s: %s does not reach node %s", name, part.Ref, n)
			}
			if had := nodeOf[nets[i]]; had != "" && had != n {
				t.Errorf("%s: node %s is joined to node %s at %s", name, n, had, part.Ref)
			}
			netOf[n], nodeOf[nets[i]] = nets[i], n
		}
	}
	if !named {
		return
	}
	for pin, nets := range pins {
		n := node(pin)
		if pin == "cold, screen" {
			n = screenPin
		}
		for _, net := range nets {
			if want, used := netOf[n]; used && net != want {
				t.Errorf("%s: pin %s does not lie on its node", name, pin)
			}
		}
	}
}

// bodies keep apart: no two symbols, with their words, lie on one another.
func checkBodies(t *testing.T, name string, p *plan) {
	t.Helper()
	box := func(s symbol) vg.Rectangle {
		half := vg.Point{X: bodyLength / 2, Y: bodyWidth / 2}
		if s.upright {
			half = vg.Point{X: half.Y, Y: half.X}
		}
		return vg.Rectangle{Min: s.middle.Sub(half), Max: s.middle.Add(half)}
	}
	for i, s := range p.symbols {
		for _, o := range p.symbols[:i] {
			if !free(box(s), []vg.Rectangle{box(o)}) {
				t.Errorf("%s: %s lies on %s", name, s.part.Ref, o.part.Ref)
			}
		}
		lines := slices.Clone(p.wires)
		for _, o := range p.symbols {
			if o.part.Ref != s.part.Ref {
				lines = append(lines, []vg.Point{o.a, o.b})
			}
		}
		for _, line := range lines {
			for k := 1; k < len(line); k++ {
				a, b := line[k-1], line[k]
				wire := vg.Rectangle{Min: vg.Point{X: min(a.X, b.X) - 1, Y: min(a.Y, b.Y) - 1}, Max: vg.Point{X: max(a.X, b.X) + 1, Y: max(a.Y, b.Y) + 1}}
				if !free(box(s), []vg.Rectangle{wire}) {
					t.Errorf("%s: a wire goes through %s", name, s.part.Ref)
				}
			}
		}
	}
}

// Every standard network is drawn as a ladder, and the ladder is the circuit; parts
// may be added to it. So may any circuit at all be drawn, with rails.
func TestSchematicIsTheCircuit(t *testing.T) {
	extras := []result.DrawnPart{
		{Ref: "C1", Kind: "capacitor", Value: 1e-9, Code: "1n", A: outHot, B: outCold},
		{Ref: "R11", Kind: "resistor", Value: 600, Code: "600", A: outHot, B: outCold},
		{Ref: "C2", Kind: "capacitor", Value: 1e-9, Code: "1n", A: inHot, B: outHot},
		{Ref: "L1", Kind: "inductor", Value: 1e-2, Code: "10m", A: outHot, B: screenPin},
		{Ref: "C3", Kind: "capacitor", Value: 1e-9, Code: "1n", A: inCold, B: outCold},
		{Ref: "R12", Kind: "resistor", Value: 10, Code: "10", A: inHot, B: "z"},
		{Ref: "C4", Kind: "capacitor", Value: 1e-9, Code: "1n", A: "z", B: screenPin},
	}
	for _, name := range []string{"L", "U", "T", "H", "pi", "O", "bridged-T"} {
		for n := range len(extras) + 1 {
			d := standard(name)
			d.Parts = append(d.Parts, extras[:n]...)
			for _, marks := range []map[string]bool{nil, {"R1": true, "R2": true, "C2": true}} {
				l, ok := ladderOf(d, marks)
				if !ok {
					if n != 6 { // R12 alone hangs loose, and no sheet has that
						t.Errorf("%s with %d more parts is no ladder", name, n)
					}
					continue
				}
				for _, ends := range []*result.Ends{nil, {SourceOhms: 100}} {
					p := l.plan(ends)
					checkPlan(t, name, d, p, true)
					checkBodies(t, name, p)
					l, _ = ladderOf(d, marks)
				}
			}
		}
	}
	ladders := 0
	for seed := range uint64(400) {
		d := randomDrawing(seed)
		p := railsOf(d, map[string]bool{"R1": true})
		checkPlan(t, "rails", d, p, false)
		checkBodies(t, "rails", p)
		if l, ok := ladderOf(d, nil); ok {
			ladders++
			p := l.plan(nil)
			checkPlan(t, "ladder", d, p, true)
			checkBodies(t, "ladder", p)
		}
	}
	if ladders < 20 {
		t.Errorf("%d of the random circuits were ladders, too few to show anything", ladders)
	}
}

// A suspect part is told by its outline and by a word, a sound one by neither.
func TestMarkedPart(t *testing.T) {
	d := standard("U")
	for _, marked := range []bool{true, false} {
		o := SchematicOptions{Title: "x"}
		if marked {
			o.Marked = []string{"R3", "R9"}
		}
		words := 0
		for _, text := range watch(Schematic(d, o), false).texts {
			if text.text == suspect {
				words++
			}
		}
		if want := map[bool]int{true: 1, false: 0}[marked]; words != want {
			t.Errorf("marked %v: %d suspects, want %d", marked, words, want)
		}
	}
}
