package analysis

import (
	"errors"
	"fmt"
	"math"
)

// Noise is what a take, or a part of one, without a signal holds.
type Noise struct {
	FromSec, ToSec float64 // what was measured

	Spectrum *Spectrum // of all but the bursts, the mean taken out
	LeftOut  int       // segments not in it for a burst, a knock or a crackle, or for bad samples
	Bad      Bad

	// Band is 20 Hz to 20 kHz, or to 0.45 of the rate where that is lower; Cuts are what hum takes
	// up of it, and Kept is the rest. LevelDBFS and Dof are those of Kept: see [Spectrum.PowerIn].
	Band      FreqRange
	Cuts      []FreqRange
	LevelDBFS float64
	Dof       float64

	Hum   *Hum        // nil where the part is too short to keep the lines apart
	Lines []NoiseLine // other lines that stand out, strongest first; they count as noise

	// As recorded, hum and all: the level under the A weighting (IEC 61672-1:2013, Annex E), and
	// the quasi-peak meter (ITU-R BS.468-4); nil where there is no such reading.
	AWeightedDBFS float64
	QuasiPeak     *QuasiPeak

	// What speaks against this being noise: see [Noise.Foreign].
	SpreadDB float64    // from the quieter to the louder tenth of it, above 300 Hz, in blocks of 50 ms
	Tone     *NoiseLine // a line that outweighs the noise; nil where there is none
	Coarse   bool       // less noise than half a step of the recording: its level means little

	PeakDBFS float64 // largest magnitude, the mean taken out
	OffsetFS float64 // mean of the first half segment
}

// QuasiPeak is the reading of the weighted meter of ITU-R BS.468-4, once settled.
type QuasiPeak struct{ MeanDBFS, HighestDBFS float64 }

// ErrNoiseTooShort says that less than a second of noise can be read.
var ErrNoiseTooShort = errors.New("too little noise")

const (
	leastNoiseSec = 1.0

	// A hop of a segment is a burst if it holds this many times the segment's median one. The power
	// of a hop of noise scatters by a few parts in a hundred.
	noiseBurst = 4.0
	hopsOfHalf = 8
	// Hops are weighed above this, where rumble and hum do not make them differ.
	hopHighpassHz = 300.0

	// Noise whose hops differ by more is none; a tone is one that holds this many times the rest of
	// the band, or that no noise take reaches at any gain.
	steadySpreadDB = 3.0
	toneTimes      = 2.0
	loudLineDBFS   = -20.0

	// Part of the samples that are like the one before: half where the noise is about half a step.
	coarsePart = 0.5
)

// MeasureNoise reads a part of a channel once, in order, and measures it as noise. From 0 to +Inf is
// the whole channel, from its first sample to its last; toSec may lie beyond the end. mainsHz is as
// for [HumIn]: 0 finds it.
//
// Less than a second is [ErrNoiseTooShort], digital silence [ErrSilent]. A channel that ends before
// Frames says so is measured as far as it goes. Samples that are no numbers count as zeros and are
// kept out of the spectrum. Memory grows by 1 MB an hour of the part.
func MeasureNoise(s Samples, fromSec, toSec, mainsHz float64) (*Noise, error) {
	if err := checkRate(s.RateHz()); err != nil {
		return nil, err
	}
	if !(fromSec >= 0 && toSec > fromSec) {
		return nil, fmt.Errorf("noise from %g to %g s is no part of a take", fromSec, toSec)
	}
	p := newNoisePass(s.RateHz())
	first := int64(math.Round(fromSec * p.rateHz))
	last := s.Frames()
	if end := math.Round(toSec * p.rateHz); end < float64(last) {
		last = int64(end)
	}
	if float64(last-first) < leastNoiseSec*p.rateHz {
		return nil, fmt.Errorf("%.2f s of noise, need at least %.0f s: %w", math.Max(0, float64(last-first)/p.rateHz), leastNoiseSec, ErrNoiseTooShort)
	}
	p.start(int(min(last-first, math.MaxInt32)))
	p.first = first
	if err := p.read(s, first, last); err != nil {
		return nil, err
	}
	return p.noise(mainsHz)
}

// sort tells hum, other lines and noise apart.
func (n *Noise) sort(mainsHz float64) {
	m := &humMeter{sp: n.Spectrum}
	n.Hum = HumIn(n.Spectrum, mainsHz)
	n.Cuts = m.cuts(n.Hum)
	n.Lines = m.lines(n.Band, n.Cuts)
	meanSquare, dof := n.Spectrum.PowerIn(n.Kept())
	n.LevelDBFS, n.Dof = DBFSFromMeanSquare(meanSquare), dof
	rest := meanSquare
	for _, l := range n.Lines {
		rest -= l.MeanSquare
	}
	if len(n.Lines) > 0 && n.Lines[0].MeanSquare > toneTimes*math.Max(rest, 0) {
		n.Tone = &n.Lines[0]
	}
	if n.Hum == nil {
		return
	}
	for _, l := range n.Hum.Lines {
		if l.LevelDBFS() > loudLineDBFS {
			n.Tone = &NoiseLine{FreqHz: l.FreqHz, MeanSquare: l.MeanSquare, Span: m.cut(l.FreqHz, l.MeanSquare)}
		}
	}
}

// Kept returns the band without the hum.
func (n *Noise) Kept() []FreqRange { return n.Band.Without(n.Cuts...) }

// Foreign says why the part is no noise but a tone or a programme, in words that follow "it holds";
// "" for noise.
func (n *Noise) Foreign() string {
	switch {
	case n.Tone != nil:
		return fmt.Sprintf("a tone of %.4g Hz, %.1f dBFS", n.Tone.FreqHz, n.Tone.LevelDBFS())
	case n.SpreadDB > steadySpreadDB:
		return fmt.Sprintf("something whose level goes up and down by %.0f dB", n.SpreadDB)
	}
	return ""
}
