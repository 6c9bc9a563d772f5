package draw

import (
	"bytes"
	"fmt"
	"html"
	"io"
	"regexp"
	"strconv"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
	"gonum.org/v1/plot/vg/vgimg"
	"gonum.org/v1/plot/vg/vgsvg"
)

// pngDPI gives an image that can be printed.
const pngDPI = 192

func (p *Picture) png(w io.Writer) error {
	width, height := p.sizeWithHeader()
	c := vgimg.NewWith(vgimg.UseWH(width, height), vgimg.UseDPI(pngDPI))
	p.draw(c, width, height, true)
	_, err := vgimg.PngCanvas{Canvas: c}.WriteTo(w)
	return err
}

// svgFonts are the fonts of an SVG: the first three have the widths by which
// pictures are set out.
const svgFonts = "Liberation Sans, Arial, Helvetica, sans-serif"

func (p *Picture) svg(w io.Writer, width, height vg.Length, whole bool) error {
	c := vgsvg.New(width, height)
	p.draw(c, width, height, whole)
	var buf bytes.Buffer
	if _, err := c.WriteTo(&buf); err != nil {
		return err
	}
	body := buf.Bytes()
	if start := bytes.Index(body, []byte("<g transform")); start >= 0 {
		body = body[start:]
	}
	head := ""
	if whole {
		head = "<?xml version=\"1.0\" encoding=\"UTF-8\"?>\n"
	}
	const pixels = 96.0 / 72
	_, err := fmt.Fprintf(w, "%s<svg xmlns=\"http://www.w3.org/2000/svg\" class=\"picture\" role=\"img\" width=\"%.0f\" height=\"%.0f\" viewBox=\"0 0 %.5g %.5g\" font-family=\"%s\">\n<title>%s</title>\n<desc>%s</desc>\n%s",
		head, float64(width)*pixels, float64(height)*pixels, float64(width), float64(height), svgFonts,
		escape(p.Title), escape(p.saysAll()), svgText.ReplaceAllFunc(body, fixText))
	return err
}

func escape(text string) string { return html.EscapeString(clean(text)) }

// svgText is a text as vgsvg writes it.
var svgText = regexp.MustCompile(`(<text [^>]*)\s+style="font-family:[^;]*;font-variant:[^;]*;font-weight:([^;]*);font-style:[^;"]*;?(?:font-size:([0-9.e+]+)px)?([^"]*)">([^<]*)</text>`)

// fixText leaves the font to the svg element, and gives the text the width by
// which the picture was set out: another font then neither collides nor is cut off.
func fixText(text []byte) []byte {
	m := svgText.FindSubmatch(text)
	size, err := strconv.ParseFloat(string(m[3]), 64)
	if err != nil {
		return text
	}
	h := hand{size: vg.Length(size), bold: string(m[2]) == "bold"}
	weight := ""
	if h.bold {
		weight = ` font-weight="bold"`
	}
	width := h.width(html.UnescapeString(string(m[5])))
	return fmt.Appendf(nil, `%s font-size="%g"%s textLength="%.1f" lengthAdjust="spacingAndGlyphs" style="%s">%s</text>`,
		m[1], size, weight, float64(width), bytes.TrimPrefix(m[4], []byte(";")), m[5])
}

// draw draws the picture on any canvas.
func (p *Picture) draw(c vg.Canvas, width, height vg.Length, withHeader bool) {
	s := &sheet{draw.NewCanvas(c, width, height)}
	s.paintOver(s.Rectangle)
	if withHeader {
		p.drawHeader(s)
	}
	s.Canvas = draw.Crop(s.Canvas, 0, vg.Length(p.Width)-width, 0, vg.Length(p.Height)-height)
	if p.Simulated {
		s.drawSimulated()
	}
	p.paint(s)
}
