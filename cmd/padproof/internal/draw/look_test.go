package draw

import (
	"image/color"
	"math"
	"testing"
)

// luminance is the relative luminance of WCAG 2.2.
func luminance(c color.NRGBA) float64 {
	channel := func(v uint8) float64 {
		s := float64(v) / 255
		if s <= 0.04045 {
			return s / 12.92
		}
		return math.Pow((s+0.055)/1.055, 2.4)
	}
	return 0.2126*channel(c.R) + 0.7152*channel(c.G) + 0.0722*channel(c.B)
}

// contrast is the contrast ratio of WCAG 2.2.
func contrast(a, b color.NRGBA) float64 {
	la, lb := luminance(a), luminance(b)
	return (math.Max(la, lb) + 0.05) / (math.Min(la, lb) + 0.05)
}

// The formula gives the ratios that WCAG names: 21 to 1 for black on white, and
// #767676 as the lightest grey of 4.5 to 1 (4.54, W3C technique G18's example).
func TestContrastFormula(t *testing.T) {
	if got := contrast(color.NRGBA{A: 255}, paper); math.Abs(got-21) > 1e-9 {
		t.Errorf("contrast(black, white) = %v, want 21", got)
	}
	if got := contrast(color.NRGBA{0x76, 0x76, 0x76, 255}, paper); math.Abs(got-4.54) > 0.01 {
		t.Errorf("contrast(#767676, white) = %v, want 4.54 ± 0.01", got)
	}
}

// Lines stand against paper by 3 to 1 (1.4.11), text by 4.5 to 1 (1.4.3), and no
// two lines are told apart by colour alone.
func TestLooks(t *testing.T) {
	for i, l := range looks {
		if got := contrast(l.color, paper); got < 3 {
			t.Errorf("%s: contrast %.2f, want at least 3", l.name, got)
		}
		for _, other := range looks[:i] {
			sameDash := len(l.dash) == len(other.dash)
			for k := 0; sameDash && k < len(l.dash); k++ {
				sameDash = l.dash[k] == other.dash[k]
			}
			if sameDash && max(l.width, other.width) < 1.6*min(l.width, other.width) {
				t.Errorf("%s and %s differ in colour alone", l.name, other.name)
			}
		}
	}
	for _, p := range samplePictures() {
		for _, text := range watch(p, true).texts {
			c := color.NRGBAModel.Convert(text.color).(color.NRGBA)
			if got := contrast(c, paper); got < 4.5 || c.A != 255 {
				t.Errorf("%s: %q has a contrast of %.2f, want at least 4.5", p.Title, text.text, got)
			}
		}
	}
}
