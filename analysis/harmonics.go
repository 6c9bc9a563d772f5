package analysis

import "math"

// A Harmonic is one line at a multiple of the tone, as powers over the tone's own.
//
// The noise of its nine bins, as what lies beside them shows it, is taken off. Power may so come
// out below 0 where there is none; sums over several harmonics then stay unbiased, and the noise
// does not count as distortion.
type Harmonic struct {
	Number    int // 2 to 10
	FreqHz    float64
	Power     float64 // of the line over that of the tone, the noise taken off; may be negative
	Noise     float64 // of the noise in the line's bins over that of the tone
	StandardU float64 // of Power
}

const (
	// A segment's nine bins hold about this many independent values of the noise: 9 over the
	// window's noise bandwidth of 2.13 bins.
	freeBins = 4.2
	// Part of the noise in nine bins that lies in phase or out of phase with the line: one noise
	// bandwidth of them.
	lineShare = 2.13 / (2*lobeBins + 1)
	// Half-overlapped segments count as somewhat fewer.
	overlapCounts = 0.9

	// DistortionToHz is how far up harmonics count, where the sample rate allows.
	DistortionToHz = 20000.0
)

// Harmonics returns harmonics 2 to 10 of the tone as far as they lie below 20 kHz and 0.45 of the
// sample rate, from the spectrum of its steady part; nil where there is none.
func (t Tone) Harmonics() []Harmonic {
	if t.Spectrum == nil {
		return nil
	}
	l := linesOf(t.Spectrum, t.FreqHz)
	tone := l.cuts[1].meanSquare
	if len(l.cuts) < 3 || !(tone > 0) {
		return nil
	}
	segments := math.Max(1, overlapCounts*float64(t.Spectrum.Segments))
	var all []Harmonic
	for i, c := range l.cuts[2:] {
		number := i + 2
		if t.FreqHz*float64(number) >= DistortionToHz {
			break
		}
		below, above := l.bridge(c)
		noise := (below + above) / 2 * (2*lobeBins + 1)
		power := sum(l.sp.MeanSquare, c.middle-lobeBins, min(len(l.sp.MeanSquare)-1, c.middle+lobeBins)) - noise
		// What the noise's own scatter makes, what it makes together with the line, and how well
		// the bins beside tell it.
		alone := noise * noise / (freeBins * segments)
		together := 2 * math.Max(0, power) * noise * lineShare / segments
		known := noise * noise * 2.13 / (2 * bridgeBins * segments)
		all = append(all, Harmonic{
			Number: number, FreqHz: t.FreqHz * float64(number),
			Power: power / tone, Noise: noise / tone, StandardU: math.Sqrt(alone+together+known) / tone,
		})
	}
	return all
}

// A Distortion is the power of harmonics together, over that of the tone.
type Distortion struct {
	Power     float64 // the noise taken off; may be negative where there is none
	StandardU float64
	Harmonics int // how many were added; 0: none could be measured
}

// Distortion adds the harmonics of [Tone.Harmonics] by power.
func (t Tone) Distortion() Distortion {
	var d Distortion
	for _, h := range t.Harmonics() {
		d.Power += h.Power
		d.StandardU = math.Hypot(d.StandardU, h.StandardU)
		d.Harmonics++
	}
	return d
}

// within is the coverage factor of an interval for powers: 95 % of a normal distribution.
const within = 1.96

// Amplitude returns what is known of the harmonics' amplitude over the tone's: the best figure, 0
// where they do not stand out at all, and the least and the most at 95 %.
func (d Distortion) Amplitude() (best, least, most float64) {
	root := func(power float64) float64 { return math.Sqrt(math.Max(0, power)) }
	half := within * d.StandardU
	return root(d.Power), root(d.Power - half), root(math.Max(0, d.Power) + half)
}

// Shows reports whether the harmonics stand out of the noise at all: else the amplitude's most is
// all that is known.
func (d Distortion) Shows() bool { return d.Power > within*d.StandardU }
