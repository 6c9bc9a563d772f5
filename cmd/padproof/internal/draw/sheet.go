package draw

import (
	"image/color"
	"math"
	"sort"
	"strings"

	xfont "golang.org/x/image/font"
	"gonum.org/v1/plot/font"
	"gonum.org/v1/plot/font/liberation"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// Sizes of text, in points.
const (
	titleSize = 12
	textSize  = 10
	tickSize  = 9
	leading   = 1.25
)

var fonts = font.NewCache(liberation.Collection())

// A sheet is what a picture is drawn on: a rectangle, its origin at the bottom
// left, in points.
type sheet struct {
	draw.Canvas
}

// A hand is how text is written.
type hand struct {
	size  vg.Length
	bold  bool
	color color.NRGBA
}

var (
	plain  = hand{textSize, false, ink}
	strong = hand{textSize, true, ink}
	small  = hand{tickSize, false, ink}
	side   = hand{tickSize, false, quiet}
	header = hand{titleSize, true, ink}
)

func (h hand) font() font.Font {
	f := font.Font{Typeface: "Liberation", Variant: "Sans", Size: h.size}
	if h.bold {
		f.Weight = xfont.WeightBold
	}
	return f
}

func (h hand) face() font.Face { return fonts.Lookup(h.font(), h.size) }

func (h hand) width(text string) vg.Length {
	face := h.face()
	return face.Width(text)
}

// line is the distance from one line of text to the next.
func (h hand) line() vg.Length { return h.size * leading }

// Where text stands about the point it is written at.
const (
	fromLeft  = 0.0
	centred   = 0.5
	fromRight = 1.0
)

// write writes one line, its baseline at y.
func (s *sheet) write(h hand, x, y vg.Length, align float64, text string) {
	if text = clean(text); text == "" {
		return
	}
	s.SetColor(h.color)
	face := h.face()
	s.FillString(face, vg.Point{X: x - vg.Length(align)*face.Width(text), Y: y}, text)
}

// stroke draws a line through points.
func (s *sheet) stroke(l look, points ...vg.Point) {
	if len(points) > 1 {
		s.StrokeLines(l.style(), points)
	}
}

// box is a rectangle's outline.
func (s *sheet) box(l look, r vg.Rectangle) {
	s.stroke(l, r.Min, vg.Point{X: r.Max.X, Y: r.Min.Y}, r.Max, vg.Point{X: r.Min.X, Y: r.Max.Y}, r.Min)
}

// fill paints a shape.
func (s *sheet) fill(c color.NRGBA, points ...vg.Point) {
	s.FillPolygon(c, points)
}

// paintOver lays paper over a rectangle, so that text on it can be read.
func (s *sheet) paintOver(r vg.Rectangle) {
	s.fill(paper, r.Min, vg.Point{X: r.Max.X, Y: r.Min.Y}, r.Max, vg.Point{X: r.Min.X, Y: r.Max.Y})
}

// clean takes out of a text what is no visible character: line ends, control
// characters and marks that turn the direction of what follows.
func clean(text string) string {
	return strings.TrimSpace(strings.Map(func(r rune) rune {
		switch {
		case r == '\n' || r == '\t':
			return ' '
		case r < ' ' || r >= 0x7f && r < 0xa0, r == 0xfffd,
			r >= 0x200b && r <= 0x200f, r >= 0x2028 && r <= 0x202e, r >= 0x2060 && r <= 0x206f, r == 0xfeff:
			return -1
		}
		return r
	}, text))
}

// wrap breaks a text into lines of a width, at most so many; what is left over
// ends in three dots.
func (h hand) wrap(text string, width vg.Length, most int) []string {
	var lines []string
	line := ""
	words := strings.Fields(clean(text))
	for i, word := range words {
		longer := strings.TrimSpace(line + " " + word)
		if line == "" || h.width(longer) <= width {
			line = longer
			continue
		}
		if len(lines) == most-1 {
			line = h.clip(line+" "+strings.Join(words[i:], " "), width)
			break
		}
		lines, line = append(lines, h.clip(line, width)), word
	}
	if line != "" {
		lines = append(lines, h.clip(line, width))
	}
	return lines
}

// clip shortens a text to a width.
func (h hand) clip(text string, width vg.Length) string {
	text = clean(text)
	if h.width(text) <= width {
		return text
	}
	runes := []rune(text)
	if len(runes) > 400 {
		runes = runes[:400]
	}
	fits := sort.Search(len(runes), func(n int) bool { return h.width(string(runes[:n+1])+"…") > width })
	return strings.TrimRight(string(runes[:fits]), " ") + "…"
}

// disc draws a filled circle with an edge.
func (s *sheet) disc(at vg.Point, radius vg.Length, inside, edge color.NRGBA) {
	var p vg.Path
	p.Move(at.Add(vg.Point{X: radius}))
	p.Arc(at, radius, 0, 2*math.Pi)
	p.Close()
	s.SetColor(inside)
	s.Fill(p)
	s.SetLineStyle(draw.LineStyle{Color: edge, Width: 1})
	s.Stroke(p)
}
