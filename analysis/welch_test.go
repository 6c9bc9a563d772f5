package analysis

import (
	"bytes"
	"encoding/binary"
	"fmt"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"testing"
)

// The spectrum of a noise take against scipy.signal.welch on the same samples.
func TestSpectrumAgainstScipy(t *testing.T) {
	python := "/usr/bin/python3"
	if err := exec.Command(python, "-c", "import scipy.signal").Run(); err != nil {
		t.Skipf("%s has no scipy: the spectrum is not held against it", python)
	}
	c := newClip(48000, 6.7).noise(-60, 1).hum(50, -50)
	n := mustNoise(t, c)
	folder := t.TempDir()
	samples, result := filepath.Join(folder, "samples"), filepath.Join(folder, "result")
	var b bytes.Buffer
	for i, v := range c.x {
		c.x[i] = v - n.OffsetFS
	}
	if err := binary.Write(&b, binary.LittleEndian, c.x); err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(samples, b.Bytes(), 0o600); err != nil {
		t.Fatal(err)
	}
	args := []string{"testdata/welch.py", samples, result, fmt.Sprint(2 * (len(n.Spectrum.MeanSquare) - 1))}
	for _, a := range windowTerms {
		args = append(args, fmt.Sprint(a))
	}
	if text, err := exec.Command(python, args...).CombinedOutput(); err != nil {
		t.Fatalf("welch.py: %v\n%s", err, text)
	}
	data, err := os.ReadFile(result)
	if err != nil {
		t.Fatal(err)
	}
	want := make([]float64, len(data)/8)
	if err := binary.Read(bytes.NewReader(data), binary.LittleEndian, want); err != nil || len(want) != len(n.Spectrum.MeanSquare) {
		t.Fatalf("scipy gave %d bins, %v, want %d", len(want), err, len(n.Spectrum.MeanSquare))
	}
	total := 0.0
	for k, v := range want {
		total += v
		if got := n.Spectrum.MeanSquare[k]; math.Abs(got-v) > 1e-9*v+1e-20 {
			t.Fatalf("bin %d = %g, want %g as scipy has it", k, got, v)
		}
	}
	got, _ := n.Spectrum.PowerIn([]FreqRange{{-1, 24001}})
	near(t, "all bins", got, total, 1e-9*total)
}
