package compare

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"padproof/compare/network"
)

// How the readings of a circuit read, by the text that names each.
func ohmsByText(c *network.Circuit) map[string]float64 {
	all := map[string]float64{}
	for _, r := range Readings(c) {
		all[r.How()] = r.On(c)
	}
	return all
}

// Pads of Saltmarsh, worked by hand with series and parallel resistors; the
// bridge by the delta-star formulas of A. E. Kennelly (Electrical World 34,
// 1899, from memory). A reading that is one before it again is left out.
func TestReadingsByHand(t *testing.T) {
	open := math.Inf(1)
	bridge := addedTo(t, "bridged-T", []float64{200, 300, 400, 500}, network.Part{Ref: "R5", Value: 600, A: "out.hot", B: "screen"})
	tests := []struct {
		name string
		c    *network.Circuit
		want map[string]float64
	}{
		{"U 560 560 330", circuit(t, "U", 0.01, 560, 560, 330), map[string]float64{
			"in.hot to in.cold":   1450, // 560 + 560 + 330
			"out.hot to out.cold": 330,
			"in.hot to out.hot":   560,
			"in.cold to out.cold": 560,
			"in.hot to screen":    open, "in.cold to screen": open, "out.hot to screen": open, "out.cold to screen": open,
			"in.hot to in.cold, out.hot joined to out.cold": 1120,                  // 560 + 560
			"out.hot to out.cold, in.hot joined to in.cold": 330 * 1120 / (1450.0), // 330 beside 1120
		}},
		{"L 680 180", circuit(t, "L", 0.01, 680, 180), map[string]float64{
			"in.hot to screen": 860, "out.hot to screen": 180, "in.hot to out.hot": 680,
			"out.hot to screen, in.hot joined to screen": 180 * 680 / 860.0,
			// in.hot to screen, out.hot joined: 680 again
		}},
		{"T 312 312 422", circuit(t, "T", 0.01, 312, 312, 422), map[string]float64{
			"in.hot to screen": 734, "out.hot to screen": 734, "in.hot to out.hot": 624,
			"in.hot to screen, out.hot joined to screen": 312 + 312*422/734.0,
			"out.hot to screen, in.hot joined to screen": 312 + 312*422/734.0, // by other parts: kept
		}},
		{"H 156 156 150 150 422", circuit(t, "H", 0.01, 156, 156, 150, 150, 422), map[string]float64{
			"in.hot to in.cold":   734, // 156 + 422 + 156
			"out.hot to out.cold": 722,
			"in.hot to out.hot":   306,
			"in.cold to out.cold": 306,
			"in.hot to screen":    open, "in.cold to screen": open, "out.hot to screen": open, "out.cold to screen": open,
			"in.hot to in.cold, out.hot joined to out.cold": 312 + 422*300/722.0,
			"out.hot to out.cold, in.hot joined to in.cold": 300 + 422*312/734.0,
		}},
		// In to screen: the delta in, mid, out of 200, 300 and 400 (900 in all) becomes a star of
		// 200·400/900 to in, 200·300/900 to mid, 300·400/900 to out; then 500 and 600 beside one another.
		{"bridged-T terminated", bridge, map[string]float64{
			"in.hot to screen":  200*400/900.0 + parallel(200*300/900.0+500, 300*400/900.0+600),
			"out.hot to screen": parallel(600, parallel(300, 600)+500), // 200 + 400 beside 300, then 500, beside 600
			// R3 beside R1 and R2, with what lies by way of screen: star of the delta in, mid, out again,
			// seen from in and out: mid reaches out by 500 and 600 too.
			"in.hot to out.hot":                          200*400/900.0 + parallel(300*400/900.0, 200*300/900.0+1100),
			"in.hot to screen, out.hot joined to screen": parallel(400, 200+parallel(300, 500)),
			"out.hot to screen, in.hot joined to screen": parallel(parallel(600, 400), 300+parallel(200, 500)),
		}},
	}
	for _, tt := range tests {
		got := ohmsByText(tt.c)
		for how, want := range tt.want {
			if v, there := got[how]; !there || !(v == want || math.Abs(v-want) <= 1e-9*want) {
				t.Errorf("%s: %s = %v (there: %v), want %v", tt.name, how, v, there, want)
			}
		}
		if len(got) != len(tt.want) {
			t.Errorf("%s: %d readings, want %d: %v", tt.name, len(got), len(tt.want), got)
		}
	}
}

func parallel(a, b float64) float64 { return a * b / (a + b) }

// addedTo is a named network with one part more.
func addedTo(t *testing.T, name string, values []float64, more network.Part) *network.Circuit {
	t.Helper()
	parts := append(circuit(t, name, 0.01, values...).Parts(), more)
	for i := range values {
		parts[i].A, parts[i].B = "", ""
	}
	c, err := network.New(name, parts)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// A capacitor is open to the meter; an inductor's wire has from nothing to its
// reactance at 1 kHz, 2π·1000·0.010 Ω = 62.83 Ω for 10 mH.
func TestBandOfReactances(t *testing.T) {
	for _, tt := range []struct {
		part      network.Part
		low, high float64
	}{
		{network.Part{Ref: "C1", Kind: network.Capacitor, Value: 1e-6, A: "out.hot", B: "screen"}, 178.2, 181.8},
		{network.Part{Ref: "L1", Kind: network.Inductor, Value: 0.010, A: "out.hot", B: "screen"}, 0, parallel(181.8, 2*math.Pi*10)},
	} {
		c := addedTo(t, "L", []float64{680, 180}, tt.part)
		low, high := OhmReading{PinA: "out.hot", PinB: "screen"}.Band(c)
		if math.Abs(low-tt.low) > 1e-9 || math.Abs(high-tt.high) > 1e-9 {
			t.Errorf("with %s: band %v to %v, want %v to %v", tt.part.Ref, low, high, tt.low, tt.high)
		}
	}
}

// No unit within its tolerances reads outside the band, and the corners reach it.
func TestBandHoldsEveryUnit(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 3))
	for _, c := range []*network.Circuit{
		circuit(t, "U", 0.05, 560, 560, 330), circuit(t, "O", 0.1, 1021, 40, 60, 457),
		addedTo(t, "bridged-T", []float64{200, 300, 400, 500}, network.Part{Ref: "R5", Value: 600, TolFrac: 0.2, A: "out.hot", B: "screen"}),
	} {
		for _, r := range Readings(c) {
			low, high := r.Band(c)
			if math.IsInf(low, 1) && math.IsInf(high, 1) {
				continue
			}
			least, most := math.Inf(1), 0.0
			for range 300 {
				v := r.On(c.Sample(rng))
				least, most = math.Min(least, v), math.Max(most, v)
			}
			if least < low || most > high {
				t.Errorf("%s: %s: units read %v to %v, band %v to %v", c.Name(), r.How(), least, most, low, high)
			}
			if least > low+(high-low)/3 || most < high-(high-low)/3 {
				t.Errorf("%s: %s: units read only %v to %v of %v to %v", c.Name(), r.How(), least, most, low, high)
			}
		}
	}
}

// Pins that are one node, in any order, are one reading.
func TestSameReading(t *testing.T) {
	l, u := circuit(t, "L", 0.01, 680, 180), circuit(t, "U", 0.01, 560, 560, 330)
	at := func(a, b string, joined ...string) OhmSeen {
		s := OhmSeen{PinA: a, PinB: b}
		copy(s.Joined[:], joined)
		return s
	}
	for _, tt := range []struct {
		c    *network.Circuit
		a, b OhmSeen
		want bool
	}{
		{u, at("out.hot", "out.cold"), at("out.cold", "out.hot"), true},
		{u, at("out.hot", "out.cold"), at("out.hot", "screen"), false},
		{l, at("out.hot", "out.cold"), at("screen", "out.hot"), true},
		{l, at("out.hot", "screen", "in.hot", "screen"), at("out.hot", "in.cold", "out.cold", "in.hot"), true},
		{l, at("out.hot", "screen", "in.hot", "screen"), at("out.hot", "screen"), false},
		{l, at("out.hot", "screen", "in.cold", "screen"), at("out.hot", "screen"), true}, // joins what is one
	} {
		if got := tt.a.Same(tt.c, tt.b); got != tt.want {
			t.Errorf("%s: %s and %s are one: %v, want %v", tt.c.Name(), tt.a.Reading().How(), tt.b.Reading().How(), got, tt.want)
		}
	}
	if !(OhmReading{PinA: "in.hot", PinB: "in.cold", Joined: [2]string{"screen", "in.hot"}}).Shorted(l) {
		t.Error("Shorted = false for joined pins that the meter is on")
	}
	if slices.ContainsFunc(Readings(u), func(r OhmReading) bool { return r.Shorted(u) }) {
		t.Error("a listed reading is shorted")
	}
}
