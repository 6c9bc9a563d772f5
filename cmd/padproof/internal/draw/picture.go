package draw

import (
	"fmt"
	"io"

	"gonum.org/v1/plot/vg"
)

// A Picture is one picture, ready to be written in any form.
type Picture struct {
	Name      string // the stem of its file: response, noise, level, spectrum, legs, predicted, schematic; spread-loss, chart-loss
	Title     string // a few words
	Says      string // one sentence: what is shown and what was found; for the caption and the screen reader
	Simulated bool   // SIMULATED stands in it

	Width, Height float64 // points, of the picture without its title and sentence

	nothing bool // there is nothing to show, and the picture says so
	paint   func(s *sheet)
}

// Nothing reports whether there was nothing to show.
func (p *Picture) Nothing() bool { return p.nothing }

// WriteSVG writes the picture as an SVG document, with title and sentence above it.
func (p *Picture) WriteSVG(w io.Writer) error {
	width, height := p.sizeWithHeader()
	return p.svg(w, width, height, true)
}

// WriteInline writes the picture as one svg element for a page: without title and
// sentence, which the page gives, and without any id. The element carries the title
// and the sentence for a screen reader, grows and shrinks with the page, and has
// the class "picture".
func (p *Picture) WriteInline(w io.Writer) error {
	return p.svg(w, vg.Length(p.Width), vg.Length(p.Height), false)
}

// WritePNG writes the picture as an image of 192 dots per inch, with title and
// sentence above it.
func (p *Picture) WritePNG(w io.Writer) error {
	return p.png(w)
}

// WritePDF writes the picture as a page of its own size, with title and sentence
// above it.
func (p *Picture) WritePDF(w io.Writer) error {
	return p.pdf(w)
}

// Write writes the picture in the form of a file's extension: svg, png or pdf.
func (p *Picture) Write(w io.Writer, form string) error {
	switch form {
	case "svg":
		return p.WriteSVG(w)
	case "png":
		return p.WritePNG(w)
	case "pdf":
		return p.WritePDF(w)
	}
	return fmt.Errorf("no picture is written as %q; there are svg, png and pdf", form)
}

// Forms are the forms that a picture is written in.
var Forms = []string{"svg", "png", "pdf"}
