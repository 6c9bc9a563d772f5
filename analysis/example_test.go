package analysis_test

import (
	"fmt"
	"io"
	"log"

	"padproof/analysis"
)

// memory is a channel held in a slice.
type memory struct {
	rateHz  float64
	samples []float64
}

func (m *memory) RateHz() float64 { return m.rateHz }
func (m *memory) Frames() int64   { return int64(len(m.samples)) }
func (m *memory) ReadAt(dst []float64, frame int64) (int, error) {
	if frame >= m.Frames() {
		return 0, io.EOF
	}
	return copy(dst, m.samples[frame:]), nil
}

// The test signal, as a pad of 14 dB would pass it on.
func Example() {
	take := &memory{rateHz: 48000}
	err := analysis.Generate(take.rateHz, func(block []float64) error {
		for _, v := range block {
			take.samples = append(take.samples, v*analysis.RatioFromDB(-14))
		}
		return nil
	})
	if err != nil {
		log.Fatal(err)
	}
	stretches, err := analysis.FindTones(take)
	if err != nil {
		log.Fatal(err)
	}
	m, err := analysis.MeasureTones(take, stretches)
	if err != nil {
		log.Fatal(err)
	}
	for _, tone := range m.Tones {
		fmt.Printf("%.3f Hz, %.2f dBFS, %.1f s\n", tone.FreqHz, tone.LevelDBFS, tone.EndSec-tone.StartSec)
	}
	fmt.Printf("peak %.2f dBFS, clipped %d times\n", m.PeakDBFS, m.Clipped.Runs)
	// Output:
	// 997.000 Hz, -20.00 dBFS, 3.9 s
	// 997.000 Hz, -30.00 dBFS, 1.9 s
	// peak -20.00 dBFS, clipped 0 times
}
