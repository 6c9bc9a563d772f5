package proof

import (
	"fmt"
	"os"
	"slices"
	"sync"

	"padproof/analysis"
	"padproof/compare"
)

// Shared keeps what takes that serve several units have shown, so that each is
// read once for all of them. A take that was recorded anew is read anew. The zero
// value is ready; it may be used from several goroutines at once.
type Shared struct {
	mu    sync.Mutex
	known map[string]*once
}

// A once is something found out once for all units.
type once struct {
	sync.Once
	value any
	err   error
}

// recall returns what make gives, made once for a key. With no Shared it is made
// each time.
func recall[T any](s *Shared, key string, make func() (T, error)) (T, error) {
	if s == nil || key == "" {
		return make()
	}
	o := s.entry(key)
	o.Do(func() {
		o.err = guarded(func() error {
			v, err := make()
			o.value = v
			return err
		})
	})
	v, _ := o.value.(T)
	return v, o.err
}

func (s *Shared) entry(key string) *once {
	s.mu.Lock()
	defer s.mu.Unlock()
	if s.known == nil {
		s.known = map[string]*once{}
	}
	if s.known[key] == nil {
		s.known[key] = &once{}
	}
	return s.known[key]
}

// seen is what reading a take has shown.
type seen struct {
	found    []analysis.Stretch
	measured *analysis.Measurement
	placed   *analysis.Placement
	noise    *analysis.Noise
	steady   analysis.Steadiness
	stepped  bool
	sha256   string
	problems []compare.Problem
}

// readOnce reads a take by read, or takes what another unit has read in the same
// way. how tells ways of reading apart.
func (t *take) readOnce(s *Shared, how string, read func() error) error {
	v, err := recall(s, t.key(how), func() (seen, error) {
		err := read()
		return seen{t.found, t.measured, t.placed, t.noise, t.steady, t.stepped, t.sha256, t.problems}, err
	})
	t.found, t.measured, t.placed, t.noise = v.found, v.measured, v.placed, v.noise
	t.steady, t.stepped, t.sha256 = v.steady, v.stepped, v.sha256
	t.problems = slices.Clip(v.problems) // units add their own
	return err
}

// key names a way of reading a take that serves several units, "" for a take of
// one unit.
func (t *take) key(how string) string {
	if !t.inherited {
		return ""
	}
	info, err := os.Stat(t.path)
	if err != nil {
		return ""
	}
	return fmt.Sprint(t.path, "\x00", info.Size(), info.ModTime().UnixNano(), t.role, t.channel, how)
}
