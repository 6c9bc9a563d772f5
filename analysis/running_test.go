package analysis

import (
	"math/rand/v2"
	"sort"
	"testing"
)

// The running median is that of the last values, sorted anew each time.
func TestRunningMedian(t *testing.T) {
	random := rand.New(rand.NewPCG(2, 2))
	var r running
	var all []float64
	for range 300 {
		v := float64(random.IntN(50)) // with ties
		if all = append(all, v); r.count() < runningBlocks {
			r.add(v)
		} else {
			r.turn(v)
		}
		last := append([]float64(nil), all[max(0, len(all)-runningBlocks):]...)
		sort.Float64s(last)
		if got, want := r.median(), last[len(last)/2]; got != want {
			t.Fatalf("after %d values: median %g, want %g", len(all), got, want)
		}
	}
}
