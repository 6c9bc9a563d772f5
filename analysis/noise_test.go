package analysis

import (
	"fmt"
	"math"
	"testing"
)

// Noise of known level under a tone reads right, whatever the tone's level, and so do harmonics.
func TestNoiseUnderTone(t *testing.T) {
	harmonicsDB := []float64{-70, -90, -85, -110}
	for _, c := range []struct{ rateHz, freqHz, levelDBFS, noiseDBFS float64 }{
		{48000, 997, -6, -100},
		{48000, 997, -6, -125},
		{96000, 997.008, -1, -110},
		{44100, 997, -60, -90},
		{44100, 997, -80, -80},
		{48000, 100, -20, -90},
		{48000, 60, -20, -90},
		{48000, 5000, -6, -100},
		{192000, 10000, -6, -95},
		{8000, 997, -10, -80},
	} {
		take := newClip(c.rateHz, 6).tone(c.freqHz, c.levelDBFS, 1, 0, 6).noise(c.noiseDBFS, 17).offset(0.002)
		for i, h := range harmonicsDB {
			if f := c.freqHz * float64(i+2); f < 0.45*c.rateHz {
				take.tone(f, c.levelDBFS+h, float64(i), 0, 6)
			}
		}
		name := fmt.Sprintf("%+v", c)
		tone := measureAll(t, take).Tones[0]
		near(t, name+": noise", tone.NoiseDBFS, c.noiseDBFS+10*math.Log10(math.Min(20000, 0.45*c.rateHz)/math.Min(20000, c.rateHz/2)), 0.12)
		near(t, name+": SNR", tone.SNRDB, tone.LevelDBFS-tone.NoiseDBFS, 1e-12)
		near(t, name+": harmonics", float64(len(tone.HarmonicsDB)), math.Min(9, math.Floor(0.45*c.rateHz/c.freqHz)-1), 0)
		for i, got := range tone.HarmonicsDB {
			// What noise there is in a line's bins, relative to the tone.
			floor := c.noiseDBFS - c.levelDBFS + 10*math.Log10(9*tone.Spectrum.BinHz/20000)
			want, tol := -400.0, 0.0
			if i < len(harmonicsDB) {
				want = harmonicsDB[i]
			}
			if want > floor+3 {
				tol = 0.02 + 6*math.Pow(10, (floor-want)/20)
				near(t, fmt.Sprintf("%s: harmonic %d", name, i+2), got, want, tol)
			} else {
				near(t, fmt.Sprintf("%s: harmonic %d, in noise", name, i+2), got, floor, 4)
			}
		}
	}
}

// The rest is everything but the tone: noise over all frequencies, hum and harmonics.
func TestRestBesideTone(t *testing.T) {
	c := newClip(48000, 6).tone(997, -6, 0, 0, 6).noise(-80, 2).tone(50, -60, 0, 0, 6).tone(1994, -70, 0, 0, 6)
	tone := measureAll(t, c).Tones[0]
	want := 10 * math.Log10(1e-6+1e-7+1e-8*1.2)
	near(t, "rest", tone.RestDBFS, want, 0.02)
	near(t, "noise", tone.NoiseDBFS, 10*math.Log10(1e-6+1e-8), 0.02)
	near(t, "RMS", tone.RMSDBFS, 10*math.Log10(math.Pow(10, -0.6)+1e-6), 3e-4)
}

// Segments with a click in them do not raise the noise.
func TestNoiseLeavesClicksOut(t *testing.T) {
	c := newClip(48000, 10).tone(997, -20, 0, 0, 10).noise(-100, 2)
	c.x[100000] += 0.3
	c.x[400000] -= 0.3
	tone := measureAll(t, c).Tones[0]
	near(t, "noise", tone.NoiseDBFS, -100, 0.15)
	near(t, "level", tone.LevelDBFS, -20, 0.001)
}

// Short takes and low rates: fewer, shorter segments, and still noise.
func TestNoiseOfShortTones(t *testing.T) {
	for _, rateHz := range []float64{8000, 48000, 384000} {
		c := newClip(rateHz, 1.3).tone(997, -6, 0, 0.1, 1.2).noise(-70, 3)
		tone := measureAll(t, c).Tones[0]
		if tone.Spectrum == nil || tone.Spectrum.Segments < 3 {
			t.Fatalf("rate %g: spectrum %+v, want three segments at least", rateHz, tone.Spectrum)
		}
		near(t, "noise", tone.NoiseDBFS, -70+10*math.Log10(math.Min(20000, 0.45*rateHz)/math.Min(20000, rateHz/2)), 0.4)
	}
}
