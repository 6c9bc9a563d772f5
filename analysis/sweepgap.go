package analysis

import (
	"math"
	"slices"
)

const (
	// Pieces of the sweep that are held against one another, and how many on either side.
	gapPieceSec   = 0.005
	gapNeighbours = 6

	// A piece that is so much lower than its neighbours is a gap: no pad's curve falls as fast as
	// this within a hundredth of an octave.
	gapDB = 6.0

	// Below this the sweep is too slow for the pieces.
	gapFromHz = 400.0
)

// SweepGaps returns where the sweep of the test signal breaks off for some milliseconds, in seconds
// of the take: buffers that were lost and filled with silence. Where the sweep does not stand
// clearly over the noise nothing is found. Samples lost without a gap are not seen here; where they
// are not made good they shift the closing marker.
func SweepGaps(s Samples, p Placement) ([]float64, error) {
	var sweep Segment
	for _, stage := range Schedule(s.RateHz()) {
		if stage.Kind == Sweep {
			sweep = stage
		}
	}
	pace := math.Log(sweep.ToHz/sweep.FromHz) / sweep.LengthSec
	from := p.TakeSec(sweep.StartSec + math.Log(gapFromHz/sweep.FromHz)/pace)
	to := p.TakeSec(sweep.StartSec + sweep.LengthSec - 0.1)
	piece := max(1, int(gapPieceSec*s.RateHz()))
	x := make([]float64, piece)
	var levels []float64
	first := int64(math.Max(0, from*s.RateHz()))
	for frame := first; float64(frame) < to*s.RateHz(); frame += int64(piece) {
		n, err := readFull(s, x, frame)
		if err != nil {
			return nil, err
		}
		if n < piece {
			break
		}
		square := plainSums(x).square
		levels = append(levels, DBFSFromMeanSquare(square/float64(piece)))
	}
	var gaps []float64
	for i := gapNeighbours; i+gapNeighbours < len(levels); i++ {
		around := slices.Concat(levels[i-gapNeighbours:i-1], levels[i+2:i+1+gapNeighbours])
		slices.Sort(around)
		// All but one of either side must stand above: noise alone scatters less, and slower.
		if levels[i] < around[1]-gapDB {
			at := float64(first+int64(i*piece)) / s.RateHz()
			if n := len(gaps); n == 0 || at-gaps[n-1] > 10*gapPieceSec {
				gaps = append(gaps, at)
			}
		}
	}
	return gaps, nil
}
