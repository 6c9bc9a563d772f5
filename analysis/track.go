package analysis

import "math/cmplx"

// A Track is the short-term level over a whole recording: the sine fit of each 100 ms, one every
// 50 ms, at the frequency of the nearest stretch. Outside the stretches it shows what there is near
// that frequency. It takes up to 21 bytes a block, 1.5 MB an hour.
type Track struct {
	HopSec float64 // from one block to the next; a block lasts two of them

	blocks   []complex64 // amplitude at the block's middle against a steady cosine at freqHz
	leftover []float32   // mean square of what the fit leaves of the block's first hop
	square   []float32   // mean square of the block's first hop
	reach    []float32   // half the way from its lowest to its highest sample
	cuts     []uint8     // cut peaks in it; none in those beyond its end
	spans    []trackSpan
	rateHz   float64
}

// A trackSpan is the run of blocks that share one frequency.
type trackSpan struct {
	from   int
	freqHz float64
}

// mostRoom is an hour of blocks: a header may claim any length.
const mostRoom = 72000

// room makes room for so many blocks at once, so that growing leaves nothing behind.
func (t *Track) room(blocks int) {
	t.blocks = make([]complex64, 0, blocks)
	t.square, t.leftover, t.reach = make([]float32, 0, blocks), make([]float32, 0, blocks), make([]float32, 0, blocks)
}

// Len returns the number of blocks.
func (t *Track) Len() int { return len(t.blocks) }

// MiddleSec returns the time of the middle of block i.
func (t *Track) MiddleSec(i int) float64 { return float64(i+1) * t.HopSec }

// LevelDBFS returns the level of the tone in block i; [FloorDBFS] where there is nothing.
func (t *Track) LevelDBFS(i int) float64 { return DBFSFromPeak(cmplx.Abs(complex128(t.blocks[i]))) }

// RestDBFS returns the level of all but the tone in the first half of block i: noise, hum,
// harmonics, clicks.
func (t *Track) RestDBFS(i int) float64 { return DBFSFromMeanSquare(float64(t.leftover[i])) }

// FreqHz returns the frequency that block i was fitted at.
func (t *Track) FreqHz(i int) float64 {
	freqHz := 0.0
	for _, s := range t.spans {
		if s.from <= i {
			freqHz = s.freqHz
		}
	}
	return freqHz
}

// PhaseRad returns the phase of the tone in block i against a cosine at FreqHz(i) that has phase 0
// at the recording's first sample. A jump from one block to the next is a jump in the recording.
func (t *Track) PhaseRad(i int) float64 { return cmplx.Phase(complex128(t.blocks[i])) }
