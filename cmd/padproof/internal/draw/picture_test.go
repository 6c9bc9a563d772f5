package draw

import (
	"bytes"
	"encoding/xml"
	"fmt"
	"image/png"
	"io"
	"math"
	"regexp"
	"strconv"
	"strings"
	"testing"
)

// Every text of every picture lies on the canvas and on no other text.
func TestTextsHaveRoom(t *testing.T) {
	for _, p := range samplePictures() {
		for _, withHeader := range []bool{true, false} {
			w := watch(p, withHeader)
			width, height := lengthOf(p.Width), lengthOf(p.Height)
			if withHeader {
				width, height = p.sizeWithHeader()
			}
			for i, a := range w.texts {
				if strings.Contains(a.text, "…") {
					t.Errorf("%s: %q is shortened", p.Title, a.text)
				}
				if a.box.Min.X < 0 || a.box.Min.Y < 0 || a.box.Max.X > width || a.box.Max.Y > height {
					t.Errorf("%s: %q at %v is cut off, the canvas being %.0f by %.0f", p.Title, a.text, a.box, float64(width), float64(height))
				}
				for _, b := range w.texts[:i] {
					const touch = 0.3
					if a.box.Min.X < b.box.Max.X-touch && b.box.Min.X < a.box.Max.X-touch && a.box.Min.Y < b.box.Max.Y-touch && b.box.Min.Y < a.box.Max.Y-touch {
						t.Errorf("%s: %q at %v lies on %q at %v", p.Title, a.text, a.box, b.text, b.box)
					}
				}
			}
			if w.reach.Min.X < -1 || w.reach.Min.Y < -1 || w.reach.Max.X > width+1 || w.reach.Max.Y > height+1 {
				t.Errorf("%s: lines reach over the canvas: %v", p.Title, w.reach)
			}
			if len(w.turns) != 1 {
				t.Errorf("%s: %d pushes without a pop", p.Title, len(w.turns)-1)
			}
		}
	}
}

// SIMULATED stands in every picture of rehearsed takes, and in no other.
func TestSimulatedIsSaid(t *testing.T) {
	for _, simulatedTakes := range []bool{true, false} {
		a := sampleAnswer()
		a.Simulated = simulatedTakes
		pictures := OfAnswer(a)
		if len(pictures) != 7 {
			t.Fatalf("%d pictures, want 7", len(pictures))
		}
		for _, p := range pictures {
			found := false
			for _, text := range watch(p, false).texts {
				found = found || text.text == "SIMULATED"
			}
			if found != simulatedTakes {
				t.Errorf("%s: SIMULATED is there: %v, want %v", p.Name, found, simulatedTakes)
			}
		}
	}
}

// An SVG is well-formed, its text is text, and nothing in it can clash with
// another on the page or ask for a file.
func TestSVG(t *testing.T) {
	for _, p := range samplePictures() {
		var whole, inline bytes.Buffer
		if err := p.WriteSVG(&whole); err != nil {
			t.Fatal(err)
		}
		if err := p.WriteInline(&inline); err != nil {
			t.Fatal(err)
		}
		if !strings.HasPrefix(inline.String(), "<svg ") {
			t.Errorf("%s: inline begins with %.20q", p.Title, inline.String())
		}
		for _, svg := range []string{whole.String(), inline.String()} {
			texts := readSVG(t, p, svg)
			if !strings.Contains(svg, "<title>") || texts == 0 {
				t.Errorf("%s: %d texts, and a title: %v", p.Title, texts, strings.Contains(svg, "<title>"))
			}
		}
	}
}

func readSVG(t *testing.T, p *Picture, svg string) (texts int) {
	t.Helper()
	d := xml.NewDecoder(strings.NewReader(svg))
	for {
		token, err := d.Token()
		if err == io.EOF {
			return texts
		}
		if err != nil {
			t.Fatalf("%s: %v", p.Title, err)
		}
		e, isStart := token.(xml.StartElement)
		if !isStart {
			continue
		}
		for _, a := range e.Attr {
			if a.Name.Local == "id" || a.Name.Local == "href" || strings.Contains(a.Value, "url(") || strings.Contains(a.Value, "NaN") || strings.Contains(a.Value, "Inf") {
				t.Errorf("%s: <%s> has %s=%q", p.Title, e.Name.Local, a.Name.Local, a.Value)
			}
		}
		switch e.Name.Local {
		case "text":
			texts++
		case "svg", "g", "path", "title", "desc":
		default:
			t.Errorf("%s: there is a <%s>", p.Title, e.Name.Local)
		}
	}
}

// Sizes: the SVG's box is that of the picture, a PNG has 192 dots to an inch of
// it, a PDF a page of it.
func TestSizes(t *testing.T) {
	for _, p := range samplePictures()[:3] {
		width, height := p.sizeWithHeader()
		var svg, image, page bytes.Buffer
		for form, to := range map[string]io.Writer{"svg": &svg, "png": &image, "pdf": &page} {
			if err := p.Write(to, form); err != nil {
				t.Fatal(err)
			}
		}
		if want := fmt.Sprintf(`viewBox="0 0 %.5g %.5g"`, float64(width), float64(height)); !strings.Contains(svg.String(), want) {
			t.Errorf("%s: no %s", p.Name, want)
		}
		config, err := png.DecodeConfig(&image)
		if err != nil {
			t.Fatal(err)
		}
		if w, h := math.Round(float64(width)*192/72), math.Round(float64(height)*192/72); float64(config.Width) != w || float64(config.Height) != h {
			t.Errorf("%s: PNG of %d by %d, want %.0f by %.0f", p.Name, config.Width, config.Height, w, h)
		}
		m := regexp.MustCompile(`/MediaBox \[0 0 ([0-9.]+) ([0-9.]+)\]`).FindSubmatch(page.Bytes())
		if m == nil || !bytes.HasPrefix(page.Bytes(), []byte("%PDF-")) {
			t.Fatalf("%s: no PDF", p.Name)
		}
		for i, want := range []float64{float64(width), float64(height)} {
			if got, _ := strconv.ParseFloat(string(m[i+1]), 64); math.Abs(got-want) > 0.01 {
				t.Errorf("%s: PDF side %s, want %.2f", p.Name, m[i+1], want)
			}
		}
	}
	if err := samplePictures()[0].Write(io.Discard, "gif"); err == nil {
		t.Error("a picture was written as gif")
	}
}
