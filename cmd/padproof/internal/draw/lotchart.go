package draw

import (
	"math"
	"slices"
	"strconv"
	"strings"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"

	"padproof/cmd/padproof/internal/result"
)

// LotChart draws a figure unit by unit in the order of the serials, with the limits
// of its chart and the points that break a rule marked, and below it how far each
// lies from the one before. The limits are the chart's, made from the units
// themselves; those of the drawing stand in [LotSpread].
func LotChart(l *result.Lot, drawing int, check string) *Picture {
	name := fileOf("chart", check, drawing)
	s, ok := seriesOf(l, drawing, check)
	if !ok || s.Chart == nil || len(s.values) < 2 {
		return nothing(name, "Chart of "+check, "a chart wants two units that give a "+check)
	}
	p := &Picture{Name: name, Title: "Chart of " + check + ": " + s.title, Says: s.chartSays(), Simulated: s.simulated, Width: usualWidth, Height: usualHeight + 66}
	p.paint = func(sh *sheet) { s.drawChart(sh) }
	return p
}

const (
	dottedUpTo  = 100 // more points than that are a line alone
	rangeHeight = 72
	panelsApart = 28
)

func (s lotSeries) drawChart(sh *sheet) {
	c := s.Chart
	xs := make([]float64, len(s.values))
	ranges := make([]float64, len(s.values)-1)
	for i := range xs {
		xs[i] = float64(i + 1)
		if i > 0 {
			ranges[i-1] = math.Abs(s.values[i] - s.values[i-1])
		}
	}
	x := s.unitsAxis()
	level := near(s.values, float64(c.Centre), float64(c.High-c.Low)/2)
	jump := near(ranges, 0, float64(c.RangeHigh))
	upper := &panel{sheet: sh, x: x, y: s.aired(level, s.Check+", "+s.Unit)}
	lower := &panel{sheet: sh, x: x, y: s.aired(jump, "from the unit before, "+s.Unit)}
	lower.y.min, lower.y.ticks = 0, slices.DeleteFunc(lower.y.ticks, func(t plot.Tick) bool { return t.Value < 0 })
	left, right := sh.Min.X+edge+yRoom(upper.y, lower.y), sh.Max.X-labelRoom
	bottom := sh.Min.Y + edge + xLabelGap + small.line()
	lower.box = vg.Rectangle{Min: vg.Point{X: left, Y: bottom}, Max: vg.Point{X: right, Y: bottom + rangeHeight}}
	upper.box = vg.Rectangle{Min: vg.Point{X: left, Y: bottom + rangeHeight + panelsApart}, Max: vg.Point{X: right, Y: sh.Max.Y - captionLine}}
	for _, p := range []*panel{upper, lower} {
		sh.write(side, sh.Min.X+edge, p.box.Max.Y+10, fromLeft, p.y.caption)
		p.rule(p == lower)
	}
	upper.level(float64(c.High), asThird, "chart limit "+s.number(c.High))
	upper.level(float64(c.Centre), asDrawn, "mean "+s.number(c.Centre))
	upper.level(float64(c.Low), asThird, "chart limit "+s.number(c.Low))
	lower.level(float64(c.RangeHigh), asThird, "chart limit "+s.number(c.RangeHigh))
	lower.level(float64(c.MeanRange), asDrawn, "mean "+s.number(c.MeanRange))
	broken, jumps := s.broken()
	upper.points(xs, s.values, s.beyondEdge(broken, s.values, upper.y))
	lower.points(xs[1:], ranges, s.beyondEdge(jumps, ranges, lower.y))
	upper.nameLines()
	lower.nameLines()
}

// near takes in the limits about a centre and all points but those that lie more
// than three times as far off: they would squeeze the others, and stand at the edge.
func near(values []float64, centre, reach float64) span {
	s := nowhere()
	s.take(centre-reach, centre+reach)
	for _, v := range values {
		if math.Abs(v-centre) <= 3*reach {
			s.take(v)
		}
	}
	return s
}

// aired is an axis that takes in a span and, for the names of points, some air.
func (s lotSeries) aired(of span, caption string) axis {
	air := math.Max(0.12*(of.high-of.low), math.Max(zeroIfMissing(float64(s.u))/2, 1e-3))
	return evenly(of.low-air, of.high+air, caption)
}

// unitsAxis counts the units in the order of their serials. Ticks bear serials
// where these are short enough.
func (s lotSeries) unitsAxis() axis {
	n := len(s.values)
	a := axis{min: 0.5, max: float64(n) + 0.5, caption: "units in the order of their serials, by serial"}
	step := int(math.Max(1, niceStep(float64(n)/6)))
	places := []int{1}
	for k := step; k <= n; k += step {
		if k > 1 && k-1 >= (step+1)/2 {
			places = append(places, k)
		}
	}
	fits := true
	for _, k := range places {
		fits = fits && small.width(s.units[k-1]) <= 0.8*vg.Length(step)*(usualWidth-labelRoom-50)/vg.Length(n) && clean(s.units[k-1]) != ""
	}
	if !fits {
		a.caption = "units in the order of their serials, counted"
	}
	for _, k := range places {
		t := plot.Tick{Value: float64(k), Label: strconv.Itoa(k)}
		if fits {
			t.Label = clean(s.units[k-1])
		}
		a.ticks = append(a.ticks, t)
	}
	return a
}

// A mark is a stretch of points that break a rule.
type mark struct {
	points []int
	name   string
}

// broken are the stretches of points that break a rule, and the moving ranges that
// are over their limit. Units are told by their names; one that has no point is
// left out.
func (s lotSeries) broken() (points, ranges []mark) {
	place := map[string]int{}
	for i, u := range s.units {
		place[u] = i
	}
	for _, b := range s.Chart.Breaks {
		m := mark{name: unitsOf(b)}
		for _, u := range b.Units {
			if i, known := place[u]; known {
				m.points = append(m.points, i)
			}
		}
		if len(m.points) == 0 {
			continue
		}
		if !isRangeBreak(b) {
			points = append(points, m)
		} else if last := m.points[len(m.points)-1]; last > 0 {
			ranges = append(ranges, mark{[]int{last - 1}, s.units[last]})
		}
	}
	return points, ranges
}

// isRangeBreak tells a break of the moving range by the name of its rule.
func isRangeBreak(b result.Break) bool { return strings.HasPrefix(b.Rule, "moving range") }

// points draws a line through the points, dots where they are not too many, and
// those that break a rule full and large, the first of them with their names.
func (p *panel) points(xs, ys []float64, marks []mark) {
	p.curve(xs, ys, asOther)
	if len(xs) <= dottedUpTo {
		for i := range xs {
			p.disc(p.place(xs[i], ys[i]), 1.5, blue, blue)
		}
	}
	marked := map[int]bool{}
	for _, m := range marks {
		for _, i := range m.points {
			if !marked[i] {
				p.disc(p.place(xs[i], ys[i]), 2.6, ink, ink)
			}
			marked[i] = true
		}
	}
	for k, m := range marks {
		if k == mostNamed {
			break
		}
		i := m.points[len(m.points)/2]
		p.say(xs[i], ys[i], m.name)
	}
}

// beyondEdge adds to the name of a point that stands at the edge how far it is.
func (s lotSeries) beyondEdge(marks []mark, values []float64, y axis) []mark {
	for k, m := range marks {
		if v := values[m.points[0]]; len(m.points) == 1 && (v < y.min || v > y.max) {
			marks[k].name = small.clip(m.name, 60) + " at " + s.number(result.Number(v))
		}
	}
	return marks
}
