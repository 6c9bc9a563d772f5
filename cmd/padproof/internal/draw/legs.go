package draw

import (
	"math"

	"gonum.org/v1/plot/vg"

	"padproof/cmd/padproof/internal/result"
)

// Legs draws how far each leg of the output, and hot over cold, lies from what
// the drawing gives.
func Legs(a *result.Answer) *Picture {
	title := titleOf(a, "Leg levels")
	c := checkOf(a, "legs")
	if a == nil || a.Curves == nil || a.Curves.Legs == nil || c == nil {
		return nothing("legs", title, "there is no take of the legs")
	}
	rows := legRows(a.Curves.Legs, c)
	p := &Picture{Name: "legs", Title: title, Says: legsSays(a.Curves.Legs, c), Simulated: a.Simulated, Width: usualWidth, Height: captionLine + 3*legHeight + 32}
	p.paint = func(s *sheet) { drawLegs(s, rows, a.Curves.Legs.From) }
	return p
}

// A legRow is one line of the picture: a figure about 0, which is the drawing.
type legRow struct {
	name, reads string
	off, u      float64
	low, high   float64 // limits; NaN for none
}

func legRows(l *result.LegLevels, c *result.Check) []legRow {
	none := math.NaN()
	row := func(name string, db, drawn result.Number) legRow {
		r := legRow{name: name, off: float64(db - drawn), u: none, low: none, high: none}
		if db.OK() && drawn.OK() {
			r.reads = fixed(db, 2) + " dB, drawing " + fixed(drawn, 2)
		} else {
			r.reads = "no tone"
		}
		return r
	}
	difference := legRow{name: "hot over cold", off: float64(c.Measured), u: float64(c.Uncertainty), low: float64(c.Low), high: float64(c.High)}
	if difference.reads = "no figure"; c.Measured.OK() {
		difference.reads = signed(c.Measured, c.Uncertainty) + " dB ±" + figure(c.Uncertainty, c.Uncertainty)
	}
	return []legRow{row("hot leg", l.HotDB, l.DrawnHot), row("cold leg", l.ColdDB, l.DrawnCold), difference}
}

const (
	legNames  = 76  // room for the names of the rows
	legReads  = 118 // and for what was read
	legHeight = 32
)

func drawLegs(s *sheet, rows []legRow, from string) {
	reach := span{-1, 1}
	for _, r := range rows {
		reach.take(r.off-zeroIfMissing(r.u), r.off+zeroIfMissing(r.u), r.low, r.high, -r.high)
	}
	caption := "dB more than the drawing gives"
	if from == "mean" {
		caption += "; levels against the mean of the two"
	}
	x := evenly(math.Max(reach.low, -60), math.Min(reach.high, 60), caption)
	left, right := s.Min.X+edge+legNames, s.Max.X-edge-legReads
	scale := func(v float64) vg.Length {
		v = math.Max(x.min, math.Min(x.max, v))
		return left + vg.Length((v-x.min)/(x.max-x.min))*(right-left)
	}
	top := s.Max.Y - captionLine
	bottom := top - vg.Length(len(rows))*legHeight
	for _, t := range x.ticks {
		s.stroke(asGrid, vg.Point{X: scale(t.Value), Y: bottom}, vg.Point{X: scale(t.Value), Y: top})
		s.write(small, scale(t.Value), bottom-12, centred, t.Label)
	}
	s.stroke(asEdge, vg.Point{X: left, Y: bottom}, vg.Point{X: right, Y: bottom})
	s.write(side, (left+right)/2, bottom-25, centred, x.caption)
	s.stroke(asDrawn, vg.Point{X: scale(0), Y: bottom}, vg.Point{X: scale(0), Y: top})
	s.write(side, scale(0), top+4, centred, "drawing")
	for i, r := range rows {
		y := top - (vg.Length(i)+0.5)*legHeight
		h := plain
		if i == len(rows)-1 {
			h = strong
		}
		s.write(h, s.Min.X+edge, y-3.5, fromLeft, r.name)
		s.write(small, right+8, y-3.5, fromLeft, small.clip(r.reads, legReads-8))
		r.draw(s, scale, y)
	}
}

func zeroIfMissing(v float64) float64 {
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return 0
	}
	return v
}

// draw draws a row's limits, its uncertainty and its point.
func (r legRow) draw(s *sheet, scale func(float64) vg.Length, y vg.Length) {
	for _, limit := range []float64{r.low, r.high} {
		if drawable(limit, 0) {
			s.stroke(asLimit, vg.Point{X: scale(limit), Y: y - legHeight/2}, vg.Point{X: scale(limit), Y: y + legHeight/2})
		}
	}
	if !drawable(r.off, 0) {
		return
	}
	if u := zeroIfMissing(r.u); u > 0 {
		from, to := scale(r.off-u), scale(r.off+u)
		s.stroke(asMeasured, vg.Point{X: from, Y: y}, vg.Point{X: to, Y: y})
		s.stroke(asMeasured, vg.Point{X: from, Y: y - 4}, vg.Point{X: from, Y: y + 4})
		s.stroke(asMeasured, vg.Point{X: to, Y: y - 4}, vg.Point{X: to, Y: y + 4})
	}
	x := scale(r.off)
	s.fill(asMeasured.color, vg.Point{X: x - 4, Y: y}, vg.Point{X: x, Y: y + 4}, vg.Point{X: x + 4, Y: y}, vg.Point{X: x, Y: y - 4})
}

func legsSays(l *result.LegLevels, c *result.Check) string {
	says := "The two legs of the output at " + hertz(l.FreqHz)
	if c.Measured.OK() {
		says += ": hot over cold lies " + signed(c.Measured, c.Uncertainty) + " dB from what the drawing gives (±" + figure(c.Uncertainty, c.Uncertainty) + " dB)"
	}
	if !l.HotDB.OK() {
		says += "; no tone on the hot leg"
	}
	if !l.ColdDB.OK() {
		says += "; no tone on the cold leg"
	}
	return says + "; " + verdictWords(c)
}
