package draw

import "gonum.org/v1/plot/vg"

// A plan is a schematic set out: lines and symbols with their places, the origin at
// the top left and y growing downwards.
type plan struct {
	width, height vg.Length
	symbols       []symbol
	wires         [][]vg.Point
	dashed        [][]vg.Point // the screen where nothing is joined to it
	dots          []vg.Point
	pins          []pin
	words         []planWord
	blocks        []block // source and load
}

// A pin is a terminal of the pad, its name above it.
type pin struct {
	name          string
	at            vg.Point
	below, output bool // the name stands below it; it is at the right end
}

// A planWord is a line of text.
type planWord struct {
	text  string
	at    vg.Point
	align float64
	hand  hand
}

// A block is a dashed box with words in it.
type block struct {
	box   vg.Rectangle
	lines []string
}

func (p *plan) wire(points ...vg.Point) { p.wires = append(p.wires, points) }

// draw draws the plan in the middle of a sheet, below the caption's line.
func (p *plan) draw(s *sheet, top vg.Length) {
	left := s.Min.X + (s.Max.X-s.Min.X-p.width)/2
	on := func(at vg.Point) vg.Point { return vg.Point{X: left + at.X, Y: s.Max.Y - top - at.Y} }
	all := func(points []vg.Point) []vg.Point {
		moved := make([]vg.Point, len(points))
		for i, at := range points {
			moved[i] = on(at)
		}
		return moved
	}
	for _, w := range p.dashed {
		s.stroke(asScreen, all(w)...)
	}
	for _, w := range p.wires {
		s.stroke(asWire, all(w)...)
	}
	for _, y := range p.symbols {
		y.a, y.b, y.middle = on(y.a), on(y.b), on(y.middle)
		y.draw(s)
	}
	for _, d := range p.dots {
		s.disc(on(d), dotRadius, ink, ink)
	}
	for _, q := range p.pins {
		at := on(q.at)
		s.disc(at, pinRadius, paper, ink)
		switch {
		case q.below && q.output:
			s.write(small, at.X+12, at.Y-pinRadius-10, fromRight, q.name)
		case q.below:
			s.write(small, at.X-12, at.Y-pinRadius-10, fromLeft, q.name)
		case q.output:
			s.write(small, at.X+12, at.Y+pinRadius+4, fromRight, q.name)
		default:
			s.write(small, at.X-12, at.Y+pinRadius+4, fromLeft, q.name)
		}
	}
	for _, w := range p.words {
		at := on(w.at)
		s.write(w.hand, at.X, at.Y, w.align, w.text)
	}
	for _, b := range p.blocks {
		b.box = vg.Rectangle{Min: on(vg.Point{X: b.box.Min.X, Y: b.box.Max.Y}), Max: on(vg.Point{X: b.box.Max.X, Y: b.box.Min.Y})}
		b.draw(s)
	}
}

func (b block) draw(s *sheet) {
	s.box(look{color: quiet, width: 0.8, dash: []vg.Length{2, 2}}, b.box)
	y := (b.box.Min.Y+b.box.Max.Y)/2 + vg.Length(len(b.lines))*small.line()/2 - small.size
	for i, line := range b.lines {
		h := small
		if i == 0 {
			h.bold = true
		}
		s.write(h, (b.box.Min.X+b.box.Max.X)/2, y, centred, line)
		y -= small.line()
	}
}

func lengthOf(points float64) vg.Length { return vg.Length(points) }

func pointOf(x, y float64) vg.Point { return vg.Point{X: vg.Length(x), Y: vg.Length(y)} }
