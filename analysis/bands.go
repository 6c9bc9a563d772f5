package analysis

import "math"

const (
	// Points of a response lie this many to a decade, about a twelfth of an octave apart.
	pointsPerDecade = 40
	firstPoint      = -68 // 19.95 Hz, which ISO 266 calls 20 Hz
	lastPoint       = 52  // 19953 Hz, called 20 kHz

	// The highest band must end below this part of the rate.
	highestBandFrac = 0.4751
)

// A Band is the stretch of frequencies that one point of a response stands for, its middle that of
// a logarithmic scale.
type Band struct{ LowHz, FreqHz, HighHz float64 }

// ResponseBands returns the bands of a response: 1000·10^(n/40) Hz, from 20 Hz to 20 kHz, each
// reaching half way to its neighbours on a logarithmic scale, as far as they lie below 0.475 of the
// rate. Every fourth is the exact mid-band frequency of a third-octave band of base ten (ISO 266;
// IEC 61260-1:2014), so that 20 Hz stands for 19.95 Hz.
func ResponseBands(rateHz float64) []Band {
	var all []Band
	for n := firstPoint; n <= lastPoint; n++ {
		at := func(steps float64) float64 { return 1000 * math.Pow(10, steps/pointsPerDecade) }
		b := Band{at(float64(n) - 0.5), at(float64(n)), at(float64(n) + 0.5)}
		if b.HighHz > highestBandFrac*rateHz {
			break
		}
		all = append(all, b)
	}
	return all
}
