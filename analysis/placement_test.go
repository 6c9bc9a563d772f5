package analysis

import (
	"errors"
	"fmt"
	"math"
	"math/cmplx"
	"testing"

	"gonum.org/v1/gonum/dsp/fourier"
)

func TestPlacementTimesAreTheSchedules(t *testing.T) {
	g := Schedule(48000)
	for what, pair := range map[string][2]float64{
		"opening marker": {openingMarkerSec, g[1].StartSec}, "tone": {toneStartSec, g[3].StartSec},
		"step": {toneStepSec, g[4].StartSec}, "tone's end": {toneEndSec, g[5].StartSec},
		"closing marker": {closingMarkerSec, g[9].StartSec}, "its length": {markerSec, g[9].LengthSec},
	} {
		near(t, what, pair[0], pair[1], 0)
	}
}

func TestFindSignal(t *testing.T) {
	for _, c := range []struct {
		playedHz, rateHz, startSec, ppm, gainDB, noiseDBFS, humDBFS float64
	}{
		{16000, 16000, 0, 0, 0, -120, -400},
		{32000, 16000, 3.21707, 150, 0, -120, -80},
		{48000, 48000, 0.7, -150, -70, -105, -80},
		{48000, 44100, 2.1, 150, -70, -105, -80},
		{44100, 32000, 2.1, 33, -20, -100, -80},
		{96000, 16000, 0.123456, -77, -20, -60, -400},
		{48000, 8000, 1, 150, -20, -90, -80},
		{8000, 8000, 1, -150, -20, -90, -80},
		{8000, 24000, 1, -150, -20, -90, -80},
		{11025, 11025, 1, 100, -20, -90, -80},
		{96000, 192000, 0.25, 150, -70, -100, -80},
		{48000, 22050, 5, -150, -70, -105, -80},
	} {
		name := fmt.Sprintf("%+v", c)
		ratio := 1 + c.ppm*1e-6
		take := player{c.playedHz}.take(c.rateHz, c.startSec, ratio, c.startSec+24, c.gainDB).noise(c.noiseDBFS, 5).hum(50, c.humDBFS)
		p, err := FindSignal(take)
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		near(t, name+": ratio", p.Ratio, ratio, 1e-7)
		near(t, name+": start", p.StartSec, c.startSec, 2e-6)
		near(t, name+": level", p.LevelDBFS, c.gainDB-6, 0.1)
		if p.Polarity != 1 {
			t.Errorf("%s: polarity %d, want 1", name, p.Polarity)
		}
		if !(math.Abs(p.Ratio-ratio) < 4*p.RatioU) {
			t.Errorf("%s: ratio off by %g with RatioU %g", name, p.Ratio-ratio, p.RatioU)
		}
	}
}

// Start or end cut off: the marker that is left places the signal, and says how little it knows.
func TestFindSignalByOneMarker(t *testing.T) {
	whole := player{48000}.take(48000, 2, 1.0001, 26, -20).noise(-90, 2)
	for what, c := range map[string]struct{ fromSec, toSec, wantSec float64 }{
		"start cut off": {4, 26, -2}, "end missing": {0, 20, 2}, "both ends missing": {4, 20, math.NaN()},
	} {
		cut := &clip{48000, whole.x[int(c.fromSec*48000):int(c.toSec*48000)]}
		p, err := FindSignal(cut)
		if math.IsNaN(c.wantSec) {
			if !errors.Is(err, ErrNoSignal) {
				t.Errorf("%s: %+v, %v, want %v", what, p, err, ErrNoSignal)
			}
			continue
		}
		if err != nil || p.Ratio != 1 || !(p.RatioU > 80e-6 && p.RatioU < 1e-4) || p.Polarity != 1 {
			t.Errorf("%s: %+v, %v", what, p, err)
		}
		near(t, what+": start", p.StartSec, c.wantSec, 0.003) // 100 ppm of 23 s
	}
}

// What turns the signal: nothing, an inversion, a quarter turn (an integrator's), and 90° with it.
func TestFindSignalPolarity(t *testing.T) {
	straight := player{16000}.take(16000, 1, 1, 25, -20)
	for what, c := range map[string]struct {
		turn complex128
		want int
	}{"straight": {1, 1}, "inverted": {-1, -1}, "quarter": {-1i, 0}, "other quarter": {1i, 0}, "45°": {cmplx.Rect(1, 0.78), 1}, "inverted and 45°": {cmplx.Rect(1, math.Pi-0.78), -1}} {
		f := fourier.NewFFT(len(straight.x))
		bins := f.Coefficients(nil, straight.x)
		for k := range bins {
			bins[k] *= c.turn / complex(float64(len(straight.x)), 0)
		}
		take := (&clip{16000, f.Sequence(nil, bins)}).noise(-90, 1)
		p, err := FindSignal(take)
		if err != nil || p.Polarity != c.want {
			t.Errorf("%s: polarity %d, %v, want %d", what, p.Polarity, err, c.want)
		}
		near(t, what+": start", p.StartSec, 1, 2e-6)
	}
}

// 512 samples lost in the sweep, or put in.
func TestFindSignalLostSamples(t *testing.T) {
	whole := player{48000}.take(48000, 1, 1, 25, -20).noise(-90, 1)
	at := 12 * 48000
	lost := &clip{48000, append(append([]float64{}, whole.x[:at]...), whole.x[at+512:]...)}
	more := &clip{48000, append(append([]float64{}, whole.x[:at+512]...), whole.x[at:]...)}
	for want, c := range map[float64]*clip{-512: lost, 512: more} {
		p, err := FindSignal(c)
		var apart *MarkersApartError
		if !errors.As(err, &apart) {
			t.Fatalf("%g samples: %+v, %v, want a MarkersApartError", want, p, err)
		}
		near(t, "OffSec", apart.OffSec, want/48000, 1e-5)
		near(t, "start", p.StartSec, 1, 1e-5)
	}
}

// Gain that never rests leaves no steady tone; the markers are found all the same. And three
// minutes of silence before it all.
func TestFindSignalEverywhere(t *testing.T) {
	c := player{16000}.take(16000, 2, 1.00012, 27, -20)
	for n := range c.x {
		c.x[n] *= math.Pow(10, 6*math.Sin(2*math.Pi*0.9*float64(n)/16000)/20)
	}
	late := player{8000}.take(8000, 182.5, 0.9999, 208, -40)
	for what, take := range map[string]struct {
		c               *clip
		startSec, ratio float64
	}{"restless gain": {c.noise(-90, 1), 2, 1.00012}, "late": {late.noise(-90, 1), 182.5, 0.9999}} {
		p, err := FindSignal(take.c)
		if err != nil {
			t.Errorf("%s: %v", what, err)
			continue
		}
		near(t, what+": start", p.StartSec, take.startSec, 2e-5)
		near(t, what+": ratio", p.Ratio, take.ratio, 1e-6)
	}
}

func TestFindSignalNone(t *testing.T) {
	tone := newClip(16000, 23.5).tone(997, -6, 0, 0, 23.5).noise(-90, 1)
	short := newClip(16000, 30).tone(997, -6, 0, 3, 8).noise(-90, 1)
	noise := newClip(16000, 60).noise(-20, 1)
	talk := newClip(16000, 30).talk(-12, 1, 0, 29)
	for what, c := range map[string]*clip{"plain tone": tone, "five seconds": short, "noise": noise, "talk": talk, "silence": newClip(16000, 30), "second": newClip(48000, 1)} {
		p, err := FindSignal(c)
		if !errors.Is(err, ErrNoSignal) {
			t.Errorf("%s: FindSignal = %+v, %v, want %v", what, p, err, ErrNoSignal)
		}
	}
}
