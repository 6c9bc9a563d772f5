package draw

import (
	"image"
	"image/color"
	"math"

	"gonum.org/v1/plot/font"
	"gonum.org/v1/plot/vg"
)

// A watcher is a canvas that keeps what text is written and where, and how far
// strokes reach.
type watcher struct {
	texts []textBox
	reach vg.Rectangle
	turns []turn // the current one last
}

type textBox struct {
	text  string
	box   vg.Rectangle
	color color.Color
}

// A turn is a transform: a rotation, then a shift.
type turn struct {
	rad   float64
	shift vg.Point
	color color.Color
}

func watch(p *Picture, withHeader bool) *watcher {
	w := &watcher{turns: []turn{{}}}
	width, height := vg.Length(p.Width), vg.Length(p.Height)
	if withHeader {
		width, height = p.sizeWithHeader()
	}
	p.draw(w, width, height, withHeader)
	return w
}

func (w *watcher) top() *turn { return &w.turns[len(w.turns)-1] }

func (w *watcher) on(at vg.Point) vg.Point {
	t := w.top()
	sin, cos := math.Sincos(t.rad)
	return t.shift.Add(vg.Point{X: at.X*vg.Length(cos) - at.Y*vg.Length(sin), Y: at.X*vg.Length(sin) + at.Y*vg.Length(cos)})
}

func (w *watcher) SetLineWidth(vg.Length)              {}
func (w *watcher) SetLineDash([]vg.Length, vg.Length)  {}
func (w *watcher) SetColor(c color.Color)              { w.top().color = c }
func (w *watcher) Rotate(rad float64)                  { w.top().rad += rad }
func (w *watcher) Translate(by vg.Point)               { w.top().shift = w.on(by) }
func (w *watcher) Scale(x, y float64)                  { panic("nothing is scaled") }
func (w *watcher) Push()                               { w.turns = append(w.turns, *w.top()) }
func (w *watcher) Pop()                                { w.turns = w.turns[:len(w.turns)-1] }
func (w *watcher) DrawImage(vg.Rectangle, image.Image) {}
func (w *watcher) Fill(p vg.Path)                      { w.Stroke(p) }

func (w *watcher) Stroke(p vg.Path) {
	for _, c := range p {
		if c.Type == vg.MoveComp || c.Type == vg.LineComp {
			at := w.on(c.Pos)
			w.reach.Min.X, w.reach.Max.X = min(w.reach.Min.X, at.X), max(w.reach.Max.X, at.X)
			w.reach.Min.Y, w.reach.Max.Y = min(w.reach.Min.Y, at.Y), max(w.reach.Max.Y, at.Y)
		}
	}
}

// FillString keeps the box of what is seen of a text: from a little below the line
// it stands on to the height of its capitals.
func (w *watcher) FillString(f font.Face, at vg.Point, text string) {
	size := f.Font.Size
	a, b := w.on(at.Add(vg.Point{Y: -0.15 * size})), w.on(at.Add(vg.Point{X: f.Width(text), Y: 0.72 * size}))
	w.texts = append(w.texts, textBox{text, vg.Rectangle{
		Min: vg.Point{X: min(a.X, b.X), Y: min(a.Y, b.Y)}, Max: vg.Point{X: max(a.X, b.X), Y: max(a.Y, b.Y)},
	}, w.top().color})
}
