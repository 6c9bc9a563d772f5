package analysis

import (
	"math"
	"math/cmplx"
)

// refine finds the time, the turn and the level of a marker, stretched by ratio, from the samples
// themselves: the top of the correlation's envelope.
func (f *markerFinder) refine(s *sighting, ratio float64) error {
	const sideSec = 0.001
	frame := int64(math.Floor((s.atSec - sideSec) * f.rateHz))
	skip := max(0, -frame)
	x := f.x[:min(f.n, int((markerSec*ratio+2*sideSec)*f.rateHz)+2)]
	clear(x)
	if skip < int64(len(x)) {
		if _, err := readFull(f.s, x[skip:], frame+skip); err != nil {
			return err
		}
	}
	for i, v := range x {
		if !(math.Abs(v) <= largestSample) {
			x[i] = 0
		}
	}
	b := f.demodulate(x, s.shape, float64(frame)/f.rateHz-s.atSec, ratio)
	lateSec := b.top()
	z := b.late(lateSec)
	s.atSec += lateSec * ratio
	s.turnRad = cmplx.Phase(z)
	s.levelDBFS = DBFSFromPeak(2 * cmplx.Abs(z) / math.Max(b.energy, 1))
	return nil
}

// A beat is what a marker leaves when it is multiplied by the conjugate of its shape: nearly
// nothing moves any more, so a few sums, each with the frequency it comes from, stand for all.
type beat struct {
	sums   []complex128
	freqHz []float64
	energy float64 // of the shape
}

const beatSums = 256

// demodulate makes the beat of samples, the first of them fromSec after the marker's start. What
// lies above the recorder's band is left out.
func (f *markerFinder) demodulate(x []float64, m markerShape, fromSec, ratio float64) beat {
	b := beat{make([]complex128, beatSums), make([]float64, beatSums), 0}
	for i := range b.freqHz {
		_, b.freqHz[i] = m.value((float64(i) + 0.5) / beatSums * markerSec)
	}
	for i, v := range x {
		sec := (fromSec + float64(i)/f.rateHz) / ratio
		z, freqHz := m.value(sec)
		if freqHz == 0 || freqHz > usableFrac*f.rateHz {
			continue
		}
		b.sums[int(sec*(beatSums/markerSec))] += complex(v*real(z), -v*imag(z))
		b.energy += square(z)
	}
	return b
}

// late returns the correlation with the shape that comes so much later.
func (b beat) late(sec float64) complex128 {
	total := 0i
	for i, z := range b.sums {
		total += z * cmplx.Rect(1, 2*math.Pi*b.freqHz[i]*sec)
	}
	return total
}

// top returns how much later than it was taken for the marker comes: the top of the envelope, by
// parabolas.
func (b beat) top() float64 {
	atSec := 0.0
	for _, stepSec := range [3]float64{40e-6, 20e-6, 5e-6} {
		off := peakOffset(square(b.late(atSec-stepSec)), square(b.late(atSec)), square(b.late(atSec+stepSec)))
		atSec += math.Max(-3, math.Min(3, off)) * stepSec
	}
	return atSec
}
