package uncertainty

import (
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"runtime"
	"slices"
	"sync"
	"sync/atomic"
)

const (
	minTrials = 100        // fewer leave the ends of the interval to a trial or two
	maxTrials = 20_000_000 // 160 MB of results
	blockSize = 4096       // trials drawn from one stream of random numbers
)

// An Interval lies between two values of the result, ends included.
type Interval struct{ Low, High float64 }

// HalfWidth returns half the length of the interval.
func (i Interval) HalfWidth() float64 { return (i.High - i.Low) / 2 }

// A Result is what [MonteCarlo] found.
type Result struct {
	Mean, SD  float64  // JCGM 101:2008, 7.6
	Symmetric Interval // 95 %, as much probability below as above (7.7.2)
	Shortest  Interval // 95 %, the shortest of all (7.7.3)
	Trials    int
}

// MonteCarlo propagates distributions (JCGM 101:2008, 7): it draws every input
// trials times, independently, puts each set through model and sums up the
// results. JCGM 101:2008, 7.2.2 asks for 10⁴/(1-0.95) = 200,000 trials or more.
//
// The same seed gives the same Result on any number of processor cores. The
// model runs on all cores at once, so it may not write to anything shared, and
// may not keep x, which is used again. Eight bytes a trial are held.
//
// An input that is no distribution, trials below 100 or above 20 million, a nil
// model, or a model that gives NaN or an infinite value are errors. A model that
// panics ends the program.
func MonteCarlo(model func(x []float64) float64, inputs []Distribution, trials int, seed uint64) (Result, error) {
	if model == nil {
		return Result{}, errors.New("monte carlo: no model")
	}
	if trials < minTrials || trials > maxTrials {
		return Result{}, fmt.Errorf("monte carlo: %d trials, %d to %d possible", trials, minTrials, maxTrials)
	}
	for i, d := range inputs {
		if err := d.check(); err != nil {
			return Result{}, fmt.Errorf("monte carlo: input %d: %w", i+1, err)
		}
	}
	values := make([]float64, trials)
	drawAll(values, model, inputs, seed)
	for i, v := range values {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return Result{}, fmt.Errorf("monte carlo: the model gives %g in trial %d", v, i+1)
		}
	}
	return summarise(values), nil
}

// drawAll fills values block by block, each from a stream of its own, so that it
// does not matter which core takes which.
func drawAll(values []float64, model func(x []float64) float64, inputs []Distribution, seed uint64) {
	blocks := (len(values) + blockSize - 1) / blockSize
	var next atomic.Int64
	var workers sync.WaitGroup
	for range min(runtime.GOMAXPROCS(0), blocks) {
		workers.Go(func() {
			x := make([]float64, len(inputs))
			for {
				block := int(next.Add(1)) - 1
				if block >= blocks {
					return
				}
				rng := rand.New(rand.NewChaCha8(streamKey(seed, block)))
				for i := block * blockSize; i < min((block+1)*blockSize, len(values)); i++ {
					for j, d := range inputs {
						x[j] = d.Draw(rng)
					}
					values[i] = model(x)
				}
			}
		})
	}
	workers.Wait()
}

// streamKey makes the key of one block's random numbers. ChaCha8 is a cipher:
// keys that differ in one bit give streams that have nothing in common.
func streamKey(seed uint64, block int) [32]byte {
	var key [32]byte
	for i := range 8 {
		key[i] = byte(seed >> (8 * i))
		key[8+i] = byte(uint64(block) >> (8 * i))
	}
	return key
}

// summarise sorts values, in place.
func summarise(values []float64) Result {
	n := len(values)
	var sum, squares float64
	for _, v := range values {
		sum += v
	}
	mean := sum / float64(n)
	for _, v := range values {
		squares += (v - mean) * (v - mean)
	}
	slices.Sort(values)

	// JCGM 101:2008, 7.7: an interval runs over q steps of the sorted values.
	q := int(0.95*float64(n) + 0.5)
	at := func(r int) Interval { return Interval{values[r], values[r+q]} }
	shortest := at(0)
	for r := 1; r < n-q; r++ {
		if i := at(r); i.HalfWidth() < shortest.HalfWidth() {
			shortest = i
		}
	}
	return Result{
		Mean: mean, SD: math.Sqrt(squares / float64(n-1)),
		// r = (n-q)/2 counted from 1, or the whole part of (n-q+1)/2.
		Symmetric: at((n-q+1)/2 - 1),
		Shortest:  shortest,
		Trials:    n,
	}
}
