package analysis

import "math"

// FloorDBFS stands for nothing at all, so that no level is ever minus infinity. It lies far below
// the smallest step of any recording.
const FloorDBFS = -400.0

// DBFromRatio returns 20 lg of a ratio of two amplitudes. A ratio that is not above zero, or so
// small that it would fall below, gives [FloorDBFS]; one too large for a number, 400.
func DBFromRatio(ratio float64) float64 {
	if !(ratio > 1e-20) {
		return FloorDBFS
	}
	return math.Min(20*math.Log10(ratio), -FloorDBFS)
}

// RatioFromDB returns the amplitude ratio of a level difference: 10^(db/20).
func RatioFromDB(db float64) float64 { return math.Pow(10, db/20) }

// PeakFromDBFS returns the peak value of a sine of the given level; full scale is 1.
func PeakFromDBFS(levelDBFS float64) float64 { return RatioFromDB(levelDBFS) }

// DBFSFromPeak returns the level of a sine of peak value peak: 20 lg peak, so a sine that just
// reaches full scale reads 0 dBFS (AES17). Nothing reads [FloorDBFS].
func DBFSFromPeak(peak float64) float64 { return DBFromRatio(peak) }

// DBFSFromMeanSquare returns the level of a signal whose squares have the given mean:
// 10 lg (2 meanSquare), so that a full-scale sine, mean square ½, reads 0 dBFS (AES17) and a
// full-scale square wave +3.01 dBFS. Nothing reads [FloorDBFS].
func DBFSFromMeanSquare(meanSquare float64) float64 {
	return DBFromRatio(math.Sqrt(2 * meanSquare))
}
