package analysis

import (
	"errors"
	"math"
	"math/cmplx"
	"testing"

	"gonum.org/v1/gonum/dsp/fourier"
)

// A network of one or two RC sections by its formula: high-pass from lowHz, low-pass from highHz.
type rc struct{ lossDB, lowHz, highHz float64 }

func (n rc) at(freqHz float64) complex128 {
	h := complex(math.Pow(10, -n.lossDB/20), 0) / complex(1, freqHz/n.highHz)
	if n.lowHz > 0 {
		h *= complex(0, freqHz/n.lowHz) / complex(1, freqHz/n.lowHz)
	}
	return h
}

// through filters a clip exactly, its frequencies by the signal's clock.
func (c *clip) through(n rc, ratio float64) *clip {
	f := fourier.NewFFT(len(c.x))
	bins := f.Coefficients(nil, c.x)
	for k := range bins {
		bins[k] *= n.at(float64(k)/float64(len(c.x))*c.rateHz*ratio) / complex(float64(len(c.x)), 0)
	}
	f.Sequence(c.x, bins)
	return c
}

// creepingHum adds a mains line and harmonics, each 10 dB weaker, that creep by driftHz in 10 s.
func (c *clip) creepingHum(mainsHz, driftHz, levelDBFS float64) *clip {
	if levelDBFS <= FloorDBFS {
		return c
	}
	for n := range c.x {
		sec := float64(n) / c.rateHz
		turns := mainsHz*sec + driftHz/10*sec*sec/2
		for h := 1.0; h <= 5; h++ {
			c.x[n] += math.Pow(10, (levelDBFS-10*(h-1))/20) * math.Sin(2*math.Pi*h*turns+h)
		}
	}
	return c
}

func placed(t *testing.T, c *clip) Placement {
	t.Helper()
	p, err := FindSignal(c)
	if err != nil {
		t.Fatal(err)
	}
	return p
}

func TestResponse(t *testing.T) {
	for _, c := range []struct {
		name                       string
		beforeHz, afterHz          float64
		beforePPM, afterPPM        float64
		beforeNoiseDBFS, noiseDBFS float64
		beforeHumDBFS, humDBFS     float64
		driftHz                    float64 // by which the mains creeps within 10 s
		mainsHz                    float64
		network                    rc
		points                     int
		worstDB                    float64 // of any point, and within four standard uncertainties
	}{
		{"clean", 16000, 16000, 0, 0, -150, -150, -400, -400, 0, 50, rc{20, 3, 30000}, 103, 0.0004},
		{"70 dB pad, hum", 48000, 44100, 150, -150, -105, -105, -80, -80, 0, 50, rc{70, 3, 30000}, 121, 0.05},
		{"steep at both ends", 32000, 16000, 100, 20, -100, -100, -70, -70, 0, 59.97, rc{20, 100, 2000}, 103, 0.005},
		{"hum in before alone", 16000, 16000, 0, 60, -105, -105, -40, -400, 0, 50, rc{60, 0, 30000}, 103, 0.02},
		{"the same, after drowned", 16000, 16000, 0, 60, -105, -65, -60, -400, 0, 50, rc{60, 0, 30000}, 103, 2},
		{"before noisy", 16000, 16000, 0, 60, -38, -60, -400, -400, 0, 50, rc{20, 0, 30000}, 103, 0.04},
		{"mains that creeps", 8000, 8000, 0, 60, -105, -105, -60, -75, 0.03, 49.98, rc{60, 0, 30000}, 91, 0.2},
		{"8 kHz take", 16000, 8000, 100, -20, -100, -100, -400, -400, 0, 50, rc{20, 0, 30000}, 91, 0.01},
	} {
		t.Run(c.name, func(t *testing.T) {
			rb, ra := 1+c.beforePPM*1e-6, 1+c.afterPPM*1e-6
			playedHz := c.beforeHz
			before := player{playedHz}.take(c.beforeHz, 0.3, rb, 24.2, 0).noise(c.beforeNoiseDBFS, 11).creepingHum(c.mainsHz, c.driftHz, c.beforeHumDBFS)
			after := player{playedHz}.take(c.afterHz, 1.7123, ra, 25.5, 0).through(c.network, ra).noise(c.noiseDBFS, 12).creepingHum(c.mainsHz, c.driftHz, c.humDBFS)
			pb, pa := placed(t, before), placed(t, after)
			points, err := Response(before, pb, after, pa)
			if err != nil {
				t.Fatal(err)
			}
			if len(points) != c.points {
				t.Errorf("%d points, want %d", len(points), c.points)
			}
			worst, worstHz, worstU, most, sum := 0.0, 0.0, 0.0, 0.0, 0.0
			for _, p := range points {
				want := DBFromRatio(cmplx.Abs(c.network.at(p.FreqHz)))
				off := -p.LossDB - want
				if math.Abs(off) > math.Abs(worst) {
					worst, worstHz = off, p.FreqHz
				}
				worstU = math.Max(worstU, p.StandardUDB)
				most = math.Max(most, math.Abs(off)/p.StandardUDB)
				sum += off * off / p.StandardUDB / p.StandardUDB
				if math.Abs(off) > c.worstDB || math.Abs(off) > 4*p.StandardUDB {
					t.Errorf("%.1f Hz: loss %.4f, want %.4f; u %.4f", p.FreqHz, p.LossDB, -want, p.StandardUDB)
				}
			}
			t.Logf("worst %.4f dB at %.1f Hz, largest u %.4f, most off/u %.2f, rms off/u %.2f", worst, worstHz, worstU, most, math.Sqrt(sum/float64(len(points))))
		})
	}
}

func TestResponseRefuses(t *testing.T) {
	c := player{8000}.take(8000, 0, 1, 23.5, 0)
	good := Placement{Ratio: 1, RatioU: 1e-8}
	for what, p := range map[string]Placement{
		"one marker": {Ratio: 1, RatioU: 87e-6}, "cut off": {StartSec: -9, Ratio: 1}, "ends early": {StartSec: 2, Ratio: 1},
		"zero": {}, "NaN": {Ratio: math.NaN()},
	} {
		if _, err := Response(c, good, c, p); !errors.Is(err, ErrNoResponse) {
			t.Errorf("%s: %v, want %v", what, err, ErrNoResponse)
		}
	}
}

// Six tenths of a hertz on either side of a line that is a hundredth of the sweep are left out; a band
// of which too few bins are left grows.
func TestHumIsLeftOut(t *testing.T) {
	take := sweepTake{bins: make([]complex128, 1000)}
	for k := range take.bins {
		take.bins[k] = 1
	}
	cut := make([]bool, 1000)
	take.cutOut(hushLine{freqHz: 50, peak: 2e-4 * sweepGate.binHz()}, cut)
	for k := range cut {
		if cut[k] {
			t.Fatalf("bin %d is left out for a line of 1e-4", k)
		}
	}
	take.cutOut(hushLine{freqHz: 50, peak: 0.02 * sweepGate.binHz()}, cut)
	for k := range cut {
		if off := math.Abs(float64(k)*sweepGate.binHz() - 50); cut[k] != (off < 0.65) {
			t.Errorf("%.2f Hz from the line: left out %v", off, cut[k])
		}
	}
	s := sumBand(take.bins, take.bins, cut, Band{49.5, 50, 50.5})
	if low, high := float64(s.low)*sweepGate.binHz(), float64(s.high)*sweepGate.binHz(); s.count < leastBandBins || low > 49.3 || high < 50.7 {
		t.Errorf("the band about the line holds %g bins from %.2f to %.2f Hz", s.count, low, high)
	}
}
