package analysis

import (
	"math"
	"testing"
)

// IEC 61672-1:2013, Table 3 at the exact frequencies (reading of transcriptions), and the formula of
// Annex E worked out elsewhere.
func TestAWeighting(t *testing.T) {
	for _, row := range readTable(t, "weighting_a_c_iec61672.csv")[1:] {
		nominalHz, exactHz := number(t, row[0]), number(t, row[1])
		near(t, "AWeightingDB("+row[1]+")", AWeightingDB(exactHz), number(t, row[2]), 0.0501)
		near(t, "AWeightingDB("+row[1]+")", AWeightingDB(exactHz), number(t, row[4]), 1e-5)
		near(t, "AWeightingDB("+row[0]+")", AWeightingDB(nominalHz), number(t, row[6]), 1e-5)
	}
	for _, freqHz := range []float64{0, -1, math.NaN()} {
		near(t, "AWeightingDB of no frequency", AWeightingDB(freqHz), FloorDBFS, 0)
	}
}

// ITU-R BS.468-4, Table 1, and the rational curve worked out elsewhere.
func TestWeighting468(t *testing.T) {
	for _, row := range readTable(t, "weighting_itur468.csv")[1:] {
		freqHz := number(t, row[0])
		near(t, "Weighting468DB("+row[0]+")", Weighting468DB(freqHz), number(t, row[1]), 0.06)
		near(t, "Weighting468DB("+row[0]+")", Weighting468DB(freqHz), number(t, row[4]), 1e-4)
	}
	near(t, "Weighting468DB(0)", Weighting468DB(0), FloorDBFS, 0)
}

// A tone reads its level and the weighting; white noise what the integral of the weighting gives.
func TestAWeightedLevel(t *testing.T) {
	for _, freqHz := range []float64{50, 997, 6300, 15000} {
		n := mustNoise(t, newClip(48000, 3).noise(-140, 1).tone(freqHz, -40, 0.3, 0, 3))
		near(t, "AWeightedDBFS of a tone", n.AWeightedDBFS, -40+AWeightingDB(freqHz), 0.02) // a bin is not a point
	}
	n := mustNoise(t, newClip(48000, 20).noise(-70, 2))
	weighted := 0.0
	for f := 0.5; f < 24000; f++ {
		weighted += math.Pow(10, AWeightingDB(f)/10)
	}
	near(t, "AWeightedDBFS of noise", n.AWeightedDBFS, -70+10*math.Log10(weighted/20000), 0.05)
}
