package analysis

import "math"

// The corner frequencies of the A and C weightings in Hz: IEC 61672-1:2013, Annex E, where they
// follow from the conditions named there and are given to these digits.
const (
	weighting1Hz = 20.598997
	weighting2Hz = 107.65265
	weighting3Hz = 737.86223
	weighting4Hz = 12194.217
)

// AWeightingDB returns the A weighting of IEC 61672-1:2013, Annex E, formula E.6, in decibels, 0 at
// 1 kHz. It falls without end towards 0 Hz: below a microhertz, and for NaN, it is [FloorDBFS].
func AWeightingDB(freqHz float64) float64 {
	if !(freqHz > 1e-6) {
		return FloorDBFS
	}
	return 20 * math.Log10(aWeighting(freqHz)/aWeighting(1000))
}

func aWeighting(freqHz float64) float64 {
	f := freqHz * freqHz
	return weighting4Hz * weighting4Hz * f * f / ((f + weighting1Hz*weighting1Hz) *
		math.Sqrt((f+weighting2Hz*weighting2Hz)*(f+weighting3Hz*weighting3Hz)) * (f + weighting4Hz*weighting4Hz))
}

// aWeightedMeanSquare returns the mean square of what a spectrum holds, DC left out, under the A
// weighting.
func (sp *Spectrum) aWeightedMeanSquare() float64 {
	total := 0.0
	for k := 1; k < len(sp.MeanSquare); k++ {
		w := aWeighting(float64(k) * sp.BinHz)
		total += sp.MeanSquare[k] * w * w
	}
	w := aWeighting(1000)
	return total / (w * w)
}

// noise468 are the coefficients of the weighting network of ITU-R BS.468-4, Annex 1, in rising powers
// of jf, the denominator's first being 1: the usual rational curve, which keeps to the table of the
// Recommendation within 0.051 dB. The gain makes 1 kHz exactly 0 dB.
var (
	noise468Gain        = 1.246332637532143e-4 * math.Pow(10, 18.238675/20)
	noise468Denominator = [7]float64{
		1, 5.559488023498642e-4, 1.363894795463638e-7, 2.118150887518656e-11,
		2.043828333606125e-15, 1.306612257412824e-19, 4.737338981378384e-24,
	}
)

// Weighting468DB returns the weighting of ITU-R BS.468-4 in decibels, 0 at 1 kHz. At and below 0 Hz,
// and for NaN, it is [FloorDBFS].
func Weighting468DB(freqHz float64) float64 {
	if !(freqHz > 0) {
		return FloorDBFS
	}
	p, sum := complex(0, freqHz), 0i
	for k := len(noise468Denominator) - 1; k >= 0; k-- {
		sum = sum*p + complex(noise468Denominator[k], 0)
	}
	return DBFromRatio(noise468Gain * freqHz / math.Hypot(real(sum), imag(sum)))
}
