package analysis

import (
	"errors"
	"fmt"
	"math"
	"math/cmplx"
)

// A ResponsePoint is the transfer from one take to another in one band.
type ResponsePoint struct {
	FreqHz      float64
	LossDB      float64    // positive where after is lower
	StandardUDB float64    // standard uncertainty of LossDB, from noise alone
	LowHz       float64    // the band that was averaged over
	HighHz      float64    // wider than its neighbours let it be where hum took too much of it
	Transfer    complex128 // after over before, by the signal's clock: an inverted after turns it by half a turn
}

const (
	// Where the clock's ratio is less well known than this, the top of the sweep would smear.
	mostRatioU = 2e-6

	// A band needs so many bins, and before so much more in it than noise and than nothing: than
	// the skirts of what the sweep holds elsewhere.
	leastBandBins   = 4
	leastSNR        = 10.0
	leastSweepShare = 1e-4

	// Hum in before is fitted out where after's sweep stands so far over its noise; else the bins
	// about a line are left out, if it is more than this part of the sweep in them.
	clearSNR    = 100.0
	mostHumFrac = 1e-3
	humCutHz    = 0.6

	// A transfer that seems to change by more over half a band is noise.
	mostSlope = 1.0

	// What is left in error without any noise, as standard uncertainties: of any point, and as a
	// part of what the transfer changes over half a band. Both were found against closed forms.
	leastUDB   = 0.0002
	slopeUFrac = 0.01
)

// sweepGate lets the sweep through, 8.25 to 14.25 s, with its edges in the silence about it.
var sweepGate = gate{7.8, 14.7, 0.4, 0.4}

// ErrNoResponse says that a take does not hold what the response is made of: the whole sweep, the
// silence after it, and both markers.
var ErrNoResponse = errors.New("no response can be made")

// Response returns the transfer from before to after through the sweep of the test signal, at the
// bands of [ResponseBands] that before's sweep covers. The takes may differ in rate and clock; both
// come to the signal's clock by their placements, which must come from both markers.
//
// A point is the cross-spectrum over before's spectrum, averaged over its band with the sweep's
// power as the weight (as good as even on a logarithmic scale of frequency): noise in after turns
// it but does not lift it, and noise in before is taken off its spectrum. StandardUDB comes from
// the noise that the silence of either take shows or, where that is larger, from how far the bins
// of the band lie from one smooth transfer: bursts, a drifting hum, a gain that moves. Lines in the
// silence, hum and others, are fitted out of both; where after is too weak to tell before's from
// the sweep, the bins about them are left out, and a band that this leaves with too few grows until
// it has enough.
//
// A point is left out where before holds no sweep, or where its loss would be less sure than a
// factor of two. The error wraps [ErrNoResponse] where a placement does not allow a response.
func Response(before Samples, beforeAt Placement, after Samples, afterAt Placement) ([]ResponsePoint, error) {
	for _, take := range []struct {
		what string
		s    Samples
		p    Placement
	}{{"before", before, beforeAt}, {"after", after, afterAt}} {
		if err := checkSweep(take.s, take.p); err != nil {
			return nil, fmt.Errorf("%s: %w", take.what, err)
		}
	}
	bands := ResponseBands(math.Min(before.RateHz(), after.RateHz()))
	x, err := sweepOf(before, beforeAt, bands)
	if err != nil {
		return nil, err
	}
	y, err := sweepOf(after, afterAt, bands)
	if err != nil {
		return nil, err
	}
	remover := newLineRemover(sweepGate)
	for _, l := range y.hush.lines {
		remover.remove(y.bins, x.bins, l.freqHz)
	}
	cut := make([]bool, len(x.bins))
	for _, l := range x.hush.lines {
		if y.standsClear(l.freqHz) {
			remover.remove(x.bins, y.bins, l.freqHz)
		} else {
			x.cutOut(l, cut)
		}
	}
	return pointsOf(x, y, cut, bands), nil
}

func checkSweep(s Samples, p Placement) error {
	switch {
	case checkRate(s.RateHz()) != nil:
		return checkRate(s.RateHz())
	case !(math.Abs(p.Ratio-1) < 2*mostClockFrac):
		return fmt.Errorf("%w: a clock ratio of %g is none", ErrNoResponse, p.Ratio)
	case !(p.RatioU <= mostRatioU):
		return fmt.Errorf("%w: one marker of the test signal is missing, record all of it", ErrNoResponse)
	case !(p.TakeSec(sweepGate.fromSec) >= 0 && p.TakeSec(hushToSec)*s.RateHz() <= float64(s.Frames())):
		return fmt.Errorf("%w: the take does not hold the whole sweep and the silence after it", ErrNoResponse)
	}
	return nil
}

// A sweepTake is one take of the sweep: its bins by the signal's clock, and its silence.
type sweepTake struct {
	bins []complex128
	hush *hush
}

func sweepOf(s Samples, p Placement, bands []Band) (sweepTake, error) {
	highHz := bands[len(bands)-1].HighHz + 2*lineFitHz
	count := int(highHz / sweepGate.binHz())
	bins, err := newClockSpectrum(s, p, sweepGate, count).sum(count)
	if err != nil {
		return sweepTake{}, err
	}
	quiet, err := hushOf(s, p, highHz)
	return sweepTake{bins, quiet}, err
}

// bandSums are the sums over the bins of one band.
type bandSums struct {
	low, high int
	count     float64
	xx        float64
	xy        complex128
}

// pointsOf makes the points of two takes' bins.
func pointsOf(x, y sweepTake, cut []bool, bands []Band) []ResponsePoint {
	all := make([]bandSums, len(bands))
	most := 0.0
	for i, b := range bands {
		all[i] = sumBand(x.bins, y.bins, cut, b)
		most = math.Max(most, all[i].xx/math.Max(1, all[i].count)*b.FreqHz) // a sweep's falls with frequency
	}
	var points []ResponsePoint
	for i, b := range bands {
		s := all[i]
		noiseX := x.hush.density(b) * sweepGate.energySec()
		noiseY := y.hush.density(b) * sweepGate.energySec()
		clean := s.xx - s.count*noiseX
		if s.count < leastBandBins || !(clean > leastSNR*s.count*noiseX) || clean*b.FreqHz < leastSweepShare*most*s.count {
			continue
		}
		fit := evenFit(x.bins, y.bins, cut, s)
		h := fit.middle(x.bins, y.bins, cut, s, b) / complex(clean, 0)
		noise := math.Max(noiseY+square(h)*noiseX, fit.left)
		variance := noise * s.xx / (clean * clean)
		if !(square(h) > 4*variance) {
			continue
		}
		points = append(points, ResponsePoint{
			FreqHz: b.FreqHz, LossDB: -DBFromRatio(cmplx.Abs(h)),
			StandardUDB: math.Hypot(dbPerPart*math.Sqrt(variance/2/square(h)), fit.methodUDB()), // noise along h alone
			LowHz:       math.Min(b.LowHz, float64(s.low)*sweepGate.binHz()),
			HighHz:      math.Max(b.HighHz, float64(s.high)*sweepGate.binHz()),
			Transfer:    h,
		})
	}
	return points
}

// standsClear says whether the sweep stands so far over the noise about a frequency that another
// take's lines can be told from the sweep by it.
func (t sweepTake) standsClear(freqHz float64) bool {
	middle, half := int(math.Round(freqHz/sweepGate.binHz())), int(lineFitHz/sweepGate.binHz())
	sum, count := 0.0, 0.0
	for k := max(1, middle-half); k <= min(middle+half, len(t.bins)-1); k++ {
		sum += square(t.bins[k])
		count++
	}
	noise := t.hush.density(Band{freqHz - lineFitHz, freqHz, freqHz + lineFitHz}) * sweepGate.energySec()
	return sum > clearSNR*count*noise
}

// cutOut marks the bins about a line, where it is so strong that they would put a band in error.
func (t sweepTake) cutOut(l hushLine, cut []bool) {
	middle, half := int(math.Round(l.freqHz/sweepGate.binHz())), int(math.Round(humCutHz/sweepGate.binHz()))
	low, high := max(1, middle-2*half), min(middle+2*half, len(cut)-1)
	sweep := 0.0
	for k := low; k <= high; k++ {
		sweep = math.Max(sweep, square(t.bins[k]))
	}
	if hum := l.peak / 2 / sweepGate.binHz(); hum < mostHumFrac*math.Sqrt(sweep) {
		return
	}
	for k := max(1, middle-half); k <= min(middle+half, len(cut)-1); k++ {
		cut[k] = true
	}
}

// sumBand sums over a band, which grows on both sides until enough bins are in it.
func sumBand(x, y []complex128, cut []bool, b Band) bandSums {
	s := bandSums{
		low: int(math.Ceil(b.LowHz / sweepGate.binHz())), high: int(math.Floor(b.HighHz / sweepGate.binHz())),
	}
	s.high = min(s.high, len(x)-1)
	add := func(k int) {
		if k < 1 || k >= len(x) || cut[k] {
			return
		}
		s.count++
		s.xx += square(x[k])
		s.xy += y[k] * cmplx.Conj(x[k])
	}
	for k := s.low; k <= s.high; k++ {
		add(k)
	}
	for s.count < leastBandBins && (s.low > 1 || s.high < len(x)-1) {
		s.low, s.high = s.low-1, s.high+1
		add(s.low)
		add(s.high)
	}
	return s
}

// An even is the transfer that changes evenly over a band and fits it best: h0 + h1 u, u from -1 to
// 1 over the band's bins.
type even struct {
	h0, h1 complex128
	mean   float64 // of u, weighed by the sweep's power
	left   float64 // mean square, per bin, that after lies off it
}

func evenFit(x, y []complex128, cut []bool, s bandSums) even {
	var xx1, xx2, yy float64
	var xy1 complex128
	for k := max(1, s.low); k <= min(s.high, len(x)-1); k++ {
		if cut[k] {
			continue
		}
		u, p, c := s.place(float64(k)), square(x[k]), y[k]*cmplx.Conj(x[k])
		xx1 += u * p
		xx2 += u * u * p
		xy1 += complex(u, 0) * c
		yy += square(y[k])
	}
	det := s.xx*xx2 - xx1*xx1
	if !(det > 0) {
		return even{h0: s.xy / complex(s.xx, 0)}
	}
	e := even{
		h0:   (s.xy*complex(xx2, 0) - xy1*complex(xx1, 0)) / complex(det, 0),
		h1:   (xy1*complex(s.xx, 0) - s.xy*complex(xx1, 0)) / complex(det, 0),
		mean: xx1 / s.xx,
	}
	left := yy - real(cmplx.Conj(e.h0)*s.xy+cmplx.Conj(e.h1)*xy1)
	e.left = math.Max(0, left) / (s.count - 2)
	return e
}

// middle returns the sum of the cross-spectrum with the phase that changes over the band turned
// back, since a delay is no loss, and moved from where the bins of the band have their centre, which
// in a narrow band may be half a bin off, to the band's own.
func (e even) middle(x, y []complex128, cut []bool, s bandSums, b Band) complex128 {
	slope := 0i
	if square(e.h0) > 0 {
		slope = e.h1 / e.h0
	}
	if cmplx.Abs(slope) > mostSlope {
		return s.xy
	}
	centre := s.place(b.FreqHz / sweepGate.binHz())
	sum := 0i
	for k := max(1, s.low); k <= min(s.high, len(x)-1); k++ {
		if !cut[k] {
			sum += y[k] * cmplx.Conj(x[k]) * cmplx.Rect(1, -imag(slope)*(s.place(float64(k))-centre))
		}
	}
	return sum * complex(1+real(slope)*(centre-e.mean), 0)
}

// methodUDB is the standard uncertainty that is left without any noise.
func (e even) methodUDB() float64 {
	if square(e.h0) == 0 {
		return leastUDB
	}
	return leastUDB + slopeUFrac*dbPerPart*math.Min(mostSlope, cmplx.Abs(e.h1/e.h0))
}

// place returns where in the band a bin lies, -1 to 1.
func (s bandSums) place(bin float64) float64 {
	return (bin - float64(s.low+s.high)/2) / math.Max(1, float64(s.high-s.low)/2)
}
