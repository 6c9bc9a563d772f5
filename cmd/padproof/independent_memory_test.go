//go:build linux

package main_test

import (
	"fmt"
	"os"
	"os/exec"
	"strconv"
	"strings"
	"testing"
	"time"
)

const mebi = 1 << 20

// TestIndependentMemory: memory does not grow with the length of a take. Ten
// minutes held whole would be 77 MB as float64. With PADPROOF_LONG=1 two takes
// of an hour at 96 kHz, stereo, 24-bit, are written and checked as well.
func TestIndependentMemory(t *testing.T) {
	b := newSimBench(t)
	units := b.make(t, "long")
	short, ten := peakBytes(t, b, units[0].folder), peakBytes(t, b, units[1].folder)
	t.Logf("peak memory: %.1f MB for a minute, %.1f MB for ten", float64(short)/mebi, float64(ten)/mebi)
	// 6 MB is room for the collector's pacing, a twelfth of what ten minutes hold.
	if ten > 40*mebi || ten > short+6*mebi {
		t.Errorf("peak memory = %d bytes for ten minutes, want up to 40 MB and within 6 MB of the %d for one", ten, short)
	}
	if !long() {
		return
	}
	hour := b.make(t, "long", "--seconds", "3600", "--rate", "96000", "--channels", "2")
	peak := peakBytes(t, b, hour[0].folder)
	t.Logf("peak memory: %.1f MB for an hour of 96 kHz stereo", float64(peak)/mebi)
	if peak > 40*mebi {
		t.Errorf("peak memory = %d bytes for an hour of 96 kHz stereo, want up to 40 MB", peak)
	}
}

// peakBytes is the largest resident set of a check of one unit, which must
// pass. It is read from the running program, again and again: what the kernel
// reports at its end counts this test's own memory, as it stood when the program
// was started.
func peakBytes(t *testing.T, b *simBench, folder string) int64 {
	t.Helper()
	cmd := exec.Command(b.program, "check", folder, "--json")
	if err := cmd.Start(); err != nil {
		t.Fatal(err)
	}
	ended := make(chan error)
	go func() { ended <- cmd.Wait() }()
	status := fmt.Sprintf("/proc/%d/status", cmd.Process.Pid)
	var peak int64
	for {
		if kib := highWaterKiB(status); kib > 0 {
			peak = kib << 10
		}
		select {
		case err := <-ended:
			if err != nil {
				t.Fatalf("check of %s: %v", folder, err)
			}
			return peak
		case <-time.After(time.Millisecond):
		}
	}
}

// highWaterKiB is the largest resident set so far, by a status file of proc(5);
// 0 where it cannot be read.
func highWaterKiB(status string) int64 {
	text, err := os.ReadFile(status)
	if err != nil {
		return 0
	}
	_, rest, found := strings.Cut(string(text), "VmHWM:")
	if !found {
		return 0
	}
	kib, err := strconv.ParseInt(strings.Fields(rest)[0], 10, 64)
	if err != nil {
		return 0
	}
	return kib
}
