package analysis

import (
	"fmt"
	"io"
)

// Samples is one channel of a recording, read in blocks at any position. Full scale is ±1.
//
// ReadAt fills dst with the samples from frame on and returns how many it gave; fewer than asked
// is allowed at any time, and io.EOF when no more follow. Frames is what the recording claims to
// hold; where less can be read, what is there is used.
type Samples interface {
	RateHz() float64
	Frames() int64
	ReadAt(dst []float64, frame int64) (int, error)
}

const (
	// A tone must stand still this long.
	leastToneSec = 1.0

	lowestRateHz  = 8000
	highestRateHz = 384000

	// A reader that gives nothing this often without an error is given up.
	emptyReads = 16
)

func checkRate(rateHz float64) error {
	if !(rateHz >= lowestRateHz && rateHz <= highestRateHz) {
		return fmt.Errorf("sample rate %g Hz is outside 8000 to 384000 Hz", rateHz)
	}
	return nil
}

// readFull fills dst from frame on, however small the pieces it comes in. Fewer samples without
// an error are the end of the recording.
func readFull(s Samples, dst []float64, frame int64) (int, error) {
	got := 0
	for empty := 0; got < len(dst); {
		n, err := s.ReadAt(dst[got:], frame+int64(got))
		got += n
		if err == io.EOF {
			return got, nil
		}
		if err != nil {
			return got, fmt.Errorf("reading at frame %d: %w", frame+int64(got), err)
		}
		if n > 0 {
			empty = 0
		} else if empty++; empty == emptyReads {
			return got, fmt.Errorf("reading at frame %d: %w", frame+int64(got), io.ErrNoProgress)
		}
	}
	return got, nil
}
