package analysis

import (
	"math"
	"math/cmplx"
	"sort"
)

const (
	slopeBlocks = 20

	leastJumpDeg = 0.8 // a millisecond lost of a 997 Hz tone makes 1.1°
	jumpSigmas   = 14.0
	jumpScatters = 10.0
)

// jumps notes where the phase does not go on as it did: samples lost there, or played twice. A
// block takes in a jump over two hops, so the phase is compared over three, and must go on
// afterwards as it went before: a change of pitch, or a drift of the clock, is no jump.
func (v *view) jumps() {
	for b := v.from + 1; b < v.to; b++ {
		if v.lost(b) {
			continue
		}
		before := max(v.from, b-3)
		for before > v.from && v.lost(before) {
			before--
		}
		gap := b - before
		if gap > runningBlocks || v.lost(before) {
			continue
		}
		slope, scatter := v.slope(before)
		least := math.Max(leastJumpDeg*math.Pi/180, math.Max(jumpScatters*scatter, jumpSigmas*v.sigma)) *
			math.Max(1, float64(gap)/slopeBlocks*2)
		if math.Abs(v.beyond(before, b, slope)) <= least {
			continue
		}
		after := min(b+3, v.to-1)
		if v.lost(after) {
			continue
		}
		rad := v.beyond(before, after, slope)
		goesOn := after+3 >= v.to || v.lost(after+3) || math.Abs(v.beyond(after, after+3, slope)) <= least
		if math.Abs(rad) <= least || !goesOn {
			continue
		}
		v.leaps = append(v.leaps, leap{v.loudest(before, after), rad})
		b = after + 3
	}
}

func (v *view) lost(b int) bool { return cmplx.Abs(v.block(b)) < lostFrac*v.peak }

// beyond returns how far the phase gets from one block to another beyond its usual slope.
func (v *view) beyond(from, to int, slope float64) float64 {
	return math.Remainder(turnOf(v.block(from), v.block(to))-float64(to-from)*slope, 2*math.Pi)
}

// slope returns the median turn of phase from block to block in the second before a block (at the
// beginning: in the first second) and its robust standard deviation.
func (v *view) slope(b int) (median, scatter float64) {
	from := max(v.from, b-slopeBlocks)
	to := min(from+slopeBlocks, v.to-1)
	var room [slopeBlocks]float64
	steps := room[:0]
	for k := from; k < to; k++ {
		if !v.lost(k) && !v.lost(k+1) {
			steps = append(steps, turnOf(v.block(k), v.block(k+1)))
		}
	}
	if len(steps) == 0 {
		return 0, math.Pi
	}
	sort.Float64s(steps)
	median = steps[len(steps)/2]
	for i, s := range steps {
		steps[i] = math.Abs(s - median)
	}
	sort.Float64s(steps)
	return median, 1.4826 * steps[len(steps)/2]
}

// loudest returns the block, of some, in whose first hop the fit leaves most.
func (v *view) loudest(from, to int) int {
	best := from
	for b := from; b <= to; b++ {
		if v.t.leftover[b] > v.t.leftover[best] {
			best = b
		}
	}
	return best
}
