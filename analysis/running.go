package analysis

import "sort"

// A running median of the last values that were put into it, in a window of fixed length.
type running struct {
	inTurn [runningBlocks]float64 // the oldest at next
	sorted [runningBlocks]float64
	next   int
	n      int
	work   [runningBlocks]float64
}

func (r *running) count() int { return r.n }

// add takes a value more, up to the length of the window.
func (r *running) add(v float64) {
	r.inTurn[r.n] = v
	at := sort.SearchFloat64s(r.sorted[:r.n], v)
	copy(r.sorted[at+1:r.n+1], r.sorted[at:r.n])
	r.sorted[at] = v
	r.n++
}

// turn takes a value in place of the oldest.
func (r *running) turn(v float64) {
	old := r.inTurn[r.next]
	r.inTurn[r.next] = v
	r.next = (r.next + 1) % r.n
	at := sort.SearchFloat64s(r.sorted[:r.n], old)
	copy(r.sorted[at:r.n-1], r.sorted[at+1:r.n])
	at = sort.SearchFloat64s(r.sorted[:r.n-1], v)
	copy(r.sorted[at+1:r.n], r.sorted[at:r.n-1])
	r.sorted[at] = v
}

func (r *running) median() float64 { return r.sorted[r.n/2] }

// scatter returns the standard deviation that the median distance from the median stands for with
// normal scatter.
func (r *running) scatter() float64 {
	median, work := r.median(), r.work[:r.n]
	for i, v := range r.sorted[:r.n] {
		if work[i] = v - median; v < median {
			work[i] = median - v
		}
	}
	sort.Float64s(work)
	return 1.4826 * work[r.n/2]
}
