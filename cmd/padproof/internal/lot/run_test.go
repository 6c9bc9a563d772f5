package lot

import (
	"context"
	"errors"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"slices"
	"testing"
	"time"

	"padproof/capture"
	"padproof/cmd/padproof/internal/proof"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/unit"
)

const (
	padSheet = `name = "Saltmarsh 14 line pad"
network = "U"
parts = [
  { ref = "R1", value = "560", tolerance = "1%" },
  { ref = "R2", value = "560", tolerance = "1%" },
  { ref = "R3", value = "330", tolerance = "1%" },
]
[limits]
loss_plus_minus_db = 0.6
`
	rigSheet = "[output]\nsource_ohms = 100\n[input]\nload_ohms = 10000\n"
)

// writeTone writes a second and a half of a steady tone of so many dBFS.
func writeTone(t *testing.T, path string, dbfs float64) {
	t.Helper()
	const rateHz, toneHz = 48000, 997
	w, err := capture.Create(path, capture.Format{RateHz: rateHz, Channels: 1, Bits: 24})
	if err != nil {
		t.Fatal(err)
	}
	samples := make([]float64, rateHz*3/2)
	for i := range samples {
		samples[i] = math.Pow(10, dbfs/20) * math.Sin(2*math.Pi*toneHz*float64(i)/rateHz)
	}
	if err := errors.Join(w.Write(samples), w.Close()); err != nil {
		t.Fatal(err)
	}
}

// lotFolder makes so many units that share their sheets and their before; unit k,
// from 0, loses 13.57 + k/1000 dB.
func lotFolder(t *testing.T, n int) (string, []*unit.Unit) {
	t.Helper()
	folder := t.TempDir()
	for name, text := range map[string]string{"pad.toml": padSheet, "rig.toml": rigSheet} {
		if err := os.WriteFile(filepath.Join(folder, name), []byte(text), 0o666); err != nil {
			t.Fatal(err)
		}
	}
	writeTone(t, filepath.Join(folder, "before.wav"), -6)
	for k := range n {
		own := filepath.Join(folder, fmt.Sprintf("%04d", 401+k))
		if err := os.Mkdir(own, 0o777); err != nil {
			t.Fatal(err)
		}
		writeTone(t, filepath.Join(own, "after.wav"), -19.57-float64(k)/1000)
	}
	found, err := unit.OpenLot(folder, nil)
	if err != nil || len(found.Units) != n {
		t.Fatalf("OpenLot gives %d units, %v", len(found.Units), err)
	}
	return folder, found.Units
}

func lossOf(a *result.Answer) float64 {
	i := slices.IndexFunc(a.Checks, func(c result.Check) bool { return c.Name == "loss" })
	return float64(a.Checks[i].Measured)
}

// Outcomes come in the order of the units, whoever is done first.
func TestRunKeepsTheOrder(t *testing.T) {
	_, units := lotFolder(t, 9)
	for workers := 1; workers <= 4; workers++ {
		var got []string
		err := Run(context.Background(), units, workers, proof.Options{}, func(o Outcome) error {
			got = append(got, o.Unit.Serial)
			if want := 13.57 + float64(len(got)-1)/1000; o.Err != nil || math.Abs(lossOf(o.Answer)-want) > 1e-4 {
				t.Errorf("%s: %v, %v, want a loss of %v ± 0.0001 dB", o.Unit.Serial, o.Err, o.Answer, want)
			}
			return nil
		})
		if err != nil || len(got) != 9 || !slices.IsSorted(got) {
			t.Errorf("%d workers: %v, %v", workers, got, err)
		}
	}
}

// A take that serves all units is read once. The bytes of before are spoilt behind
// the program's back, its size and time left as they were, when the first unit is
// done: whoever read them again would see.
func TestRunReadsSharedTakesOnce(t *testing.T) {
	folder, units := lotFolder(t, 8)
	before := filepath.Join(folder, "before.wav")
	spoil := func() {
		info, err := os.Stat(before)
		if err != nil {
			t.Fatal(err)
		}
		writeTone(t, before, -26)
		if err := os.Chtimes(before, info.ModTime(), info.ModTime()); err != nil {
			t.Fatal(err)
		}
	}
	one := func(shared *proof.Shared) (wrong int) {
		writeTone(t, before, -6)
		n := 0
		err := Run(context.Background(), units, 1, proof.Options{Shared: shared}, func(o Outcome) error {
			if n++; n == 1 {
				spoil()
			}
			if o.Err != nil {
				return o.Err
			}
			if math.Abs(lossOf(o.Answer)-13.57) > 0.1 {
				wrong++
			}
			return nil
		})
		if err != nil {
			t.Fatal(err)
		}
		return wrong
	}
	if wrong := one(nil); wrong != 0 {
		t.Errorf("%d of 8 units read the shared take anew", wrong)
	}
	// The spoilt bytes do show where they are read: a take of another time is read anew.
	writeTone(t, before, -26)
	err := Run(context.Background(), units[:1], 1, proof.Options{}, func(o Outcome) error {
		if o.Err != nil || math.Abs(lossOf(o.Answer)+6.43) > 0.1 {
			t.Errorf("with the spoilt take: %v, want a loss of -6.43 dB", o.Err)
		}
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
}

// An error of the receiver ends the run, and so does the end of the context.
func TestRunEnds(t *testing.T) {
	_, units := lotFolder(t, 6)
	full := errors.New("disk full")
	n := 0
	err := Run(context.Background(), units, 2, proof.Options{}, func(Outcome) error {
		if n++; n == 2 {
			return full
		}
		return nil
	})
	if !errors.Is(err, full) || n != 2 {
		t.Errorf("after %d units: %v, want 2 and %v", n, err, full)
	}
	for range 5 {
		ctx, stop := context.WithCancel(context.Background())
		n = 0
		err = Run(ctx, units, 2, proof.Options{Err: ctx.Err}, func(o Outcome) error {
			if n++; n == 2 {
				time.Sleep(300 * time.Millisecond) // others are done meanwhile
				stop()
			}
			return nil
		})
		if !errors.Is(err, context.Canceled) || n != 2 {
			t.Fatalf("after %d units: %v, want 2 and %v", n, err, context.Canceled)
		}
	}
}

// A fault of the program is that unit's alone.
func TestRunSurvivesAPanic(t *testing.T) {
	_, units := lotFolder(t, 3)
	units[1] = nil
	failed := 0
	err := Run(context.Background(), units, 2, proof.Options{}, func(o Outcome) error {
		if o.Err != nil {
			failed++
		}
		return nil
	})
	if err != nil || failed != 1 {
		t.Errorf("%d units failed, %v, want one", failed, err)
	}
}
