package compare

import (
	"math"
	"math/cmplx"

	"padproof/analysis"
)

// LegLevels are the levels of the two legs, each to screen, in dB, beside what the drawing gives.
type LegLevels struct {
	FreqHz float64
	// FromStraight: each level is relative to the same leg straight through. Else, without legs-before,
	// both are relative to the mean of the two.
	FromStraight            bool
	HotDB, ColdDB           float64 // NaN for a leg without a tone
	DrawnHotDB, DrawnColdDB float64 // NaN where the drawing gives none
}

// Levels returns the two legs beside the drawing; the case is that of [JudgeLegs]. Where one leg holds
// no tone and there is no legs-before nothing can be said of the other: both are NaN.
func (c LegsCase) Levels() LegLevels {
	freqHz := c.Hot.Tone.FreqHz
	if c.Hot.NoTone {
		freqHz = c.Cold.Tone.FreqHz
	}
	straight, with := c.Circuit.LegVolts(c.Rig.Ends, c.LegsLoadOhms, freqHz)
	l := LegLevels{
		FreqHz: freqHz, FromStraight: c.calibrated(freqHz),
		HotDB: levelOf(c.Hot), ColdDB: levelOf(c.Cold), DrawnHotDB: sizeDB(with.Hot), DrawnColdDB: sizeDB(with.Cold),
	}
	hot, cold := (l.HotDB+l.ColdDB)/2, (l.HotDB+l.ColdDB)/2
	drawnHot, drawnCold := (l.DrawnHotDB+l.DrawnColdDB)/2, (l.DrawnHotDB+l.DrawnColdDB)/2
	if l.FromStraight {
		hot, cold = c.StraightHot.LevelDBFS, c.StraightCold.LevelDBFS
		drawnHot, drawnCold = sizeDB(straight.Hot), sizeDB(straight.Cold)
	}
	l.HotDB, l.ColdDB = l.HotDB-hot, l.ColdDB-cold
	l.DrawnHotDB, l.DrawnColdDB = l.DrawnHotDB-drawnHot, l.DrawnColdDB-drawnCold
	return l
}

func levelOf(l Leg) float64 {
	if l.NoTone {
		return math.NaN()
	}
	return l.Tone.LevelDBFS
}

// sizeDB is the size of a voltage in dB; NaN of nothing.
func sizeDB(volts complex128) float64 {
	if volts == 0 {
		return math.NaN()
	}
	return analysis.DBFromRatio(cmplx.Abs(volts))
}
