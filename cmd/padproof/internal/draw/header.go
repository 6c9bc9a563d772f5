package draw

import "gonum.org/v1/plot/vg"

const (
	edge       = 8 // about everything
	headerGap  = 4
	mostLines  = 5 // of the sentence
	simulated  = "SIMULATED"
	simulation = "Simulated: it says nothing about a real unit."
)

// saysAll is the sentence, and that the takes are simulated where they are: for a
// reader who does not see the box that says so.
func (p *Picture) saysAll() string {
	if p.Simulated {
		return p.Says + " " + simulation
	}
	return p.Says
}

func (p *Picture) headerLines() (title string, says []string) {
	width := vg.Length(p.Width) - 2*edge
	return header.clip(p.Title, width), plain.wrap(p.Says, width, mostLines)
}

// sizeWithHeader is the size of the picture with title and sentence.
func (p *Picture) sizeWithHeader() (width, height vg.Length) {
	_, says := p.headerLines()
	return vg.Length(p.Width), vg.Length(p.Height) + edge + header.size + headerGap + vg.Length(len(says))*plain.line() + headerGap
}

func (p *Picture) drawHeader(s *sheet) {
	title, says := p.headerLines()
	y := s.Max.Y - edge - header.size
	s.write(header, s.Min.X+edge, y, fromLeft, title)
	y -= headerGap
	for _, line := range says {
		y -= plain.line()
		s.write(plain, s.Min.X+edge, y, fromLeft, line)
	}
}

// captionLine is the height of the line above a frame that holds the caption of
// its upright axis, and SIMULATED.
const captionLine = 24

// drawSimulated writes SIMULATED in a box in the upper right corner.
func (s *sheet) drawSimulated() {
	width := strong.width(simulated)
	right, top := s.Max.X-edge, s.Max.Y-5
	s.write(strong, right-4, top-12, fromRight, simulated)
	s.box(look{color: ink, width: 1.2}, vg.Rectangle{
		Min: vg.Point{X: right - width - 8, Y: top - 16}, Max: vg.Point{X: right, Y: top},
	})
}

// nothing is a picture that says why there is nothing in it.
func nothing(name, title, why string) *Picture {
	p := &Picture{Name: name, Title: title, Says: "Nothing to show: " + why + ".", Width: usualWidth, Height: 80, nothing: true}
	p.paint = func(s *sheet) {
		y := s.Center().Y + 8
		for _, line := range plain.wrap(p.Says, s.Max.X-s.Min.X-4*edge, 3) {
			s.write(plain, s.Center().X, y, centred, line)
			y -= plain.line()
		}
	}
	return p
}

// The size of a picture of curves: readable on a phone held upright, and half a
// page of A4 or Letter.
const (
	usualWidth  = 420
	usualHeight = 250
)
