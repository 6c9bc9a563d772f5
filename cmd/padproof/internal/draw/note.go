package draw

import (
	"math"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// drawNotes points points out: a ring about each that wants one, and its words
// above it, or further up or below until they lie on no other words.
func (f *frame) drawNotes(s *sheet, p *plot.Plot, data draw.Canvas) {
	var taken []vg.Rectangle
	for _, n := range f.notes {
		if !drawable(n.x, n.y) || n.x < p.X.Min || n.x > p.X.Max {
			continue
		}
		point := at(data, p, n.x, math.Max(p.Y.Min, math.Min(p.Y.Max, kept(n.y))))
		if n.mark {
			var ring vg.Path
			ring.Move(point.Add(vg.Point{X: 3.5}))
			ring.Arc(point, 3.5, 0, 2*math.Pi)
			s.SetLineStyle(look{color: ink, width: 1.1}.style())
			s.Stroke(ring)
		}
		if n.text == "" {
			continue
		}
		if box, ok := placeFor(n.text, point, data.Rectangle, taken); ok {
			taken = append(taken, box)
			s.paintOver(box)
			s.write(small, box.Min.X+1, box.Min.Y+2.5, fromLeft, n.text)
		}
	}
}

// placeFor finds a place for words near a point, within a rectangle and off what
// is taken.
func placeFor(text string, point vg.Point, within vg.Rectangle, taken []vg.Rectangle) (vg.Rectangle, bool) {
	width, height := small.width(clean(text))+2, vg.Length(small.size+2)
	if width > within.Max.X-within.Min.X {
		return vg.Rectangle{}, false
	}
	x := max(within.Min.X+1, min(within.Max.X-1-width, point.X-width/2))
	for step := range 12 {
		for _, y := range []vg.Length{point.Y + 6 + vg.Length(step)*height, point.Y - 6 - vg.Length(step+1)*height} {
			box := vg.Rectangle{Min: vg.Point{X: x, Y: y}, Max: vg.Point{X: x + width, Y: y + height}}
			if box.Min.Y >= within.Min.Y+1 && box.Max.Y <= within.Max.Y-1 && free(box, taken) {
				return box, true
			}
		}
	}
	return vg.Rectangle{}, false
}

func free(box vg.Rectangle, taken []vg.Rectangle) bool {
	for _, t := range taken {
		if box.Min.X < t.Max.X && t.Min.X < box.Max.X && box.Min.Y < t.Max.Y && t.Min.Y < box.Max.Y {
			return false
		}
	}
	return true
}
