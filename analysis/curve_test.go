package analysis

import (
	"math"
	"testing"
)

// White noise has one density everywhere: 2σ² over the rate. Middles are those of IEC 61260-1 for 24
// bands an octave, so that 1 kHz is one and ten octaves hold 240 and a few.
func TestDensities(t *testing.T) {
	const rateHz, sigma = 48000.0, 0.001
	c := newClip(rateHz, 20).noise(0, 5)
	scale := 0.0
	for _, v := range c.x {
		scale += v * v
	}
	scale = sigma / math.Sqrt(scale/float64(len(c.x)))
	for i := range c.x {
		c.x[i] *= scale
	}
	n := mustNoise(t, c)
	all := n.Spectrum.Densities(24, n.Band)
	want := 2 * sigma * sigma / rateHz
	mean, held := 0.0, false
	for i, d := range all {
		near(t, "density", d.MeanSquare/want, 1, 5*math.Sqrt(2/d.Dof))
		mean += d.MeanSquare / want / float64(len(all))
		held = held || math.Abs(d.FreqHz-1000) < 1e-6
		if i > 0 {
			near(t, "step", math.Log10(d.FreqHz/all[i-1].FreqHz), 0.3/24, 1e-9)
		}
	}
	near(t, "mean density", mean, 1, 0.02)
	if !held || len(all) < 238 || len(all) > 242 {
		t.Errorf("%d bands, 1 kHz among them: %v; want some 240 and true", len(all), held)
	}
	for _, none := range [][]Density{n.Spectrum.Densities(0, n.Band), n.Spectrum.Densities(24, FreqRange{0, 100}), n.Spectrum.Densities(24, FreqRange{20, math.Inf(1)}), n.Spectrum.Densities(24, FreqRange{math.NaN(), 100})} {
		if none != nil {
			t.Errorf("%d bands of no range", len(none))
		}
	}
}

// Hum left out, the noise beside it keeps its density; and each line reads what it was made with: a
// sine of peak A has a mean square of A²/2.
func TestLineIn(t *testing.T) {
	n := mustNoise(t, newClip(48000, 20).noise(-90, 6).hum(50, -70))
	if len(n.Cuts) < 5 {
		t.Fatalf("%d cuts, want at least 5", len(n.Cuts))
	}
	for h := range 5 {
		level := DBFSFromMeanSquare(n.Spectrum.LineIn(n.Cuts[h]))
		near(t, "line", level, -70-10*float64(h), 0.1)
	}
	clear := mustNoise(t, newClip(48000, 20).noise(-90, 6)).Spectrum.Densities(24, n.Band)
	beside := n.Spectrum.Densities(24, n.Band, n.Cuts...)
	at := map[float64]float64{}
	for _, d := range clear {
		at[d.FreqHz] = d.MeanSquare
	}
	for _, d := range beside {
		near(t, "density beside hum, dB", 10*math.Log10(d.MeanSquare/at[d.FreqHz]), 0, 3)
	}
	if len(beside) >= len(clear) {
		t.Errorf("%d bands with hum left out, %d without; those that hum takes up should be gone", len(beside), len(clear))
	}
}

// A line anywhere between bins reads its level in Peaks, times LineBins, within the 0.9 dB by which
// this window falls half a bin off (computed from its transform); no line is lost, however few the
// points.
func TestPeaks(t *testing.T) {
	for _, off := range []float64{0, 0.25, 0.5} {
		binHz := 48000.0 / 32768
		freqHz := (3000 + off) * binHz
		c := newClip(48000, 4).tone(freqHz, -20, 1, 0, 4).noise(-110, 9)
		sp := mustNoise(t, c).Spectrum
		peaks := sp.Peaks(20, 20000, 200)
		if len(peaks) > 200 {
			t.Errorf("%d points, want at most 200", len(peaks))
		}
		best := Peak{}
		for i, p := range peaks {
			if p.MeanSquare > best.MeanSquare {
				best = p
			}
			if i > 0 && p.FreqHz <= peaks[i-1].FreqHz {
				t.Fatalf("points out of order at %g Hz", p.FreqHz)
			}
		}
		near(t, "frequency", best.FreqHz, freqHz, sp.BinHz)
		near(t, "level", DBFSFromMeanSquare(LineBins*best.MeanSquare), -20, 0.9)
		if off == 0 {
			near(t, "level on a bin", DBFSFromMeanSquare(LineBins*best.MeanSquare), -20, 0.05)
		}
	}
	sp := &Spectrum{RateHz: 48000, BinHz: 1, MeanSquare: make([]float64, 24001)}
	for _, none := range [][]Peak{sp.Peaks(0, 100, 10), sp.Peaks(100, 100, 10), sp.Peaks(20, 20000, 0), sp.Peaks(math.NaN(), 100, 10)} {
		if none != nil {
			t.Errorf("%d points of no range", len(none))
		}
	}
}

// A step of 0.5 dB shows in full, and departures are those that Steady judges.
func TestDepartures(t *testing.T) {
	c := newClip(48000, 10).tone(997, -20, 0, 0, 10)
	for n := 6 * 48000; n < len(c.x); n++ {
		c.x[n] *= math.Pow(10, -0.5/20)
	}
	c.noise(-110, 3)
	m := measureAll(t, c)
	tone := m.Tones[0]
	s := Steady(&m.Track, tone, 0, 10)
	atSec, db := Departures(&m.Track, tone, 0, 10)
	if len(atSec) != s.Blocks || len(db) != s.Blocks {
		t.Fatalf("%d departures, want %d", len(db), s.Blocks)
	}
	lowest, at := 0.0, 0.0
	for i, v := range db {
		if v < lowest {
			lowest, at = v, atSec[i]
		}
		if atSec[i] < 5.9 {
			near(t, "departure before the step", v, 0, 0.01)
		}
	}
	near(t, "step", lowest, -0.5, 0.01)
	near(t, "LargestDB", -lowest, s.LargestDB, 1e-9)
	if at < 6 || at > 8 {
		t.Errorf("step at %g s, want 6 to 8", at)
	}
	if x, y := Departures(&m.Track, tone, 3, 3.1); x != nil || y != nil {
		t.Errorf("%d departures of 0.1 s, want none", len(y))
	}
}
