package proof

import (
	"errors"
	"os"
	"testing"

	"padproof/cmd/padproof/internal/unit"
)

func demo(t *testing.T) (u *unit.Unit, bytes int64) {
	t.Helper()
	u, err := unit.Open("../../../../testdata/saltmarsh/0417")
	if err != nil {
		t.Fatal(err)
	}
	for _, path := range u.Files {
		info, err := os.Stat(path)
		if err != nil {
			t.Fatal(err)
		}
		bytes += info.Size()
	}
	return u, bytes
}

// Reading counts each file once, from nothing to all.
func TestProgressReachesTheEnd(t *testing.T) {
	u, bytes := demo(t)
	var total, last int64
	calls := 0
	_, err := Check(u, Options{Progress: func(done, all int64) {
		calls++
		if done <= last || done > all {
			t.Errorf("told %d of %d after %d", done, all, last)
		}
		last, total = done, all
	}})
	if err != nil || total != bytes || float64(last) < 0.99*float64(bytes) || calls < 10 {
		t.Errorf("told %d times, %d of %d (%v); want 10 times or more, to the end of %d", calls, last, total, err, bytes)
	}
}

func TestProgressIsToldSeldom(t *testing.T) {
	calls := 0
	r := &reading{total: 1e6, tell: func(int64, int64) { calls++ }}
	for range r.total + 10 {
		r.add(1)
	}
	if calls != tellings || r.done != r.total {
		t.Errorf("told %d times up to %d, want %d times up to %d", calls, r.done, tellings, r.total)
	}
}

// Whoever is asked meanwhile can end the check, long before all is read.
func TestErrEndsTheCheck(t *testing.T) {
	u, bytes := demo(t)
	want := errors.New("enough")
	var ended error
	var read int64
	_, err := Check(u, Options{
		Progress: func(done, _ int64) { read, ended = done, want },
		Err:      func() error { return ended },
	})
	if !errors.Is(err, want) || read > bytes/2 {
		t.Errorf("ended with %v after %d of %d bytes, want %v soon", err, read, bytes, want)
	}
}
