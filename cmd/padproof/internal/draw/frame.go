package draw

import (
	"image/color"
	"math"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/text"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// A frame is a picture of curves: two axes, what is drawn between them, and the
// names of the lines at its right.
type frame struct {
	x, y   axis
	bands  []band
	curves []curve
	stems  []stem
	notes  []note
}

// A curve is a line through points. It breaks where a point is missing.
type curve struct {
	xs, ys []float64
	look   look
	label  string // "" for none
}

// A band is what lies between two lines.
type band struct {
	xs, lows, highs []float64
	color           color.NRGBA
	label           string
}

// A stem is a line from the bottom up to a level, for what has no width.
type stem struct {
	x, y float64
	look look
}

// A note is a point that is pointed out.
type note struct {
	x, y  float64
	text  string
	mark  bool // with a ring about the point
	below bool // the words go below it rather than above
}

const labelRoom = 92 // to the right of a frame, with the gap

// flat is a level line from end to end.
func (f *frame) flat(y float64, l look, label string) {
	f.curves = append(f.curves, curve{xs: []float64{f.x.min, f.x.max}, ys: []float64{y, y}, look: l, label: label})
}

// paint draws the frame on all of a sheet.
func (f *frame) paint(s *sheet) {
	p := plot.New()
	p.BackgroundColor = nil
	setAxis(&p.X, f.x)
	setAxis(&p.Y, f.y)
	p.X.Label.Text = f.x.caption
	p.X.Label.TextStyle = style(side, draw.XCenter, draw.YBottom)
	p.X.Label.Padding = 1
	p.Add(grid{f})
	for _, b := range f.bands {
		p.Add(b)
	}
	for _, st := range f.stems {
		p.Add(st)
	}
	for _, c := range f.curves {
		p.Add(c)
	}
	area := draw.Crop(s.Canvas, edge, -labelRoom, 4, -captionLine)
	s.write(side, s.Min.X+edge, area.Max.Y+10, fromLeft, f.y.caption)
	p.Draw(area)
	data := p.DataCanvas(area)
	s.box(asEdge, data.Rectangle)
	f.drawLabels(s, p, data)
	f.drawNotes(s, p, data)
}

func setAxis(a *plot.Axis, from axis) {
	a.Min, a.Max = from.min, from.max
	if from.log {
		a.Scale = plot.LogScale{}
	}
	a.Padding = 0
	a.LineStyle.Width = 0 // the frame is drawn once, about the data
	a.Tick.LineStyle = asEdge.style()
	a.Tick.Length = 4
	a.Tick.Label = style(small, a.Tick.Label.XAlign, a.Tick.Label.YAlign)
	a.Tick.Marker = plot.ConstantTicks(from.ticks)
}

// style is a hand in the form in which gonum's axes take it.
func style(h hand, x text.XAlignment, y text.YAlignment) text.Style {
	return text.Style{Color: h.color, Font: h.font(), XAlign: x, YAlign: y, Handler: text.Plain{Fonts: fonts}}
}

// at is where a point lies on the canvas.
func at(c draw.Canvas, p *plot.Plot, x, y float64) vg.Point {
	return vg.Point{X: c.X(p.X.Norm(x)), Y: c.Y(p.Y.Norm(y))}
}

// A grid draws a faint line at each tick.
type grid struct{ f *frame }

func (g grid) Plot(c draw.Canvas, p *plot.Plot) {
	for _, t := range g.f.x.ticks {
		x := c.X(p.X.Norm(t.Value))
		c.StrokeLine2(asGrid.style(), x, c.Min.Y, x, c.Max.Y)
	}
	for _, t := range g.f.y.ticks {
		y := c.Y(p.Y.Norm(t.Value))
		c.StrokeLine2(asGrid.style(), c.Min.X, y, c.Max.X, y)
	}
}

// Plot draws the line, piece by piece.
func (l curve) Plot(c draw.Canvas, p *plot.Plot) {
	for _, piece := range pieces(p, l.xs, l.ys) {
		points := make([]vg.Point, 0, len(piece))
		for _, i := range piece {
			points = append(points, at(c, p, l.xs[i], kept(l.ys[i])))
		}
		if len(points) == 1 { // a point alone is a short dash
			points = []vg.Point{points[0].Add(vg.Point{X: -2}), points[0].Add(vg.Point{X: 2})}
		}
		c.StrokeLines(l.look.style(), c.ClipLinesXY(points)...)
	}
}

// Plot paints the band, piece by piece.
func (b band) Plot(c draw.Canvas, p *plot.Plot) {
	width := make([]float64, len(b.xs))
	for i := range width {
		width[i] = b.highs[i] - b.lows[i]
	}
	for _, piece := range pieces(p, b.xs, width) {
		var points []vg.Point
		for _, i := range piece {
			points = append(points, at(c, p, b.xs[i], kept(b.highs[i])))
		}
		for n := len(piece) - 1; n >= 0; n-- {
			points = append(points, at(c, p, b.xs[piece[n]], kept(b.lows[piece[n]])))
		}
		c.FillPolygon(b.color, c.ClipPolygonXY(points))
	}
}

// Plot draws the stem up to its level.
func (st stem) Plot(c draw.Canvas, p *plot.Plot) {
	if !drawable(st.x, st.y) || st.x < p.X.Min || st.x > p.X.Max || st.y < p.Y.Min {
		return
	}
	top := at(c, p, st.x, math.Min(st.y, p.Y.Max))
	c.StrokeLine2(st.look.style(), top.X, c.Min.Y, top.X, top.Y)
}

// furthestX is beyond any frequency or time that a take has.
const furthestX = 1e7

// kept keeps a level within what can be drawn.
func kept(v float64) float64 { return math.Max(-2*furthestDB, math.Min(2*furthestDB, v)) }

func drawable(x, y float64) bool {
	return !math.IsNaN(x) && !math.IsInf(x, 0) && !math.IsNaN(y) && !math.IsInf(y, 0)
}

// pieces are the runs of points that can be drawn on a plot's axes.
func pieces(p *plot.Plot, xs, ys []float64) [][]int {
	_, log := p.X.Scale.(plot.LogScale)
	var all [][]int
	open := false
	for i := range min(len(xs), len(ys)) {
		if !drawable(xs[i], ys[i]) || log && xs[i] < lowestDrawn || math.Abs(xs[i]) > furthestX {
			open = false
			continue
		}
		if !open {
			all, open = append(all, nil), true
		}
		all[len(all)-1] = append(all[len(all)-1], i)
	}
	return all
}
