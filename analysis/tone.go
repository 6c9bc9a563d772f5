package analysis

import (
	"math"
	"math/cmplx"

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

	leastBatch   = 4  // blocks in a batch
	longestBatch = 20 // 1 s
	leastBatches = 4
	usualBatches = 8
)

func highestToneHz(rateHz float64) float64 { return usableFrac * rateHz }

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
