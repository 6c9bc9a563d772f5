package analysis

import (
	"fmt"
	"math"
	"testing"
)

func (c *clip) limit(low, high float64) *clip {
	for n, v := range c.x {
		c.x[n] = math.Max(low, math.Min(high, v))
	}
	return c
}

func (c *clip) scale(by float64) *clip {
	for n := range c.x {
		c.x[n] *= by
	}
	return c
}

func clippedOf(t *testing.T, c *clip) Clipped {
	t.Helper()
	m, err := MeasureTones(c, nil)
	if err != nil {
		t.Fatal(err)
	}
	return m.Clipped
}

// Sound takes in every resolution, low tones and weak ones too: nothing is called clipped.
func TestClippedNoFalseAlarm(t *testing.T) {
	for _, rateHz := range []float64{8000, 44100, 192000} {
		for _, freqHz := range []float64{20, 60, 100, 997, 1000, 6000, 10000, 12000} {
			if freqHz > 0.45*rateHz {
				continue
			}
			for _, levelDBFS := range []float64{-0.1, -6, -40, -70} {
				for _, bits := range []int{8, 16, 20, 24} {
					for _, noisy := range []bool{false, true} {
						c := newClip(rateHz, 0.4).tone(freqHz, levelDBFS, 0.3, 0, 0.4)
						if noisy {
							c.noise(-90, 1)
						}
						c.round(bits)
						if noisy { // brought up afterwards, and stored finer
							c.scale(0.7).round(24)
						}
						if got := clippedOf(t, c); got.Runs > 0 {
							t.Errorf("%g Hz at %g Hz, %g dBFS, %d bits, noisy %v: %+v", freqHz, rateHz, levelDBFS, bits, noisy, got)
						}
					}
				}
			}
		}
	}
	others := map[string]*clip{
		"test signal":     generated(t, 48000),
		"16 bit":          generated(t, 44100).round(16),
		"8 bit":           generated(t, 44100).round(8),
		"digital silence": newClip(48000, 1),
		"constant":        newClip(48000, 1).offset(0.3),
		"noise":           newClip(48000, 1).noise(-95, 1).round(16),
		"talk":            newClip(48000, 3).talk(-12, 1, 0, 3).round(16),
	}
	for name, c := range others {
		if got := clippedOf(t, c); got.Runs > 0 {
			t.Errorf("%s: %+v", name, got)
		}
	}
}

// Cut by 0.3 dB and more, at full scale and below, in every resolution.
func TestClipped(t *testing.T) {
	for _, freqHz := range []float64{60, 100, 997, 1000} {
		for _, bits := range []int{16, 24} {
			for _, overDB := range []float64{0.3, 1, 6} {
				for _, cutDBFS := range []float64{0, -3} {
					cut := RatioFromDB(cutDBFS)
					c := newClip(48000, 2).tone(freqHz, cutDBFS+overDB, 0.2, 0.5, 1.5).noise(-95, 3).limit(-cut, cut).round(bits)
					name := fmt.Sprintf("%g Hz, %d bits, %g dB over %g dBFS", freqHz, bits, overDB, cutDBFS)
					got := clippedOf(t, c)
					near(t, name+": cut peaks", float64(got.Runs), 2*freqHz, 0.2*freqHz+4)
					near(t, name+": first", got.FirstSec, 0.5, 1/freqHz)
					near(t, name+": level", got.LevelDBFS, cutDBFS, 0.001)
					flat := 2 * math.Acos(RatioFromDB(-overDB)) / (2 * math.Pi * freqHz) * 48000
					near(t, name+": samples", float64(got.Samples)/float64(got.Runs), flat, 1.8)
				}
			}
		}
	}
	if got := clippedOf(t, newClip(48000, 2).tone(997, 3, 0, 0, 2).limit(-1, 1).round(8)); got.Runs < 3000 {
		t.Errorf("8 bit, 3 dB over: %+v, want some 3988 runs", got)
	}
	if got := clippedOf(t, newClip(48000, 2).tone(1000, 0, 0, 0, 2).limit(-0.7, 0.7).round(16)); got.Runs < 3000 {
		t.Errorf("1 kHz without noise, cut at -3 dBFS: %+v, want some 4000 runs", got)
	}
	one := newClip(48000, 2).tone(200, -1, 0, 0, 2).noise(-100, 1)
	for n := 50000; n < 50005; n++ { // one single cut somewhere
		one.x[n] = 1
	}
	if got := clippedOf(t, one.round(24)); got.Runs != 1 || got.Samples != 5 {
		t.Errorf("one cut of five samples: %+v", got)
	}
}

// A tone that needs more than full scale although hardly a run shows.
func TestClippedSlightly(t *testing.T) {
	m := measureAll(t, newClip(48000, 3).tone(997, 0.05, 0, 0, 3).limit(-1, 1).round(16))
	if m.Clipped.Runs == 0 {
		t.Errorf("0.05 dB over full scale: level %g, not clipped", m.Tones[0].LevelDBFS)
	}
	m = measureAll(t, newClip(48000, 3).tone(997, 0, 0, 0, 3).round(16))
	if m.Clipped.Runs > 0 {
		t.Errorf("a full-scale sine: %+v", m.Clipped)
	}
	m = measureAll(t, newClip(48000, 3).tone(997, 3, 0, 0, 3)) // floats may lie above full scale
	if m.Clipped.Runs > 0 {
		t.Errorf("a float sine of +3 dBFS: %+v", m.Clipped)
	}
}
