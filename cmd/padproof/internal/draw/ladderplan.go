package draw

import (
	"strings"

	"gonum.org/v1/plot/vg"

	"padproof/cmd/padproof/internal/result"
)

// plan sets the ladder out between a source and a load, where they are drawn.
func (l *ladder) plan(ends *result.Ends) *plan {
	p := &plan{height: l.setRows()}
	start := vg.Length(edge + 12)
	if ends != nil {
		start += blockWidth + blockGap - 8
	}
	right := l.setColumns(start+pinLead) + pinLead
	p.width = right + start
	for node := range l.row {
		if node != screenPin && (l.used[node] || isPin(node)) {
			l.drawNode(p, node, start, right)
		}
	}
	for _, r := range l.series {
		l.drawRun(p, r)
	}
	for _, u := range l.uprights {
		l.drawUpright(p, u)
	}
	l.drawScreen(p, start, right)
	if ends != nil {
		l.drawEnds(p, *ends, start, right)
	}
	return p
}

// drawNode draws a node as a level wire that reaches all that joins it, with its
// pin where it has one.
func (l *ladder) drawNode(p *plan, node string, start, right vg.Length) {
	y, c := l.rowY[l.row[node]], l.columns[l.col[node]]
	xs := l.joinsOf(node)
	switch node {
	case inHot, inCold:
		xs = append(xs, start)
		p.pins = append(p.pins, pin{name: node, at: vg.Point{X: start, Y: y}})
	case outHot, outCold:
		xs = append(xs, right)
		p.pins = append(p.pins, pin{name: node, at: vg.Point{X: right, Y: y}, output: true})
	}
	if len(xs) == 0 {
		xs = append(xs, c.left)
	}
	from, to := minMax(xs)
	p.wire(vg.Point{X: from, Y: y}, vg.Point{X: to, Y: y})
	if degree := l.degree(node); degree >= 3 || degree == 2 && isPin(node) {
		for _, u := range l.uprights {
			if u.upper == node || u.lower == node {
				p.dots = append(p.dots, vg.Point{X: c.slots[u.slot], Y: y})
			}
		}
		for _, r := range l.series {
			if r.lane > 0 && (r.left == node || r.right == node) {
				p.dots = append(p.dots, vg.Point{X: l.riser(r, node), Y: y})
			}
		}
	}
}

// joinsOf are the places on a node's row where parts join it.
func (l *ladder) joinsOf(node string) []vg.Length {
	c := l.columns[l.col[node]]
	var xs []vg.Length
	for _, u := range l.uprights {
		if u.upper == node || u.lower == node {
			xs = append(xs, c.slots[u.slot])
		}
	}
	for _, r := range l.series {
		switch {
		case r.left != node && r.right != node:
		case r.lane > 0:
			xs = append(xs, l.riser(r, node))
		case r.left == node:
			xs = append(xs, c.right)
		default:
			xs = append(xs, c.left)
		}
	}
	return xs
}

// riser is where a part in a lane leaves its node's row.
func (l *ladder) riser(r run, node string) vg.Length {
	c := l.columns[l.col[node]]
	if r.left == node {
		return c.left - 6
	}
	return c.right + 6
}

func (l *ladder) drawRun(p *plan, r run) {
	y := l.rowY[l.row[r.left]]
	if r.lane == 0 {
		a, b := vg.Point{X: l.columns[l.col[r.left]].right, Y: y}, vg.Point{X: l.columns[l.col[r.right]].left, Y: y}
		p.symbols = append(p.symbols, symbol{part: r.part, a: a, b: b, middle: vg.Point{X: l.middleOf(r.left), Y: y}, marked: l.isMarked(r.part)})
		return
	}
	offset := -vg.Length(r.lane) * l.laneStep()
	if l.row[r.left] == coldRow {
		offset = -offset
	}
	from, to := l.riser(r, r.left), l.riser(r, r.right)
	middle := mean(from, to)
	if l.row[r.left] == coldRow { // uprights cross the lanes below: the body stands clear of them
		middle = l.middleOf(r.left)
	}
	a, b := vg.Point{X: from, Y: y + offset}, vg.Point{X: to, Y: y + offset}
	p.wire(vg.Point{X: from, Y: y}, a)
	p.wire(vg.Point{X: to, Y: y}, b)
	p.symbols = append(p.symbols, symbol{part: r.part, a: a, b: b, middle: vg.Point{X: middle, Y: a.Y}, marked: l.isMarked(r.part)})
}

func (l *ladder) drawUpright(p *plan, u upright) {
	x := l.columns[u.col].slots[u.slot]
	a, b := vg.Point{X: x, Y: l.rowY[u.from]}, vg.Point{X: x, Y: l.rowY[u.to]}
	upper := a.Y
	if u.from == coldRow {
		upper += vg.Length(l.lanes(coldRow)) * l.laneStep()
	}
	next := b.Y // the body stands above the first row below its upper end
	for row := u.from + 1; row < u.to; row++ {
		if l.rowY[row] > 0 {
			next = min(next, l.rowY[row])
		}
	}
	p.symbols = append(p.symbols, symbol{part: u.part, a: a, b: b, middle: vg.Point{X: x, Y: mean(upper, next)}, upright: true, marked: l.isMarked(u.part)})
	if u.to == screenRow {
		p.dots = append(p.dots, b)
	}
}

// drawScreen draws the screen from end to end: a wire where something is joined to
// it, else dashed.
func (l *ladder) drawScreen(p *plan, start, right vg.Length) {
	y := l.rowY[screenRow]
	line := []vg.Point{{X: start, Y: y}, {X: right, Y: y}}
	name := screenPin
	if l.unbalanced {
		name = "cold, screen"
	}
	if l.unbalanced || l.used[screenPin] {
		p.wire(line...)
	} else {
		p.dashed = append(p.dashed, line)
	}
	p.pins = append(p.pins, pin{name: name, at: line[0], below: true}, pin{name: name, at: line[1], below: true, output: true})
}

// drawEnds draws source and load.
func (l *ladder) drawEnds(p *plan, e result.Ends, start, right vg.Length) {
	top, bottom := l.rowY[hotRow]-14, l.rowY[screenRow]+20
	source := vg.Rectangle{Min: vg.Point{X: start - blockGap - blockWidth, Y: top}, Max: vg.Point{X: start - blockGap, Y: bottom}}
	load := vg.Rectangle{Min: vg.Point{X: right + blockGap, Y: top}, Max: vg.Point{X: right + blockGap + blockWidth, Y: bottom}}
	p.blocks = append(p.blocks,
		block{source, small.wrapAll([]string{"source", ohms(e.SourceOhms), strings.ReplaceAll(e.Drive, "-", "- ")}, blockWidth-6)},
		block{load, small.wrapAll(loadWords(e), blockWidth-6)})
	for row, y := range l.rowY {
		if y > 0 && row != middleRow {
			p.wire(vg.Point{X: start - blockGap, Y: y}, vg.Point{X: start, Y: y})
			p.wire(vg.Point{X: right, Y: y}, vg.Point{X: right + blockGap, Y: y})
		}
	}
}

func loadWords(e result.Ends) []string {
	words := []string{"load", ohms(e.LoadOhms), e.Sense}
	if e.CablePF.OK() && e.CablePF > 0 {
		words = append(words, "cable "+give(e.CablePF)+" pF")
	}
	return words
}

// wrapAll breaks each text into lines of a width.
func (h hand) wrapAll(texts []string, width vg.Length) []string {
	var lines []string
	for _, t := range texts {
		lines = append(lines, h.wrap(t, width, 2)...)
	}
	return lines
}

// ohms writes a resistance to three digits; beyond a gigohm it is as good as open.
func ohms(n result.Number) string {
	if n < 0 || n >= 999.5e6 {
		return "open"
	}
	return n.Ohms(3)
}
