package draw

import (
	"image/color"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// The colours. Black, blue, vermilion and bluish green are those of Okabe and Ito
// (2008); green is darkened to stand against white. Greys are for what stands
// behind. Text is ink or quiet alone.
var (
	ink       = color.NRGBA{0x1a, 0x1a, 0x1a, 0xff}
	quiet     = color.NRGBA{0x55, 0x55, 0x55, 0xff}
	faint     = color.NRGBA{0xdd, 0xdd, 0xdd, 0xff} // grid alone
	paper     = color.NRGBA{0xff, 0xff, 0xff, 0xff}
	blue      = color.NRGBA{0x00, 0x72, 0xb2, 0xff}
	vermilion = color.NRGBA{0xd5, 0x5e, 0x00, 0xff}
	green     = color.NRGBA{0x00, 0x7a, 0x59, 0xff}
	blueWash  = color.NRGBA{0x00, 0x72, 0xb2, 0x38}
	inkWash   = color.NRGBA{0x1a, 0x1a, 0x1a, 0x20}
)

// A look is how a line is drawn. No two looks have both width and dash in common.
type look struct {
	name  string
	color color.NRGBA
	width vg.Length
	dash  []vg.Length
}

var (
	asMeasured = look{"measured", blue, 1.8, nil}
	asDrawn    = look{"drawn", ink, 0.9, []vg.Length{5, 2.5}}
	asLimit    = look{"limit", vermilion, 1.2, []vg.Length{8, 2, 1.5, 2}}
	asOther    = look{"other", quiet, 0.8, nil}
	asThird    = look{"third", green, 1.4, []vg.Length{2, 1.6}}
	asGrid     = look{"grid", faint, 0.5, nil}
	asEdge     = look{"edge", quiet, 0.6, nil}
	asLeader   = look{"leader", quiet, 0.4, []vg.Length{1, 1.5}}
)

// looks are all that draw data.
var looks = []look{asMeasured, asDrawn, asLimit, asOther, asThird}

func (l look) style() draw.LineStyle {
	return draw.LineStyle{Color: l.color, Width: l.width, Dashes: l.dash}
}
