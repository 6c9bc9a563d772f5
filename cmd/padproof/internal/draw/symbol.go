package draw

import (
	"math"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"

	"padproof/cmd/padproof/internal/result"
)

// Sizes of a schematic, in points.
const (
	bodyLength = 30 // of a resistor's rectangle, along
	bodyWidth  = 11 // across
	dotRadius  = 2.2
	pinRadius  = 3.0
)

var (
	asWire   = look{"wire", ink, 1, nil}
	asSymbol = look{"symbol", ink, 1.3, nil}
	asMarked = look{"marked", vermilion, 3, nil}
	asScreen = look{"screen", quiet, 0.8, []vg.Length{4, 3}}
)

const suspect = "suspect"

// A symbol is a part between two points, both on one line, upright or level. Its
// body stands at a middle of its own, so that a long lead may cross what it must.
type symbol struct {
	part    result.DrawnPart // its A is joined at a, its B at b
	a, b    vg.Point
	middle  vg.Point
	upright bool
	marked  bool
}

// textOf is a part's value as it is written beside its ref.
func textOf(p result.DrawnPart) string {
	switch {
	case p.Kind == "resistor" && p.Value == 0:
		return "link"
	case p.Code != "":
		return p.Code
	}
	return "?"
}

// textWidth is the room that a part's words take up.
func textWidth(p result.DrawnPart, marked bool) vg.Length {
	width := max(strong.width(clean(shortRef(p.Ref))), plain.width(textOf(p)))
	if marked {
		width = max(width, strong.width(suspect))
	}
	return width
}

// shortRef keeps a long ref from spreading the drawing.
func shortRef(ref string) string { return strong.clip(ref, 60) }

// draw draws leads, body and words.
func (y symbol) draw(s *sheet) {
	// Along the part, from a to b, and across it.
	along := vg.Point{X: 1}
	if y.upright {
		along = vg.Point{Y: -1}
	}
	if (y.b.X-y.a.X)*along.X+(y.b.Y-y.a.Y)*along.Y < 0 {
		y.a, y.b = y.b, y.a
	}
	if y.part.Kind == "resistor" && y.part.Value == 0 {
		s.stroke(asWire, y.a, y.b)
		if y.marked {
			s.stroke(asMarked, y.middle.Sub(along.Scale(bodyLength/2)), y.middle.Add(along.Scale(bodyLength/2)))
		}
		y.words(s)
		return
	}
	half := vg.Length(bodyLength) / 2
	if y.part.Kind == "capacitor" {
		half = 2.5
	}
	s.stroke(asWire, y.a, y.middle.Sub(along.Scale(half)))
	s.stroke(asWire, y.middle.Add(along.Scale(half)), y.b)
	across := vg.Point{X: -along.Y, Y: along.X}
	if y.marked {
		y.body(s, asMarked, along, across)
		y.halo(s, along, across)
	} else {
		y.body(s, asSymbol, along, across)
	}
	y.words(s)
}

// body draws the symbol itself: a rectangle, two plates or four half turns (IEC
// 60617, from memory).
func (y symbol) body(s *sheet, l look, along, across vg.Point) {
	at := func(a, c vg.Length) vg.Point { return y.middle.Add(along.Scale(a)).Add(across.Scale(c)) }
	switch y.part.Kind {
	case "capacitor":
		for _, a := range []vg.Length{-2.5, 2.5} {
			s.stroke(l, at(a, -9), at(a, 9))
		}
	case "inductor":
		const turn = bodyLength / 8.0
		var p vg.Path
		p.Move(at(-bodyLength/2, 0))
		start := math.Atan2(-float64(along.Y), -float64(along.X))
		for i := range 4 {
			p.Arc(at(vg.Length(-3+2*i)*turn, 0), turn, start, -math.Pi)
		}
		s.SetLineStyle(l.style())
		s.Stroke(p)
	default:
		const l2, w2 = bodyLength / 2, bodyWidth / 2
		corners := []vg.Point{at(-l2, -w2), at(l2, -w2), at(l2, w2), at(-l2, w2)}
		s.FillPolygon(paper, corners)
		s.stroke(l, append(corners, corners[0], corners[1])...)
	}
}

// halo draws a dashed frame about a suspect part, so that it is found in grey too.
func (y symbol) halo(s *sheet, along, across vg.Point) {
	const l2, w2 = bodyLength/2 + 6, bodyWidth/2 + 5.5
	at := func(a, c vg.Length) vg.Point { return y.middle.Add(along.Scale(a)).Add(across.Scale(c)) }
	s.StrokeLines(draw.LineStyle{Color: ink, Width: 0.9, Dashes: []vg.Length{3, 2}}, []vg.Point{at(-l2, -w2), at(l2, -w2), at(l2, w2), at(-l2, w2), at(-l2, -w2)})
}

// words writes ref and value: right of an upright part, above and below a level one.
func (y symbol) words(s *sheet) {
	ref, value := shortRef(y.part.Ref), textOf(y.part)
	if y.upright {
		x := y.middle.X + bodyWidth/2 + 5
		if y.part.Kind == "capacitor" {
			x += 4
		}
		if y.marked {
			x += 5
			s.write(strong, x, y.middle.Y-20.5, fromLeft, suspect)
		}
		s.write(strong, x, y.middle.Y+3, fromLeft, ref)
		s.write(plain, x, y.middle.Y-8.5, fromLeft, value)
		return
	}
	up, down := vg.Length(bodyWidth/2+4), vg.Length(bodyWidth/2+4+textSize)
	if y.part.Kind == "capacitor" {
		up, down = up+3, down+3
	}
	if y.marked {
		up, down = up+5, down+5
		s.write(strong, y.middle.X, y.middle.Y-down-textSize-1, centred, suspect)
	}
	s.write(strong, y.middle.X, y.middle.Y+up, centred, ref)
	s.write(plain, y.middle.X, y.middle.Y-down+1, centred, value)
}
