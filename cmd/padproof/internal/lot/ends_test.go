package lot

import (
	"bytes"
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"runtime"
	"testing"
	"time"

	"padproof/capture"
	"padproof/cmd/padproof/internal/proof"
	"padproof/cmd/padproof/internal/unit"
)

// empty are units without takes: each is done in no time, with an error.
func empty(n int) []*unit.Unit {
	var units []*unit.Unit
	for i := range n {
		units = append(units, &unit.Unit{Serial: fmt.Sprint(i)})
	}
	return units
}

// noneLeft fails where goroutines of a run are still there.
func noneLeft(t *testing.T, before int) {
	t.Helper()
	for range 100 {
		if runtime.NumGoroutine() <= before {
			return
		}
		time.Sleep(time.Millisecond)
	}
	t.Errorf("%d goroutines, %d before", runtime.NumGoroutine(), before)
}

func TestRunHandsOnInOrder(t *testing.T) {
	before := runtime.NumGoroutine()
	for _, workers := range []int{-1, 1, 3, 500} {
		for _, n := range []int{0, 1, 300} {
			next := 0
			err := Run(t.Context(), empty(n), workers, proof.Options{}, func(o Outcome) error {
				if o.Unit.Serial != fmt.Sprint(next) || o.Answer != nil || o.Err == nil {
					t.Errorf("outcome %d is %+v", next, o)
				}
				next++
				return nil
			})
			if err != nil || next != n {
				t.Errorf("%d units, %d workers: %d outcomes, %v", n, workers, next, err)
			}
		}
	}
	noneLeft(t, before)
}

// The caller's error, and the end of the context, end the run and all that it began.
func TestRunEndsWithItsContext(t *testing.T) {
	before := runtime.NumGoroutine()
	enough := errors.New("enough")
	seen := 0
	err := Run(t.Context(), empty(300), 2, proof.Options{}, func(Outcome) error {
		if seen++; seen == 5 {
			return enough
		}
		return nil
	})
	if !errors.Is(err, enough) || seen != 5 {
		t.Errorf("after %d outcomes: %v, want %v after 5", seen, err, enough)
	}
	for range 20 { // which of two ends is seen first must not matter
		ctx, stop := context.WithCancel(t.Context())
		seen = 0
		err = Run(ctx, empty(300), 2, proof.Options{}, func(Outcome) error {
			if seen++; seen == 5 {
				stop()
			}
			return nil
		})
		stop()
		if !errors.Is(err, context.Canceled) || seen != 5 {
			t.Fatalf("after %d outcomes: %v, want %v after 5", seen, err, context.Canceled)
		}
	}
	noneLeft(t, before)
}

// write makes a take of a steady tone in each channel, at the levels given, over a
// little noise.
func write(t *testing.T, path string, seconds float64, peaks ...float64) {
	t.Helper()
	w, err := capture.Create(path, capture.Format{RateHz: 48000, Channels: len(peaks), Bits: 24})
	if err != nil {
		t.Fatal(err)
	}
	defer w.Abort()
	random := rand.New(rand.NewPCG(1, 2))
	var frames []float64
	for i := range int(48000 * seconds) {
		tone := math.Sin(2 * math.Pi * 997 * float64(i) / 48000)
		for _, p := range peaks {
			frames = append(frames, p*tone+1e-6*(random.Float64()-0.5))
		}
	}
	if err := errors.Join(w.Write(frames), w.Close()); err != nil {
		t.Fatal(err)
	}
}

// inText puts a file of a name into a folder.
func inText(t *testing.T, folder, name, text string) {
	t.Helper()
	if err := os.WriteFile(filepath.Join(folder, name), []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
}

// saltmarsh is a lot of a few units that share every take that can be shared.
func saltmarsh(t *testing.T, n int) string {
	folder := t.TempDir()
	inText(t, folder, "rig.toml", "name = \"Bench\"\n[calibration]\nfull_scale_dbu = 18.0\nloaded_ohms = 600\n")
	inText(t, folder, "pad.toml", `name = "Saltmarsh 14 line pad"
network = "U"
parts = [
  { ref = "R1", value = "560", tolerance = "1%" },
  { ref = "R2", value = "560", tolerance = "1%" },
  { ref = "R3", value = "330", tolerance = "1%" },
]
[limits]
loss_plus_minus_db = 0.3
leg_match_db = 1.0
hum_max_dbu = -60
`)
	write(t, filepath.Join(folder, "before.wav"), 4, 0.5)
	write(t, filepath.Join(folder, "before-again.wav"), 4, 0.5001)
	write(t, filepath.Join(folder, "before-loaded.wav"), 4, 0.4)
	write(t, filepath.Join(folder, "rig-noise.wav"), 4, 0)
	write(t, filepath.Join(folder, "legs-before.wav"), 4, 0.25, 0.2501)
	for i := range n {
		serial := fmt.Sprintf("%04d", 417+i)
		if err := os.Mkdir(filepath.Join(folder, serial), 0o755); err != nil {
			t.Fatal(err)
		}
		at := func(name string) string { return filepath.Join(folder, serial, name) }
		write(t, at("after.wav"), 4, 0.1+0.0001*float64(i))
		write(t, at("legs.wav"), 4, 0.05+0.0001*float64(i), 0.05)
		write(t, at("pad-noise.wav"), 4, 0)
	}
	return folder
}

// Units that share takes, checked at once, get the answers that each gets alone.
func TestRunSharesTakes(t *testing.T) {
	found, err := unit.OpenLot(saltmarsh(t, 3), nil)
	if err != nil {
		t.Fatal(err)
	}
	asText := func(v any) []byte {
		text, err := json.Marshal(v)
		if err != nil {
			t.Fatal(err)
		}
		return text
	}
	o := proof.Options{Curves: true}
	err = Run(t.Context(), found.Units, 4, o, func(done Outcome) error {
		if done.Err != nil {
			return done.Err
		}
		alone, err := proof.Check(done.Unit, o)
		if err != nil {
			return err
		}
		if got, want := asText(done.Answer), asText(alone); !bytes.Equal(got, want) {
			t.Errorf("unit %s in the lot:\n%s\nalone:\n%s", done.Unit.Serial, got, want)
		}
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
}

// An interrupted lot does not wait for the end of a long take, and hands on no unit
// that was dropped.
func TestRunEndsWithinATake(t *testing.T) {
	folder := filepath.Join(t.TempDir(), "0417")
	if err := os.Mkdir(folder, 0o755); err != nil {
		t.Fatal(err)
	}
	write(t, filepath.Join(folder, "before.wav"), 20, 0.5)
	write(t, filepath.Join(folder, "after.wav"), 20, 0.1)
	u, err := unit.Open(folder)
	if err != nil {
		t.Fatal(err)
	}
	ctx, stop := context.WithCancel(t.Context())
	defer stop()
	var read float64
	o := proof.Options{Progress: func(done, total int64) {
		read = float64(done) / float64(total)
		stop()
	}}
	err = Run(ctx, []*unit.Unit{u}, 1, o, func(o Outcome) error {
		t.Errorf("outcome %+v", o)
		return nil
	})
	if !errors.Is(err, context.Canceled) || read > 0.5 {
		t.Errorf("Run = %v with %.0f %% read, want %v soon", err, 100*read, context.Canceled)
	}
}
