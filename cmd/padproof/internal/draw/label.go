package draw

import (
	"image/color"
	"math"
	"sort"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// A label names a line where it ends.
type label struct {
	lines  []string
	from   vg.Point // where the line ends
	middle vg.Length
	look   look
	wash   *color.NRGBA // of a band
}

const (
	sampleLength = 14
	labelGap     = 3
)

func (l label) height() vg.Length { return vg.Length(len(l.lines)) * small.line() }

// drawLabels names each line at the right of the frame, at the height where it
// ends or as near as the others let it, with a piece of the line before its name.
func (f *frame) drawLabels(s *sheet, p *plot.Plot, data draw.Canvas) {
	left := data.Max.X + 10
	room := s.Max.X - edge - left - sampleLength - labelGap
	var labels []label
	for _, c := range f.curves {
		if end, ok := lastOf(c.xs, c.ys, p, data); ok && c.label != "" {
			labels = append(labels, label{lines: small.wrap(c.label, room, 3), from: end, middle: end.Y, look: c.look})
		}
	}
	for _, b := range f.bands {
		middles := make([]float64, len(b.xs))
		for i := range middles {
			middles[i] = (kept(b.lows[i]) + kept(b.highs[i])) / 2
		}
		if end, ok := lastOf(b.xs, middles, p, data); ok && b.label != "" {
			labels = append(labels, label{lines: small.wrap(b.label, room, 3), from: end, middle: end.Y, wash: &b.color})
		}
	}
	setApart(labels, s.Min.Y+4, data.Max.Y+4)
	for _, l := range labels {
		l.draw(s, left, data.Max.X)
	}
}

// lastOf is where a line ends, brought into the frame.
func lastOf(xs, ys []float64, p *plot.Plot, data draw.Canvas) (vg.Point, bool) {
	for i := min(len(xs), len(ys)) - 1; i >= 0; i-- {
		if drawable(xs[i], ys[i]) && xs[i] >= p.X.Min && xs[i] <= p.X.Max {
			end := at(data, p, xs[i], kept(ys[i]))
			end.Y = vg.Length(math.Max(float64(data.Min.Y), math.Min(float64(data.Max.Y), float64(end.Y))))
			return end, true
		}
	}
	return vg.Point{}, false
}

func (l label) draw(s *sheet, left, frameRight vg.Length) {
	start := vg.Point{X: left, Y: l.middle}
	s.stroke(asLeader, l.from, vg.Point{X: frameRight + 2, Y: l.from.Y}, start)
	end := vg.Point{X: left + sampleLength, Y: l.middle}
	if l.wash != nil {
		s.fill(*l.wash, vg.Point{X: left, Y: l.middle - 4}, vg.Point{X: end.X, Y: l.middle - 4}, vg.Point{X: end.X, Y: l.middle + 4}, vg.Point{X: left, Y: l.middle + 4})
	} else {
		s.stroke(l.look, start, end)
	}
	y := l.middle + l.height()/2 - small.size
	for _, line := range l.lines {
		s.write(small, end.X+labelGap, y+1, fromLeft, line)
		y -= small.line()
	}
}

// setApart moves labels up and down until none lies on another, all between low
// and high, each as near to where it belongs as the order of their places lets it.
// Where they are too many for the room they fill it from the top.
func setApart(labels []label, low, high vg.Length) {
	sort.SliceStable(labels, func(i, j int) bool { return labels[i].middle > labels[j].middle })
	top := high
	for i := range labels { // push down from the top
		half := labels[i].height() / 2
		labels[i].middle = min(labels[i].middle, top-half)
		top = labels[i].middle - half
	}
	bottom := low
	for i := len(labels) - 1; i >= 0; i-- { // and up from the bottom
		half := labels[i].height() / 2
		labels[i].middle = max(labels[i].middle, bottom+half)
		bottom = labels[i].middle + half
	}
}
