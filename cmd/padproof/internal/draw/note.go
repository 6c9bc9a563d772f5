package draw

import (
	"math"
	"slices"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// drawNotes points points out: a ring about each that wants one, and its words
// beside it where they lie on no other words and, as far as there is such a place,
// on no line.
func (f *frame) drawNotes(s *sheet, p *plot.Plot, data draw.Canvas) {
	var taken []vg.Rectangle
	lines := f.drawnLines(p, data)
	for _, n := range f.notes {
		if !drawable(n.x, n.y) || n.x < p.X.Min || n.x > p.X.Max {
			continue
		}
		point := at(data, p, n.x, math.Max(p.Y.Min, math.Min(p.Y.Max, kept(n.y))))
		if n.mark {
			s.ring(point)
		}
		if n.text = clean(n.text); n.text == "" {
			continue
		}
		if box, ok := placeFor(n, point, data.Rectangle, taken, lines); ok {
			taken = append(taken, box)
			s.paintOver(box)
			s.write(small, box.Min.X+1, box.Min.Y+2.5, fromLeft, n.text)
		}
	}
}

func (s *sheet) ring(about vg.Point) {
	var ring vg.Path
	ring.Move(about.Add(vg.Point{X: 3.5}))
	ring.Arc(about, 3.5, 0, 2*math.Pi)
	s.SetLineStyle(look{color: ink, width: 1.1}.style())
	s.Stroke(ring)
}

// drawnLines are the pieces of all curves and stems, as they are drawn.
func (f *frame) drawnLines(p *plot.Plot, data draw.Canvas) [][2]vg.Point {
	var all [][2]vg.Point
	for _, c := range f.curves {
		for _, piece := range pieces(p, c.xs, c.ys) {
			for k := 1; k < len(piece); k++ {
				i, j := piece[k-1], piece[k]
				all = append(all, [2]vg.Point{at(data, p, c.xs[i], kept(c.ys[i])), at(data, p, c.xs[j], kept(c.ys[j]))})
			}
		}
	}
	for _, st := range f.stems {
		if drawable(st.x, st.y) && st.x > 0 {
			top := at(data, p, st.x, kept(st.y))
			all = append(all, [2]vg.Point{{X: top.X, Y: data.Min.Y}, top})
		}
	}
	return all
}

// placeFor finds a place for the words of a note, within a rectangle and off what
// is taken: above the point or below it, to its left or right, the nearest that no
// line crosses; or else the nearest.
func placeFor(n note, point vg.Point, within vg.Rectangle, taken []vg.Rectangle, lines [][2]vg.Point) (vg.Rectangle, bool) {
	width, height := small.width(n.text)+2, vg.Length(small.size+2)
	if width > within.Max.X-within.Min.X-2 {
		return vg.Rectangle{}, false
	}
	var second vg.Rectangle
	found := false
	for step := range 14 {
		ys := []vg.Length{point.Y + 6 + vg.Length(step)*height/2, point.Y - 6 - height - vg.Length(step)*height/2}
		if n.below {
			slices.Reverse(ys)
		}
		for _, y := range ys {
			for _, shift := range []vg.Length{0.5, 0, 1} { // centred, to the right, to the left
				gap := (0.5 - shift) * 14
				x := max(within.Min.X+1, min(within.Max.X-1-width, point.X-width*shift+gap))
				box := vg.Rectangle{Min: vg.Point{X: x, Y: y}, Max: vg.Point{X: x + width, Y: y + height}}
				if box.Min.Y < within.Min.Y+1 || box.Max.Y > within.Max.Y-1 || !free(box, taken) {
					continue
				}
				if !crossed(box, lines) {
					return box, true
				}
				if !found {
					second, found = box, true
				}
			}
		}
	}
	return second, found
}

func free(box vg.Rectangle, taken []vg.Rectangle) bool {
	return !slices.ContainsFunc(taken, func(t vg.Rectangle) bool {
		return box.Min.X < t.Max.X && t.Min.X < box.Max.X && box.Min.Y < t.Max.Y && t.Min.Y < box.Max.Y
	})
}

// crossMargin is how far words keep from a line.
const crossMargin = 2

// crossed reports whether a piece of a line lies in a box, by its own box, cut to
// the stretch beside it.
func crossed(box vg.Rectangle, lines [][2]vg.Point) bool {
	return slices.ContainsFunc(lines, func(l [2]vg.Point) bool {
		a, b := l[0], l[1]
		if a.X > b.X {
			a, b = b, a
		}
		if b.X < box.Min.X-crossMargin || a.X > box.Max.X+crossMargin {
			return false
		}
		if b.X > a.X {
			slope := float64((b.Y - a.Y) / (b.X - a.X))
			if a.X < box.Min.X {
				a = vg.Point{X: box.Min.X, Y: a.Y + vg.Length(slope)*(box.Min.X-a.X)}
			}
			if b.X > box.Max.X {
				b = vg.Point{X: box.Max.X, Y: b.Y - vg.Length(slope)*(b.X-box.Max.X)}
			}
		}
		return max(a.Y, b.Y) > box.Min.Y-crossMargin && min(a.Y, b.Y) < box.Max.Y+crossMargin
	})
}
