package analysis

import (
	"errors"
	"math"
	"slices"
	"testing"
)

func generated(t *testing.T, rateHz float64) *clip {
	t.Helper()
	c := &clip{rateHz: rateHz}
	err := Generate(rateHz, func(b []float64) error {
		c.x = append(c.x, b...)
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// rms returns the level of part of a clip.
func (c *clip) rms(fromSec, toSec float64) float64 {
	part := c.x[int(math.Round(fromSec*c.rateHz)):int(math.Round(toSec*c.rateHz))]
	return DBFSFromMeanSquare(plainSums(part).square / float64(len(part)))
}

func (c *clip) crossings(fromSec, toSec float64) int {
	count := 0
	for n := int(math.Round(fromSec * c.rateHz)); n+1 < int(math.Round(toSec*c.rateHz)); n++ {
		if c.x[n] <= 0 && c.x[n+1] > 0 {
			count++
		}
	}
	return count
}

// The stages as the design's table has them: seconds, level, frequencies at 48 kHz.
func TestScheduleIsTheDesigns(t *testing.T) {
	want := []Segment{
		{"", Silence, 0, 1, FloorDBFS, 0, 0},
		{"", Chirp, 1, 0.25, -6, 1000, 5000},
		{"", Silence, 1.25, 0.5, FloorDBFS, 0, 0},
		{"", SteadyTone, 1.75, 4, -6, 997, 997},
		{"", SteadyTone, 5.75, 2, -16, 997, 997},
		{"", Silence, 7.75, 0.5, FloorDBFS, 0, 0},
		{"", Sweep, 8.25, 6, -6, 10, 23040},
		{"", Silence, 14.25, 0.5, FloorDBFS, 0, 0},
		{"", Silence, 14.75, 8, FloorDBFS, 0, 0},
		{"", Chirp, 22.75, 0.25, -6, 5000, 1000},
		{"", Silence, 23, 0.5, FloorDBFS, 0, 0},
	}
	got := Schedule(48000)
	for i := range got {
		if got[i].Name == "" {
			t.Errorf("stage %d has no name", i)
		}
		got[i].Name = ""
	}
	if !slices.Equal(got, want) {
		t.Errorf("Schedule(48000) =\n%+v, want\n%+v", got, want)
	}
	near(t, "SignalSec", SignalSec(), 23.5, 0)
	near(t, "sweep's end at 192 kHz", Schedule(192000)[6].ToHz, 40000, 0)
	near(t, "marker's end at 8 kHz", Schedule(8000)[1].ToHz, 3600, 0)
}

// Levels, peak, cycles of each stage by closed form.
func TestGenerateByClosedForm(t *testing.T) {
	for _, rateHz := range []float64{8000, 44100, 96000} {
		c := generated(t, rateHz)
		if want := int(math.Round(23.5 * rateHz)); len(c.x) != want {
			t.Fatalf("rate %g: %d samples, want %d", rateHz, len(c.x), want)
		}
		all := plainSums(c.x)
		peak := math.Pow(10, -6./20)
		if all.high > peak || all.low < -peak || all.high < 0.999*peak {
			t.Errorf("rate %g: samples from %g to %g, want up to %g", rateHz, all.low, all.high, peak)
		}
		near(t, "tone", c.rms(2, 5), -6, 0.0005)
		near(t, "tone, stepped down", c.rms(5.75, 7.7), -16, 0.005)
		near(t, "sweep, edges left out", c.rms(8.75, 14.2), -6, 0.02)
		near(t, "marker, edges left out", c.rms(1.03, 1.22), -6, 0.02)
		for _, g := range Schedule(rateHz) {
			from, to := g.StartSec, g.StartSec+g.LengthSec
			switch g.Kind {
			case Silence:
				if got := c.rms(from, to); got != FloorDBFS {
					t.Errorf("rate %g: %s is not silent: %g dBFS", rateHz, g.Name, got)
				}
			case SteadyTone:
				near(t, "cycles of "+g.Name, float64(c.crossings(from, to)), 997*g.LengthSec, 1)
			case Chirp:
				near(t, "cycles of "+g.Name, float64(c.crossings(from, to)), (g.FromHz+g.ToHz)/2*g.LengthSec, 2)
				near(t, "in its first tenth", float64(c.crossings(from, from+0.025)), (g.FromHz+(g.ToHz-g.FromHz)/20)*0.025, 2)
			case Sweep:
				// f(t) = a·e^(kt): cycles up to t are (f(t)-a)/k.
				k := math.Log(g.ToHz/g.FromHz) / 6
				near(t, "cycles of half the sweep", float64(c.crossings(from, from+3)), (math.Sqrt(g.FromHz*g.ToHz)-g.FromHz)/k, 1)
				near(t, "cycles of the sweep", float64(c.crossings(from, to)), (g.ToHz-g.FromHz)/k, g.ToHz/k/1000)
			}
		}
	}
}

// The tone is one sine from start to end: sample n of it is known, step or not.
func TestGenerateTonePhaseRunsThrough(t *testing.T) {
	const rateHz = 44100.0
	c := generated(t, rateHz)
	first := int(math.Round(1.75 * rateHz))
	step := int(math.Round(5.75 * rateHz))
	for _, n := range []int{first + 1000, step - 1, step, step + 1, step + 5000} {
		peak := math.Pow(10, -6./20)
		if n >= step {
			peak = math.Pow(10, -16./20)
		}
		want := peak * math.Sin(2*math.Pi*997*float64(n-first)/rateHz)
		near(t, "sample", c.x[n], want, 1e-9)
	}
}

func TestGenerateIsRepeatable(t *testing.T) {
	if !slices.Equal(generated(t, 48000).x, generated(t, 48000).x) {
		t.Error("two runs differ")
	}
}

func TestGenerateRefuses(t *testing.T) {
	keep := func([]float64) error { return nil }
	for _, rateHz := range []float64{0, -48000, 7999, 384001, math.NaN(), math.Inf(1)} {
		if Generate(rateHz, keep) == nil {
			t.Errorf("Generate(%g) gave no error", rateHz)
		}
	}
	for _, c := range [][4]float64{{48000, 0, -6, 1}, {48000, 24000, -6, 1}, {48000, 997, 1, 1}, {48000, 997, math.NaN(), 1}, {48000, 997, -6, -1}, {48000, 997, -6, math.Inf(1)}, {0, 997, -6, 1}} {
		if GenerateTone(c[0], c[1], c[2], c[3], keep) == nil {
			t.Errorf("GenerateTone(%v) gave no error", c)
		}
	}
	if Generate(48000, nil) == nil {
		t.Error("Generate to nowhere gave no error")
	}
	full, calls := errors.New("disk full"), 0
	err := Generate(48000, func([]float64) error { calls++; return full })
	if err != full || calls != 1 {
		t.Errorf("Generate = %v after %d calls, want %v after 1", err, calls, full)
	}
}

func TestGenerateTone(t *testing.T) {
	var x []float64
	err := GenerateTone(48000, 1000, -20, 0.5, func(b []float64) error {
		x = append(x, b...)
		return nil
	})
	if err != nil || len(x) != 24000 {
		t.Fatalf("%d samples, %v; want 24000", len(x), err)
	}
	fit, err := FitSine3(x, 48000, 1000)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "level", DBFSFromPeak(fit.Peak()), -20, 1e-9)
	near(t, "phase", fit.PhaseRad(), -math.Pi/2, 1e-9)
}
