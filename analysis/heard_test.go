package analysis

import (
	"math"
	"math/cmplx"
	"testing"
)

func heard(t *testing.T, rateHz, ratio float64) (all []float64) {
	t.Helper()
	err := GenerateHeard(rateHz, ratio, func(b []float64) error { all = append(all, b...); return nil })
	if err != nil {
		t.Fatal(err)
	}
	return all
}

func TestHeardByTheSameClockIsWhatWasPlayed(t *testing.T) {
	var played []float64
	if err := Generate(44100, func(b []float64) error { played = append(played, b...); return nil }); err != nil {
		t.Fatal(err)
	}
	got := heard(t, 44100, 1)
	if len(got) != len(played) {
		t.Fatalf("%d samples, want %d", len(got), len(played))
	}
	for i, want := range played {
		if got[i] != want {
			t.Fatalf("sample %d = %v, want %v", i, got[i], want)
		}
	}
}

// A recorder that runs r times as fast sees every frequency r times lower and every instant r times
// later, by the samples it counts.
func TestHeardByAnotherClock(t *testing.T) {
	for _, tc := range []struct{ rateHz, ratio float64 }{{48000, 1 + 150e-6}, {48000, 1 - 150e-6}, {44100, 48000.0 / 44100}, {48000, 1 / 1.05}} {
		got := heard(t, tc.rateHz, tc.ratio)
		all := Schedule(tc.rateHz)
		for n, x := range got {
			if !(math.Abs(x) <= PeakFromDBFS(SignalPeakDBFS)) {
				t.Fatalf("ratio %v: sample %d = %v, beyond the signal's peak", tc.ratio, n, x)
			}
		}
		if want := SignalSec() * tc.rateHz * tc.ratio; math.Abs(float64(len(got))-want) > 1 {
			t.Errorf("ratio %v: %d samples, want %.1f ± 1", tc.ratio, len(got), want)
		}
		// The tone: correlated with a sine of its own frequency from its own start, phase 0 (a sine).
		tone := all[3]
		first, last := tone.StartSec*tc.rateHz*tc.ratio, (tone.StartSec+tone.LengthSec)*tc.rateHz*tc.ratio
		var sum complex128
		from, to := int(first)+1000, int(last)-1000
		for n := from; n < to; n++ {
			phase := 2 * math.Pi * ToneHz * (float64(n) - first) / (tc.rateHz * tc.ratio)
			sum += complex(got[n], 0) * cmplx.Exp(complex(0, -phase))
		}
		sum *= complex(0, 2/float64(to-from)/PeakFromDBFS(SignalPeakDBFS))
		if cmplx.Abs(sum-1) > 1e-4 { // the sum does not end on a whole turn
			t.Errorf("ratio %v: the tone against its closed form = %v, want 1 ± 1e-4", tc.ratio, sum)
		}
		// The sweep is silent before and sounds after its start.
		start := int(math.Ceil(all[6].StartSec * tc.rateHz * tc.ratio))
		if got[start-1] != 0 || got[start+2] == 0 {
			t.Errorf("ratio %v: about the start of the sweep %v", tc.ratio, got[start-2:start+3])
		}
	}
}

func TestHeardRefuses(t *testing.T) {
	for _, ratio := range []float64{0.4, 2.1, math.NaN(), math.Inf(1)} {
		if err := GenerateHeard(48000, ratio, func([]float64) error { return nil }); err == nil {
			t.Errorf("GenerateHeard(ratio %v): no error", ratio)
		}
	}
	if err := GenerateHeard(100, 1, func([]float64) error { return nil }); err == nil {
		t.Error("GenerateHeard(100 Hz): no error")
	}
}
