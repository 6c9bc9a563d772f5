package analysis

import (
	"fmt"
	"math"
	"testing"
)

// cutAt limits part of the clip to ±level.
func (c *clip) cutAt(low, high, fromSec, toSec float64) *clip {
	for n := int(fromSec * c.rateHz); n < int(toSec*c.rateHz); n++ {
		c.x[n] = math.Max(low, math.Min(high, c.x[n]))
	}
	return c
}

// A clipped click beside the tone does not make it cut; cut peaks within do, at full scale and
// below it, on both sides and on one, also where noise lies over the flat tops.
func TestCutPeaks(t *testing.T) {
	const peak = 0.5
	tests := []struct {
		name  string
		spoil func(c *clip)
		cut   bool
	}{
		{"sound", func(*clip) {}, false},
		{"clicks beside", func(c *clip) {
			for _, at := range []float64{0.2, 0.4, 3.8} {
				for n := range 9 {
					c.x[int(at*c.rateHz)+n] = 1
				}
			}
		}, false},
		{"at full scale", func(c *clip) { c.scaled(7, 0, 4).cutAt(-1, 1, 0, 4) }, true},
		{"below full scale", func(c *clip) { c.cutAt(-0.47, 0.47, 0, 4) }, true},
		{"for a moment", func(c *clip) { c.cutAt(-0.45, 0.45, 2, 2.4) }, true},
		{"one side", func(c *clip) { c.cutAt(-0.44, 1, 0, 4) }, true},
		{"under noise", func(c *clip) { c.cutAt(-0.47, 0.47, 0, 4).noise(-75, 3) }, true},
		{"one side under noise", func(c *clip) { c.cutAt(-0.44, 1, 0, 4).noise(-75, 3) }, true},
		{"1 % of third harmonic", func(c *clip) { c.tone(3*997, -46, math.Pi, 0.5, 3.5) }, false},
		{"offset", func(c *clip) { c.offset(0.05) }, false},
		{"16 bit", func(c *clip) { c.round(16) }, false},
	}
	for _, tt := range tests {
		for _, rateHz := range []float64{44100, 96000} {
			c := newClip(rateHz, 4).tone(997, DBFSFromPeak(peak), 0, 0.5, 3.5).noise(-110, 1)
			tt.spoil(c)
			m := measureAll(t, c)
			got := m.CutPeaks(m.Tones[0])
			if got.Cut() != tt.cut {
				t.Errorf("%s at %g Hz: %+v, want cut %v", tt.name, rateHz, got, tt.cut)
			}
			if tt.name == "for a moment" {
				near(t, fmt.Sprintf("%s at %g Hz: first", tt.name, rateHz), got.FirstSec, 2, 0.11)
			}
		}
	}
}

// What a cut at c times the peak leaves of the fundamental is (2/π)(asin c + c sqrt(1-c²)): closed
// form of the Fourier integral.
func TestCutPeaksFlatness(t *testing.T) {
	for _, part := range []float64{0.7, 0.9, 0.97} {
		c := newClip(48000, 3).tone(997, -6, 0, 0, 3).cutAt(-part*PeakFromDBFS(-6), part*PeakFromDBFS(-6), 0, 3)
		m := measureAll(t, c)
		want := -DBFromRatio(part / (2 / math.Pi * (math.Asin(part) + part*math.Sqrt(1-part*part))))
		near(t, fmt.Sprintf("cut at %g of the peak: FlatDB", part), m.CutPeaks(m.Tones[0]).FlatDB, want, 0.02)
	}
}

// The step of the test signal between its last half seconds, as made.
func TestLevelBetween(t *testing.T) {
	c := newClip(48000, 7).tone(997, -10, 0, 0.5, 4.5).tone(997, -19.7, 0, 4.5, 6.5).noise(-70, 2)
	m := measureAll(t, c)
	if len(m.Tones) != 2 {
		t.Fatalf("%d tones, want 2", len(m.Tones))
	}
	loud, loudErr, n := LevelBetween(&m.Track, m.Tones[0], 4, 4.5)
	low, lowErr, _ := LevelBetween(&m.Track, m.Tones[1], 6, 6.5)
	near(t, "step", loud-low, 9.7, 0.01)
	if n < 8 {
		t.Errorf("%d blocks in half a second, want 8 or more", n)
	}
	// A sine of amplitude A in noise of density D: A scatters by sqrt(D/T); -70 dBFS over 20 kHz
	// beside -10 and -19.7 dBFS in 0.5 s (Cramer-Rao bound of the amplitude).
	near(t, "standard error of the louder", loudErr, dbPerPart*1e-3/math.Sqrt(2*20000*0.5), 3e-5)
	near(t, "standard error of the lower", lowErr, dbPerPart*math.Pow(10, -50.3/20)/math.Sqrt(2*20000*0.5), 1e-4)
	if _, _, n := LevelBetween(&m.Track, m.Tones[0], 3, 3); n != 0 {
		t.Errorf("%d blocks between a time and itself, want none", n)
	}
}
