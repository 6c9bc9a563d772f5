package rehearsal

import (
	"math"

	"padproof/analysis"
)

// gain multiplies.
type gain float64

func (g gain) run(block []float64) []float64 {
	for i := range block {
		block[i] *= float64(g)
	}
	return block
}

func (gain) rest() []float64 { return nil }

// A spell changes the samples from one frame up to another, each by itself.
type spell struct {
	from, to int64
	change   func(x float64) float64
	at       int64
}

func (s *spell) run(block []float64) []float64 {
	for i := max(s.from-s.at, 0); i < min(s.to-s.at, int64(len(block))); i++ {
		block[i] = s.change(block[i])
	}
	s.at += int64(len(block))
	return block
}

func (*spell) rest() []float64 { return nil }

// A stop lets so many frames through and none after.
type stop struct{ left int64 }

func (s *stop) run(block []float64) []float64 {
	block = block[:min(int64(len(block)), s.left)]
	s.left -= int64(len(block))
	return block
}

func (*stop) rest() []float64 { return nil }

// Riding is an automatic gain that makes level differences half as large in dB: what lies
// as much under its target comes out half as far under it. It follows the mean square with
// a time constant, and its gain never goes beyond 20 dB either way.
type riding struct {
	target float64 // mean square
	mean   float64 // as followed
	follow float64 // part of each sample's square that goes into it
}

const (
	ridingSec  = 0.1
	ridingMost = 10.0
)

func newRiding(target, rateHz float64) *riding {
	return &riding{target: target, mean: target, follow: 1 - math.Exp(-1/(ridingSec*rateHz))}
}

func (r *riding) run(block []float64) []float64 {
	for i, x := range block {
		r.mean += r.follow * (x*x - r.mean)
		g := math.Sqrt(math.Sqrt(r.target / r.mean))
		block[i] = x * math.Max(1/ridingMost, math.Min(g, ridingMost))
	}
	return block
}

func (*riding) rest() []float64 { return nil }

// A swell raises and lowers the level by some dB, in a sine over so many frames.
type swell struct {
	db, perFrame float64
	at           float64 // frames since the sine began
}

func newSwell(db, frames float64, from int64) *swell {
	return &swell{db: db, perFrame: 2 * math.Pi / frames, at: -float64(from)}
}

func (s *swell) run(block []float64) []float64 {
	for i := range block {
		block[i] *= analysis.RatioFromDB(s.db * math.Sin(s.perFrame*s.at))
		s.at++
	}
	return block
}

func (*swell) rest() []float64 { return nil }
