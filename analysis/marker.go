package analysis

import (
	"math"
	"math/cmplx"
	"sync"

	"gonum.org/v1/gonum/dsp/fourier"
)

const (
	// The design's schedule, as far as placing needs it; a test holds them to Schedule.
	openingMarkerSec = 1.0
	toneStartSec     = 1.75
	toneStepSec      = 5.75
	toneEndSec       = 7.75
	closingMarkerSec = 22.75
	markerSec        = 0.25

	// The band that holds a marker and the skirts of its edges.
	markerBandLowHz, markerBandHighHz = 900.0, 5300.0

	// A block holds a marker and what it is looked for in beside it.
	markerBlockSec = 0.9

	// Time that no correlation resolves: what the two markers' edges, one a sample shorter than the
	// other, and the take's filters make of it.
	markerFloorSec = 2e-7

	// How many sightings a look everywhere keeps of each marker.
	mostSightings = 64
)

// markerTopsHz are the frequencies that the marker's chirp may reach: 5 kHz, and 0.45 of the rate
// where the signal was played at 11.025 or 8 kHz.
var markerTopsHz = []float64{markerHighHz, 0.45 * 11025, 0.45 * 8000}

// A markerShape is the marker as a complex signal, whose real part is the marker itself.
type markerShape struct {
	topHz   float64
	opening bool // rising; the closing one falls
}

// value returns the shape at a signal second of its own, 0 outside it, and the frequency there.
func (m markerShape) value(sec float64) (z complex128, freqHz float64) {
	if sec <= 0 || sec >= markerSec {
		return 0, 0
	}
	fromHz, toHz := markerLowHz, m.topHz
	if !m.opening {
		fromHz, toHz = toHz, fromHz
	}
	slope := (toHz - fromHz) / markerSec
	gain := 1.0
	if near := math.Min(sec, markerSec-sec); near < markerEdgeSec {
		gain = 0.5 - 0.5*math.Cos(math.Pi*near/markerEdgeSec)
	}
	cycles := fromHz*sec + slope*sec*sec/2
	return cmplx.Rect(gain, 2*math.Pi*cycles-math.Pi/2), fromHz + slope*sec
}

// A sighting is one place where a marker stands.
type sighting struct {
	shape     markerShape
	atSec     float64 // in the take
	explains  float64 // its part of the power in the marker's band
	turnRad   float64 // by which it arrives turned
	levelDBFS float64
}

func (s sighting) polarity() int {
	switch off := math.Abs(s.turnRad); {
	case off < surePolarityRad:
		return 1
	case off > math.Pi-surePolarityRad:
		return -1
	}
	return 0
}

// sigmaSec is the standard uncertainty of the time: the bound for a signal in white noise whose
// phase is not known, 1/(2π β √(2 snr)), β the standard deviation of frequency within the signal
// (Cramér and Rao; textbook form, from memory).
func (s sighting) sigmaSec() float64 {
	wideHz := s.shape.topHz - markerLowHz
	snr := wideHz * markerSec * s.explains / math.Max(1-s.explains, 1e-6)
	return math.Hypot(1/(2*math.Pi*wideHz/math.Sqrt(12)*math.Sqrt(2*snr)), markerFloorSec)
}

// A markerFinder is a matched filter for the markers: overlapping blocks are transformed, and the
// bins of the markers' band alone are turned back, at a low rate of their own.
type markerFinder struct {
	s        Samples
	rateHz   float64
	n, few   int // samples of a block, and of its band
	low      int // first bin of the band
	forward  *fourier.FFT
	backward *fourier.CmplxFFT
	x        []float64
	bins     []complex128
	band     []complex128 // of the block
	narrow   []complex128 // samples of the band, and work
	power    []float64    // summed up over narrow
}

// A shapeBand is the band of a marker's spectrum, conjugate, with the power of its samples.
type shapeBand struct {
	markerShape
	bins   []complex128
	energy float64
}

func newMarkerFinder(s Samples) *markerFinder {
	return &markerFinder{s: s, rateHz: s.RateHz(), n: 1, few: 1}
}

// prepare makes what the search needs.
func (f *markerFinder) prepare() {
	if f.x != nil {
		return
	}
	for float64(f.n) < markerBlockSec*f.rateHz {
		f.n *= 2
	}
	binHz := f.rateHz / float64(f.n)
	highHz := math.Min(markerBandHighHz, usableFrac*f.rateHz)
	f.low = int(markerBandLowHz / binHz)
	width := int(highHz/binHz) - f.low + 1
	for f.few < width {
		f.few *= 2
	}
	f.forward, f.backward = fourier.NewFFT(f.n), fourier.NewCmplxFFT(f.few)
	f.x, f.bins = make([]float64, f.n), make([]complex128, f.n/2+1)
	f.band, f.narrow = make([]complex128, width), make([]complex128, f.few)
	f.power = make([]float64, f.few+1)
}

// A shapeKey is what a shapeBand depends on.
type shapeKey struct {
	markerShape
	rateHz float64
}

var shapeBands sync.Map // shapeKey -> shapeBand; never changed once made

// shapeBand samples a shape often enough for all of it and keeps the bins of the band.
func (f *markerFinder) shapeBand(m markerShape) shapeBand {
	key := shapeKey{m, f.rateHz}
	if b, ok := shapeBands.Load(key); ok {
		return b.(shapeBand)
	}
	finer := 1
	for float64(finer)*f.rateHz < 4*markerHighHz {
		finer *= 2
	}
	x := make([]float64, f.n*finer)
	for i := range int(markerSec*f.rateHz*float64(finer)) + 1 {
		z, _ := m.value(float64(i) / (f.rateHz * float64(finer)))
		x[i] = real(z)
	}
	all := fourier.NewFFT(len(x)).Coefficients(nil, x)
	b := shapeBand{markerShape: m, bins: make([]complex128, len(f.band))}
	for k := range b.bins {
		z := all[f.low+k] * complex(2/float64(finer), 0)
		b.bins[k] = cmplx.Conj(z)
		b.energy += real(z)*real(z) + imag(z)*imag(z)
	}
	b.energy /= float64(f.n)
	kept, _ := shapeBands.LoadOrStore(key, b)
	return kept.(shapeBand)
}

// load reads the block at a frame, what lies outside the take as zeros, and transforms it.
func (f *markerFinder) load(frame int64) error {
	clear(f.x)
	skip := max(0, -frame)
	if skip >= int64(f.n) {
		clear(f.band)
		return nil
	}
	if _, err := readFull(f.s, f.x[skip:], frame+skip); err != nil {
		return err
	}
	for i, v := range f.x {
		if !(math.Abs(v) <= largestSample) {
			f.x[i] = 0
		}
	}
	f.forward.Coefficients(f.bins, f.x)
	copy(f.band, f.bins[f.low:])
	return nil
}

// sumPower sums up the power of the block's band, sample by sample of narrow.
func (f *markerFinder) sumPower() {
	f.turnBack(nil)
	scale := float64(f.n) / float64(f.few) // narrow's samples stand for so many
	for i, z := range f.narrow {
		f.power[i+1] = f.power[i] + scale*(real(z)*real(z)+imag(z)*imag(z))
	}
}

// turnBack makes narrow of the block's band, multiplied by bins where there are any.
func (f *markerFinder) turnBack(bins []complex128) {
	clear(f.narrow)
	copy(f.narrow, f.band)
	for k, z := range bins {
		f.narrow[k] *= z
	}
	f.backward.Sequence(f.narrow, f.narrow)
	scale := complex(1/float64(f.n), 0)
	for i := range f.narrow {
		f.narrow[i] *= scale
	}
}

// best returns where one marker explains most, from one sample of the block to another. The power
// must be summed up.
func (f *markerFinder) best(b shapeBand, frame int64, from, to int) sighting {
	f.turnBack(b.bins)
	step := float64(f.n) / float64(f.few)
	long := int(markerSec * f.rateHz / step)
	first, last := int(math.Ceil(float64(from)/step)), min(int(float64(to)/step), f.few-1-long)
	found, at := sighting{shape: b.markerShape}, -1
	for i := max(0, first); i <= last; i++ {
		z := f.narrow[i]
		if power := f.power[i+long] - f.power[i]; power > leastMeanSquare {
			if e := (real(z)*real(z) + imag(z)*imag(z)) / (power * b.energy); e > found.explains {
				found.explains, at = e, i
			}
		}
	}
	if at < 0 {
		return found
	}
	off := 0.0
	if at > 0 && at+1 < f.few {
		off = peakOffset(square(f.narrow[at-1]), square(f.narrow[at]), square(f.narrow[at+1]))
	}
	found.atSec = (float64(frame) + (float64(at)+off)*step) / f.rateHz
	found.explains = math.Min(1, found.explains)
	return found
}

func square(z complex128) float64 { return real(z)*real(z) + imag(z)*imag(z) }

// near looks for the opening or the closing marker about a second of the take.
func (f *markerFinder) near(atSec float64, opening bool) (sighting, error) {
	f.prepare()
	frame := int64(math.Floor((atSec - markerWithinSec) * f.rateHz))
	var found sighting
	if frame >= f.s.Frames() || frame+int64(f.n) <= 0 {
		return found, nil
	}
	if err := f.load(frame); err != nil {
		return found, err
	}
	f.sumPower()
	to := int(2 * markerWithinSec * f.rateHz)
	for _, topHz := range markerTopsHz {
		seen := f.best(f.shapeBand(markerShape{topHz, opening}), frame, 0, to)
		if seen.explains > found.explains {
			found = seen
		}
		if found.explains >= leastLoneFrac {
			break
		}
	}
	return found, nil
}

// everywhere looks for the markers in the whole take, block by block.
func (f *markerFinder) everywhere() (Placement, error) {
	f.prepare()
	var openings, closings []sighting
	lead := int(math.Ceil(markerSec*f.rateHz)) + f.n/f.few
	for frame := int64(-lead / 2); frame < f.s.Frames(); frame += int64(f.n - lead) {
		if err := f.load(frame); err != nil {
			return Placement{}, err
		}
		f.sumPower()
		for _, topHz := range markerTopsHz {
			openings = keepSighting(openings, f.best(f.shapeBand(markerShape{topHz, true}), frame, 0, f.n))
			closings = keepSighting(closings, f.best(f.shapeBand(markerShape{topHz, false}), frame, 0, f.n))
		}
	}
	m := bestPair(openings, closings)
	if math.Max(m.opening.explains, m.closing.explains) < leastPairedFrac {
		return Placement{}, ErrNoSignal
	}
	return f.place(m)
}

// keepSighting adds one that explains enough, the weakest falling out where there are many.
func keepSighting(all []sighting, s sighting) []sighting {
	if s.explains < leastPairedFrac {
		return all
	}
	if len(all) < mostSightings {
		return append(all, s)
	}
	weakest := 0
	for i := range all {
		if all[i].explains < all[weakest].explains {
			weakest = i
		}
	}
	if all[weakest].explains < s.explains {
		all[weakest] = s
	}
	return all
}

// bestPair returns the two markers that keep to the schedule and explain most, or else the one that
// explains most if that is enough by itself.
func bestPair(openings, closings []sighting) marks {
	var best, lone marks
	for _, a := range openings {
		for _, b := range closings {
			off := b.atSec - a.atSec - (closingMarkerSec - openingMarkerSec)
			if a.shape.topHz == b.shape.topHz && math.Abs(off) < markerWithinSec &&
				a.explains+b.explains > best.opening.explains+best.closing.explains {
				best = marks{a, b}
			}
		}
	}
	if best.opening.explains > 0 {
		return best
	}
	for _, a := range openings {
		if a.explains > math.Max(leastLoneFrac, lone.opening.explains) {
			lone.opening = a
		}
	}
	for _, b := range closings {
		if b.explains > math.Max(leastLoneFrac, math.Max(lone.opening.explains, lone.closing.explains)) {
			lone = marks{closing: b}
		}
	}
	return lone
}
