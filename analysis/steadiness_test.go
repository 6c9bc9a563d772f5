package analysis

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"
)

// scaled multiplies part of the clip.
func (c *clip) scaled(db, fromSec, toSec float64) *clip {
	for n := int(fromSec * c.rateHz); n < int(toSec*c.rateHz); n++ {
		c.x[n] *= RatioFromDB(db)
	}
	return c
}

// lose takes samples out, or, below 0, plays the ones before again.
func (c *clip) lose(samples int, atSec float64) *clip {
	at := int(atSec * c.rateHz)
	c.x = append(append([]float64(nil), c.x[:at]...), c.x[at+samples:]...)
	return c
}

// burst adds noise for some milliseconds.
func (c *clip) burst(levelDBFS, atSec, sec float64, seed uint64) *clip {
	random := rand.New(rand.NewPCG(seed, 5))
	for n := int(atSec * c.rateHz); n < int((atSec+sec)*c.rateHz); n++ {
		c.x[n] += PeakFromDBFS(levelDBFS) / math.Sqrt2 * random.NormFloat64()
	}
	return c
}

// steadiness is that of the strongest tone over all its span.
func steadiness(t *testing.T, c *clip) Steadiness {
	t.Helper()
	m := measureAll(t, c)
	tone := m.Tones[0]
	for _, other := range m.Tones {
		if other.EndSec-other.StartSec > tone.EndSec-tone.StartSec {
			tone = other
		}
	}
	from, to := ToneSpan(&m.Track, tone)
	return Steady(&m.Track, tone, from, to)
}

func ordinary(seed uint64, levelDBFS, noiseDBFS float64) *clip {
	return newClip(48000, 8).tone(997, levelDBFS, float64(seed), 0.7, 7.5).noise(noiseDBFS, seed)
}

// Each event is named, timed and sized as it was made.
func TestSteadyEvents(t *testing.T) {
	const at = 4.031
	tests := []struct {
		name  string
		spoil func(c *clip)
		what  string
		db    float64
		tolDB float64
	}{
		{"step up", func(c *clip) { c.scaled(0.3, at, 8) }, LevelStep, 0.3, 0.01},
		{"step down", func(c *clip) { c.scaled(-2, at, 8) }, LevelStep, -2, 0.01},
		{"small step", func(c *clip) { c.scaled(-0.06, at, 8) }, LevelStep, -0.06, 0.01},
		{"dip of 0.2 s", func(c *clip) { c.scaled(-0.4, at, at+0.2) }, LevelStep, -0.4, 0.02},
		{"loss of 0.3 s", func(c *clip) { c.scaled(-60, at, at+0.3) }, Dropout, -60, 25},
		{"loss of 3 s", func(c *clip) { c.scaled(-80, at-1.5, at+1.5) }, Dropout, -80, 25},
		{"silence of 5 ms", func(c *clip) { c.scaled(-200, at, at+0.005) }, Dropout, -0.9, 0.3},
		{"silence of 20 ms", func(c *clip) { c.scaled(-200, at, at+0.02) }, Dropout, -4, 1.2},
		{"crackle of 5 ms", func(c *clip) { c.burst(-20, at, 0.005, 3) }, Crackle, -20, 4}, // -10 dB, a tenth of 50 ms
		{"crackle of 0.4 s", func(c *clip) { c.burst(-40, at, 0.4, 3) }, Crackle, -30, 3},
		{"buffer lost", func(c *clip) { *c = *c.lose(256, at) }, Dropout, 0, 12},
		{"sample lost", func(c *clip) { *c = *c.lose(1, at) }, Dropout, 0, 0.1},
		{"millisecond lost", func(c *clip) { *c = *c.lose(48, at) }, Dropout, 0, 0.1},
		{"buffer repeated", func(c *clip) { *c = *c.lose(-512, at) }, Dropout, 0, 12},
	}
	for _, tt := range tests {
		for _, noiseDBFS := range []float64{-110, -70} {
			c := ordinary(7, -10, -200)
			tt.spoil(c)
			c.noise(noiseDBFS, 4)
			what := fmt.Sprintf("%s, noise %g dBFS", tt.name, noiseDBFS)
			s := steadiness(t, c)
			if len(s.Events) != 1 {
				t.Errorf("%s: %+v, want one event", what, s.Events)
				continue
			}
			e := s.Events[0]
			if e.What != tt.what {
				t.Errorf("%s: %+v, want a %s", what, e, tt.what)
			}
			start := at
			if tt.name == "loss of 3 s" {
				start -= 1.5
			}
			near(t, what+": time", e.AtSec, start, 0.08)
			near(t, what+": depth", e.DB, tt.db, tt.tolDB)
			if e.What == LevelStep {
				near(t, what+": departure", s.DepartureDB, math.Abs(tt.db), 0.015)
			}
		}
	}
}

// Samples lost turn the phase by their number times the turn a sample, whole turns left out.
func TestSteadyPhaseJump(t *testing.T) {
	for _, samples := range []int{1, 2, 64, 96, 441, 512, 1024, -64, -100, -4096} {
		c := ordinary(3, -10, -200).lose(samples, 3.3).noise(-80, 9)
		s := steadiness(t, c)
		want := 360 * math.Remainder(997*float64(samples)/48000, 1)
		if len(s.Events) != 1 {
			t.Errorf("%d samples: %+v, want one event of %.2f°", samples, s.Events, want)
			continue
		}
		near(t, fmt.Sprintf("jump after %d samples lost", samples), math.Remainder(s.Events[0].JumpDeg-want, 360), 0, 0.15)
	}
}

// Noise that the tone stands in is no departure: what is left of it stays within what the noise
// takes off, and no event is seen.
func TestSteadyOrdinaryTakes(t *testing.T) {
	random := rand.New(rand.NewPCG(1, 2))
	for seed := range uint64(200) {
		rateHz := 48000.0
		if seed%2 == 0 {
			rateHz = 44100
		}
		levelDBFS := -6 - 30*random.Float64()
		c := newClip(rateHz, 2.6)
		drifting(c, 500+1000*random.Float64(), levelDBFS, 0.1*(2*random.Float64()-1), 50e-6*(2*random.Float64()-1), 0.3, 2.3)
		c.noise(levelDBFS-15-65*random.Float64(), seed)
		if seed%3 == 0 {
			c.hum(50+10*float64(seed%2), levelDBFS-40)
		}
		if seed%4 == 0 {
			c.burst(-3, 0.1, 0.002, seed).burst(-3, 2.45, 0.002, seed)
		}
		if seed%5 == 0 {
			c.round(16)
		}
		s := steadiness(t, c)
		if len(s.Events) > 0 {
			t.Errorf("take %d: %+v", seed, s.Events)
		}
		if s.DepartureDB > 0.01+s.NoiseDB {
			t.Errorf("take %d: departs by %.4f dB beyond the noise's %.4f", seed, s.DepartureDB, s.NoiseDB)
		}
	}
}

// drifting adds a tone whose level and frequency drift, in dB and parts a minute.
func drifting(c *clip, freqHz, levelDBFS, dbPerMin, partsPerMin, fromSec, toSec float64) {
	peak, phase := PeakFromDBFS(levelDBFS), 0.0
	for n := int(fromSec * c.rateHz); n < int(toSec*c.rateHz); n++ {
		minutes := (float64(n)/c.rateHz - fromSec) / 60
		c.x[n] += peak * (1 + dbPerMin*minutes/dbPerPart) * math.Cos(phase)
		phase += 2 * math.Pi * freqHz * (1 + partsPerMin*minutes) / c.rateHz
	}
}

// The largest of the departures that white noise makes lies above NoiseDB in half of all takes.
func TestSteadyNoiseIsTakenOff(t *testing.T) {
	above, takes := 0, 60
	for seed := range takes {
		s := steadiness(t, newClip(48000, 4).tone(997, -20, 0, 0.3, 3.8).noise(-45, uint64(seed)))
		if s.LargestDB > s.NoiseDB {
			above++
		}
	}
	// 60 takes at one half scatter by 4; the running median scatters too and lifts it a little.
	if above < 18 || above > 48 {
		t.Errorf("%d of %d takes depart by more than NoiseDB, want about half", above, takes)
	}
}

// A slow clock step (a change of pitch) is no lost buffer.
func TestSteadyPitchChangeIsNoJump(t *testing.T) {
	c := newClip(48000, 8)
	phase := 0.0
	for n := range c.x {
		freqHz := 997.0
		if n > 4*48000 {
			freqHz = 997.05
		}
		c.x[n] = 0.3 * math.Cos(phase)
		phase += 2 * math.Pi * freqHz / 48000
	}
	for _, e := range steadiness(t, c.noise(-90, 1)).Events {
		t.Errorf("%+v, want no event", e)
	}
}

// Too little of the tone between two times gives nothing at all.
func TestSteadyTooShort(t *testing.T) {
	m := measureAll(t, ordinary(1, -10, -90))
	for _, span := range [][2]float64{{1, 1.3}, {5, 4}, {0, 0.5}, {7.8, 90}, {-5, 0.2}} {
		if s := Steady(&m.Track, m.Tones[0], span[0], span[1]); s.Blocks != 0 || len(s.Events) != 0 {
			t.Errorf("Steady(%v) = %+v, want no blocks", span, s)
		}
	}
}

// Buffers lost, played twice or silent, of any length and anywhere, at several tones and rates and
// as noisy as a telephone: each is seen, as one event.
func TestSteadyLostBuffers(t *testing.T) {
	random := rand.New(rand.NewPCG(5, 5))
	takes, seen := 0, 0
	for k := range 75 {
		freqHz, rateHz := []float64{997, 1000, 440, 3000, 100.3}[k%5], []float64{44100, 48000, 96000}[k%3]
		c := newClip(rateHz, 4).tone(freqHz, -20, random.Float64(), 0.5, 3.5)
		at, lost := 1+2*random.Float64(), 16+random.IntN(2000)
		if k%2 == 0 {
			lost = -lost
		}
		if k%7 == 0 {
			c.scaled(-300, at, at+0.003+0.05*random.Float64())
		} else if math.Abs(math.Remainder(freqHz*float64(lost)/rateHz, 1)) < 1.2/360 {
			continue // nearly whole periods: the splice is smooth, there is nothing to see
		} else {
			c.lose(lost, at)
		}
		s := steadiness(t, c.noise(-50-40*random.Float64(), uint64(k)))
		takes++
		if len(s.Events) == 1 && s.Events[0].What == Dropout && math.Abs(s.Events[0].AtSec-at) < 0.1 && (k%7 == 0 || s.Events[0].JumpDeg != 0) {
			seen++
		} else {
			t.Logf("%g Hz at %g Hz, %d samples at %.3f s: %+v", freqHz, rateHz, lost, at, s.Events)
		}
	}
	if float64(seen) < 0.95*float64(takes) {
		t.Errorf("%d of %d seen, want 95 %%", seen, takes)
	}
}

// The stages of the test signal, and tones one after another, are steady between their own times.
func TestSteadyStages(t *testing.T) {
	for _, rateHz := range []float64{44100, 96000} {
		c := &clip{rateHz: rateHz}
		if err := Generate(rateHz, func(b []float64) error { c.x = append(c.x, b...); return nil }); err != nil {
			t.Fatal(err)
		}
		m := measureAll(t, c.noise(-90, 3))
		for _, g := range Schedule(rateHz) {
			for _, tone := range m.Tones {
				if g.Kind != SteadyTone || math.Abs(tone.StartSec-g.StartSec) > 0.2 {
					continue
				}
				s := Steady(&m.Track, tone, g.StartSec, g.StartSec+g.LengthSec)
				if s.Blocks < int(g.LengthSec/0.05)-6 || len(s.Events) > 0 || s.LargestDB > 0.001 {
					t.Errorf("%s: %+v, want steady", g.Name, s)
				}
			}
		}
	}
	c := newClip(48000, 15).tone(1000, -20, 0, 1, 4).tone(100, -20, 0, 4, 7).tone(10000, -20, 0, 7.3, 10.1).tone(1000, -20, 1, 11, 14).noise(-80, 1)
	m := measureAll(t, c)
	if len(m.Tones) != 4 {
		t.Fatalf("%d tones, want 4", len(m.Tones))
	}
	for i, tone := range m.Tones {
		from, to := ToneSpan(&m.Track, tone)
		start, end := []float64{1, 4, 7.3, 11}[i], []float64{4, 7, 10.1, 14}[i]
		near(t, "span from", from, start, 0.15)
		near(t, "span to", to, end, 0.15)
		if s := Steady(&m.Track, tone, from, to); len(s.Events) > 0 || s.Blocks < 40 {
			t.Errorf("%g Hz: %+v, want steady", tone.FreqHz, s)
		}
	}
}

// A drift that adds up to far more than any limit is none from one moment to the next.
func TestSteadyDriftIsNoDeparture(t *testing.T) {
	c := newClip(48000, 12)
	drifting(c, 997, -20, 0.6, 50e-6, 0.3, 11.7)
	s := steadiness(t, c.noise(-90, 1))
	if len(s.Events) > 0 || s.DepartureDB > 0.025 {
		t.Errorf("0.6 dB a minute: %+v, want less than 0.025 dB and no event", s)
	}
}

// A step within the first two seconds is timed and sized from the side that is the shorter.
func TestSteadyEarlyStep(t *testing.T) {
	s := steadiness(t, ordinary(2, -10, -90).scaled(0.5, 1.3, 8))
	if len(s.Events) != 1 || s.Events[0].What != LevelStep || !s.Events[0].Stays {
		t.Fatalf("%+v, want one step that stays", s.Events)
	}
	near(t, "time", s.Events[0].AtSec, 1.3, 0.08)
	near(t, "step", s.Events[0].DB, 0.5, 0.02)
}
