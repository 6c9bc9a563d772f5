package analysis

import (
	"fmt"
	"math"
	"testing"
)

// Tones between bins at all rates, with noise, DC and hum, something before and after: frequency
// and level by construction. What noise may do is taken from the variance bound of a sine fit:
// var(A) ≥ 2σ²/N, var(f) ≥ 6 rate²σ²/(π²A²N³); five times that, and 0.0005 dB, 1e-6 Hz.
func TestMeasureTones(t *testing.T) {
	rates := []float64{8000, 44100, 48000, 88200, 96000, 192000}
	for i, freqHz := range []float64{60.37, 120.37, 250.2, 440.44, 997.013, 3150.7, 10000.3} {
		for j, rateHz := range rates {
			if freqHz > 0.45*rateHz {
				continue
			}
			levelDBFS := []float64{-0.5, -6, -20, -40, -60, -80}[(i+j)%6]
			noiseDBFS := levelDBFS - []float64{90, 60, 40, 25}[(i*5+j)%4]
			c := newClip(rateHz, 3.6).tone(freqHz, levelDBFS, 1, 0.7, 3).noise(noiseDBFS, uint64(100*i+j))
			c.hum(50, levelDBFS-50).offset(0.1 * RatioFromDB(levelDBFS))
			name := fmt.Sprintf("%g Hz at %g Hz, %g dBFS, noise %g", freqHz, rateHz, levelDBFS, noiseDBFS)

			tone := measureAll(t, c).Tones[0]
			sigma := RatioFromDB(noiseDBFS-levelDBFS) / math.Sqrt(2*math.Min(1, 20000/(rateHz/2))) // A = 1
			n := (tone.EndSec - tone.StartSec) * rateHz
			near(t, name+": level", tone.LevelDBFS, levelDBFS, 0.0005+5*dbPerPart*sigma*math.Sqrt(2/n))
			near(t, name+": frequency", tone.FreqHz, freqHz, 2e-4*RatioFromDB(-20)+5*rateHz*sigma*math.Sqrt(6/(n*n*n))/math.Pi)
			near(t, name+": start", tone.StartSec, 0.8, 0.11)
			near(t, name+": end", tone.EndSec, 2.9, 0.11)
			phase := 1 + 2*math.Pi*freqHz*(tone.StartSec-0.7)
			near(t, name+": phase", math.Remainder(tone.PhaseRad-phase, 2*math.Pi), 0, 0.002+10*sigma*math.Sqrt(2/n))
		}
	}
}

// At high signal to noise ratio nothing but arithmetic is left.
func TestMeasureTonesExactly(t *testing.T) {
	for _, rateHz := range []float64{8000, 11025, 44100, 48000, 192000, 384000} {
		for _, freqHz := range []float64{20, 61.7, 399.9, 997, 3000.1234567} {
			c := newClip(rateHz, 4).tone(freqHz, -6, 0.5, 0, 4).offset(0.01)
			name := fmt.Sprintf("%g Hz at %g Hz", freqHz, rateHz)
			tone := measureAll(t, c).Tones[0]
			near(t, name+": level", tone.LevelDBFS, -6, 2e-5)
			near(t, name+": frequency", tone.FreqHz, freqHz, 1e-6)
			near(t, name+": scatter", tone.ScatterDB, 0, 2e-5)
			near(t, name+": RMS", tone.RMSDBFS, DBFSFromMeanSquare(0.5*math.Pow(10, -0.6)+1e-4), 0.05)
			near(t, name+": phase", math.Remainder(tone.PhaseRad-0.5-2*math.Pi*freqHz*tone.StartSec, 2*math.Pi), 0, 1e-5)
		}
	}
}

// A stretch whose frequency is a little off is measured all the same.
func TestMeasureTonesFrequencyOff(t *testing.T) {
	for _, freqHz := range []float64{100, 997} {
		for _, offHz := range []float64{-0.5, -0.1, 0.01, 0.2, 1} {
			c := newClip(48000, 3).tone(freqHz+offHz, -10, 0, 0, 3)
			m, err := MeasureTones(c, []Stretch{{FreqHz: freqHz, LevelDBFS: -10, EndSec: 3}})
			if err != nil {
				t.Fatal(err)
			}
			near(t, fmt.Sprintf("%g Hz off by %g: frequency", freqHz, offHz), m.Tones[0].FreqHz, freqHz+offHz, 1e-5)
			near(t, fmt.Sprintf("%g Hz off by %g: level", freqHz, offHz), m.Tones[0].LevelDBFS, -10, 1e-3)
		}
	}
}

// Hum 10 Hz beside a tone, stronger than it: behind a pad.
func TestMeasureTonesBesideHum(t *testing.T) {
	for _, c := range []struct{ freqHz, mainsHz, humDBFS, tolDB float64 }{
		{60, 50, -70, 0.002},
		{60, 50.1, -80, 0.002},
		{50, 60, -80, 0.001},
		{70, 60, -80, 0.001},
		{997, 50, -40, 0.01}, // behind a 60 dB pad the fundamental of the hum is the strongest line
	} {
		take := newClip(48000, 8).tone(c.freqHz, -80, 0.4, 1, 7).noise(-120, 5).tone(c.mainsHz, c.humDBFS, 2, 0, 8)
		stretches, err := FindTonesAt(take, []float64{c.freqHz})
		if err != nil {
			t.Errorf("%+v: %v", c, err)
			continue
		}
		m, err := MeasureTones(take, stretches)
		if err != nil {
			t.Errorf("%+v: %v", c, err)
			continue
		}
		near(t, fmt.Sprintf("%+v: level", c), m.Tones[0].LevelDBFS, -80, c.tolDB)
	}
}

// The level steps inside one stretch of phase; each part reads its own level.
func TestMeasureTestSignal(t *testing.T) {
	for _, rateHz := range []float64{44100, 96000} {
		m := measureAll(t, generated(t, rateHz).noise(-85, 4).round(24))
		if len(m.Tones) != 2 {
			t.Fatalf("%d tones, want 2", len(m.Tones))
		}
		for i, want := range []struct{ level, start, end float64 }{{-6, 1.75, 5.75}, {-16, 5.75, 7.75}} {
			tone := m.Tones[i]
			near(t, "level", tone.LevelDBFS, want.level, 2e-4)
			near(t, "frequency", tone.FreqHz, 997, 1e-5)
			near(t, "start", tone.StartSec, want.start, 0.15)
			near(t, "end", tone.EndSec, want.end, 0.15)
			near(t, "noise", tone.NoiseDBFS, -85, 0.2)
		}
	}
}

// What stands in the middle of a tone does not enter its level: the longest undisturbed part is
// measured.
func TestMeasureTonesInterrupted(t *testing.T) {
	const rateHz = 48000.0
	base := func() *clip { return newClip(rateHz, 6).tone(997, -60, 0, 0, 6).noise(-110, 8) }
	click, gap, jump, slip, bad := base(), base(), base(), base(), base()
	click.x[2*48000] = 0.9
	for n := 96000; n < 96480; n++ {
		gap.x[n] = 0
	}
	copy(jump.x[96000:], jump.x[96019:]) // a lost buffer, 142° of the tone
	copy(slip.x[96000:], slip.x[96003:]) // three samples, 22°: the level hardly shows it
	for n := 96000; n < 96300; n++ {
		bad.x[n] = math.NaN()
	}
	for name, c := range map[string]*clip{"click": click, "gap": gap, "jump": jump, "slip": slip, "bad samples": bad} {
		tone := measureAll(t, c).Tones[0]
		near(t, name+": level", tone.LevelDBFS, -60, 0.001)
		near(t, name+": frequency", tone.FreqHz, 997, 1e-4)
		near(t, name+": start", tone.StartSec, 2.05, 0.1)
		near(t, name+": noise", tone.NoiseDBFS, -110, 0.3)
	}
}
