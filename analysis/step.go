package analysis

import (
	"fmt"
	"math"
	"math/cmplx"
)

const (
	// The last half second of each level of the test signal's tone, clear of step and edge.
	stepLastSec  = 0.5
	stepClearSec = 0.015
)

// StepDB returns the level difference, in dB, between the last half second of the test signal's
// tone at -6 dBFS and that of the tone at -16 dBFS, with its standard uncertainty from the scatter
// of the fits. The softer level decides it, with three degrees of freedom, so k for 95 % is 3.2. A recorder that leaves gain alone gives [SignalStepDB], 10; automatic gain makes the
// step smaller, since by then it has settled. In the takes themselves nothing else shows it.
func StepDB(s Samples, p Placement) (stepDB, standardUDB float64, err error) {
	if err := checkRate(s.RateHz()); err != nil {
		return 0, 0, err
	}
	if !(p.Ratio > 0.5 && p.Ratio < 2) {
		return 0, 0, fmt.Errorf("a clock ratio of %g is none", p.Ratio)
	}
	fit, err := newBlockFit(s.RateHz(), ToneHz/p.Ratio)
	if err != nil {
		return 0, 0, err
	}
	loud, err := lastOf(s, p, fit, toneStepSec)
	if err != nil {
		return 0, 0, err
	}
	soft, err := lastOf(s, p, fit, toneEndSec)
	if err != nil {
		return 0, 0, err
	}
	return loud.LevelDBFS - soft.LevelDBFS, math.Hypot(repeatsDB(loud), repeatsDB(soft)), nil
}

// repeatsDB is the larger of a tone's standard error and half the difference of its halves.
func repeatsDB(t Tone) float64 { return math.Max(t.StdErrDB, math.Abs(t.HalvesDB)) }

// lastOf measures the tone before a second of the signal.
func lastOf(s Samples, p Placement, fit *blockFit, endSec float64) (Tone, error) {
	rateHz, hop := s.RateHz(), len(fit.rise)
	first := int64(math.Round(p.TakeSec(endSec-stepLastSec) * rateHz))
	hops := int((p.TakeSec(endSec-stepClearSec)*rateHz - float64(first)) / float64(hop))
	x := make([]float64, hop)
	var run steadyRun
	var last hopSums
	for i := range hops {
		frame := first + int64(i*hop)
		n, err := readFull(s, x, max(0, frame))
		if err != nil {
			return Tone{}, err
		}
		if n < hop || frame < 0 {
			return Tone{}, fmt.Errorf("the take does not hold the test signal's tone at %.3g s: %w", p.TakeSec(endSec), ErrNoSignal)
		}
		sums := fit.sums(x)
		if i > 0 {
			back := cmplx.Rect(1, -2*math.Pi*turns(fit.freqHz, i*hop, rateHz))
			run.blocks = append(run.blocks, fit.estimate(last, sums)*back)
		}
		last = sums
	}
	hopSec := float64(hop) / rateHz
	run.settle(0, hopSec)
	var t Tone
	run.level(&t, hopSec)
	if t.LevelDBFS <= FloorDBFS || math.IsNaN(t.LevelDBFS+t.StdErrDB) {
		return Tone{}, fmt.Errorf("nothing stands where the test signal's tone should: %w", ErrNoSignal)
	}
	return t, nil
}
