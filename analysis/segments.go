package analysis

import (
	"math"
	"math/cmplx"
	"sort"
)

const (
	// Segments are this long at 44.1 to 96 kHz, and about the same time at other rates.
	usualSegment = 32768
	widestBinHz  = 3.0
	finestBinHz  = 1.0
	leastSegment = 256

	// Segments wanted within a stretch at the least, where it is short.
	leastSegments = 3

	// What a block may differ from the stretch's level, noise apart, for its segment to count.
	segmentWithinDB = 1.5
	// A hop is a burst if it is this many times as strong as the segment's median one, but only
	// where it also stands above this part of the tone's power.
	burstTimes    = 16.0
	burstToneFrac = 1e-11
)

// A segmenter cuts the inside of a stretch into half-overlapped segments and has those averaged in
// which the tone stands steady and no click or burst is heard.
type segmenter struct {
	n, hop     int
	rateHz     float64
	peak       float64      // of the tone
	start, end int64        // frames of the stretch
	at         int64        // frame of the first half's first sample
	kept       [2][]float64 // the segment's halves as they fill
	mean       *averager
	result     *Spectrum // once the stretch is over; nil if no segment served
	work       []float64
}

func newSegmenter(g Stretch, rateHz float64) *segmenter {
	s := &segmenter{n: segmentLength(rateHz), hop: hopSamples(rateHz), rateHz: rateHz, peak: PeakFromDBFS(g.LevelDBFS)}
	s.start, s.end = int64(math.Ceil(g.StartSec*rateHz)), int64(math.Floor(g.EndSec*rateHz))
	for s.n > leastSegment && int64(s.n)*(leastSegments+1)/2 > s.end-s.start {
		s.n /= 2
	}
	s.at = s.start
	return s
}

// segmentLength returns the power of two that makes a bin 1 to 3 Hz wide.
func segmentLength(rateHz float64) int {
	n := usualSegment
	for rateHz/float64(n) > widestBinHz {
		n *= 2
	}
	for rateHz/float64(n) < finestBinHz {
		n /= 2
	}
	return n
}

// take gets every hop in order, each after the track has it.
func (s *segmenter) take(x []float64, frame int64, track *Track) {
	if s == nil {
		return
	}
	from, to := max(frame, s.start)-frame, min(frame+int64(len(x)), s.end)-frame
	if from >= to {
		return
	}
	if s.mean == nil {
		s.mean = newAverager(s.n)
		s.kept = [2][]float64{make([]float64, 0, s.n/2), make([]float64, 0, s.n/2)}
	}
	for x = x[from:to]; len(x) > 0; {
		half := &s.kept[0]
		if len(*half) == s.n/2 {
			half = &s.kept[1]
		}
		n := min(len(x), s.n/2-len(*half))
		*half = append(*half, x[:n]...)
		x = x[n:]
		if len(s.kept[1]) < s.n/2 {
			continue
		}
		if s.steady(track) {
			s.mean.add(s.kept[0], s.kept[1])
		}
		s.kept[0], s.kept[1] = s.kept[1], s.kept[0][:0]
		s.at += int64(s.n / 2)
	}
	if frame+int64(to) == s.end {
		s.finish()
	}
}

// finish makes the spectrum and lets the room for it go.
func (s *segmenter) finish() {
	if s.mean != nil {
		s.result = s.mean.spectrum(s.rateHz)
		s.mean, s.kept = nil, [2][]float64{}
	}
}

// steady judges the segment just filled: no burst in any hop that it touches, the level right in
// the blocks that lie wholly in it.
func (s *segmenter) steady(t *Track) bool {
	hop := int64(s.hop)
	from, to := int(s.at/hop), min(int((s.at+int64(s.n)+hop-1)/hop), len(t.leftover))
	if from >= to {
		return true
	}
	s.work = s.work[:0]
	for _, v := range t.leftover[from:to] {
		s.work = append(s.work, float64(v))
	}
	sort.Float64s(s.work)
	usual, most := s.work[len(s.work)/2], s.work[len(s.work)-1]
	if most > burstTimes*usual && most > burstToneFrac*s.peak*s.peak {
		return false
	}
	// The amplitude fitted to a block scatters by the square root of 1.5·leftover/hop.
	noise := steadySigmas * math.Sqrt(1.5*usual/float64(s.hop)) / s.peak
	first, next := from+1, to-2 // blocks
	return first >= next || s.even(t.blocks[first:next], noise)
}

// even says whether blocks keep the tone's level and turn evenly; noise is what it adds to either,
// as a part of the tone's amplitude.
func (s *segmenter) even(blocks []complex64, noise float64) bool {
	s.work = s.work[:0]
	for b, z := range blocks {
		if math.Abs(cmplx.Abs(complex128(z))/s.peak-1) > RatioFromDB(segmentWithinDB)-1+noise {
			return false
		}
		if b > 0 {
			s.work = append(s.work, turnOf(complex128(blocks[b-1]), complex128(z)))
		}
	}
	if len(s.work) == 0 {
		return true
	}
	sort.Float64s(s.work)
	middle, within := s.work[len(s.work)/2], steadyWithinRad+math.Sqrt2*noise
	return s.work[len(s.work)-1]-middle <= within && middle-s.work[0] <= within
}
