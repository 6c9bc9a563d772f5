package draw

import (
	"math"

	"gonum.org/v1/plot/vg"
)

// A panel is a rectangle between two axes, set out by itself: so that two can
// stand over one another with one axis for both, and names over what stands upright.
type panel struct {
	*sheet
	box  vg.Rectangle
	x, y axis

	lines  [][2]vg.Point  // what has been drawn, for words to keep off
	taken  []vg.Rectangle // by words
	labels []label        // at the right
}

const (
	yLabelGap = 6
	xLabelGap = 12
)

// yRoom is the width that an axis's labels want to the left of a panel.
func yRoom(axes ...axis) vg.Length {
	var wide vg.Length
	for _, a := range axes {
		for _, t := range a.ticks {
			wide = max(wide, small.width(t.Label))
		}
	}
	return wide + yLabelGap
}

// place is where a point lies, within the box.
func (p *panel) place(x, y float64) vg.Point {
	part := func(v float64, a axis, low, high vg.Length) vg.Length {
		f := (v - a.min) / (a.max - a.min)
		return low + vg.Length(math.Max(0, math.Min(1, f)))*(high-low)
	}
	return vg.Point{X: part(x, p.x, p.box.Min.X, p.box.Max.X), Y: part(y, p.y, p.box.Min.Y, p.box.Max.Y)}
}

// rule draws the grid, the axes and their labels; those of the x axis only where
// they are wanted.
func (p *panel) rule(xLabels bool) {
	for _, t := range p.y.ticks {
		y := p.place(0, t.Value).Y
		p.stroke(asGrid, vg.Point{X: p.box.Min.X, Y: y}, vg.Point{X: p.box.Max.X, Y: y})
		p.write(small, p.box.Min.X-yLabelGap, y-3, fromRight, t.Label)
	}
	for _, t := range p.x.ticks {
		x := p.place(t.Value, 0).X
		p.stroke(asGrid, vg.Point{X: x, Y: p.box.Min.Y}, vg.Point{X: x, Y: p.box.Max.Y})
		if xLabels {
			p.write(small, x, p.box.Min.Y-xLabelGap, centred, t.Label)
		}
	}
	if xLabels {
		p.write(side, (p.box.Min.X+p.box.Max.X)/2, p.box.Min.Y-xLabelGap-small.line(), centred, p.x.caption)
	}
	p.sheet.box(asEdge, p.box)
}

// level draws a line from side to side, with its name at the right.
func (p *panel) level(y float64, l look, name string) {
	if !drawable(0, y) || y < p.y.min || y > p.y.max {
		return
	}
	from, to := p.place(p.x.min, y), p.place(p.x.max, y)
	p.stroke(l, from, to)
	p.lines = append(p.lines, [2]vg.Point{from, to})
	p.labels = append(p.labels, label{lines: small.wrap(name, p.labelWidth(), 3), from: to, middle: to.Y, look: l})
}

// curve draws a line through points.
func (p *panel) curve(xs, ys []float64, l look) {
	var points []vg.Point
	for i := range xs {
		points = append(points, p.place(xs[i], ys[i]))
		if i > 0 {
			p.lines = append(p.lines, [2]vg.Point{points[i-1], points[i]})
		}
	}
	p.stroke(l, points...)
}

func (p *panel) labelWidth() vg.Length {
	return p.Max.X - edge - p.box.Max.X - 10 - sampleLength - labelGap
}

// nameLines names the lines at the right.
func (p *panel) nameLines() {
	setApart(p.labels, p.box.Min.Y-4, p.box.Max.Y+4)
	for _, l := range p.labels {
		l.draw(p.sheet, p.box.Max.X+10, p.box.Max.X)
	}
}

// say writes words beside a point, where they lie on nothing else.
func (p *panel) say(x, y float64, text string) {
	n := note{text: small.clip(text, (p.box.Max.X-p.box.Min.X)/2)}
	if n.text == "" {
		return
	}
	if box, ok := placeFor(n, p.place(x, y), p.box, p.taken, p.lines); ok {
		p.taken = append(p.taken, box)
		p.paintOver(box)
		p.write(small, box.Min.X+1, box.Min.Y+2.5, fromLeft, n.text)
	}
}

// sideBySide moves texts left and right until none lies on another, all between
// low and high, given where their middles belong in rising order.
func sideBySide(middles, widths []vg.Length, low, high vg.Length) {
	right := high
	for i := len(middles) - 1; i >= 0; i-- {
		middles[i] = min(middles[i], right-widths[i]/2)
		right = middles[i] - widths[i]/2
	}
	left := low
	for i := range middles {
		middles[i] = max(middles[i], left+widths[i]/2)
		left = middles[i] + widths[i]/2
	}
}
