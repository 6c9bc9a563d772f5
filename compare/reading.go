package compare

import (
	"math"

	"padproof/analysis"
	"padproof/compare/uncertainty"
)

// Gains are what the rig may do to a level difference: half-widths of
// rectangles, in dB, and the gain raised on purpose for after.
type Gains struct {
	LinearityDB  float64 // largest error of a level difference in the range used
	DriftDB      float64 // how far a knob may have moved between the takes
	AfterDB      float64 // gain raised for after against before
	AfterDoubtDB float64 // half-width of AfterDB
}

// ReadLoss is the insertion loss on the bench from the same tone in before and
// in after, at before's frequency.
func ReadLoss(before, after analysis.Tone, g Gains) LossReading {
	r := LossReading{
		LossDB: before.LevelDBFS - after.LevelDBFS + g.AfterDB,
		FreqHz: before.FreqHz,
		Terms: []uncertainty.Term{
			repeatability(beforeRepeats, before),
			repeatability(afterRepeats, after),
		},
	}
	r.Terms = append(r.Terms, g.Terms()...)
	return r
}

// Terms are the rig's share of the uncertainty of a level difference; what is
// nil is left out.
func (g Gains) Terms() []uncertainty.Term {
	var terms []uncertainty.Term
	for _, t := range []struct {
		source string
		half   float64
	}{{linearitySrc, g.LinearityDB}, {driftSrc, g.DriftDB}, {afterGainSrc, g.AfterDoubtDB}} {
		if t.half > 0 {
			terms = append(terms, uncertainty.FromRectangle(t.source, t.half, 1))
		}
	}
	return terms
}

// repeatability is the larger of the blocks' standard error and half the
// difference of the take's two halves.
func repeatability(source string, t analysis.Tone) uncertainty.Term {
	return uncertainty.FromSample(source, math.Max(t.StdErrDB, math.Abs(t.HalvesDB)), float64(t.Blocks-1), 1)
}
