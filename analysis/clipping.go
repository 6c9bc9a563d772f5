package analysis

import "math"

// Clipped says where a recording's peaks were cut off.
//
// A cut is a run of three or more equal samples at the highest or lowest value for some tenths of
// a second around, at full scale or below it, that is flatter than the signal beside it and
// the steps it is stored in allow: so the broad crests of a low tone, and those of 8 and 16 bit, are
// none. Common practice, no source. Soft clipping, and a cut that noise was added to afterwards,
// are not seen here; they show as harmonics.
type Clipped struct {
	Runs      int     // cut peaks
	Samples   int     // samples in them
	FirstSec  float64 // start of the first; 0 where there is none
	LevelDBFS float64 // of a sine that would just reach the first cut; 0 at full scale
}

const (
	leastRun = 3

	// How many times flatter than natural a crest must be.
	flatness = 4.0

	// A run is judged once this many samples behind it are known.
	flatMargin = 64
	flatLead   = 4 * flatMargin
)

// A flatFinder looks for cut peaks in a recording that comes in chunks, each with flatLead samples
// of the one before in front.
type flatFinder struct {
	rateHz float64
	hop    int
	found  Clipped
	cuts   []uint8 // cut peaks that begin in each hop, 255 at most
}

// chunk looks through b, whose first sample has the number frame, for runs at low and high, the
// extremes of its new samples, which begin at fresh. Runs that end within flatMargin of its end are
// left to the next chunk, unless this is the last.
func (f *flatFinder) chunk(b []float64, fresh int, frame int64, low, high float64, last bool) {
	if !(low < high) {
		return
	}
	from, to := max(0, fresh-flatMargin), len(b)-flatMargin
	if last {
		to = len(b)
	}
	step := 0.0 // in which samples are stored, once it is needed

	// No run fits between two of these.
	for i := leastRun - 1; i < len(b); i += leastRun {
		if v := b[i]; v != low && v != high {
			continue
		}
		start, end := i, i+1
		for start > 0 && b[start-1] == b[i] {
			start--
		}
		for end < len(b) && b[end] == b[i] {
			end++
		}
		if end-start >= leastRun && end > from && end <= to {
			if step == 0 {
				step = resolution(b)
			}
			if stepNeeded(b, start, end) > flatness*step {
				f.note(end-start, frame+int64(start), b[i])
			}
		}
		i += (end - 1 - i) / leastRun * leastRun // once a run is enough
	}
}

func (f *flatFinder) note(samples int, frame int64, value float64) {
	atSec := float64(frame) / f.rateHz
	for int64(len(f.cuts))*int64(f.hop) <= frame {
		f.cuts = append(f.cuts, 0)
	}
	if here := &f.cuts[frame/int64(f.hop)]; *here < math.MaxUint8 {
		*here++
	}
	if f.found.Runs == 0 {
		f.found.FirstSec = atSec
		f.found.LevelDBFS = DBFSFromPeak(math.Abs(value))
	}
	f.found.Runs++
	f.found.Samples += samples
}

// stepNeeded returns how wide the steps in which samples are stored would have to be to make the
// run of equal samples b[start:end] a natural crest. Were it the top of a smooth wave, a parabola,
// then one run's length beyond its edges the wave would lie nine times as far down as at the edges,
// and a step would have to be about as wide as that. For a cut the steps are clearly finer. Next to
// nothing where the ends of b are too near to tell.
func stepNeeded(b []float64, start, end int) float64 {
	n := end - start
	value, fall := b[start], math.Inf(1)
	if at := start - n; at >= 0 {
		fall = math.Abs(value - b[at])
	}
	if at := end - 1 + n; at < len(b) {
		fall = math.Min(fall, math.Abs(value-b[at]))
	}
	if math.IsInf(fall, 1) {
		return 0
	}
	inside := float64(n-1) / float64(n)
	return fall / 9 * inside * inside
}

// resolution estimates the step in which samples are stored: the smallest difference between
// neighbours where all small differences are multiples of it (so also where a coarse recording
// was scaled afterwards), else the binary fraction that all of them are multiples of.
func resolution(b []float64) float64 {
	least := math.Inf(1)
	for i := 1; i < len(b); i++ {
		if d := math.Abs(b[i] - b[i-1]); d > 0 && d < least {
			least = d
		}
	}
	grid := binaryStep(b)
	if least <= grid {
		return grid
	}
	const small, off = 8, 0.1
	for i := 1; i < len(b); i++ {
		steps := math.Abs(b[i]-b[i-1]) / least
		if steps < small && math.Abs(steps-math.Round(steps)) > off {
			return grid
		}
	}
	return least
}

// binaryStep returns the largest 2^-k, k from 7 to 31, that all samples are multiples of; 2^-31
// where there is none.
func binaryStep(b []float64) float64 {
	k := 7
	for _, v := range b {
		for k < 31 && math.Ldexp(v, k) != math.Trunc(math.Ldexp(v, k)) {
			k++
		}
	}
	return math.Ldexp(1, -k)
}
