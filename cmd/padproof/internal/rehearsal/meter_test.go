package rehearsal

import (
	"math"
	"testing"
)

// A meter shows what it is off by, to a ten-thousandth or a hundredth of an ohm.
func TestMeterShows(t *testing.T) {
	right, off := Meter{}, Meter{Frac: 0.005, Ohms: -0.2}
	for _, tt := range []struct {
		m          Meter
		ohms, want float64
	}{
		{right, 330, 330}, {right, 254.896, 254.9}, {right, 4.7049, 4.7}, {right, 1450.4, 1450}, {right, 12345678, 12345678},
		{right, math.Inf(1), math.Inf(1)}, {right, 21e6, math.Inf(1)}, {right, 0, 0},
		{off, 340, 341.5}, {off, 0.1, 0}, // 340 · 1.005 - 0.2; never below nothing
	} {
		if got := tt.m.shows(tt.ohms); got != tt.want {
			t.Errorf("%+v shows %v for %v Ω, want %v", tt.m, got, tt.ohms, tt.want)
		}
	}
}

// Meters drawn lie within what they state and fill it; one seed, one meter.
func TestDrawMeter(t *testing.T) {
	var frac, ohms float64
	for seed := range uint64(200) {
		m := DrawMeter(0.005, 0.2, seed)
		if m != DrawMeter(0.005, 0.2, seed) {
			t.Fatalf("seed %d gives two meters", seed)
		}
		frac, ohms = math.Max(frac, math.Abs(m.Frac)), math.Max(ohms, math.Abs(m.Ohms))
	}
	if frac > 0.005 || ohms > 0.2 || frac < 0.0045 || ohms < 0.18 {
		t.Errorf("meters are off by up to %v and %v Ω, want up to 0.005 and 0.2 Ω", frac, ohms)
	}
}

// A sound L of 680 and 150 Ω, worked by hand, and the same with its shunt open.
func TestRead(t *testing.T) {
	p := plan(pad(t))
	for _, tt := range []struct {
		plan Plan
		want []float64
	}{
		{p, []float64{830, 150, 680, 122.9}}, // 680 + 150, 150, 680, 150 beside 680
		{Plan{Pad: p.Pad.With("R2", math.Inf(1))}, []float64{math.Inf(1), math.Inf(1), 680, 680}},
	} {
		got := tt.plan.Read(Meter{})
		if len(got) != len(tt.want) {
			t.Fatalf("%d readings, want %d: %+v", len(got), len(tt.want), got)
		}
		for i, s := range got {
			if s.Ohms != tt.want[i] {
				t.Errorf("%s = %v, want %v", s.Reading().How(), s.Ohms, tt.want[i])
			}
		}
	}
}
