package analysis

import (
	"fmt"
	"math"
	"math/cmplx"
	"sort"

	"gonum.org/v1/gonum/stat"
)

const (
	steadyWithinDB  = 0.5
	steadyWithinRad = 0.1
	steadySigmas    = 6.0
	// Where the blocks' amplitude scatters by more than this part, no tone stands: 100 ms of a tone
	// 10 dB under the noise of the band scatter as much.
	mostScatterFrac = 0.2

	// Below this the blocks are smoothed over three hops more, which takes off what lies 10 Hz away:
	// hum beside a low tone.
	smoothBelowHz = 400.0

	leastBlocks = 12 // in the steady part
)

// A steadyRun is the steady part of a stretch: blocks from to to-1 of the track, derotated so that
// a steady tone stands still.
type steadyRun struct {
	from, to int
	blocks   []complex128
	offHz    float64 // of the tone from the frequency that was fitted
	phase    float64 // at the first block's middle, against the fitted frequency
	smooth   bool
}

// steadyRun looks for the longest run of blocks about the stretch whose level keeps to its median
// and whose phase goes on evenly, and trims its edges.
func (p *pass) steadyRun(i int) (*steadyRun, error) {
	g, hopSec := p.watches[i].stretch, p.track.HopSec
	low, high := p.blocksOf(i)
	inLow := max(low, int(math.Ceil(g.StartSec/hopSec)))
	inHigh := min(high, int(g.EndSec/hopSec)-1)
	if inHigh-inLow < leastBlocks/2 {
		return nil, &TooShortError{FreqHz: g.FreqHz, Sec: math.Max(0, float64(inHigh-inLow+1)*hopSec)}
	}
	run := &steadyRun{smooth: g.FreqHz < smoothBelowHz}
	blocks := make([]complex128, high-low)
	for b := range blocks {
		blocks[b] = complex128(p.track.blocks[low+b])
	}
	if run.smooth {
		smoothen(blocks)
	}
	from, to, step := longestRun(blocks, inLow-low, inHigh-low)
	if from == to {
		return nil, fmt.Errorf("%w at %.6g Hz", ErrNoTone, g.FreqHz)
	}
	trim := 1
	if run.smooth {
		trim = 2
	}
	if to-from-2*trim < leastBlocks {
		return nil, &TooShortError{FreqHz: g.FreqHz, Sec: math.Max(0, float64(to-from+1)*hopSec)}
	}
	run.from, run.to = low+from+trim, low+to-trim
	run.blocks = blocks[from+trim : to-trim]
	run.settle(step, hopSec)
	return run, nil
}

// blocksOf returns the first block fitted at a watch's frequency and the first after it.
func (p *pass) blocksOf(i int) (low, high int) {
	if i > p.now {
		return 0, 0
	}
	high = len(p.track.blocks)
	if i < p.now {
		high = min(high, p.track.spans[i+1].from)
	}
	return p.track.spans[i].from, high
}

// smoothen weighs each block with its neighbours, ¼ ½ ¼: nothing of what turns by half a turn from
// block to block is left.
func smoothen(blocks []complex128) {
	if len(blocks) == 0 {
		return
	}
	before := blocks[0]
	for b := range len(blocks) - 1 {
		here := blocks[b]
		blocks[b] = (before + 2*here + blocks[b+1]) / 4
		before = here
	}
}

// longestRun returns the steady run of blocks that has most in common with those from inLow to
// inHigh-1, which must be at least two, and the median turn of phase from block to block there. An
// empty run where no tone stands.
func longestRun(blocks []complex128, inLow, inHigh int) (from, to int, step float64) {
	inside := blocks[inLow:inHigh]
	peaks, steps := make([]float64, len(inside)), make([]float64, len(inside)-1)
	for b, z := range inside {
		peaks[b] = cmplx.Abs(z)
		if b > 0 {
			steps[b-1] = turnOf(inside[b-1], z)
		}
	}
	peak, peakSigma := medianSigma(peaks)
	step, stepSigma := medianSigma(steps)
	if peakSigma > mostScatterFrac*peak || peak == 0 {
		return 0, 0, 0
	}
	peakTol := peak*(RatioFromDB(steadyWithinDB)-1) + steadySigmas*peakSigma
	stepTol := steadyWithinRad + steadySigmas*stepSigma

	best := 0
	for b := 0; b < len(blocks); {
		end := b
		for end < len(blocks) && math.Abs(cmplx.Abs(blocks[end])-peak) <= peakTol &&
			(end == b || math.Abs(math.Remainder(turnOf(blocks[end-1], blocks[end])-step, 2*math.Pi)) <= stepTol) {
			end++
		}
		if common := min(end, inHigh) - max(b, inLow); end > b && common > best {
			best, from, to = common, b, end
		}
		b = max(end, b+1)
	}
	return from, to, step
}

func turnOf(a, b complex128) float64 { return cmplx.Phase(b * cmplx.Conj(a)) }

// medianSigma returns the median and the standard deviation that the median distance from it
// stands for with normal scatter.
func medianSigma(x []float64) (median, sigma float64) {
	work := append([]float64(nil), x...)
	sort.Float64s(work)
	median = work[len(work)/2]
	for i, v := range work {
		work[i] = math.Abs(v - median)
	}
	sort.Float64s(work)
	return median, 1.4826 * work[len(work)/2]
}

// settle finds the frequency by regression of the unwrapped phase over the run and derotates it.
func (r *steadyRun) settle(step, hopSec float64) {
	at, phase := make([]float64, len(r.blocks)), make([]float64, len(r.blocks))
	for b, z := range r.blocks {
		at[b] = float64(b)
		phase[b] = cmplx.Phase(z)
		if b > 0 {
			phase[b] = phase[b-1] + step + math.Remainder(turnOf(r.blocks[b-1], z)-step, 2*math.Pi)
		}
	}
	intercept, slope := stat.LinearRegression(at, phase, nil, false)
	for b := range r.blocks {
		r.blocks[b] *= cmplx.Rect(1, -slope*float64(b))
	}
	r.phase, r.offHz = intercept, slope/(2*math.Pi*hopSec)
}
