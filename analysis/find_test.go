package analysis

import (
	"errors"
	"fmt"
	"io"
	"math"
	"math/rand/v2"
	"testing"
)

// Whatever stands before, between and after a tone, its stretch alone is found.
func TestFindTonesAmongOthers(t *testing.T) {
	const from, to = 4.3, 7.1
	surroundings := map[string]func(c *clip){
		"silence": func(*clip) {},
		"clicks": func(c *clip) {
			random := rand.New(rand.NewPCG(3, 3))
			for range 30 {
				n := random.IntN(len(c.x))
				if at := float64(n) / c.rateHz; at < from || at > to {
					c.x[n] = 0.9
				}
			}
		},
		"talk": func(c *clip) {
			c.talk(-12, 1, 0, from-0.02)
			c.talk(-12, 2, to+0.05, float64(len(c.x))/c.rateHz)
		},
		"hum":           func(c *clip) { c.hum(50, -45) },
		"strong hum":    func(c *clip) { c.tone(50, -36, 0, 0, 10) },
		"offset":        func(c *clip) { c.offset(-0.4) },
		"a weak tone":   func(c *clip) { c.tone(700, -45, 0, 7.5, 9.5) },
		"louder noise":  func(c *clip) { c.noise(-40, 6) },
		"another short": func(c *clip) { c.tone(2000, -15, 0, 1, 1.6) },
	}
	for name, add := range surroundings {
		for _, freqHz := range []float64{60.2, 130, 997, 10000} {
			for _, rateHz := range []float64{44100, 96000} {
				if rateHz > 48000 && freqHz != 997 {
					continue
				}
				c := newClip(rateHz, 10).tone(freqHz, -20, 0, from, to).noise(-90, 2)
				add(c)
				found, err := FindTones(c)
				what := fmt.Sprintf("%s, %g Hz at %g Hz", name, freqHz, rateHz)
				if err != nil || len(found) != 1 {
					t.Errorf("%s: %+v, %v, want one stretch", what, found, err)
					continue
				}
				near(t, what+": frequency", found[0].FreqHz, freqHz, 1e-3)
				near(t, what+": level", found[0].LevelDBFS, -20, 0.05)
				near(t, what+": start", found[0].StartSec, from, 0.15)
				near(t, what+": end", found[0].EndSec, to, 0.15)
			}
		}
	}
}

// A line-up oscillator: several tones one after another, with and without gaps.
func TestFindTonesOneAfterAnother(t *testing.T) {
	freqsHz := []float64{100, 1000, 10000, 400}
	for _, gap := range []float64{0, 0.3} {
		c := newClip(48000, 12).noise(-90, 1)
		at := 0.7
		for _, f := range freqsHz {
			c.tone(f, -18, 0, at, at+2)
			at += 2 + gap
		}
		for name, find := range map[string]func() ([]Stretch, error){
			"FindTones":   func() ([]Stretch, error) { return FindTones(c) },
			"FindTonesAt": func() ([]Stretch, error) { return FindTonesAt(c, freqsHz) },
		} {
			found, err := find()
			if err != nil || len(found) != len(freqsHz) {
				t.Fatalf("%s, gap %g: %+v, %v; want %d stretches", name, gap, found, err, len(freqsHz))
			}
			m, err := MeasureTones(c, found)
			if err != nil {
				t.Fatal(err)
			}
			for i, f := range freqsHz {
				start := 0.7 + float64(i)*(2+gap)
				near(t, name+": frequency", m.Tones[i].FreqHz, f, 1e-4)
				near(t, name+": level", m.Tones[i].LevelDBFS, -18, 0.001)
				near(t, name+": start", m.Tones[i].StartSec, start+0.1, 0.11)
				near(t, name+": end", m.Tones[i].EndSec, start+1.9, 0.11)
			}
		}
	}
}

func TestFindTonesInTestSignal(t *testing.T) {
	for _, rateHz := range []float64{8000, 44100, 48000, 192000} {
		c := generated(t, rateHz)
		found, err := FindTones(c)
		if err != nil || len(found) != 2 {
			t.Fatalf("rate %g: %+v, %v; want two stretches", rateHz, found, err)
		}
		for i, want := range []Stretch{{997, -6, 1.75, 5.75}, {997, -16, 5.75, 7.75}} {
			near(t, "frequency", found[i].FreqHz, want.FreqHz, 1e-5)
			near(t, "level", found[i].LevelDBFS, want.LevelDBFS, 0.001)
			near(t, "start", found[i].StartSec, want.StartSec, 0.03)
			near(t, "end", found[i].EndSec, want.EndSec, 0.03)
		}
	}
}

// Behind a pad: hum far above the tone, noise up to the tone's own level.
func TestFindTonesAtWeak(t *testing.T) {
	for _, freqHz := range []float64{60, 100, 440, 997, 5000, 10000} {
		for _, snrDB := range []float64{15, 0} {
			c := newClip(48000, 9).tone(freqHz*1.0002, -80, 0.3, 2, 7).noise(-80-snrDB, 21)
			humHz := 50.0
			if freqHz == 100 {
				humHz = 60
			}
			c.tone(humHz, -55, 1, 0, 9)
			found, err := FindTonesAt(c, []float64{freqHz})
			what := fmt.Sprintf("%g Hz, SNR %g dB", freqHz, snrDB)
			if err != nil || len(found) != 1 {
				t.Errorf("%s: %+v, %v; want one stretch", what, found, err)
				continue
			}
			near(t, what+": frequency", found[0].FreqHz, freqHz*1.0002, 0.02)
			near(t, what+": level", found[0].LevelDBFS, -80, 0.5)
			near(t, what+": start", found[0].StartSec, 2, 0.3)
			near(t, what+": end", found[0].EndSec, 7, 0.3)
		}
	}
}

// Talk far above the tone, before and after it.
func TestFindTonesAtBesideTalk(t *testing.T) {
	c := newClip(48000, 9).tone(997, -70, 0.3, 3, 6).noise(-90, 21).talk(-12, 4, 0, 2.8).talk(-12, 5, 6.2, 9)
	found, err := FindTonesAt(c, []float64{997})
	if err != nil || len(found) != 1 {
		t.Fatalf("%+v, %v; want one stretch", found, err)
	}
	near(t, "level", found[0].LevelDBFS, -70, 0.05)
	near(t, "start", found[0].StartSec, 3, 0.1)
	near(t, "end", found[0].EndSec, 6, 0.1)
}

func TestFindTonesErrors(t *testing.T) {
	talk := newClip(48000, 6).talk(-12, 3, 0, 6).noise(-70, 1)
	sweep := generated(t, 48000)
	sweep.x = sweep.x[int(8*48000):int(14.5*48000)]
	for _, c := range []struct {
		name string
		clip *clip
		want error
	}{
		{"no samples", newClip(48000, 0), ErrTooShort},
		{"half a second", newClip(48000, 0.5).tone(997, -6, 0, 0, 0.5), ErrTooShort},
		{"one block", newClip(48000, 0.05), ErrTooShort},
		{"digital silence", newClip(48000, 5), ErrSilent},
		{"noise", newClip(48000, 5).noise(-40, 1), ErrNoTone},
		{"talk", talk, ErrNoTone},
		{"sweep", sweep, ErrNoTone},
		{"tone of 0.6 s", newClip(48000, 5).tone(997, -6, 0, 2, 2.6).noise(-90, 1), ErrTooShort},
		{"rate", newClip(4000, 5), nil},
	} {
		found, err := FindTones(c.clip)
		if err == nil || c.want != nil && !errors.Is(err, c.want) {
			t.Errorf("%s: %+v, %v; want %v", c.name, found, err, c.want)
		}
	}
	var short *TooShortError
	_, err := FindTones(newClip(48000, 5).tone(997, -6, 0, 2, 2.6).noise(-90, 1))
	if !errors.As(err, &short) {
		t.Fatalf("got %v, want a TooShortError", err)
	}
	near(t, "length", short.Sec, 0.6, 0.05)
	near(t, "frequency", short.FreqHz, 997, 5)
}

// At the least length: a second is enough, somewhat less is not.
func TestFindTonesLeastLength(t *testing.T) {
	for _, freqHz := range []float64{80, 997, 10000} {
		c := newClip(48000, 5).tone(freqHz, -10, 0, 2.13, 3.15).noise(-80, 1)
		m := measureAll(t, c)
		near(t, "level", m.Tones[0].LevelDBFS, -10, 0.002)
		if m.Tones[0].Blocks < 4 {
			t.Errorf("%d blocks, want 4 at least", m.Tones[0].Blocks)
		}
		c = newClip(48000, 5).tone(freqHz, -10, 0, 2.13, 2.93).noise(-80, 1)
		if found, err := FindTones(c); !errors.Is(err, ErrTooShort) {
			t.Errorf("%g Hz for 0.8 s: %+v, %v", freqHz, found, err)
		}
	}
}

func TestFindTonesAtOther(t *testing.T) {
	c := newClip(48000, 5).tone(440, -30, 0, 1, 4).noise(-90, 1)
	_, err := FindTonesAt(c, []float64{997})
	var other *OtherToneError
	if !errors.As(err, &other) || !errors.Is(err, ErrNoTone) {
		t.Fatalf("got %v, want an OtherToneError", err)
	}
	near(t, "other frequency", other.FreqHz, 440, 0.001)
	near(t, "other level", other.LevelDBFS, -30, 0.01)

	for want, c := range map[error]*clip{
		ErrSilent:   newClip(48000, 5),
		ErrNoTone:   newClip(48000, 5).noise(-50, 2),
		ErrTooShort: newClip(48000, 5).tone(997, -40, 0, 1, 1.7).noise(-90, 2),
	} {
		if found, err := FindTonesAt(c, []float64{997}); !errors.Is(err, want) || errors.As(err, &other) {
			t.Errorf("FindTonesAt = %+v, %v; want %v", found, err, want)
		}
	}
	for _, freqHz := range []float64{0, 5, 23000, math.NaN()} {
		if _, err := FindTonesAt(c, []float64{freqHz}); err == nil {
			t.Errorf("FindTonesAt(%g Hz) gave no error", freqHz)
		}
	}
	found, err := FindTonesAt(newClip(48000, 5).tone(997, -40, 0, 0, 5), []float64{997, 5000, 997.0001})
	if err != nil || len(found) != 1 {
		t.Errorf("one of two frequencies, named twice: %+v, %v, want one stretch", found, err)
	}
}

// A long take is hardly read, and a short tone in it is found all the same.
func TestFindTonesReadsLittle(t *testing.T) {
	c := &counting{clip: newClip(48000, 400).tone(997, -6, 0, 0, 400)}
	if _, err := FindTones(c); err != nil {
		t.Fatal(err)
	}
	if part := float64(c.read) / float64(len(c.x)); part > 0.06 {
		t.Errorf("read %.1f %% of a long tone, want 6 at most", 100*part)
	}
	if found, err := FindTones(newClip(16000, 400).tone(997, -6, 0, 211.3, 212.6).noise(-80, 3)); err != nil || len(found) != 1 {
		t.Errorf("1.3 s of tone in 400 s: %+v, %v", found, err)
	}
}

// counting counts what is read and gives it in small pieces.
type counting struct {
	*clip
	read, next int64
	piece      int
	jumps      int
}

func (c *counting) ReadAt(dst []float64, frame int64) (int, error) {
	if c.piece > 0 && len(dst) > c.piece {
		dst = dst[:c.piece]
	}
	if frame != c.next {
		c.jumps++
	}
	n, err := c.clip.ReadAt(dst, frame)
	c.read += int64(n)
	c.next = frame + int64(n)
	return n, err
}

type failing struct{ *clip }

func (failing) ReadAt([]float64, int64) (int, error) { return 0, io.ErrUnexpectedEOF }

type stuck struct{ *clip }

func (stuck) ReadAt([]float64, int64) (int, error) { return 0, nil }

func TestReadingErrorsComeThrough(t *testing.T) {
	c := newClip(48000, 3).tone(997, -6, 0, 0, 3)
	g := []Stretch{{FreqHz: 997, LevelDBFS: -6, EndSec: 3}}
	for want, s := range map[error]Samples{io.ErrUnexpectedEOF: failing{c}, io.ErrNoProgress: stuck{c}} {
		if _, err := FindTones(s); !errors.Is(err, want) {
			t.Errorf("FindTones: %v, want %v", err, want)
		}
		if _, err := FindTonesAt(s, []float64{997}); !errors.Is(err, want) {
			t.Errorf("FindTonesAt: %v, want %v", err, want)
		}
		if _, err := MeasureTones(s, g); !errors.Is(err, want) {
			t.Errorf("MeasureTones: %v, want %v", err, want)
		}
		if _, err := ToneLevels([]Samples{s}, nil); !errors.Is(err, want) {
			t.Errorf("ToneLevels: %v, want %v", err, want)
		}
	}
}
