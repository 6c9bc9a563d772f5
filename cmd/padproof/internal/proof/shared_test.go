package proof

import (
	"errors"
	"sync"
	"sync/atomic"
	"testing"
)

// common is a take that serves several units, as it was recorded at a time.
func common(atNanos int64) *take {
	return &take{path: "before.wav", role: "before", channel: 1, inherited: true, stamp: stamp{100, atNanos}}
}

// What a take shows is found out once, however many ask at once.
func TestRecallIsMadeOnce(t *testing.T) {
	var s Shared
	var made atomic.Int64
	var wait sync.WaitGroup
	for range 8 {
		wait.Go(func() {
			if v, err := recall(&s, common(1), "find", func() (int64, error) { return made.Add(1), nil }); v != 1 || err != nil {
				t.Errorf("recall = %d, %v; want 1", v, err)
			}
		})
	}
	wait.Wait()
	if made.Load() != 1 {
		t.Errorf("made %d times, want once", made.Load())
	}
}

// A share that was away for a moment must not spoil the take for the rest of a shift.
func TestRecallForgetsErrors(t *testing.T) {
	var s Shared
	away := errors.New("the share is away")
	for i, want := range []error{away, nil} {
		v, err := recall(&s, common(1), "find", func() (int, error) { return i, want })
		if v != i || !errors.Is(err, want) {
			t.Errorf("time %d: recall = %d, %v; want %d, %v", i, v, err, i, want)
		}
	}
	if _, err := recall(&s, common(1), "measure", func() (int, error) { panic("odd") }); err == nil {
		t.Error("a panic is no error")
	}
	if len(s.known) != 1 {
		t.Errorf("%d ways of reading are kept, want 1", len(s.known))
	}
}

// A take recorded anew takes the old one's place: what is kept does not grow.
func TestRecallOfATakeRecordedAnew(t *testing.T) {
	var s Shared
	for i := range 10 {
		if v, _ := recall(&s, common(int64(i)), "find", func() (int, error) { return i, nil }); v != i {
			t.Errorf("recording %d shows %d", i, v)
		}
	}
	if len(s.known) != 1 {
		t.Errorf("%d ways of reading are kept, want 1", len(s.known))
	}
}

// What belongs to one unit, or was not seen on the disk, is never kept.
func TestRecallKeepsSharedTakesAlone(t *testing.T) {
	var s Shared
	own, unseen := common(1), common(1)
	own.inherited, unseen.stamp = false, stamp{}
	for _, one := range []*take{own, unseen} {
		for i := range 2 {
			if v, _ := recall(&s, one, "find", func() (int, error) { return i, nil }); v != i {
				t.Errorf("recall = %d, want %d", v, i)
			}
		}
	}
	if len(s.known) != 0 {
		t.Errorf("%d ways of reading are kept, want none", len(s.known))
	}
}
