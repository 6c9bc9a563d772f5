package analysis

import (
	"errors"
	"fmt"
	"math"
	"math/cmplx"
	"sort"
)

// A Measurement is what one pass over a channel gives.
type Measurement struct {
	Tones []Tone // one a stretch, in order of time

	Seconds  float64 // length of what could be read
	PeakDBFS float64 // largest magnitude, as the level of a sine that reaches it
	PeakSec  float64 // where it stands first
	RMSDBFS  float64 // of everything, bad samples counted as nothing
	OffsetFS float64 // mean of everything, in parts of full scale
	Clipped  Clipped
	Bad      Bad
	Track    Track
}

// Bad counts samples that are no numbers, or too large to be any: NaN, infinite, beyond 10^9 times
// full scale. They are measured as zeros, so a tone is not steady across them.
type Bad struct {
	Count    int64
	FirstSec float64 // of the first; 0 where there is none
}

const (
	largestSample = 1e9

	// A chunk is as many whole hops as fit into this many samples, at least one.
	chunkSamples = 16384
)

// MeasureTones reads the whole channel once, from the first sample to the last, and measures the
// tone in each stretch, as [FindTones] or [FindTonesAt] return them, and what the pass shows beside
// it. No stretches at all are allowed: then only what needs none is filled in.
//
// A stretch is a start: the steady part is looked for within it and as far beyond as the tone
// stands, up to half way to the next stretch. The frequency must be right within 0.2 Hz for all
// figures to hold. Where the tone does not stand long enough the error is a [TooShortError], where
// none stands it is [ErrNoTone]. A
// channel that ends before Frames says so is measured as far as it goes; one without a single
// sample gives a TooShortError where there are stretches, else an empty Measurement.
func MeasureTones(s Samples, stretches []Stretch) (*Measurement, error) {
	p, err := newPass(s, stretches)
	if err != nil {
		return nil, err
	}
	if err := p.read(s); err != nil {
		return nil, err
	}
	m := p.measurement()
	for i := range p.watches {
		tone, err := p.tone(i)
		if err != nil {
			return nil, err
		}
		m.Tones = append(m.Tones, tone)
	}
	m.noteOverload()
	return m, nil
}

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
	p := &pass{rateHz: rateHz, hop: hop, flat: flatFinder{rateHz: rateHz}}
	p.track.HopSec = float64(hop) / rateHz
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
		p.track.spans = append(p.track.spans, trackSpan{freqHz: g.FreqHz})
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
		sum, square := plainSums(x)
		if !(square < largestSample*largestSample) {
			p.mend(x)
			sum, square = plainSums(x)
		}
		p.count(x, sum, square)
		return
	}
	fit := p.watches[p.now].fit
	sums := fit.sums(x)
	if !(sums.square < largestSample*largestSample) {
		p.mend(x)
		sums = fit.sums(x)
	}
	p.hopDone(x, fit, sums)
	p.count(x, sums.x, sums.square)
}

// hopDone enters one whole hop, and the block that ends with it, into the track.
func (p *pass) hopDone(x []float64, fit *blockFit, sums hopSums) {
	t := &p.track
	hop := len(t.square)
	t.square = append(t.square, float32(sums.square/float64(p.hop)))
	t.leftover = append(t.leftover, float32(fit.leftover(sums)))
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
		t.spans[p.now].from = hop
		p.last = p.watches[p.now].fit.sums(x)
	}
}

func plainSums(x []float64) (sum, square float64) {
	for _, v := range x {
		sum += v
		square += v * v
	}
	return sum, square
}

// count keeps the plain figures.
func (p *pass) count(x []float64, sum, square float64) {
	low, high := extremes(x)
	p.low, p.high = math.Min(p.low, low), math.Max(p.high, high)
	if peak := math.Max(-low, high); peak > p.peak {
		p.peak = peak
		for i, v := range x {
			if math.Abs(v) == peak {
				p.peakAt = p.frames + int64(i)
				break
			}
		}
	}
	p.sum += sum
	p.square += square
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

func (p *pass) measurement() *Measurement {
	m := &Measurement{
		Seconds: float64(p.frames) / p.rateHz, PeakDBFS: DBFSFromPeak(p.peak), PeakSec: float64(p.peakAt) / p.rateHz,
		RMSDBFS: FloorDBFS, Clipped: p.flat.found, Bad: p.bad, Track: p.track,
	}
	if p.frames > 0 {
		m.RMSDBFS = DBFSFromMeanSquare(p.square / float64(p.frames))
		m.OffsetFS = p.sum / float64(p.frames)
	}
	return m
}

// noteOverload counts as clipped a tone that would not fit under full scale although no sample
// lies above it: its peaks are cut so slightly that hardly a run of equal samples shows.
func (m *Measurement) noteOverload() {
	for _, t := range m.Tones {
		if m.Clipped.Runs == 0 && t.LevelDBFS > overloadDBFS && m.PeakDBFS <= 0 {
			m.Clipped = Clipped{Runs: 1, Samples: 1, FirstSec: m.PeakSec, LevelDBFS: m.PeakDBFS}
		}
	}
}

// overloadDBFS leaves room for the largest step of a 16-bit sine at full scale.
const overloadDBFS = 0.001
