package analysis

import (
	"errors"
	"fmt"
	"math"
	"math/cmplx"
	"sort"
)

// A pass holds what is gathered while a channel is read.
type pass struct {
	rateHz  float64
	hop     int
	watches []watch
	now     int // the watch whose frequency is fitted
	track   Track
	last    hopSums // of the hop before

	frames      int64
	peak        float64
	peakAt      int64
	sum, square float64
	low, high   float64 // extremes of the chunk
	bad         Bad
	flat        flatFinder
}

// A watch is a stretch being measured.
type watch struct {
	stretch Stretch
	fit     *blockFit
	until   int // first hop that belongs to the next watch
	noise   *segmenter
}

func newPass(s Samples, stretches []Stretch) (*pass, error) {
	rateHz := s.RateHz()
	if err := checkRate(rateHz); err != nil {
		return nil, err
	}
	hop := hopSamples(rateHz)
	p := &pass{rateHz: rateHz, hop: hop, flat: flatFinder{rateHz: rateHz, hop: hop}}
	p.track.HopSec, p.track.rateHz = float64(hop)/rateHz, rateHz
	p.track.room(int(min(s.Frames()/int64(hop)+1, mostRoom)))
	ordered := append([]Stretch(nil), stretches...)
	sort.SliceStable(ordered, func(i, j int) bool { return ordered[i].StartSec < ordered[j].StartSec })
	for i, g := range ordered {
		if err := g.check(rateHz); err != nil {
			return nil, err
		}
		fit, err := newBlockFit(rateHz, g.FreqHz)
		if err != nil {
			return nil, err
		}
		w := watch{stretch: g, fit: fit, until: math.MaxInt, noise: newSegmenter(g, rateHz)}
		if i+1 < len(ordered) {
			w.until = int((g.EndSec + ordered[i+1].StartSec) / 2 / p.track.HopSec)
		}
		p.watches = append(p.watches, w)
	}
	if len(ordered) > 0 {
		p.track.spans = []trackSpan{{freqHz: ordered[0].FreqHz}}
	}
	return p, nil
}

func (g Stretch) check(rateHz float64) error {
	if !(g.FreqHz >= lowestToneHz*(1-nearFrac) && g.FreqHz <= highestToneHz(rateHz)) {
		return fmt.Errorf("a tone of %g Hz cannot be measured at a sample rate of %g Hz", g.FreqHz, rateHz)
	}
	if !(g.StartSec >= 0 && g.EndSec > g.StartSec) || math.IsInf(g.EndSec, 0) || math.IsNaN(g.LevelDBFS) {
		return errors.New("a stretch of tone needs a start, a later end and a level")
	}
	return nil
}

// read goes through the channel chunk by chunk. The end of each chunk stays in front of the next.
func (p *pass) read(s Samples) error {
	size := max(1, chunkSamples/p.hop) * p.hop
	buffer := make([]float64, flatLead+size)
	lead := 0
	for {
		fresh := buffer[lead : lead+size]
		if left := s.Frames() - p.frames; left < int64(size) {
			fresh = fresh[:max(0, left)]
		}
		n, err := readFull(s, fresh, p.frames)
		if err != nil {
			return err
		}
		last := n < size
		p.chunk(buffer[:lead+n], lead, last)
		if last {
			return nil
		}
		copy(buffer, buffer[lead+n-flatLead:lead+n])
		lead = flatLead
	}
}

func (p *pass) chunk(b []float64, lead int, last bool) {
	frame := p.frames - int64(lead)
	p.low, p.high = math.Inf(1), math.Inf(-1)
	for rest := b[lead:]; len(rest) > 0; {
		n := min(p.hop, len(rest))
		p.take(rest[:n])
		rest = rest[n:]
	}
	if len(b) > lead {
		p.flat.chunk(b, lead, frame, p.low, p.high, last)
	}
}

// take measures one hop, or what is left at the end.
func (p *pass) take(x []float64) {
	if len(p.watches) == 0 || len(x) < p.hop {
		p.count(x, p.mended(x, plainSums))
		return
	}
	fit := p.watches[p.now].fit
	sums := p.mended(x, fit.sums)
	p.hopDone(x, fit, sums)
	p.count(x, sums)
}

// mended sums up a hop, anew with bad samples taken out if there are any.
func (p *pass) mended(x []float64, sums func([]float64) hopSums) hopSums {
	s := sums(x)
	if !(s.square < largestSample*largestSample) {
		p.mend(x)
		s = sums(x)
	}
	return s
}

// hopDone enters one whole hop, and the block that ends with it, into the track.
func (p *pass) hopDone(x []float64, fit *blockFit, sums hopSums) {
	t := &p.track
	hop := len(t.square)
	t.square = append(t.square, float32(sums.square/float64(p.hop)))
	t.leftover = append(t.leftover, float32(fit.leftover(sums)))
	t.reach = append(t.reach, float32((sums.high-sums.low)/2))
	if hop > 0 {
		middle := int(p.frames)
		back := cmplx.Rect(1, -2*math.Pi*turns(fit.freqHz, middle, p.rateHz))
		t.blocks = append(t.blocks, complex64(fit.estimate(p.last, sums)*back))
	}
	p.last = sums
	w := &p.watches[p.now]
	w.noise.take(x, p.frames, t)
	if hop+1 >= w.until { // the next block is fitted at the next frequency
		p.now++
		fit = p.watches[p.now].fit
		t.spans = append(t.spans, trackSpan{from: hop, freqHz: fit.freqHz})
		p.last = fit.sums(x)
	}
}

// plainSums are those sums of a hop that need no frequency.
func plainSums(x []float64) hopSums {
	s := hopSums{low: math.Inf(1), high: math.Inf(-1)}
	for _, v := range x {
		s.x += v
		s.square += v * v
		s.low, s.high = math.Min(s.low, v), math.Max(s.high, v)
	}
	return s
}

// count keeps the plain figures.
func (p *pass) count(x []float64, s hopSums) {
	if peak := math.Max(-s.low, s.high); peak > p.peak {
		p.peak = peak
		for i, v := range x {
			if math.Abs(v) == peak {
				p.peakAt = p.frames + int64(i)
				break
			}
		}
	}
	p.low, p.high = math.Min(p.low, s.low), math.Max(p.high, s.high)
	p.sum += s.x
	p.square += s.square
	p.frames += int64(len(x))
}

// mend sets bad samples to zero and counts them.
func (p *pass) mend(x []float64) {
	for i, v := range x {
		if math.Abs(v) <= largestSample {
			continue
		}
		x[i] = 0
		if p.bad.Count == 0 {
			p.bad.FirstSec = float64(p.frames+int64(i)) / p.rateHz
		}
		p.bad.Count++
	}
}
