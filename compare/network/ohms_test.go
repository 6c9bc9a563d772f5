package network

import (
	"math"
	"testing"
)

// star gives the rays to a, b and c of the star that is the triangle with the sides ab, bc and ca at
// its corners: the product of the two sides that meet there over the sum of all three (A. E. Kennelly,
// "The equivalence of triangles and three-pointed stars in conducting networks", Electrical World and
// Engineer 34, 1899, 413-414).
func star(ab, bc, ca float64) (a, b, c float64) {
	sum := ab + bc + ca
	return ca * ab / sum, ab * bc / sum, bc * ca / sum
}

func besideOhms(x, y float64) float64 { return x * y / (x + y) }

// Readings of circuits in which no two parts are in series or side by side: a triangle in each is turned
// into its star by hand, and the rest then is series and parallel.
func TestOhmsByTriangleAndStar(t *testing.T) {
	const tol = 1e-12 // of the reading
	check := func(what string, got, want float64) {
		t.Helper()
		if !near(got, want, tol*want) {
			t.Errorf("%s = %.12g Ω, want %.12g", what, got, want)
		}
	}

	// A bridge worked out in round figures: the triangle 50, 30, 20 between in.hot, x and out.hot is the star
	// 15, 10, 6 about a middle (1500/100, 1000/100 and 600/100); behind the rays to x and
	// out.hot lie 35 and 39 to the screen: 15 + (10 + 35 ‖ 6 + 39) = 15 + 22.5.
	bridge := mustNew(t, Custom,
		at("R1", Resistor, 50, "in.hot", "x"), at("R2", Resistor, 30, "in.hot", "out.hot"), at("R3", Resistor, 20, "x", "out.hot"),
		at("R4", Resistor, 35, "x", "screen"), at("R5", Resistor, 39, "out.hot", "screen"))
	check("bridge, in.hot to screen", bridge.Ohms("in.hot", "screen"), 37.5)

	// A bridged T: R1, R2 and R3 are a triangle in.hot, mid, out.hot; R4 goes from mid to the screen.
	r1, r2, r3, r4 := 620.0, 560.0, 1300.0, 270.0
	tee := mustNew(t, "bridged-T", ohms(r1, r2, r3, r4)...)
	in, mid, out := star(r1, r2, r3)
	check("bridged-T, in.hot to screen", tee.Ohms("in.hot", "screen"), in+mid+r4)
	check("bridged-T, out.hot to screen", tee.Ohms("out.hot", "screen"), out+mid+r4)
	check("bridged-T, in.hot to out.hot", tee.Ohms("in.hot", "out.hot"), in+out)
	check("bridged-T, in.hot to screen, out joined", tee.Ohms("in.hot", "screen", [2]string{"out.hot", "screen"}), in+besideOhms(mid+r4, out))
	check("bridged-T, out.hot to screen, in joined", tee.Ohms("out.hot", "screen", [2]string{"in.hot", "screen"}), out+besideOhms(mid+r4, in))

	// A lattice: in.hot and in.cold each go to both pins of the output, which R5 bridges: the triangle R1, R3, R5
	// stands at in.hot, the arms R2 and R4 at in.cold.
	r1, r2, r3, r4, r5 := 300.0, 310.0, 900.0, 850.0, 1200.0
	lattice := mustNew(t, Custom,
		at("R1", Resistor, r1, "in.hot", "out.hot"), at("R2", Resistor, r2, "in.cold", "out.cold"),
		at("R3", Resistor, r3, "in.hot", "out.cold"), at("R4", Resistor, r4, "in.cold", "out.hot"),
		at("R5", Resistor, r5, "out.hot", "out.cold"))
	hot, outHot, outCold := star(r1, r5, r3)
	check("lattice, in.hot to in.cold", lattice.Ohms("in.hot", "in.cold"), hot+besideOhms(outHot+r4, outCold+r2))

	// An H tied to the screen at both middles: the triangle of its shunt and the two ties has the star's
	// point between; the arms lead to the rays.
	h := mustNew(t, "H", append(ohms(150, 220, 180, 120, 430), at("R6", Resistor, 2200, "mid.hot", "screen"), at("R7", Resistor, 1800, "mid.cold", "screen"))...)
	toHot, toCold, toScreen := star(430, 1800, 2200)
	check("tied H, in.hot to in.cold", h.Ohms("in.hot", "in.cold"), 150+toHot+toCold+220)
	check("tied H, in.hot to out.cold", h.Ohms("in.hot", "out.cold"), 150+toHot+toCold+120)
	check("tied H, out.hot to screen", h.Ohms("out.hot", "screen"), 180+toHot+toScreen)
	check("tied H, in.hot to in.cold, out joined", h.Ohms("in.hot", "in.cold", [2]string{"out.hot", "out.cold"}),
		150+220+besideOhms(besideOhms(430, 2200+1800), 180+120))
	check("tied H, out.cold to screen, in joined", h.Ohms("out.cold", "screen", [2]string{"in.hot", "in.cold"}), joinedTie(toHot, toCold, toScreen))

	if got := h.With("R4", math.Inf(1)).Ohms("out.cold", "screen"); !math.IsInf(got, 1) {
		t.Errorf("tied H with R4 open, out.cold to screen = %v Ω, want +Inf", got)
	}
}

// joinedTie is R4, then the point mid.cold to the screen while 150 + 220 Ω bridges mid.hot and mid.cold: the
// bridge closes a second triangle with the rays of the star, turned into a star in its turn.
func joinedTie(toHot, toCold, toScreen float64) float64 {
	// Between mid.cold and the star's point lie its ray, and beside it the bridge and the ray to mid.hot.
	return 120 + besideOhms(toCold, 150+220+toHot) + toScreen
}

// A shorted capacitor and a broken inductor are what they are for direct current too: links and gaps, by
// series and parallel.
func TestOhmsOfShortedAndBroken(t *testing.T) {
	c := mustNew(t, Custom,
		at("R1", Resistor, 1000, "in.hot", "out.hot"), at("R2", Resistor, 470, "out.hot", "screen"),
		at("C1", Capacitor, 2.2e-9, "out.hot", "screen"), at("L1", Inductor, 0.01, "in.hot", "x"), at("R3", Resistor, 330, "x", "screen"))
	for _, tt := range []struct {
		what string
		c    *Circuit
		want float64
	}{
		{"sound", c, besideOhms(1470, 330)},
		{"C1 shorted", c.With("C1", math.Inf(1)), besideOhms(1000, 330)},
		{"L1 broken", c.With("L1", math.Inf(1)), 1470},
	} {
		if got := tt.c.Ohms("in.hot", "screen"); !near(got, tt.want, 1e-9*tt.want) {
			t.Errorf("%s: in.hot to screen = %v Ω, want %v", tt.what, got, tt.want)
		}
	}
	b := c.Dependence(Ends{SourceOhms: 100, LoadOhms: 10000}, 0, "C1")
	if got, want := b.At(1e-6), b.At(0); got != want {
		t.Errorf("transfer at 0 Hz with a capacitor of 1 µF = %v, want %v as without", got, want)
	}
}
