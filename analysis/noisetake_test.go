package analysis

import (
	"errors"
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/stat"
)

func mustNoise(t *testing.T, s Samples) *Noise {
	t.Helper()
	n, err := MeasureNoise(s, 0, math.Inf(1), 0)
	if err != nil {
		t.Fatalf("MeasureNoise: %v", err)
	}
	return n
}

// White noise reads what it was made with, whatever the rate, an offset and hum, the share of the
// band that the hum takes up left out.
func TestMeasureNoiseLevel(t *testing.T) {
	for i, rateHz := range []float64{8000, 44100, 48000, 96000, 192000} {
		for _, humDBFS := range []float64{-200, -80, -40} {
			n := mustNoise(t, newClip(rateHz, 5).noise(-90, uint64(i)).offset(0.01).hum(50, humDBFS))
			kept := 0.0
			for _, r := range n.Kept() {
				kept += r.HighHz - r.LowHz
			}
			widthHz := math.Min(20000, rateHz/2)
			near(t, "LevelDBFS", n.LevelDBFS, -90+10*math.Log10(kept/widthHz), 4*dbPerPart/2*math.Sqrt(2/n.Dof)+0.002)
			if n.Foreign() != "" || n.Coarse || n.LeftOut > 0 {
				t.Errorf("%g Hz, hum %g dBFS: Foreign %q, Coarse %v, LeftOut %d, want plain noise", rateHz, humDBFS, n.Foreign(), n.Coarse, n.LeftOut)
			}
			if lost := n.Band.HighHz - n.Band.LowHz - kept; lost > 500 || (humDBFS == -200) != (lost == 0) {
				t.Errorf("%g Hz, hum %g dBFS: %g Hz cut out", rateHz, humDBFS, lost)
			}
		}
	}
}

// The scatter of many takes is what Dof says: a chi-square's, √(2/dof) of the mean. 300 takes know
// their own scatter within 4 %. Coloured noise and a narrow band count as well.
func TestNoiseDof(t *testing.T) {
	const takes, rateHz = 300, 8000.0
	bands := []FreqRange{{20, 3600}, {400, 500}, {100, 130}}
	for _, colour := range []float64{0, 0.97} {
		powers, dofs := make([][]float64, len(bands)), make([]float64, len(bands))
		for take := range takes {
			c := newClip(rateHz, 4).noise(-40, uint64(1000+take))
			for i := 1; i < len(c.x); i++ {
				c.x[i] += colour * c.x[i-1]
			}
			n := mustNoise(t, c)
			for i, b := range bands {
				p, dof := n.Spectrum.PowerIn([]FreqRange{b})
				powers[i] = append(powers[i], p)
				dofs[i] += dof / takes
			}
		}
		for i, b := range bands {
			mean, sd := stat.MeanStdDev(powers[i], nil)
			near(t, "scatter of power over what Dof says", sd/mean/math.Sqrt(2/dofs[i]), 1, 0.15)
			t.Logf("colour %g, %v: scatter %.4f, by Dof %.4f", colour, b, sd/mean, math.Sqrt(2/dofs[i]))
		}
	}
}

// Ranges that fall within bins count by their share, and parts add up to the whole.
func TestPowerIn(t *testing.T) {
	sp := &Spectrum{BinHz: 2, Segments: 10, MeanSquare: []float64{8, 1, 2, 4}}
	for _, row := range []struct {
		ranges []FreqRange
		want   float64
	}{
		{[]FreqRange{{1, 7}}, 7},
		{[]FreqRange{{1, 2}, {5, 6}}, 2.5},
		{[]FreqRange{{-5, 100}}, 15},
		{[]FreqRange{{3.5, 3.6}}, 0.1},
		{nil, 0},
	} {
		got, dof := sp.PowerIn(row.ranges)
		near(t, "PowerIn", got, row.want, 1e-12)
		if (dof > 0) != (row.want > 0) || math.IsNaN(dof) {
			t.Errorf("PowerIn(%v): dof %g", row.ranges, dof)
		}
	}
}

func TestFreqRangeWithout(t *testing.T) {
	got := FreqRange{20, 100}.Without(FreqRange{90, 200}, FreqRange{30, 40}, FreqRange{35, 50}, FreqRange{0, 10}, FreqRange{70, 60}, FreqRange{math.NaN(), 1})
	want := []FreqRange{{20, 30}, {50, 90}}
	if len(got) != len(want) || got[0] != want[0] || got[1] != want[1] {
		t.Errorf("Without = %v, want %v", got, want)
	}
	if got := (FreqRange{1, 2}).Without(FreqRange{0, 3}); got != nil {
		t.Errorf("Without all = %v, want nothing", got)
	}
}

// Knocks are left out; noise that is none is named.
func TestMeasureNoiseForeign(t *testing.T) {
	knocked := newClip(48000, 10).noise(-90, 1)
	for _, at := range []int{100000, 250000} {
		for i := range 200 {
			knocked.x[at+i] += 0.01
		}
	}
	n := mustNoise(t, knocked)
	near(t, "knocked, LevelDBFS", n.LevelDBFS, -90, 0.05)
	if n.LeftOut == 0 || n.LeftOut > 6 || n.Foreign() != "" {
		t.Errorf("knocked: LeftOut %d, Foreign %q, want a few and none", n.LeftOut, n.Foreign())
	}
	for name, c := range map[string]*clip{
		"tone":                 newClip(48000, 5).noise(-100, 2).tone(997, -6, 0, 0, 5),
		"tone under a pad":     newClip(48000, 5).noise(-90, 2).tone(997, -86, 0, 0, 5),
		"tone for a meter":     newClip(48000, 5).noise(-90, 2).tone(100, -12, 0, 0, 5),
		"tone that stops":      newClip(48000, 5).noise(-90, 2).tone(997, -20, 0, 0, 3),
		"speech":               newClip(48000, 8).noise(-90, 3).talk(-30, 4, 0, 8),
		"quiet speech":         newClip(48000, 8).noise(-90, 3).talk(-76, 5, 0, 8),
		"the test signal":      generated(t, 48000).noise(-90, 6),
		"the test signal weak": generated(t, 48000).scale(1e-4).noise(-95, 6),
	} {
		if n := mustNoise(t, c); n.Foreign() == "" {
			t.Errorf("%s: Foreign = %q, spread %.2f dB, want a reason", name, n.Foreign(), n.SpreadDB)
		}
	}
	for name, c := range map[string]*clip{
		"hum":          newClip(48000, 5).noise(-100, 2).hum(60, -45),
		"whine":        newClip(48000, 5).noise(-90, 2).tone(8000, -95, 0, 0, 5),
		"sixteen bits": newClip(48000, 5).noise(-90, 2).round(16),
		"rumble":       newClip(48000, 5).noise(-90, 2).tone(7, -50, 0, 0, 5),
	} {
		if n := mustNoise(t, c); n.Foreign() != "" || n.Coarse {
			t.Errorf("%s: Foreign = %q, Coarse %v, want noise", name, n.Foreign(), n.Coarse)
		}
	}
	if n := mustNoise(t, newClip(48000, 5).noise(-105, 2).round(16)); !n.Coarse {
		t.Error("noise of -105 dBFS in 16 bits: Coarse false, want true")
	}
}

// Noise that falls with frequency has no lines and no hum in it.
func TestMeasureNoisePink(t *testing.T) {
	for seed := range uint64(5) {
		c := newClip(48000, 10).noise(-100, seed)
		random, slow := rand.New(rand.NewPCG(seed, 3)), 0.0
		for i := range c.x {
			slow += 1e-6*random.NormFloat64() - 1e-4*slow // falls by 6 dB an octave from 0.8 Hz
			c.x[i] += 3 * slow
		}
		n := mustNoise(t, c)
		if len(n.Lines) > 0 || n.Hum.Found || n.Foreign() != "" {
			t.Errorf("seed %d: lines %+v, hum %v, Foreign %q, want none", seed, n.Lines, n.Hum.Found, n.Foreign())
		}
		if n.Hum.MeanSquare > 5*n.Hum.StdU || n.Hum.MeanSquare < -5*n.Hum.StdU {
			t.Errorf("seed %d: hum of %g ± %g, want 0 within five times that", seed, n.Hum.MeanSquare, n.Hum.StdU)
		}
	}
}

func TestMeasureNoiseOfAPart(t *testing.T) {
	c := newClip(48000, 20).noise(-80, 1)
	for i := 5 * 48000; i < 13*48000; i++ {
		c.x[i] /= 10
	}
	n, err := MeasureNoise(c, 5, 13, 50)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "LevelDBFS", n.LevelDBFS, -100, 0.1)
	near(t, "FromSec", n.FromSec, 5, 1e-9)
	near(t, "ToSec", n.ToSec, 13, 1e-9)
	if n.Foreign() != "" {
		t.Errorf("Foreign = %q, want none", n.Foreign())
	}
}

// The whole channel is read once, from the first sample to the last.
func TestMeasureNoiseReadsOnceInOrder(t *testing.T) {
	r := &ordered{clip: newClip(48000, 4.321).noise(-80, 1), t: t}
	if _, err := MeasureNoise(r, 0, math.Inf(1), 0); err != nil {
		t.Fatal(err)
	}
	if r.next != r.Frames() {
		t.Errorf("read up to frame %d, want %d", r.next, r.Frames())
	}
}

type ordered struct {
	*clip
	t    *testing.T
	next int64
}

func (o *ordered) ReadAt(dst []float64, frame int64) (int, error) {
	if frame != o.next {
		o.t.Fatalf("read at frame %d, want %d", frame, o.next)
	}
	n, err := o.clip.ReadAt(dst, frame)
	o.next += int64(n)
	return n, err
}

func TestMeasureNoiseOddTakes(t *testing.T) {
	for name, row := range map[string]struct {
		s        Samples
		from, to float64
		want     error
	}{
		"short":    {newClip(48000, 0.9).noise(-80, 1), 0, 9, ErrNoiseTooShort},
		"past end": {newClip(48000, 5).noise(-80, 1), 4.5, 9, ErrNoiseTooShort},
		"empty":    {newClip(48000, 0), 0, 9, ErrNoiseTooShort},
		"silent":   {newClip(48000, 2).offset(0.25), 0, 9, ErrSilent},
		"lying":    {shortened{newClip(48000, 5).noise(-80, 1), 24000}, 0, 9, ErrNoiseTooShort},
	} {
		if _, err := MeasureNoise(row.s, row.from, row.to, 0); !errors.Is(err, row.want) {
			t.Errorf("%s: %v, want %v", name, err, row.want)
		}
	}
	for _, part := range [][2]float64{{3, 2}, {-1, 2}, {math.NaN(), 2}, {0, math.NaN()}} {
		if _, err := MeasureNoise(newClip(48000, 5), part[0], part[1], 0); err == nil {
			t.Errorf("MeasureNoise from %g to %g: no error", part[0], part[1])
		}
	}
	if _, err := MeasureNoise(failing{newClip(48000, 5)}, 0, 9, 0); err == nil {
		t.Error("a read that fails: no error")
	}
	bad := newClip(48000, 6).noise(-80, 1)
	bad.x[100000], bad.x[100001] = math.NaN(), math.Inf(1)
	n := mustNoise(t, bad)
	near(t, "with bad samples, LevelDBFS", n.LevelDBFS, -80, 0.1)
	near(t, "FirstSec", n.Bad.FirstSec, 100000./48000, 1e-9)
	if n.Bad.Count != 2 || n.LeftOut == 0 {
		t.Errorf("Bad = %+v, LeftOut %d, want 2 and some", n.Bad, n.LeftOut)
	}
}

// Nothing grows with the take but 4 bytes for each of the hops.
func TestMeasureNoiseAllocatesNothingBySample(t *testing.T) {
	p := newNoisePass(48000)
	p.start(480000)
	block := newClip(48000, 1).noise(-60, 1).x[:p.n/2]
	p.take(block)
	p.take(block)
	p.hops = make([]float32, 0, 1<<16)
	p.hops = append(p.hops, make([]float32, 4*hopsOfHalf)...)
	if got := testing.AllocsPerRun(20, func() { p.take(block) }); got > 2 {
		t.Errorf("a half segment allocates %g times, want none but the sort's", got)
	}
}

func BenchmarkMeasureNoise(b *testing.B) {
	c := newClip(48000, 60).noise(-80, 1)
	for b.Loop() {
		if _, err := MeasureNoise(c, 0, math.Inf(1), 0); err != nil {
			b.Fatal(err)
		}
	}
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/float64(len(c.x)), "ns/sample")
}
