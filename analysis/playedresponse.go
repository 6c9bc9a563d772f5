package analysis

import (
	"fmt"
	"math"
	"math/cmplx"
)

const (
	// Segments of what was played, half overlapped, and how many at the most are used.
	playedSegmentSec   = 4.0
	mostPlayedSegments = 60
	leastPlayedSegs    = 2

	// Less of the power than this shared with what was played is nothing to go by.
	leastCoherence = 0.1
)

// PlayedResponse returns the transfer from before to after of anything that was played, as
// [FindPlayed] finds it: noise, a sweep, music. Each take's transfer from what was played is
// the cross-spectrum over the spectrum of played, averaged over segments of 4 s (Welch's method)
// and over the bands of [ResponseBands], and the point is the ratio of the two: noise of neither
// take biases it, and what player and rig do to the signal falls out. Of long recordings 60 segments
// spread over all are used.
//
// StandardUDB comes from the coherence of either take with what was played: a relative error of
// √((1 − γ²)/(2 n γ²)) with n averages (J. S. Bendat and A. G. Piersol, Random Data; from memory),
// n the bandwidth times the time. A point is left out where the signal has no content: where the
// coherence is below 0.1 or the loss is less sure than a factor of two. A steep slope within a band
// that holds few lines of music may put a point in error by a part of the slope.
func PlayedResponse(played, before, after Samples) ([]ResponsePoint, error) {
	atBefore, err := FindPlayed(played, before)
	if err != nil {
		return nil, fmt.Errorf("before: %w", err)
	}
	atAfter, err := FindPlayed(played, after)
	if err != nil {
		return nil, fmt.Errorf("after: %w", err)
	}
	rateHz := math.Min(played.RateHz(), math.Min(before.RateHz(), after.RateHz()))
	bands := ResponseBands(rateHz)
	c := newCrossed(int(bands[len(bands)-1].HighHz*playedSegmentSec) + 1)
	starts := segmentStarts(float64(played.Frames()) / played.RateHz())
	for _, fromSec := range starts {
		if err := c.add(fromSec, [3]Samples{played, before, after}, [3]Placement{{Ratio: 1}, atBefore, atAfter}); err != nil {
			return nil, err
		}
	}
	if c.segments < leastPlayedSegs {
		return nil, fmt.Errorf("%w: the takes share less than %.0f s of what was played", ErrNoResponse, 1.5*playedSegmentSec)
	}
	return c.points(bands), nil
}

// segmentStarts spreads segments over what was played, half overlapped or further apart.
func segmentStarts(longSec float64) []float64 {
	const hop = playedSegmentSec / 2
	count := min(int((longSec-playedSegmentSec)/hop)+1, mostPlayedSegments)
	starts := make([]float64, 0, max(0, count))
	for i := range count {
		at := 0.0
		if count > 1 {
			at = (longSec - playedSegmentSec) * float64(i) / float64(count-1)
		}
		starts = append(starts, at)
	}
	return starts
}

// crossed are the sums of spectra, bin by bin: p of what was played, x of before, y of after.
type crossed struct {
	count      int
	segments   int
	pp, xx, yy []float64
	xp, yp     []complex128
}

func newCrossed(count int) *crossed {
	return &crossed{
		count: count, pp: make([]float64, count), xx: make([]float64, count), yy: make([]float64, count),
		xp: make([]complex128, count), yp: make([]complex128, count),
	}
}

// add takes one segment, unless a take does not hold all of it.
func (c *crossed) add(fromSec float64, takes [3]Samples, at [3]Placement) error {
	g := gate{fromSec, fromSec + playedSegmentSec, playedSegmentSec / 2, playedSegmentSec / 2}
	var bins [3][]complex128
	for i, s := range takes {
		if at[i].TakeSec(g.fromSec) < 0 || at[i].TakeSec(g.toSec)*s.RateHz() > float64(s.Frames())+1 {
			return nil
		}
	}
	for i, s := range takes {
		var err error
		if bins[i], err = newClockSpectrum(s, at[i], g, c.count).sum(c.count); err != nil {
			return err
		}
	}
	for k, p := range bins[0] {
		x, y := bins[1][k], bins[2][k]
		c.pp[k] += square(p)
		c.xx[k] += square(x)
		c.yy[k] += square(y)
		c.xp[k] += x * cmplx.Conj(p)
		c.yp[k] += y * cmplx.Conj(p)
	}
	c.segments++
	return nil
}

func (c *crossed) points(bands []Band) []ResponsePoint {
	var points []ResponsePoint
	for _, b := range bands {
		low, high := int(math.Ceil(b.LowHz*playedSegmentSec)), int(math.Floor(b.HighHz*playedSegmentSec))
		var pp, xx, yy float64
		var xp, yp complex128
		for k := low; k <= high && k < c.count; k++ {
			pp += c.pp[k]
			xx += c.xx[k]
			yy += c.yy[k]
			xp += c.xp[k]
			yp += c.yp[k]
		}
		averages := float64((high-low+1)*c.segments) / 2
		u := math.Hypot(coherentError(xp, pp, xx, averages), coherentError(yp, pp, yy, averages))
		if !(u < 0.5) {
			continue
		}
		h := yp / xp
		points = append(points, ResponsePoint{
			FreqHz: b.FreqHz, LossDB: -DBFromRatio(cmplx.Abs(h)), StandardUDB: math.Hypot(dbPerPart*u, leastUDB),
			LowHz: b.LowHz, HighHz: b.HighHz, Transfer: h,
		})
	}
	return points
}

// coherentError returns the relative standard error of a transfer's size, +Inf where there is next
// to no coherence.
func coherentError(cross complex128, pp, yy, averages float64) float64 {
	coherence := square(cross) / (pp * yy)
	if !(coherence >= leastCoherence) {
		return math.Inf(1)
	}
	return math.Sqrt(math.Max(0, 1-coherence) / (2 * averages * coherence))
}

// ToneResponse returns the transfer between steady tones one after another, as [MeasureTones] gave
// them of either take: a point for each frequency that both hold within 1 %, in before's order; of
// several tones of one frequency the first counts. LowHz and HighHz are the frequency, Transfer is
// without its phase, and StandardUDB is the larger of scatter and drift of either tone.
func ToneResponse(before, after []Tone) []ResponsePoint {
	var points []ResponsePoint
	for _, b := range before {
		same := func(freqHz float64) bool { return math.Abs(freqHz-b.FreqHz) <= nearFrac*b.FreqHz }
		known := false
		for _, p := range points {
			known = known || same(p.FreqHz)
		}
		for _, a := range after {
			if known || !same(a.FreqHz) {
				continue
			}
			lossDB := b.LevelDBFS - a.LevelDBFS
			points = append(points, ResponsePoint{
				FreqHz: b.FreqHz, LowHz: b.FreqHz, HighHz: b.FreqHz, LossDB: lossDB,
				StandardUDB: math.Hypot(repeatsDB(b), repeatsDB(a)),
				Transfer:    complex(RatioFromDB(-lossDB), 0),
			})
			break
		}
	}
	return points
}
