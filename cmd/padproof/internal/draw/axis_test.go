package draw

import (
	"math"
	"math/rand/v2"
	"strconv"
	"testing"

	"gonum.org/v1/plot/vg"
)

// The ticks are the octaves of ISO 266, table 1, and each lies by its exact
// frequency, 1000·10^(3n/10).
func TestOctaveTicks(t *testing.T) {
	want := map[string]float64{
		"31.5": 31.5, "63": 63, "125": 125, "250": 250, "500": 500, "1k": 1000, "2k": 2000, "4k": 4000, "8k": 8000, "16k": 16000,
	}
	a := frequencies()
	if a.min != 20 || a.max != 20000 || !a.log {
		t.Errorf("axis from %v to %v, want 20 to 20000, logarithmic", a.min, a.max)
	}
	if len(a.ticks) != len(want) {
		t.Errorf("%d ticks, want %d", len(a.ticks), len(want))
	}
	for i, tick := range a.ticks {
		if want[tick.Label] != tick.Value {
			t.Errorf("tick %q at %v Hz, want %v", tick.Label, tick.Value, want[tick.Label])
		}
		if exact := 1000 * math.Pow(10, 0.3*float64(i-5)); math.Abs(tick.Value/exact-1) > 0.015 {
			t.Errorf("tick %q lies %.4f of %v Hz", tick.Label, tick.Value/exact, exact)
		}
	}
	if a := frequencies([]float64{5, 40000, math.NaN(), math.Inf(1), -3}); a.min != 5 || a.max != 40000 || len(a.ticks) != 12 {
		t.Errorf("axis from %v to %v with %d ticks, want 5 to 40000 with 12", a.min, a.max, len(a.ticks))
	}
}

// Ticks are multiples of 1, 2 or 5 times a power of ten, say what they stand for,
// and are neither few nor many.
func TestTicksByOneTwoFive(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	for range 2000 {
		low := 400 * (rng.Float64() - 0.5)
		high := low + math.Pow(10, 5*rng.Float64()-2)
		for name, a := range map[string]axis{"evenly": evenly(low, high, ""), "between": between(low, high, "")} {
			if len(a.ticks) < 3 || len(a.ticks) > 12 {
				t.Fatalf("%s(%v, %v) has %d ticks", name, low, high, len(a.ticks))
			}
			step := a.ticks[1].Value - a.ticks[0].Value
			mantissa := step / math.Pow(10, math.Floor(math.Log10(step*1.0001)))
			if m := math.Round(mantissa); math.Abs(mantissa-m) > 1e-6 || m != 1 && m != 2 && m != 5 {
				t.Fatalf("%s(%v, %v) steps by %v", name, low, high, step)
			}
			for _, tick := range a.ticks {
				if v, err := strconv.ParseFloat(tick.Label, 64); err != nil || math.Abs(v-tick.Value) > step*1e-6 || math.Abs(v/step-math.Round(v/step)) > 1e-6 {
					t.Fatalf("%s(%v, %v): tick %q at %v", name, low, high, tick.Label, tick.Value)
				}
			}
			if a.min > low || a.max < high {
				t.Fatalf("%s(%v, %v) runs from %v to %v", name, low, high, a.min, a.max)
			}
		}
	}
}

// Labels set apart keep their order, do not overlap and stay in the room there is.
func TestSetApart(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 6))
	for range 500 {
		var labels []label
		for range 1 + rng.IntN(6) {
			labels = append(labels, label{lines: make([]string, 1+rng.IntN(3)), middle: vg.Length(300*rng.Float64() - 50)})
		}
		setApart(labels, 0, 220)
		for i, l := range labels {
			if l.middle-l.height()/2 < -1e-9 || l.middle+l.height()/2 > 220+1e-9 {
				t.Fatalf("label %d at %v ± %v is out of 0 to 220", i, l.middle, l.height()/2)
			}
			if i > 0 && labels[i-1].middle-labels[i-1].height()/2 < l.middle+l.height()/2-1e-9 {
				t.Fatalf("labels %d and %d overlap: %v, %v", i-1, i, labels[i-1].middle, l.middle)
			}
		}
	}
	alone := []label{{lines: make([]string, 1), middle: 100}}
	if setApart(alone, 0, 220); alone[0].middle != 100 {
		t.Errorf("a label alone was moved from 100 to %v", alone[0].middle)
	}
}
