package analysis

import (
	"errors"
	"io"
	"math"
	"testing"
)

// One pass, in order, whatever the size of the pieces: what a hash taken beside it needs.
func TestMeasureTonesReadsOnceInOrder(t *testing.T) {
	base := newClip(44100, 4.0123).tone(997, -6, 0, 0.5, 3.5).noise(-80, 1)
	g := []Stretch{{FreqHz: 997, LevelDBFS: -6, StartSec: 0.6, EndSec: 3.4}}
	want, err := MeasureTones(base, g)
	if err != nil {
		t.Fatal(err)
	}
	for _, piece := range []int{1009, 4096, 100000} {
		c := &counting{clip: base, piece: piece}
		m, err := MeasureTones(c, g)
		if err != nil {
			t.Fatal(err)
		}
		if c.read != base.Frames() || c.jumps != 0 {
			t.Errorf("pieces of %d: read %d samples with %d jumps, want %d with none", piece, c.read, c.jumps, base.Frames())
		}
		near(t, "level", m.Tones[0].LevelDBFS, want.Tones[0].LevelDBFS, 0)
		near(t, "RMS", m.RMSDBFS, want.RMSDBFS, 0)
	}
	near(t, "length", want.Seconds, 4.0123, 1e-4)
}

// shortened ends before it says it does.
type shortened struct {
	*clip
	left int64
}

func (s shortened) ReadAt(dst []float64, frame int64) (int, error) {
	if frame >= s.left {
		return 0, io.EOF
	}
	return s.clip.ReadAt(dst[:min(int64(len(dst)), s.left-frame)], frame)
}

func TestMeasureTonesEndsEarly(t *testing.T) {
	c := shortened{newClip(48000, 8).tone(997, -6, 0, 0, 8).noise(-90, 1), 3*48000 + 77}
	found, err := FindTones(c)
	if err != nil {
		t.Fatal(err)
	}
	m, err := MeasureTones(c, found)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "length", m.Seconds, 3, 0.01)
	near(t, "level", m.Tones[0].LevelDBFS, -6, 1e-4)
	near(t, "end", m.Tones[0].EndSec, 2.95, 0.06)

	var short *TooShortError
	if _, err := MeasureTones(shortened{c.clip, 100}, found); !errors.As(err, &short) {
		t.Errorf("100 samples: %v, want a TooShortError", err)
	}
	m, err = MeasureTones(c, []Stretch{{FreqHz: 997, LevelDBFS: -6, EndSec: 2}, {FreqHz: 500, LevelDBFS: -6, StartSec: 5, EndSec: 7}})
	if err != nil || len(m.Tones) != 1 || len(m.Missed) != 1 || !errors.As(m.Missed[0], &short) {
		t.Errorf("second stretch behind the end: %+v, %v, want one tone and a TooShortError in Missed", m, err)
	}
}

// Without stretches: the plain figures of anything, however short.
func TestMeasureTonesPlainFigures(t *testing.T) {
	for n, want := range map[int]float64{0: FloorDBFS, 1: 20 * math.Log10(0.5*math.Sqrt2), 7: 20 * math.Log10(0.5*math.Sqrt2), 2400: 20 * math.Log10(0.5*math.Sqrt2), 100001: 20 * math.Log10(0.5*math.Sqrt2)} {
		c := &clip{48000, make([]float64, n)}
		for i := range c.x {
			c.x[i] = 0.5 - float64(i%2) // ±0.5
		}
		m, err := MeasureTones(c, nil)
		if err != nil {
			t.Fatal(err)
		}
		near(t, "RMS", m.RMSDBFS, want, 1e-9)
		if n > 0 {
			near(t, "peak", m.PeakDBFS, 20*math.Log10(0.5), 1e-9)
			near(t, "peak's place", m.PeakSec, 0, 0)
		} else {
			near(t, "peak", m.PeakDBFS, FloorDBFS, 0)
		}
		if len(m.Tones) != 0 || m.Track.Len() != 0 {
			t.Errorf("%d samples: %d tones, %d blocks", n, len(m.Tones), m.Track.Len())
		}
	}
	c := newClip(48000, 1).tone(100, -20, 0, 0, 1)
	c.x[12345] = -0.75
	m, err := MeasureTones(c.offset(0.001), nil)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "peak", m.PeakDBFS, 20*math.Log10(0.749), 1e-9)
	near(t, "peak's place", m.PeakSec, 12345./48000, 0)
	near(t, "offset", m.OffsetFS, 0.001, 2e-5)
}

func TestMeasureTonesBadSamples(t *testing.T) {
	c := newClip(48000, 5).tone(997, -6, 0, 0, 5).noise(-90, 1)
	c.x[4*48000+5] = math.NaN()
	c.x[4*48000+6] = math.Inf(-1)
	c.x[4*48000+4321] = 1e30
	m := measureAll(t, c)
	if m.Bad.Count != 3 {
		t.Errorf("%d bad samples, want 3", m.Bad.Count)
	}
	near(t, "first", m.Bad.FirstSec, 4+5./48000, 1e-9)
	near(t, "level", m.Tones[0].LevelDBFS, -6, 1e-3)
	near(t, "peak", m.PeakDBFS, -6, 0.01)
	near(t, "RMS", m.RMSDBFS, -6, 0.01)

	all := newClip(48000, 2)
	for i := range all.x {
		all.x[i] = math.NaN()
	}
	m, err := MeasureTones(all, nil)
	if err != nil || m.Bad.Count != 96000 || m.RMSDBFS != FloorDBFS || m.PeakDBFS != FloorDBFS {
		t.Errorf("nothing but NaN: %+v, %v", m, err)
	}
	if _, err := FindTones(all); !errors.Is(err, ErrSilent) {
		t.Errorf("FindTones in nothing but NaN: %v, want %v", err, ErrSilent)
	}
}

func TestMeasureTonesRefuses(t *testing.T) {
	c := newClip(48000, 3).tone(997, -6, 0, 0, 3)
	nan := math.NaN()
	for _, g := range []Stretch{
		{FreqHz: 0, EndSec: 3}, {FreqHz: nan, EndSec: 3}, {FreqHz: 23000, EndSec: 3}, {FreqHz: 997}, {FreqHz: 997, StartSec: 2, EndSec: 1},
		{FreqHz: 997, StartSec: nan, EndSec: 3}, {FreqHz: 997, EndSec: math.Inf(1)}, {FreqHz: 997, EndSec: 3, LevelDBFS: nan},
	} {
		if m, err := MeasureTones(c, []Stretch{g}); err == nil {
			t.Errorf("MeasureTones(%+v) = %+v, want an error", g, m)
		}
	}
	if _, err := MeasureTones(newClip(1000, 3), nil); err == nil {
		t.Error("a rate of 1000 Hz gave no error")
	}
	if _, err := MeasureTones(newClip(48000, 3), []Stretch{{FreqHz: 997, LevelDBFS: -6, EndSec: 3}}); !errors.Is(err, ErrNoTone) {
		t.Errorf("silence for a tone: %v, want %v", err, ErrNoTone)
	}
	if _, err := MeasureTones(newClip(48000, 3).noise(-60, 1), []Stretch{{FreqHz: 997, LevelDBFS: -6, EndSec: 3}}); !errors.Is(err, ErrNoTone) {
		t.Errorf("noise for a tone: %v, want %v", err, ErrNoTone)
	}
}

// The track shows the level, the rest and the phase of every 50 ms.
func TestTrack(t *testing.T) {
	c := newClip(48000, 6).tone(997, -20, 0, 0, 6).noise(-60, 2)
	for n := 3 * 48000; n < 4*48000; n++ {
		c.x[n] *= 0.9
	}
	m, err := MeasureTones(c, []Stretch{{FreqHz: 997, LevelDBFS: -20, EndSec: 3}})
	if err != nil {
		t.Fatal(err)
	}
	if want := 119; m.Track.Len() != want {
		t.Fatalf("%d blocks, want %d", m.Track.Len(), want)
	}
	for i := range m.Track.Len() {
		at := m.Track.MiddleSec(i)
		want := -20.0
		if at > 3.06 && at < 3.94 {
			want += 20 * math.Log10(0.9)
		}
		if math.Abs(at-3) > 0.06 && math.Abs(at-4) > 0.06 {
			near(t, "level", m.Track.LevelDBFS(i), want, 0.02)
			near(t, "rest", m.Track.RestDBFS(i), -60+0.79, 1.1)
			near(t, "phase", m.Track.PhaseRad(i), 0, 0.002)
			near(t, "frequency", m.Track.FreqHz(i), 997, 0)
		}
	}
}

// Where one tone follows another without a gap, the block across the join holds half of each: at
// the second one's frequency it reads 6.02 dB less.
func TestTrackAcrossTones(t *testing.T) {
	c := newClip(48000, 6).tone(1000, -20, 0, 0, 3).tone(2000, -20, 0, 3, 6)
	m, err := MeasureTones(c, []Stretch{{1000, -20, 0, 3}, {2000, -20, 3, 6}})
	if err != nil {
		t.Fatal(err)
	}
	for i, want := range map[int]float64{57: -20, 58: -20, 59: -26.02, 60: -20, 61: -20} {
		near(t, "level", m.Track.LevelDBFS(i), want, 0.01)
	}
	near(t, "frequency before", m.Track.FreqHz(58), 1000, 0)
	near(t, "frequency after", m.Track.FreqHz(59), 2000, 0)
}

func BenchmarkMeasureTones(b *testing.B) {
	c := newClip(96000, 20).tone(997.008, -6, 0, 0, 20).noise(-100, 1)
	g, err := FindTones(c)
	if err != nil {
		b.Fatal(err)
	}
	for b.Loop() {
		if _, err := MeasureTones(c, g); err != nil {
			b.Fatal(err)
		}
	}
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/float64(len(c.x)), "ns/sample")
	b.ReportAllocs()
}

func BenchmarkFindTones(b *testing.B) {
	c := newClip(96000, 20).tone(997.008, -6, 0, 0, 20).noise(-100, 1)
	for b.Loop() {
		if _, err := FindTones(c); err != nil {
			b.Fatal(err)
		}
	}
}
