package proof

import (
	"sync"

	"padproof/analysis"
)

// A reading counts the bytes of all takes as they are read, and tells of it.
type reading struct {
	tell  func(done, total int64)
	ended func() error
	total int64

	mu   sync.Mutex
	done int64
	told int64
}

// tellings is how often a reading tells of itself, at most.
const tellings = 200

// watch lets the takes count what is read of them, each file once.
func (ts *takes) watch(o Options) {
	if o.Progress == nil && o.Err == nil {
		return
	}
	r := &reading{tell: o.Progress, ended: o.Err}
	for _, t := range ts.order {
		r.total += t.facts.Bytes
		t.reading = r
	}
}

// add counts bytes, and tells where that is worth telling.
func (r *reading) add(bytes int64) {
	r.mu.Lock()
	defer r.mu.Unlock()
	r.done = min(r.total, r.done+bytes)
	if r.tell != nil && (r.done-r.told)*tellings >= r.total {
		r.told = r.done
		r.tell(r.done, r.total)
	}
}

// watched is the take's channel, counted while it is read from end to end.
func (t *take) watched() analysis.Samples {
	if t.reading == nil {
		return t.samples
	}
	return &counted{Samples: t.samples, take: t}
}

// A counted channel counts how far it has been read.
type counted struct {
	analysis.Samples
	take *take
	end  int64 // the frame up to which it was
	told int64 // bytes that stand for it
}

func (c *counted) ReadAt(dst []float64, frame int64) (int, error) {
	r := c.take.reading
	if r.ended != nil {
		if err := r.ended(); err != nil {
			return 0, err
		}
	}
	n, err := c.Samples.ReadAt(dst, frame)
	if end := frame + int64(n); end > c.end {
		c.end = end
		bytes := int64(float64(c.take.facts.Bytes) * float64(end) / float64(max(1, c.Frames())))
		r.add(bytes - c.told)
		c.told = bytes
	}
	return n, err
}
