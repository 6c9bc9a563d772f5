package analysis

// A Measurement is what one pass over a channel gives.
type Measurement struct {
	Tones  []Tone  // one a stretch, in order of time
	Missed []error // why the tone of a stretch could not be measured, for those that are not in Tones

	Seconds  float64 // length of what could be read
	PeakDBFS float64 // largest magnitude, as the level of a sine that reaches it
	PeakSec  float64 // where it stands first
	RMSDBFS  float64 // of everything, bad samples counted as nothing
	OffsetFS float64 // mean of everything, in parts of full scale
	Clipped  Clipped
	Bad      Bad
	Track    Track
}

// Bad counts samples that are no numbers, or too large to be any: NaN, infinite, beyond 10^9 times
// full scale. They are measured as zeros, so a tone is not steady across them.
type Bad struct {
	Count    int64
	FirstSec float64 // of the first; 0 where there is none
}

const (
	largestSample = 1e9

	// A chunk is as many whole hops as fit into this many samples, at least one.
	chunkSamples = 16384
)

// MeasureTones reads the whole channel once, from the first sample to the last, and measures the
// tone in each stretch, as [FindTones] or [FindTonesAt] return them, and what the pass shows beside
// it. No stretches at all are allowed: then only what needs none is filled in.
//
// A stretch is a start: the steady part is looked for within it and as far beyond as the tone
// stands, up to half way to the next stretch. The frequency must be right within 0.2 Hz for all
// figures to hold. A stretch whose tone does not stand long enough leaves a [TooShortError] in Missed,
// one where no tone stands [ErrNoTone]; if none of the stretches can be measured, the first of these
// is the error returned.
//
// A channel that ends before Frames says so is measured as far as it goes. One without a single
// sample reads [FloorDBFS] throughout.
func MeasureTones(s Samples, stretches []Stretch) (*Measurement, error) {
	p, err := newPass(s, stretches)
	if err != nil {
		return nil, err
	}
	if err := p.read(s); err != nil {
		return nil, err
	}
	m := p.measurement()
	for i := range p.watches {
		tone, err := p.tone(i)
		if err != nil {
			m.Missed = append(m.Missed, err)
			continue
		}
		m.Tones = append(m.Tones, tone)
	}
	if len(m.Tones) == 0 && len(m.Missed) > 0 {
		return nil, m.Missed[0]
	}
	m.noteOverload()
	return m, nil
}

func (p *pass) measurement() *Measurement {
	p.track.cuts = p.flat.cuts
	m := &Measurement{
		Seconds: float64(p.frames) / p.rateHz, PeakDBFS: DBFSFromPeak(p.peak), PeakSec: float64(p.peakAt) / p.rateHz,
		RMSDBFS: FloorDBFS, Clipped: p.flat.found, Bad: p.bad, Track: p.track,
	}
	if p.frames > 0 {
		m.RMSDBFS = DBFSFromMeanSquare(p.square / float64(p.frames))
		m.OffsetFS = p.sum / float64(p.frames)
	}
	return m
}

// noteOverload counts as clipped a tone that would not fit under full scale although no sample
// lies above it: its peaks are cut so slightly that hardly a run of equal samples shows.
func (m *Measurement) noteOverload() {
	for _, t := range m.Tones {
		if m.Clipped.Runs == 0 && t.LevelDBFS > overloadDBFS && m.PeakDBFS <= 0 {
			m.Clipped = Clipped{Runs: 1, Samples: 1, FirstSec: t.StartSec, LevelDBFS: m.PeakDBFS}
		}
	}
}

// overloadDBFS leaves room for the largest step of a 16-bit sine at full scale.
const overloadDBFS = 0.001
