package analysis

import (
	"fmt"
	"math"
	"math/cmplx"
	"sort"

	"gonum.org/v1/gonum/floats"
	"gonum.org/v1/gonum/stat"
)

// A Tone is one steady tone as MeasureTones found it.
//
// The level is that of batches, each the mean of the sine fits of some tenths of a second taken
// with their phase, so that noise does not lift a weak tone. The scatter of the batches says how
// well it repeats; with Blocks batches, StdErrDB has Blocks-1 degrees of freedom.
type Tone struct {
	FreqHz    float64
	LevelDBFS float64
	PhaseRad  float64 // of a cosine, at StartSec; -π to π

	StartSec float64 // the steady part, its edges trimmed
	EndSec   float64

	Blocks        int     // batches behind the figures below
	ScatterDB     float64 // standard deviation of their levels
	StdErrDB      float64 // standard error of LevelDBFS that this makes
	HalvesDB      float64 // half the difference of the two halves, without sign
	NoiseStdErrDB float64 // standard error that the noise beside the tone alone would make

	NoiseDBFS   float64   // 20 Hz to 20 kHz (or 0.45 of the rate): all but tone, harmonics, DC
	SNRDB       float64   // LevelDBFS less NoiseDBFS
	RestDBFS    float64   // all but tone and DC, at all frequencies
	RMSDBFS     float64   // everything: tone, noise, DC
	HarmonicsDB []float64 // relative to the tone: 2, 3 … 10, as many as lie below 0.45 of the rate

	Spectrum *Spectrum // of the steady part, tone included; nil where no segment of it was usable
}

const (
	lowestToneHz = 20.0

	steadyWithinDB  = 0.5
	steadyWithinRad = 0.1
	steadySigmas    = 6.0
	// Where the blocks' amplitude scatters by more than this part, no tone stands: 100 ms of a tone
	// 10 dB under the noise of the band scatter as much.
	mostScatterFrac = 0.2

	// Below this the blocks are smoothed over three hops more, which takes off what lies 10 Hz away:
	// hum beside a low tone.
	smoothBelowHz = 400.0

	leastBlocks  = 12 // in the steady part
	leastBatch   = 4  // blocks in a batch
	longestBatch = 20 // 1 s
	leastBatches = 4
	usualBatches = 8
)

func highestToneHz(rateHz float64) float64 { return usableFrac * rateHz }

// A steadyRun is the steady part of a stretch: blocks from to to-1 of the track, derotated so that
// a steady tone stands still.
type steadyRun struct {
	from, to int
	blocks   []complex128
	offHz    float64 // of the tone from the frequency that was fitted
	phase    float64 // at the first block's middle, against the fitted frequency
	smooth   bool
}

func (p *pass) tone(i int) (Tone, error) {
	g := p.watches[i].stretch
	run, err := p.steadyRun(i)
	if err != nil {
		return Tone{}, err
	}
	hopSec := p.track.HopSec
	t := Tone{
		FreqHz:   g.FreqHz + run.offHz,
		StartSec: float64(run.from) * hopSec,
		EndSec:   float64(run.to+1) * hopSec,
		RMSDBFS:  DBFSFromMeanSquare(mean32(p.track.square[run.from : run.to+1])),
	}
	atStart := 2 * math.Pi * (turns(g.FreqHz, run.from*p.hop, p.rateHz) - run.offHz*hopSec)
	t.PhaseRad = math.Remainder(atStart+run.phase, 2*math.Pi)
	run.level(&t, hopSec)
	p.watches[i].noise.finish()
	t.describeNoise(p.watches[i].noise.result, mean32(p.track.leftover[run.from:run.to+1]))
	return t, nil
}

// describeNoise fills in what the spectrum shows; without one, what the fits left over.
func (t *Tone) describeNoise(sp *Spectrum, leftover float64) {
	peak := PeakFromDBFS(t.LevelDBFS)
	density := 0.0
	t.Spectrum = sp
	if sp == nil {
		t.NoiseDBFS = DBFSFromMeanSquare(leftover)
		t.RestDBFS = t.NoiseDBFS
	} else {
		l := linesOf(sp, t.FreqHz)
		t.NoiseDBFS, t.RestDBFS, t.HarmonicsDB = l.noiseDBFS(), l.restDBFS(), l.harmonicsDB()
		density = l.densityAtTone()
	}
	t.SNRDB = t.LevelDBFS - t.NoiseDBFS
	t.NoiseStdErrDB = dbPerPart * math.Sqrt(density/(t.EndSec-t.StartSec)) / peak
}

// dbPerPart turns a small relative change into decibels: 20/ln 10.
const dbPerPart = 8.685889638065035

func mean32(x []float32) float64 {
	total := 0.0
	for _, v := range x {
		total += float64(v)
	}
	return total / float64(len(x))
}

// steadyRun looks for the longest run of blocks about the stretch whose level keeps to its median
// and whose phase goes on evenly, and trims its edges.
func (p *pass) steadyRun(i int) (*steadyRun, error) {
	g, hopSec := p.watches[i].stretch, p.track.HopSec
	low, high := p.blocksOf(i)
	inLow := max(low, int(math.Ceil(g.StartSec/hopSec)))
	inHigh := min(high, int(g.EndSec/hopSec)-1)
	if inHigh-inLow < leastBlocks/2 {
		return nil, &TooShortError{FreqHz: g.FreqHz, Sec: math.Max(0, float64(inHigh-inLow+1)*hopSec)}
	}
	run := &steadyRun{smooth: g.FreqHz < smoothBelowHz}
	blocks := make([]complex128, high-low)
	for b := range blocks {
		blocks[b] = complex128(p.track.blocks[low+b])
	}
	if run.smooth {
		smoothen(blocks)
	}
	from, to, step := longestRun(blocks, inLow-low, inHigh-low)
	if from == to {
		return nil, fmt.Errorf("%w at %.6g Hz", ErrNoTone, g.FreqHz)
	}
	trim := 1
	if run.smooth {
		trim = 2
	}
	if to-from-2*trim < leastBlocks {
		return nil, &TooShortError{FreqHz: g.FreqHz, Sec: math.Max(0, float64(to-from+1)*hopSec)}
	}
	run.from, run.to = low+from+trim, low+to-trim
	run.blocks = blocks[from+trim : to-trim]
	run.settle(step, hopSec)
	return run, nil
}

// blocksOf returns the first block fitted at a watch's frequency and the first after it.
func (p *pass) blocksOf(i int) (low, high int) {
	if i > p.now {
		return 0, 0
	}
	high = len(p.track.blocks)
	if i < p.now {
		high = min(high, p.track.spans[i+1].from)
	}
	return p.track.spans[i].from, high
}

// smoothen weighs each block with its neighbours, ¼ ½ ¼: nothing of what turns by half a turn from
// block to block is left.
func smoothen(blocks []complex128) {
	if len(blocks) == 0 {
		return
	}
	before := blocks[0]
	for b := range len(blocks) - 1 {
		here := blocks[b]
		blocks[b] = (before + 2*here + blocks[b+1]) / 4
		before = here
	}
}

// longestRun returns the steady run of blocks that has most in common with those from inLow to
// inHigh-1, which must be at least two, and the median turn of phase from block to block there. An
// empty run where no tone stands.
func longestRun(blocks []complex128, inLow, inHigh int) (from, to int, step float64) {
	inside := blocks[inLow:inHigh]
	peaks, steps := make([]float64, len(inside)), make([]float64, len(inside)-1)
	for b, z := range inside {
		peaks[b] = cmplx.Abs(z)
		if b > 0 {
			steps[b-1] = turnOf(inside[b-1], z)
		}
	}
	peak, peakSigma := medianSigma(peaks)
	step, stepSigma := medianSigma(steps)
	if peakSigma > mostScatterFrac*peak || peak == 0 {
		return 0, 0, 0
	}
	peakTol := peak*(RatioFromDB(steadyWithinDB)-1) + steadySigmas*peakSigma
	stepTol := steadyWithinRad + steadySigmas*stepSigma

	best := 0
	for b := 0; b < len(blocks); {
		end := b
		for end < len(blocks) && math.Abs(cmplx.Abs(blocks[end])-peak) <= peakTol &&
			(end == b || math.Abs(math.Remainder(turnOf(blocks[end-1], blocks[end])-step, 2*math.Pi)) <= stepTol) {
			end++
		}
		if common := min(end, inHigh) - max(b, inLow); end > b && common > best {
			best, from, to = common, b, end
		}
		b = max(end, b+1)
	}
	return from, to, step
}

func turnOf(a, b complex128) float64 { return cmplx.Phase(b * cmplx.Conj(a)) }

// medianSigma returns the median and the standard deviation that the median distance from it
// stands for with normal scatter.
func medianSigma(x []float64) (median, sigma float64) {
	work := append([]float64(nil), x...)
	sort.Float64s(work)
	median = work[len(work)/2]
	for i, v := range work {
		work[i] = math.Abs(v - median)
	}
	sort.Float64s(work)
	return median, 1.4826 * work[len(work)/2]
}

// settle finds the frequency by regression of the unwrapped phase over the run and derotates it.
func (r *steadyRun) settle(step, hopSec float64) {
	at, phase := make([]float64, len(r.blocks)), make([]float64, len(r.blocks))
	for b, z := range r.blocks {
		at[b] = float64(b)
		phase[b] = cmplx.Phase(z)
		if b > 0 {
			phase[b] = phase[b-1] + step + math.Remainder(turnOf(r.blocks[b-1], z)-step, 2*math.Pi)
		}
	}
	intercept, slope := stat.LinearRegression(at, phase, nil, false)
	for b := range r.blocks {
		r.blocks[b] *= cmplx.Rect(1, -slope*float64(b))
	}
	r.phase, r.offHz = intercept, slope/(2*math.Pi*hopSec)
}

// level fills in level, scatter and standard error from the batches.
func (r *steadyRun) level(t *Tone, hopSec float64) {
	n := len(r.blocks)
	size := min(max(n/usualBatches, leastBatch), longestBatch)
	if n/size < leastBatches {
		size = n / leastBatches
	}
	count := n / size
	peaks, levels := make([]float64, count), make([]float64, count)
	for k := range peaks {
		batch := r.blocks[k*n/count : (k+1)*n/count]
		total := 0i
		for _, z := range batch {
			total += z
		}
		peaks[k] = cmplx.Abs(total) / float64(len(batch)) / r.fall(hopSec)
		levels[k] = DBFSFromPeak(peaks[k])
	}
	t.LevelDBFS = DBFSFromPeak(stat.Mean(peaks, nil))
	t.Blocks = count
	t.ScatterDB = stat.StdDev(levels, nil)
	t.StdErrDB = t.ScatterDB * math.Sqrt(overlapExcess(size, count, r.smooth)/float64(count))
	half := count / 2
	first, second := floats.Sum(peaks[:half])/float64(half), floats.Sum(peaks[count-half:])/float64(half)
	t.HalvesDB = math.Abs(DBFSFromPeak(first)-DBFSFromPeak(second)) / 2
}

// fall returns by how much the fits read low since the tone is off the frequency that was fitted.
func (r *steadyRun) fall(hopSec float64) float64 {
	fall := hannFall(r.offHz, 2*hopSec)
	if r.smooth {
		c := math.Cos(math.Pi * r.offHz * hopSec)
		fall *= c * c
	}
	return fall
}

// overlapExcess returns how much larger the variance of the batches' mean is than their sample
// variance over their number, since neighbouring batches share the blocks' overlap: in white noise
// two blocks one hop apart have a correlation of 1/6, two hops apart none.
func overlapExcess(size, count int, smooth bool) float64 {
	alike := []float64{1, 1. / 6}
	if smooth { // under the weights ¼ ½ ¼
		alike = []float64{(6 + 8./6) / 16, (4 + 7./6) / 16, (1 + 4./6) / 16, 1. / 6 / 16}
	}
	variance, shared := float64(size)*alike[0], 0.0
	for d := 1; d < len(alike); d++ {
		variance += 2 * float64(max(0, size-d)) * alike[d]
		shared += float64(d) * alike[d]
	}
	rho, k := shared/variance, float64(count)
	return (1 + 2*rho*(k-1)/k) / (1 - 2*rho/k)
}
