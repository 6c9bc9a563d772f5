package draw

import (
	"slices"
	"strconv"

	"gonum.org/v1/plot/vg"

	"padproof/cmd/padproof/internal/result"
)

// An pole is a line that stands at a value, with its name and its figure over it.
type pole struct {
	at         result.Number
	look       look
	name, text string
}

func sortPoles(all []pole) {
	slices.SortStableFunc(all, func(a, b pole) int {
		switch {
		case a.at < b.at:
			return -1
		case a.at > b.at:
			return 1
		}
		return 0
	})
}

// trimmed writes a limit to three places, without zeros at its end.
func trimmed(n result.Number) string {
	text := fixed(n, 3)
	for text[len(text)-1] == '0' {
		text = text[:len(text)-1]
	}
	if text[len(text)-1] == '.' {
		text = text[:len(text)-1]
	}
	return text
}

// The verdicts in the order in which they are stacked: those that pass below.
var stacked = []string{"PASS", "", "UNPROVEN", "FAIL"}

const unitRadius = 3.8

// A layer is the units of one verdict in a pile.
type layer struct {
	verdict  string
	from, to int // counted from the foot of the pile
}

// layers are the verdicts of a pile over one another.
func (b *pile) layers() []layer {
	var all []layer
	from := 0
	for _, v := range stacked {
		if n := b.verdicts[v]; n > 0 {
			all = append(all, layer{v, from, from + n})
			from += n
		}
	}
	return all
}

// bars draws a pile as a bar, stacked by verdict.
func (b *pile) bars(p *panel) {
	for _, l := range b.layers() {
		p.brick(p.place(b.from, float64(l.from)), p.place(b.to, float64(l.to)), l.verdict)
	}
	low, high := p.place(b.from, 0), p.place(b.to, float64(b.count))
	p.lines = append(p.lines, [2]vg.Point{{X: low.X, Y: high.Y}, high}, [2]vg.Point{low, {X: low.X, Y: high.Y}}, [2]vg.Point{{X: high.X, Y: low.Y}, high})
}

// dots draws a pile as dots over one another.
func (b *pile) dots(p *panel) {
	x := (b.from + b.to) / 2
	for _, l := range b.layers() {
		for k := l.from; k < l.to; k++ {
			at := p.place(x, float64(k)+0.5)
			p.dot(at, l.verdict)
			p.lines = append(p.lines, [2]vg.Point{{X: at.X - unitRadius, Y: at.Y}, {X: at.X + unitRadius, Y: at.Y}})
		}
	}
}

// brick fills a rectangle as a verdict looks: a wash where all is well, stripes
// where nothing is proven, full where it is out. In grey they differ as much.
func (s *sheet) brick(low, high vg.Point, verdict string) {
	corners := []vg.Point{low, {X: high.X, Y: low.Y}, high, {X: low.X, Y: high.Y}}
	switch verdict {
	case "FAIL":
		s.fill(ink, corners...)
	case "UNPROVEN":
		s.fill(paper, corners...)
		const apart = 3.5
		for y := low.Y + apart; y < high.Y-0.5; y += apart {
			s.stroke(look{color: ink, width: 0.9}, vg.Point{X: low.X, Y: y}, vg.Point{X: high.X, Y: y})
		}
	default:
		s.fill(blueWash, corners...)
	}
	s.stroke(look{color: ink, width: 0.6}, append(corners, low)...)
}

// dot is the same for a single unit: light, a ring, or full.
func (s *sheet) dot(at vg.Point, verdict string) {
	switch verdict {
	case "FAIL":
		s.disc(at, unitRadius, ink, ink)
	case "UNPROVEN":
		s.disc(at, unitRadius, paper, ink)
		s.disc(at, 0.8, ink, ink)
	default:
		s.disc(at, unitRadius, paper, ink)
		s.disc(at, unitRadius, blueWash, ink)
	}
}

// drawKey says at the right what the fillings stand for, and how many there are.
func (s lotSeries) drawKey(p *panel) {
	y := p.box.Max.Y - 14
	left := p.box.Max.X + 10
	p.write(side, left, y, fromLeft, small.clip("by their "+s.Check, spreadRoom-20))
	for i := len(stacked) - 1; i >= 0; i-- {
		v := stacked[i]
		n := s.count(v)
		if n == 0 {
			continue
		}
		y -= small.line() + 5
		if len(s.values) <= fewUnits {
			p.dot(vg.Point{X: left + 5, Y: y + 3}, v)
		} else {
			p.brick(vg.Point{X: left, Y: y - 1}, vg.Point{X: left + 11, Y: y + 8}, v)
		}
		name := v
		if v == "" {
			name = "no limit"
		}
		p.write(small, left+sampleLength+labelGap, y, fromLeft, strconv.Itoa(n)+" "+name)
	}
	s.drawDoubt(p, vg.Point{X: left, Y: y - 28})
}

// drawDoubt says how far one reading may be off, by a bar as wide as that.
func (s lotSeries) drawDoubt(p *panel, at vg.Point) {
	u := float64(s.u)
	if !drawable(u, 0) || u <= 0 {
		return
	}
	p.write(side, at.X, at.Y, fromLeft, "one reading")
	p.write(small, at.X, at.Y-small.line(), fromLeft, "±"+s.number(s.u)+" "+small.clip(s.Unit, 40))
	wide := p.place(p.x.min+2*u, 0).X - p.place(p.x.min, 0).X
	if wide < 2 || wide > spreadRoom-20 {
		return
	}
	y := at.Y - small.line() - 9
	p.stroke(asMeasured, vg.Point{X: at.X, Y: y}, vg.Point{X: at.X + wide, Y: y})
	for _, x := range []vg.Length{at.X, at.X + wide} {
		p.stroke(asMeasured, vg.Point{X: x, Y: y - 3}, vg.Point{X: x, Y: y + 3})
	}
}
