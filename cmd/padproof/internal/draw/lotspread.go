package draw

import (
	"math"
	"strconv"

	"gonum.org/v1/plot/vg"

	"padproof/cmd/padproof/internal/result"
)

// fewUnits are shown as a dot each; more as bars.
const fewUnits = 40

// mostNamed are the units that a picture of a lot names.
const mostNamed = 5

// LotSpread draws how a figure spreads over the units of one of a lot's drawings:
// a dot for each of a few, bars for many, between the limits, with what the drawing
// gives and the mean. Units that do not pass are told by their filling. Those that
// lie far from all others are named at the edge, so that they do not squeeze the
// rest.
func LotSpread(l *result.Lot, drawing int, check string) *Picture {
	name := fileOf("spread", check, drawing)
	s, ok := seriesOf(l, drawing, check)
	if !ok {
		return nothing(name, "Spread of "+check, "no unit gives a "+check)
	}
	p := &Picture{Name: name, Title: "Spread of " + check + ": " + s.title, Says: s.spreadSays(), Simulated: s.simulated, Width: usualWidth, Height: usualHeight}
	p.paint = func(sh *sheet) { s.drawSpread(sh) }
	return p
}

// A window is the stretch of a figure that a picture of its spread shows.
type window struct {
	span
	step   float64 // of the bars
	origin float64 // where one begins
}

// window takes in the limits, the drawing and all units that lie within six
// standard deviations of the middle, by the quartiles: a normal line leaves one
// in some hundred million outside.
func (s lotSeries) window() window {
	lower, middle, upper := s.quartiles()
	reach := 6 * math.Max((upper-lower)/1.349, math.Max(zeroIfMissing(float64(s.u))/2, 1e-3))
	w := window{span: nowhere()}
	w.take(float64(s.Low), float64(s.High), middle)
	if e := float64(s.Expected); math.Abs(e-middle) < math.Max(reach, w.high-w.low) {
		w.take(e)
	}
	near := nowhere()
	for _, v := range s.values {
		if math.Abs(v-middle) <= reach || v >= w.low && v <= w.high {
			near.take(v)
		}
	}
	w.take(near.low, near.high)
	s.setBars(&w, upper-lower, near)
	margin := math.Max(0.06*(w.high-w.low), 1.2*w.step)
	w.low, w.high = w.low-margin, w.high+margin
	return w
}

const mostBars = 48

// setBars chooses bars by the rule of Freedman and Diaconis (1981), no more than
// can be told apart, and lets them begin at a limit, so that none stands on both
// sides of one.
func (s lotSeries) setBars(w *window, quartiles float64, near span) {
	n := float64(len(s.values))
	step := 2 * quartiles / math.Cbrt(n)
	if !(step > 0) {
		step = (near.high - near.low) / math.Sqrt(n)
	}
	step = math.Max(step, math.Max((w.high-w.low)/mostBars, 1e-6))
	if len(s.values) <= fewUnits { // a dot's width, the margins counted in
		step = math.Max(1.15*(w.high-w.low)*2*unitRadius/(usualWidth-spreadRoom-40), 1e-6)
	}
	low, high := float64(s.Low), float64(s.High)
	switch {
	case drawable(low, high) && high-low > step:
		step = (high - low) / math.Floor((high-low)/step+1e-9)
		w.origin = low
	case drawable(low, 0):
		w.origin = low
	case drawable(high, 0):
		w.origin = high
	default:
		step = niceStep(step)
	}
	w.step = step
}

// bar tells which bar a value is in.
func (w window) bar(v float64) int { return int(math.Floor((v-w.origin)/w.step + 1e-9)) }

// A pile is the units of one bar.
type pile struct {
	from, to float64 // of the bar
	verdicts map[string]int
	count    int
}

// pile parts the units that the window shows into bars; the others lie beyond.
func (s lotSeries) pile(w window) (piles map[int]*pile, tallest int, beyond []int) {
	piles = map[int]*pile{}
	for i, v := range s.values {
		if v < w.low || v > w.high {
			beyond = append(beyond, i)
			continue
		}
		k := w.bar(v)
		if piles[k] == nil {
			piles[k] = &pile{from: w.origin + float64(k)*w.step, to: w.origin + float64(k+1)*w.step, verdicts: map[string]int{}}
		}
		b := piles[k]
		b.verdicts[s.verdicts[i]]++
		b.count++
		tallest = max(tallest, b.count)
	}
	return piles, tallest, beyond
}

// counting is an axis of whole numbers from 0.
func counting(most int, caption string) axis {
	step := math.Max(1, niceStep(float64(most)*1.12/5))
	a := axis{max: math.Ceil(float64(most)*1.12/step) * step, caption: caption}
	a.ticks = steps(0, a.max, step)
	return a
}

const (
	poleNames  = 30  // room over a panel for the names of what stands upright
	spreadRoom = 112 // and at its right for what the fillings stand for
)

func (s lotSeries) drawSpread(sh *sheet) {
	w := s.window()
	piles, tallest, beyond := s.pile(w)
	p := &panel{sheet: sh, x: between(w.low, w.high, s.Check+", "+s.Unit), y: counting(max(tallest, 3), "units")}
	p.box = vg.Rectangle{
		Min: vg.Point{X: sh.Min.X + edge + yRoom(p.y), Y: sh.Min.Y + edge + xLabelGap + small.line()},
		Max: vg.Point{X: sh.Max.X - spreadRoom, Y: sh.Max.Y - captionLine - poleNames},
	}
	sh.write(side, sh.Min.X+edge, sh.Max.Y-captionLine+10, fromLeft, p.y.caption)
	p.rule(true)
	for _, b := range piles {
		if len(s.values) <= fewUnits {
			b.dots(p)
		} else {
			b.bars(p)
		}
	}
	s.drawPoles(p)
	s.nameUnits(p, w, piles, beyond)
	s.drawKey(p)
}

// drawPoles draws limits, drawing and mean, with their names over them.
func (s lotSeries) drawPoles(p *panel) {
	var xs, widths []vg.Length
	var all []pole
	for _, u := range []pole{
		{s.Low, asLimit, "limit", give(s.Low)}, {s.High, asLimit, "limit", give(s.High)},
		{s.Expected, asDrawn, "drawing", s.number(s.Expected)}, {s.Mean.Value, asMeasured, "mean", s.number(s.Mean.Value)},
	} {
		if v := float64(u.at); drawable(v, 0) && v >= p.x.min && v <= p.x.max {
			if u.name == "limit" {
				u.text = trimmed(u.at)
			}
			all = append(all, u)
		}
	}
	sortPoles(all)
	for _, u := range all {
		x := p.place(float64(u.at), 0).X
		xs, widths = append(xs, x), append(widths, max(small.width(u.name), small.width(u.text))+8)
		p.lines = append(p.lines, [2]vg.Point{{X: x, Y: p.box.Min.Y}, {X: x, Y: p.box.Max.Y}})
	}
	sideBySide(xs, widths, p.Min.X+edge+yRoom(p.y), p.box.Max.X+spreadRoom/2)
	for i, u := range all {
		foot := p.place(float64(u.at), 0)
		top := vg.Point{X: foot.X, Y: p.box.Max.Y}
		p.stroke(u.look, foot, top)
		p.stroke(asLeader, top, vg.Point{X: xs[i], Y: top.Y + 6})
		p.write(small, xs[i], top.Y+8+small.line(), centred, u.name)
		p.write(small, xs[i], top.Y+8, centred, u.text)
	}
}

// nameUnits names the units that do not pass, where they are few, and counts those
// beyond the edges.
func (s lotSeries) nameUnits(p *panel, w window, piles map[int]*pile, beyond []int) {
	var left, right []int
	for _, i := range beyond {
		if s.values[i] < w.low {
			left = append(left, i)
		} else {
			right = append(right, i)
		}
	}
	top := 0.93 * p.y.max
	if len(left) > 0 {
		p.say(p.x.min, top, "← "+s.beyondText(left))
	}
	if len(right) > 0 {
		p.say(p.x.max, top, s.beyondText(right)+" →")
	}
	if n := s.count("FAIL"); n == 0 || n > mostNamed {
		return
	}
	for i, v := range s.values {
		if s.verdicts[i] == "FAIL" && v >= w.low && v <= w.high {
			p.say(v, float64(piles[w.bar(v)].count), s.units[i])
		}
	}
}

func (s lotSeries) beyondText(units []int) string {
	if len(units) == 1 {
		i := units[0]
		return small.clip(s.units[i], 60) + " at " + s.number(result.Number(s.values[i]))
	}
	reach := nowhere()
	for _, i := range units {
		reach.take(s.values[i])
	}
	return strconv.Itoa(len(units)) + " units, " + s.number(result.Number(reach.low)) + " to " + s.number(result.Number(reach.high))
}
