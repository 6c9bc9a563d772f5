package analysis

import (
	"math"
	"sync"
)

const (
	// Below this rate the weighting's shoulder does not fit under half the rate.
	leastQuasiPeakRateHz = 32000.0

	// The filter and the detector run at a whole multiple of the rate of at least this, so that the
	// rectifier sees the peaks between the samples.
	leastDetectorRateHz = 88000.0

	// Until then the pointer is still rising.
	quasiPeakSettlesSec = 2.0
)

// A detector's stages charge and discharge at these rates, per second: found by fitting the burst
// tables of ITU-R BS.468-4 (from memory, so the fit is no better than they are). Two stages in
// cascade, a fast one and a slow one, are common practice.
type detectorRates struct{ charge1, discharge1, charge2, discharge2 float64 }

var quasiPeakRates = detectorRates{charge1: 700, discharge1: 3.5, charge2: 4.5, discharge2: 2.6}

// A quasiPeak is the weighted quasi-peak meter of ITU-R BS.468-4: the weighting network as a filter
// in time, a full-wave rectifier, and two peak detectors in cascade. It reads the RMS of a steady
// sine of 1 kHz.
type quasiPeak struct {
	up       *interpolator
	sections [3]secondOrder
	detector detector
	gain     float64
	settle   int // readings until the pointer has come to rest
	readings int
	sum, top float64
	raised   []float64
}

// newQuasiPeak returns nil for a rate that the weighting does not fit.
func newQuasiPeak(rateHz float64) *quasiPeak {
	if rateHz < leastQuasiPeakRateHz {
		return nil
	}
	factor := int(math.Ceil(leastDetectorRateHz / rateHz))
	fastHz := rateHz * float64(factor)
	return &quasiPeak{
		up: newInterpolator(rateHz, factor), sections: weightingSections(fastHz),
		detector: newDetector(quasiPeakRates, fastHz), gain: detectorGain(fastHz),
		settle: int(quasiPeakSettlesSec * fastHz),
	}
}

// take runs the meter over a block.
func (q *quasiPeak) take(x []float64) {
	q.raised = q.up.run(q.raised[:0], x)
	a, b, c := q.sections[0], q.sections[1], q.sections[2]
	d := q.detector
	for _, v := range q.raised {
		reading := d.step(math.Abs(a.step(v) + b.step(v) + c.step(v)))
		if q.readings++; q.readings > q.settle {
			q.sum += reading
			if reading > q.top {
				q.top = reading
			}
		}
	}
	q.sections, q.detector = [3]secondOrder{a, b, c}, d
}

// reading returns the mean and the highest reading once settled; nil where it was not.
func (q *quasiPeak) reading() *QuasiPeak {
	if q.readings <= q.settle {
		return nil
	}
	level := func(rms float64) float64 { return DBFSFromMeanSquare(rms * rms * q.gain * q.gain) }
	return &QuasiPeak{MeanDBFS: level(q.sum / float64(q.readings-q.settle)), HighestDBFS: level(q.top)}
}

// A detector is two peak detectors in cascade.
type detector struct{ up1, down1, up2, down2, first, second float64 }

func newDetector(r detectorRates, rateHz float64) detector {
	part := func(perSec float64) float64 { return -math.Expm1(-perSec / rateHz) }
	return detector{up1: part(r.charge1), down1: part(r.discharge1), up2: part(r.charge2), down2: part(r.discharge2)}
}

func (d *detector) step(v float64) float64 {
	d.first -= d.first * d.down1
	if v > d.first {
		d.first += (v - d.first) * d.up1
	}
	d.second -= d.second * d.down2
	if d.first > d.second {
		d.second += (d.first - d.second) * d.up2
	}
	return d.second
}

var detectorGains sync.Map // rate -> float64; never changed once made

// detectorGain returns what turns a reading into the RMS of a steady sine of 1 kHz.
func detectorGain(rateHz float64) float64 {
	if g, ok := detectorGains.Load(rateHz); ok {
		return g.(float64)
	}
	d := newDetector(quasiPeakRates, rateHz)
	settle, whole := int(5*rateHz), int(0.1*rateHz)
	sum := 0.0
	for n := range settle + whole {
		v := d.step(math.Abs(math.Sin(2 * math.Pi * turns(1000, n, rateHz))))
		if n >= settle {
			sum += v
		}
	}
	gain := math.Sqrt(0.5) * float64(whole) / sum
	detectorGains.Store(rateHz, gain)
	return gain
}
