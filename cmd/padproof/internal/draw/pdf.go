package draw

import (
	"bytes"
	"fmt"
	"image"
	"image/color"
	"io"
	"math"

	"codeberg.org/go-pdf/fpdf"
	xfont "golang.org/x/image/font"
	"gonum.org/v1/plot/font"
	"gonum.org/v1/plot/vg"
)

// A pdfCanvas draws on a page of PDF. Gonum's own canvas for PDF takes the bold
// face's glyphs from the plain one when both are used, and knows the characters of
// Windows-1252 alone; this one holds the glyphs that are used, of both faces.
type pdfCanvas struct {
	doc    *fpdf.Fpdf
	height vg.Length
	states []pdfState
}

// A pdfState is what Push keeps: the line's width and the transform.
type pdfState struct {
	width  vg.Length
	x, y   vg.Point // what one step along either axis is on the page
	origin vg.Point
}

const pdfFamily = "Liberation Sans"

func (p *Picture) pdf(w io.Writer) (err error) {
	defer func() { // the font's tables are read without a check of their own
		if r := recover(); r != nil {
			err = fmt.Errorf("no PDF could be made: %v", r)
		}
	}()
	width, height := p.sizeWithHeader()
	c := newPDF(width, height)
	c.doc.SetTitle(clean(p.Title), true)
	c.doc.SetSubject(clean(p.saysAll()), true)
	c.doc.SetCreator("padproof", true)
	p.draw(c, width, height, true)
	return c.doc.Output(w)
}

func newPDF(width, height vg.Length) *pdfCanvas {
	doc := fpdf.NewCustom(&fpdf.InitType{UnitStr: "pt", Size: fpdf.SizeType{Wd: width.Points(), Ht: height.Points()}})
	doc.SetMargins(0, 0, 0)
	doc.SetAutoPageBreak(false, 0)
	for _, h := range []hand{plain, strong} {
		var ttf bytes.Buffer
		face := h.face()
		if _, err := face.Face.WriteSourceTo(nil, &ttf); err == nil {
			doc.AddUTF8FontFromBytes(pdfFamily, pdfStyle(h.font()), ttf.Bytes())
		}
	}
	doc.AddPage()
	return &pdfCanvas{doc, height, []pdfState{{x: vg.Point{X: 1}, y: vg.Point{Y: 1}}}}
}

func pdfStyle(f font.Font) string {
	if f.Weight == xfont.WeightBold {
		return "B"
	}
	return ""
}

func (c *pdfCanvas) state() *pdfState { return &c.states[len(c.states)-1] }

// on is where a point lies on the page, measured from its upper left corner.
func (c *pdfCanvas) on(at vg.Point) (x, y float64) {
	s := c.state()
	to := s.origin.Add(s.x.Scale(at.X)).Add(s.y.Scale(at.Y))
	return to.X.Points(), (c.height - to.Y).Points()
}

func (c *pdfCanvas) Push() { c.states = append(c.states, *c.state()) }
func (c *pdfCanvas) Pop()  { c.states = c.states[:len(c.states)-1]; c.SetLineWidth(c.state().width) }

func (c *pdfCanvas) Translate(by vg.Point) {
	s := c.state()
	s.origin = s.origin.Add(s.x.Scale(by.X)).Add(s.y.Scale(by.Y))
}

func (c *pdfCanvas) Rotate(rad float64) {
	s := c.state()
	sin, cos := math.Sincos(rad)
	s.x, s.y = s.x.Scale(vg.Length(cos)).Add(s.y.Scale(vg.Length(sin))), s.y.Scale(vg.Length(cos)).Sub(s.x.Scale(vg.Length(sin)))
}

func (c *pdfCanvas) Scale(x, y float64) {
	s := c.state()
	s.x, s.y = s.x.Scale(vg.Length(x)), s.y.Scale(vg.Length(y))
}

func (c *pdfCanvas) SetLineWidth(width vg.Length) {
	c.state().width = width
	c.doc.SetLineWidth(width.Points())
}

func (c *pdfCanvas) SetLineDash(pattern []vg.Length, offset vg.Length) {
	var points []float64
	for _, l := range pattern {
		points = append(points, l.Points())
	}
	c.doc.SetDashPattern(points, offset.Points())
}

func (c *pdfCanvas) SetColor(of color.Color) {
	if of == nil {
		of = color.Black
	}
	n := color.NRGBAModel.Convert(of).(color.NRGBA)
	c.doc.SetDrawColor(int(n.R), int(n.G), int(n.B))
	c.doc.SetFillColor(int(n.R), int(n.G), int(n.B))
	c.doc.SetTextColor(int(n.R), int(n.G), int(n.B))
	c.doc.SetAlpha(float64(n.A)/255, "Normal")
}

func (c *pdfCanvas) Stroke(p vg.Path) {
	if c.state().width > 0 {
		c.path(p, "D")
	}
}

func (c *pdfCanvas) Fill(p vg.Path) { c.path(p, "F") }

// path draws a path; arcs are drawn as many short lines.
func (c *pdfCanvas) path(p vg.Path, how string) {
	for _, part := range p {
		switch part.Type {
		case vg.MoveComp:
			c.doc.MoveTo(c.on(part.Pos))
		case vg.LineComp, vg.CurveComp: // nothing here draws curves
			c.doc.LineTo(c.on(part.Pos))
		case vg.ArcComp:
			const pieces = 32
			for i := range pieces + 1 {
				sin, cos := math.Sincos(part.Start + part.Angle*float64(i)/pieces)
				c.doc.LineTo(c.on(part.Pos.Add(vg.Point{X: part.Radius * vg.Length(cos), Y: part.Radius * vg.Length(sin)})))
			}
		case vg.CloseComp:
			c.doc.ClosePath()
		}
	}
	c.doc.DrawPath(how)
}

func (c *pdfCanvas) FillString(f font.Face, at vg.Point, text string) {
	c.doc.SetFont(pdfFamily, pdfStyle(f.Font), f.Font.Size.Points())
	x, y := c.on(at)
	along := c.state().x
	if angle := math.Atan2(float64(along.Y), float64(along.X)); angle != 0 {
		c.doc.TransformBegin()
		c.doc.TransformRotate(angle*180/math.Pi, x, y)
		defer c.doc.TransformEnd()
	}
	c.doc.Text(x, y, withinPlane(text))
}

// withinPlane puts a question mark for what lies beyond the first 65536
// characters, where the font has no glyphs.
func withinPlane(text string) string {
	runes := []rune(text)
	for i, r := range runes {
		if r > 0xffff {
			runes[i] = '?'
		}
	}
	return string(runes)
}

// DrawImage draws nothing: no picture holds an image.
func (c *pdfCanvas) DrawImage(vg.Rectangle, image.Image) {}
