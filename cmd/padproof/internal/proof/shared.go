package proof

import (
	"slices"
	"sync"

	"padproof/analysis"
	"padproof/compare"
)

// Shared keeps what takes that serve several units have shown, so that each is
// read once for all of them. A take that was recorded anew is read anew, in the
// place of the old one, and one that could not be read is tried again for the next
// unit. The zero value is ready; it may be used from several goroutines at once.
type Shared struct {
	mu    sync.Mutex
	known map[key]*once
}

// A key names a way of reading a take.
type key struct {
	path, role string
	channel    int
	how        string
}

// A once is something found out once for all units.
type once struct {
	sync.Once
	stamp stamp
	value any
	err   error
}

// recall returns what make gives, made once for a way of reading a take that
// serves several units, while its file is the same. An error is for those who wait
// for it, and not kept. For a take of one unit, or with no Shared, it is made each
// time.
func recall[T any](s *Shared, t *take, how string, make func() (T, error)) (T, error) {
	if s == nil || !t.inherited || t.stamp == (stamp{}) {
		return make()
	}
	k := key{t.path, t.role, t.channel, how}
	o := s.entry(k, t.stamp)
	o.Do(func() {
		o.err = guarded(func() error {
			v, err := make()
			o.value = v
			return err
		})
		if o.err != nil {
			s.forget(k, o)
		}
	})
	v, _ := o.value.(T)
	return v, o.err
}

func (s *Shared) entry(k key, now stamp) *once {
	s.mu.Lock()
	defer s.mu.Unlock()
	if s.known == nil {
		s.known = map[key]*once{}
	}
	if o := s.known[k]; o == nil || o.stamp != now {
		s.known[k] = &once{stamp: now}
	}
	return s.known[k]
}

func (s *Shared) forget(k key, o *once) {
	s.mu.Lock()
	defer s.mu.Unlock()
	if s.known[k] == o {
		delete(s.known, k)
	}
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
	v, err := recall(s, t, how, func() (seen, error) {
		err := read()
		return seen{t.found, t.measured, t.placed, t.noise, t.steady, t.stepped, t.sha256, t.problems}, err
	})
	t.found, t.measured, t.placed, t.noise = v.found, v.measured, v.placed, v.noise
	t.steady, t.stepped, t.sha256 = v.steady, v.stepped, v.sha256
	t.problems = slices.Clip(v.problems) // units add their own
	return err
}
