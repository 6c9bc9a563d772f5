package analysis

import (
	"fmt"
	"math"
	"sort"
)

// A noisePass holds what is gathered while noise is read.
type noisePass struct {
	rateHz     float64
	n, hop     int
	halves     [2][]float64 // the last two half segments
	calm       *averager
	bursts     *averager
	hops       []float32 // power of each hop, above the highpass
	badHalf    bool      // the half segment before this one had bad samples
	work       []float64
	quasi      *quasiPeak
	first      int64
	frames     int64
	offset     float64
	peak, past float64
	high       float64 // of the highpass's first half
	higher     float64 // and of its second
	fall       float64 // by which they fall a sample
	equal      int64
	bad        Bad
}

func newNoisePass(rateHz float64) *noisePass {
	return &noisePass{rateHz: rateHz, quasi: newQuasiPeak(rateHz), fall: math.Exp(-2 * math.Pi * hopHighpassHz / rateHz)}
}

// start makes room for a part of so many frames: segments as usual, shorter where few would fit.
func (p *noisePass) start(frames int) {
	p.n = segmentLength(p.rateHz)
	for p.n > leastSegment && p.n*(leastSegments+1)/2 > frames {
		p.n /= 2
	}
	p.hop = p.n / 2 / hopsOfHalf
	p.calm, p.bursts = newAverager(p.n), newAverager(p.n)
	p.halves = [2][]float64{make([]float64, p.n/2), make([]float64, p.n/2)}
}

func (p *noisePass) read(s Samples, first, last int64) error {
	for at := first; at < last; {
		half := p.halves[1][:min(int64(p.n/2), last-at)]
		got, err := readFull(s, half, at)
		if err != nil {
			return err
		}
		p.take(half[:got])
		at += int64(got)
		if got < len(half) {
			break
		}
		p.halves[0], p.halves[1] = p.halves[1], p.halves[0]
	}
	return nil
}

// take measures one half segment, or what is left at the end.
func (p *noisePass) take(x []float64) {
	bad := p.mend(x)
	if p.frames == 0 && len(x) > 0 {
		p.offset = sum(x, 0, len(x)-1) / float64(len(x))
		p.past = x[0] - p.offset
	}
	for rest := x; len(rest) > 0; {
		n := min(p.hop, len(rest))
		power := p.weigh(rest[:n])
		if n == p.hop {
			p.hops = append(p.hops, float32(power))
		}
		rest = rest[n:]
	}
	p.frames += int64(len(x))
	if p.quasi != nil {
		p.quasi.take(x)
	}
	if len(x) == p.n/2 && len(p.hops) >= 2*hopsOfHalf {
		if p.burst() || bad || p.badHalf {
			p.bursts.add(p.halves[0], x)
		} else {
			p.calm.add(p.halves[0], x)
		}
	}
	p.badHalf = bad
}

// weigh takes the mean out of a hop and returns its power above the highpass.
func (p *noisePass) weigh(x []float64) float64 {
	past, high, higher, fall, power, offset := p.past, p.high, p.higher, p.fall, 0.0, p.offset
	equal := int64(0)
	for i, v := range x {
		v -= offset
		x[i] = v
		once := fall * (high + v - past)
		higher = fall * (higher + once - high)
		high = once
		power += higher * higher
		if v == past {
			equal++
		}
		past = v
	}
	low, top := extremes(x)
	p.peak = math.Max(p.peak, math.Max(-low, top))
	p.past, p.high, p.higher = past, high, higher
	p.equal += equal
	return power / float64(len(x))
}

// mend sets bad samples to the mean, counts them and says whether there were any.
func (p *noisePass) mend(x []float64) (found bool) {
	for i, v := range x {
		if math.Abs(v) <= largestSample {
			continue
		}
		x[i] = p.offset
		if p.bad.Count == 0 {
			p.bad.FirstSec = float64(p.first+p.frames+int64(i)) / p.rateHz
		}
		p.bad.Count++
		found = true
	}
	return found
}

// burst says whether a burst lies in the last two half segments.
func (p *noisePass) burst() bool {
	p.work = p.work[:0]
	for _, v := range p.hops[len(p.hops)-2*hopsOfHalf:] {
		p.work = append(p.work, float64(v))
	}
	sort.Float64s(p.work)
	return p.work[len(p.work)-1] > noiseBurst*p.work[len(p.work)/2]
}

func (p *noisePass) noise(mainsHz float64) (*Noise, error) {
	sec := float64(p.frames) / p.rateHz
	if sec < leastNoiseSec {
		return nil, fmt.Errorf("%.2f s of noise, need at least %.0f s: %w", sec, leastNoiseSec, ErrNoiseTooShort)
	}
	if p.equal == p.frames {
		return nil, ErrSilent
	}
	from := float64(p.first) / p.rateHz
	n := &Noise{
		FromSec: from, ToSec: from + sec, LeftOut: p.bursts.segments, Bad: p.bad,
		Band: FreqRange{bandLowHz, bandHigh(p.rateHz)}, OffsetFS: p.offset, PeakDBFS: DBFSFromPeak(p.peak),
		SpreadDB: p.spreadDB(), Coarse: float64(p.equal) > coarsePart*float64(p.frames),
	}
	if n.Spectrum = p.calm.spectrum(p.rateHz); n.Spectrum == nil {
		n.Spectrum = p.bursts.spectrum(p.rateHz)
	}
	if p.quasi != nil {
		n.QuasiPeak = p.quasi.reading()
	}
	n.AWeightedDBFS = DBFSFromMeanSquare(n.Spectrum.aWeightedMeanSquare())
	n.sort(mainsHz)
	return n, nil
}

// spreadDB compares the louder tenth of the hops with the quieter.
func (p *noisePass) spreadDB() float64 {
	p.work = p.work[:0]
	for _, v := range p.hops {
		p.work = append(p.work, float64(v))
	}
	sort.Float64s(p.work)
	low, high := p.work[len(p.work)/10], p.work[len(p.work)-1-len(p.work)/10]
	return DBFSFromMeanSquare(high) - DBFSFromMeanSquare(low)
}
