package analysis

import (
	"errors"
	"math"
	"testing"
)

func TestStepDB(t *testing.T) {
	for _, c := range []struct {
		rateHz, ppm, gainDB, noiseDBFS, humDBFS float64
		squeeze                                 float64 // part of a decibel by which gain answers a decibel
		want, tol                               float64
	}{
		{16000, 0, 0, -150, -400, 0, 10, 1e-5},
		{11025, 150, -20, -90, -60, 0, 10, 0.02},
		{8000, -150, -20, -90, -60, 0, 10, 0.02},
		{48000, 100, -70, -105, -80, 0, 10, 0.2},
		{16000, 0, -20, -100, -80, 0.3, 7, 0.01},
		{16000, 0, -20, -100, -80, 0.006, 9.94, 0.01},
	} {
		ratio := 1 + c.ppm*1e-6
		take := player{48000}.take(c.rateHz, 2.345, ratio, 27, c.gainDB)
		for n := range take.x { // gain that has come back up 0.5 s after the step
			if sec := float64(n)/c.rateHz/ratio - 2.345; sec > 5.75 {
				take.x[n] *= math.Pow(10, c.squeeze*10*math.Min(1, (sec-5.75)/0.5)/20)
			}
		}
		take.noise(c.noiseDBFS, 3).hum(50, c.humDBFS)
		p := Placement{StartSec: 2.345, Ratio: ratio}
		got, _, err := StepDB(take, p)
		if err != nil {
			t.Fatal(err)
		}
		near(t, "StepDB", got, c.want, c.tol)
	}
}

// The stated uncertainty is what the step scatters by, and 3.2 of it (Student's t, three degrees of
// freedom) hold 95 in 100.
func TestStepDBUncertainty(t *testing.T) {
	const takes = 60
	signal := player{48000}.take(8000, 0.345, 1.00015, 24, -20)
	var squares, stated float64
	beyond := 0
	for seed := range uint64(takes) {
		c := newClip(8000, 24)
		copy(c.x, signal.x)
		got, u, err := StepDB(c.noise(-90, seed), Placement{StartSec: 0.345, Ratio: 1.00015})
		if err != nil {
			t.Fatal(err)
		}
		squares += (got - 10) * (got - 10) / takes
		stated += u * u / takes
		if math.Abs(got-10) > 3.2*u {
			beyond++
		}
	}
	near(t, "scatter over u", math.Sqrt(squares/stated), 1, 0.25)
	if beyond > 8 {
		t.Errorf("%d of %d beyond 3.2 u, want about 3", beyond, takes)
	}
}

func TestStepDBRefuses(t *testing.T) {
	for what, p := range map[string]Placement{"before its start": {StartSec: -7, Ratio: 1}, "after its end": {StartSec: 20, Ratio: 1}, "silence": {Ratio: 1}} {
		if _, _, err := StepDB(newClip(8000, 24), p); !errors.Is(err, ErrNoSignal) {
			t.Errorf("%s: %v, want %v", what, err, ErrNoSignal)
		}
	}
	if _, _, err := StepDB(newClip(8000, 24), Placement{}); err == nil {
		t.Error("no ratio: no error")
	}
}
