//go:build linux

package main_test

import (
	"os/exec"
	"syscall"
	"testing"
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
// pass. It reads no lower than what this test held itself when it started the
// program, since the kernel counts the moment before the program is loaded.
func peakBytes(t *testing.T, b *simBench, folder string) int64 {
	t.Helper()
	cmd := exec.Command(b.program, "check", folder, "--json")
	if out, err := cmd.Output(); err != nil {
		t.Fatalf("check of %s: %v\n%s", folder, err, out)
	}
	return cmd.ProcessState.SysUsage().(*syscall.Rusage).Maxrss << 10
}
