package analysis

import (
	"fmt"
	"math"
	"testing"
)

// run puts a signal through the meter and returns the readings, one for each block of 256 samples.
func (q *quasiPeak) run(seconds, rateHz float64, signal func(n int) float64) (highest float64) {
	q.settle, q.top = 0, 0
	block := make([]float64, 0, 256)
	for n := range int(seconds * rateHz) {
		if block = append(block, signal(n)); len(block) == cap(block) {
			q.take(block)
			block = block[:0]
		}
	}
	return q.top
}

func burst5k(rateHz, burstSec, perSec float64) func(n int) float64 {
	return func(n int) float64 {
		at := float64(n) / rateHz
		if perSec > 0 {
			at = math.Mod(at, 1/perSec)
		}
		if at >= burstSec {
			return 0
		}
		return 0.5 * math.Sin(2*math.Pi*5000*at)
	}
}

// Bursts of 5 kHz against the steady tone: ITU-R BS.468-4, its tables for single bursts and for
// trains of 5 ms bursts, both from memory.
func TestQuasiPeakBursts(t *testing.T) {
	for _, rateHz := range []float64{32000, 44100, 48000, 96000} {
		steady := newQuasiPeak(rateHz).run(4, rateHz, burst5k(rateHz, 9, 0))
		check := func(row []string, seconds float64, burst func(n int) float64) {
			t.Helper()
			got := 100 * newQuasiPeak(rateHz).run(seconds, rateHz, burst) / steady
			if low, high := number(t, row[3]), number(t, row[5]); !(got >= low && got <= high) {
				t.Errorf("%g Hz, burst %s: %.1f %% of the steady reading, want %g to %g (%s)", rateHz, row[0], got, low, high, row[1])
			}
			if off := 20 * math.Log10(got/number(t, row[1])); math.Abs(off) > 0.35 {
				t.Errorf("%g Hz, burst %s: %.2f dB off the table's middle, want within 0.35", rateHz, row[0], off)
			}
		}
		for _, row := range readTable(t, "quasi_peak_itur468_single_bursts.csv")[1:] {
			sec := number(t, row[0]) / 1000
			check(row, sec+0.5, burst5k(rateHz, sec, 0))
		}
		for _, row := range readTable(t, "quasi_peak_itur468_repeated_bursts.csv")[1:] {
			check(row, 3, burst5k(rateHz, 0.005, number(t, row[0])))
		}
	}
}

// A steady tone reads its RMS and the weighting, at every rate. The tones lie beside the frequencies
// of the table (which the curve itself is held to), so that samples and periods do not keep step.
func TestQuasiPeakWeighting(t *testing.T) {
	for _, rateHz := range []float64{32000, 44100, 48000, 88200, 192000} {
		for _, row := range readTable(t, "weighting_itur468.csv")[1:] {
			freqHz := number(t, row[0]) * 1.00731
			if freqHz > bandHigh(rateHz) {
				continue
			}
			q := newQuasiPeak(rateHz)
			q.take(newClip(rateHz, 3).tone(freqHz, -20, 0.7, 0, 3).x)
			tol := 0.06
			if freqHz < 200 { // half waves long enough for the fast stage to follow
				tol = 0.6
			}
			what := fmt.Sprintf("%g Hz at %g Hz", freqHz, rateHz)
			near(t, what, q.reading().MeanDBFS+20, Weighting468DB(freqHz), tol)
			near(t, what+", highest", q.reading().HighestDBFS, q.reading().MeanDBFS, 2*tol)
		}
	}
}

// White noise reads about 4 to 5 dB above its weighted RMS (common experience, no source), and the
// same at any rate.
func TestQuasiPeakOfNoise(t *testing.T) {
	weighted := 0.0
	for f := 1.0; f < 20000; f++ {
		weighted += math.Pow(10, Weighting468DB(f)/10) / 20000
	}
	for i, rateHz := range []float64{44100, 48000, 96000} {
		n := mustNoise(t, newClip(rateHz, 8).noise(-60, uint64(i)))
		near(t, fmt.Sprintf("noise at %g Hz", rateHz), n.QuasiPeak.MeanDBFS, -60+10*math.Log10(weighted)+4.5, 0.7)
	}
	if n := mustNoise(t, newClip(16000, 8).noise(-60, 1)); n.QuasiPeak != nil {
		t.Errorf("reading at 16 kHz = %+v, want none", *n.QuasiPeak)
	}
	if n := mustNoise(t, newClip(48000, 1.5).noise(-60, 1)); n.QuasiPeak != nil {
		t.Errorf("reading of 1.5 s = %+v, want none", *n.QuasiPeak)
	}
}
