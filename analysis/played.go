package analysis

import (
	"errors"
	"fmt"
	"math"
	"math/cmplx"

	"gonum.org/v1/gonum/dsp/fourier"
)

const (
	// What was played is found by two pieces of it, each so long or half of it, in this band.
	pieceSec                     = 5.0
	leastPieceOfPlayedSec        = 0.5
	pieceBandLowHz, pieceBandTop = 100.0, 4000.0

	// A piece is found where the correlation's top is so many times its mean power. Of noise, the
	// top among all lags of a look is some 11 times the mean.
	pieceStandsOut = 50.0

	// A sweep that is stretched seems to come earlier or later, so start and ratio are found in
	// rounds, until the ratio moves by less than this.
	mostRounds = 16
	stillFrac  = 1e-7

	roughStepFrac = 40e-6
)

// ErrNotPlayed says that what should have been played cannot be found in a take.
var ErrNotPlayed = errors.New("the signal that was played is not in the take")

// FindPlayed finds in a take what was played: any channel that is no steady tone, of a second or
// more, noise, a sweep or music. The Placement's signal seconds are those of played. Two of its
// pieces, the one of its first and of its last third that tells most, are looked for by cross-correlation, over
// all of the take for the first, and give start and clock ratio; what repeats itself within the take
// may be found at the wrong turn. Where the pad delays the one piece otherwise than the other, as one
// with a corner in the band does for two parts of a sweep, that counts as clock. LevelDBFS is the gain from played to take, in dB, of the first
// piece between 100 Hz and 4 kHz; Polarity is not told and is 0.
//
// The error is [ErrNotPlayed], or what reading gave.
func FindPlayed(played, take Samples) (Placement, error) {
	for _, s := range []Samples{played, take} {
		if err := checkRate(s.RateHz()); err != nil {
			return Placement{}, err
		}
	}
	long := float64(played.Frames()) / played.RateHz()
	sec := math.Min(pieceSec, long/2)
	if sec < leastPieceOfPlayedSec {
		return Placement{}, fmt.Errorf("%w: %.2f s of it are too short, need a second", ErrNotPlayed, long)
	}
	f := newPieceFinder(played, take, sec)
	first, err := f.telling(0, long/3)
	if err != nil {
		return Placement{}, err
	}
	last, err := f.telling(2*long/3-sec, long-sec)
	if err != nil {
		return Placement{}, err
	}
	early, err := f.piece(first)
	if err != nil {
		return Placement{}, err
	}
	late, err := f.piece(last)
	if err != nil {
		return Placement{}, err
	}
	p, err := f.somewhere(early)
	if err != nil {
		return Placement{}, err
	}
	if p, err = f.roughRatio(early, p); err != nil {
		return Placement{}, err
	}
	if p, err = f.settle(early, late, p); err != nil {
		return Placement{}, err
	}
	if !(math.Abs(p.Ratio-1) < mostClockFrac) {
		return Placement{}, fmt.Errorf("%w: its two ends lie %.0f ppm too far apart for any clock", ErrNotPlayed, 1e6*(p.Ratio-1))
	}
	return p, nil
}

// A pieceFinder correlates pieces of what was played with a take.
type pieceFinder struct {
	played, take Samples
	sec          float64
	low, count   int // bins of the band
	back         *fourier.CmplxFFT
	lags         []complex128
}

func newPieceFinder(played, take Samples, sec float64) *pieceFinder {
	f := &pieceFinder{played: played, take: take, sec: sec}
	topHz := math.Min(pieceBandTop, usableFrac*math.Min(played.RateHz(), take.RateHz()))
	f.low, f.count = int(pieceBandLowHz*sec), int(topHz*sec)
	n := 1
	for n < f.count-f.low {
		n *= 2
	}
	f.back, f.lags = fourier.NewCmplxFFT(n), make([]complex128, n)
	return f
}

// gate is the piece that begins at a second, under a Hann window.
func (f *pieceFinder) gate(fromSec float64) gate {
	return gate{fromSec, fromSec + f.sec, f.sec / 2, f.sec / 2}
}

func (f *pieceFinder) bins(s Samples, p Placement, fromSec float64) ([]complex128, error) {
	all, err := newClockSpectrum(s, p, f.gate(fromSec), f.count).sum(f.count)
	if err != nil {
		return nil, err
	}
	return all[f.low:], nil
}

// telling returns where the piece begins that tells most, between two seconds of what was played:
// loud and of many frequencies at once, which a steady tone is not. It is the one with the largest
// sum of magnitudes over the band's bins.
func (f *pieceFinder) telling(fromSec, toSec float64) (float64, error) {
	const steps = 8
	best, most := fromSec, 0.0
	for i := range steps + 1 {
		at := fromSec + (toSec-fromSec)*float64(i)/steps
		bins, err := f.bins(f.played, Placement{Ratio: 1}, at)
		if err != nil {
			return 0, err
		}
		total := 0.0
		for _, z := range bins {
			total += cmplx.Abs(z)
		}
		if total > most*1.01 {
			best, most = at, total
		}
	}
	if !(most > 0) {
		return 0, fmt.Errorf("%w: it is silent", ErrNotPlayed)
	}
	return best, nil
}

// evenOut returns a weight for each bin of a piece by which the loud ones count no more than those
// of the mean magnitude do: a bass, or a steady tone, must not blur the correlation.
func evenOut(piece []complex128) []float64 {
	weights, mean := make([]float64, len(piece)), 0.0
	for _, z := range piece {
		mean += cmplx.Abs(z) / float64(len(piece))
	}
	for k, z := range piece {
		if mean > 0 {
			weights[k] = 1 / math.Max(mean*mean, square(z))
		}
	}
	return weights
}

// correlate fills lags with the cross-correlation and returns its mean power.
func (f *pieceFinder) correlate(take []complex128, a piece) float64 {
	clear(f.lags)
	mean := 0.0
	for k, z := range a.bins {
		f.lags[k] = take[k] * cmplx.Conj(z) * complex(a.weights[k], 0)
		mean += square(f.lags[k])
	}
	f.back.Sequence(f.lags, f.lags)
	return mean
}

// A piece is one of what was played.
type piece struct {
	fromSec, middleSec float64
	bins               []complex128
	weights            []float64
}

func (f *pieceFinder) piece(fromSec float64) (piece, error) {
	bins, err := f.bins(f.played, Placement{Ratio: 1}, fromSec)
	return piece{fromSec, fromSec + f.sec/2, bins, evenOut(bins)}, err
}

// somewhere looks for a piece in the whole take.
func (f *pieceFinder) somewhere(a piece) (Placement, error) {
	best, p := pieceStandsOut, Placement{Ratio: 1}
	long := float64(f.take.Frames()) / f.take.RateHz()
	for at := 0.0; at < long; at += f.sec / 2 {
		bins, err := f.bins(f.take, Placement{Ratio: 1}, at)
		if err != nil {
			return Placement{}, err
		}
		mean := f.correlate(bins, a)
		for i, z := range f.lags {
			// A piece that lies further off than half overlaps with another look better.
			late := f.lagSec(i)
			if over := square(z) / mean; over > best && math.Abs(late) < 0.4*f.sec {
				best, p.StartSec = over, at+late-a.fromSec
			}
		}
	}
	if best == pieceStandsOut {
		return Placement{}, ErrNotPlayed
	}
	return p, nil
}

// roughRatio tries ratios evenly and returns the placement under which a piece explains most: one
// that is stretched by a part in 10^4 is smeared by more than a period.
func (f *pieceFinder) roughRatio(a piece, p Placement) (Placement, error) {
	best, most := p, -1.0
	for off := -mostClockFrac; off <= mostClockFrac; off += roughStepFrac {
		tried := Placement{Ratio: 1 + off, StartSec: p.StartSec + (p.Ratio-1-off)*a.middleSec}
		l, err := f.lag(a, tried)
		if errors.Is(err, ErrNotPlayed) {
			continue
		}
		if err != nil {
			return p, err
		}
		if l.explains > most {
			most, best = l.explains, tried
			best.StartSec += l.sec
		}
	}
	return best, nil
}

// settle moves start and ratio by what the two pieces are off, in rounds.
func (f *pieceFinder) settle(early, late piece, p Placement) (Placement, error) {
	apart := late.fromSec - early.fromSec
	for range mostRounds {
		a, err := f.lag(early, p)
		if err != nil {
			return p, err
		}
		b, err := f.lag(late, p)
		if err != nil {
			return p, err
		}
		turned := (b.sec - a.sec) / apart
		p.Ratio += turned
		p.StartSec += a.sec - turned*early.middleSec
		p.RatioU = math.Hypot(a.sigmaSec, b.sigmaSec) / apart
		p.LevelDBFS = a.gainDB
		if math.Abs(turned) < stillFrac {
			break
		}
	}
	return p, nil
}

// lagSec returns the lag that an element of lags stands for.
func (f *pieceFinder) lagSec(i int) float64 {
	if i > len(f.lags)/2 {
		i -= len(f.lags)
	}
	return float64(i) * f.sec / float64(len(f.lags))
}

// A lag is how much later than a placement says a piece comes.
type lag struct{ sec, sigmaSec, gainDB, explains float64 }

// lag finds it: the top of the correlation's envelope among the lags that two clocks allow, then by
// the sums themselves.
func (f *pieceFinder) lag(a piece, p Placement) (lag, error) {
	bins, err := f.bins(f.take, p, a.fromSec)
	if err != nil {
		return lag{}, err
	}
	within := mostClockFrac*(a.fromSec+f.sec) + 0.002
	mean, best, found := f.correlate(bins, a), 0.0, lag{}
	for i, z := range f.lags {
		if late := f.lagSec(i); square(z) > best && math.Abs(late) < within {
			best, found.sec = square(z), late
		}
	}
	if best < pieceStandsOut*mean {
		return lag{}, ErrNotPlayed
	}
	var pp, yy float64
	for k, z := range a.bins {
		pp += a.weights[k] * square(z)
		yy += a.weights[k] * square(bins[k])
	}
	for _, stepSec := range [3]float64{60e-6, 30e-6, 10e-6} {
		at := func(off float64) float64 { return square(f.sum(a, bins, found.sec+off)) }
		off := peakOffset(at(-stepSec), at(0), at(stepSec))
		found.sec += math.Max(-2, math.Min(2, off)) * stepSec
	}
	xy := f.sum(a, bins, found.sec)
	found.explains = square(xy) / (pp * yy)
	wideHz := float64(f.count-f.low) / f.sec
	found.sigmaSec = sighting{shape: markerShape{topHz: markerLowHz + wideHz}, explains: found.explains}.sigmaSec()
	found.gainDB = DBFromRatio(cmplx.Abs(xy) / pp)
	return found, nil
}

// sum returns the cross-correlation at one lag.
func (f *pieceFinder) sum(a piece, bins []complex128, lateSec float64) (xy complex128) {
	turn, step := turnOfPart(float64(f.low)/f.sec*lateSec), turnOfPart(lateSec/f.sec)
	for k, z := range a.bins {
		xy += bins[k] * cmplx.Conj(z) * turn * complex(a.weights[k], 0)
		turn *= step
	}
	return xy
}
