package analysis

import (
	"fmt"
	"math"
	"testing"

	"gonum.org/v1/gonum/stat"
)

// Hum of all ten lines at known levels, mains off its nominal by up to 0.5 %: the frequency and
// every level come back, at every rate.
func TestHumLevels(t *testing.T) {
	for i, rateHz := range []float64{8000, 44100, 96000} {
		for _, mainsHz := range []float64{49.78, 50, 50.21, 59.75, 60.02, 60.28} {
			c := newClip(rateHz, 4).noise(-90, uint64(i))
			total := 0.0
			for h := 1; h <= 10; h++ {
				levelDBFS := -70 - 2*float64(h)
				c.tone(float64(h)*mainsHz, levelDBFS, float64(h), 0, 4)
				total += math.Pow(10, levelDBFS/10) / 2
			}
			hum := mustNoise(t, c).Hum
			what := fmt.Sprintf("%g Hz at rate %g: ", mainsHz, rateHz)
			near(t, what+"MainsHz", hum.MainsHz, mainsHz, 0.02)
			near(t, what+"LevelDBFS", hum.LevelDBFS(), DBFSFromMeanSquare(total), 0.1)
			for _, l := range hum.Lines {
				near(t, fmt.Sprint(what, "line ", l.Harmonic), l.LevelDBFS(), -70-2*float64(l.Harmonic), 0.3)
			}
		}
	}
}

// The stated uncertainty of a line and of the sum is their scatter from take to take, from hum far
// under the noise to hum far over it.
func TestHumScatter(t *testing.T) {
	const takes = 100
	for _, humDBFS := range []float64{-200, -75, -50} {
		var sums, lines, sumU, lineU []float64
		for take := range takes {
			c := newClip(8000, 5).noise(-60, uint64(50+take))
			for h := 1; h <= 10; h++ {
				c.tone(float64(h)*50, humDBFS, float64(take+h), 0, 5)
			}
			n, err := MeasureNoise(c, 0, math.Inf(1), 50)
			if err != nil {
				t.Fatal(err)
			}
			sums, sumU = append(sums, n.Hum.MeanSquare), append(sumU, n.Hum.StdU)
			lines, lineU = append(lines, n.Hum.Lines[2].MeanSquare), append(lineU, n.Hum.Lines[2].StdU)
		}
		want := math.Pow(10, humDBFS/10) / 2
		mean, sd := stat.MeanStdDev(lines, nil)
		near(t, fmt.Sprintf("hum %g dBFS: mean of a line", humDBFS), mean, want, 0.01*want+4*sd/math.Sqrt(takes))
		near(t, fmt.Sprintf("hum %g dBFS: scatter of a line over StdU", humDBFS), sd/stat.Mean(lineU, nil), 1, 0.25)
		mean, sd = stat.MeanStdDev(sums, nil)
		near(t, fmt.Sprintf("hum %g dBFS: mean of the sum", humDBFS), mean, 10*want, 0.1*want+4*sd/math.Sqrt(takes))
		t.Logf("hum %g dBFS: scatter over StdU: sum %.3f", humDBFS, sd/stat.Mean(sumU, nil))
		near(t, fmt.Sprintf("hum %g dBFS: scatter of the sum over StdU", humDBFS), sd/stat.Mean(sumU, nil), 1, 0.12)
	}
}

// Beside a tone: the lines that the tone does not hide.
func TestHumBesideTone(t *testing.T) {
	for _, toneHz := range []float64{997, 440, 250} {
		c := newClip(48000, 6).noise(-95, 1).tone(toneHz, -20, 0, 0, 6)
		for h := 1; h <= 10; h++ {
			c.tone(float64(h)*50, -70, float64(h), 0, 6)
		}
		tone := measureAll(t, c).Tones[0]
		hum := HumIn(tone.Spectrum, 0, tone.FreqHz)
		near(t, "MainsHz", hum.MainsHz, 50, 0.02) // the line that lies 10 Hz beside 440 Hz is hidden
		hidden := 0
		for _, l := range hum.Lines {
			if l.Hidden {
				hidden++
				continue
			}
			near(t, fmt.Sprintf("tone %g Hz, line %d", toneHz, l.Harmonic), l.LevelDBFS(), -70, 0.3)
		}
		if want := map[float64]int{997: 0, 440: 1, 250: 2}[toneHz]; hidden != want {
			t.Errorf("tone %g Hz hides %d lines, want %d", toneHz, hidden, want)
		}
	}
}

func TestHumInOdd(t *testing.T) {
	for name, sp := range map[string]*Spectrum{
		"nothing":        nil,
		"bins too wide":  {RateHz: 48000, BinHz: 5.9, Segments: 9, MeanSquare: make([]float64, 4097)},
		"no mains":       nil,
		"mains negative": nil,
	} {
		if h := HumIn(sp, 50); h != nil {
			t.Errorf("%s: HumIn = %+v, want nil", name, *h)
		}
	}
	empty := &Spectrum{RateHz: 48000, BinHz: 1.4648, Segments: 9, MeanSquare: make([]float64, 16385)}
	if h := HumIn(empty, math.NaN()); h != nil {
		t.Errorf("HumIn at NaN = %+v, want nil", *h)
	}
	h := HumIn(empty, 0)
	if h == nil || h.Found || h.MeanSquare != 0 || h.LevelDBFS() != FloorDBFS {
		t.Errorf("HumIn of nothing at all = %+v, want no hum", h)
	}
}
