package lotstat

import (
	"math"

	"gonum.org/v1/gonum/stat"
)

// The factors of a moving range of two readings, as NIST/SEMATECH e-Handbook
// 6.3.2.2 rounds them: mean range over standard deviation, and upper limit over
// mean range.
const (
	rangeD2 = 1.128
	rangeD4 = 3.267
)

// movingRanges are the differences between neighbours, without sign: one fewer
// than the values.
func movingRanges(values []float64) []float64 {
	if len(values) < 2 {
		return nil
	}
	ranges := make([]float64, len(values)-1)
	for i := range ranges {
		ranges[i] = math.Abs(values[i+1] - values[i])
	}
	return ranges
}

func meanOf(values []float64) float64 { return stat.Mean(values, nil) }
