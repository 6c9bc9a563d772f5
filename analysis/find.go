package analysis

import (
	"errors"
	"math"
	"sort"
)

// A Stretch is where a steady tone stands, as a sparse look found it. Times are good to some 20 ms
// (0.1 s below 400 Hz), the frequency to what two seconds of the tone allow, the level to 0.1 dB.
type Stretch struct {
	FreqHz    float64
	LevelDBFS float64
	StartSec  float64
	EndSec    float64
}

const (
	// Looks are this far apart, further in long recordings; where they differ, no further than the
	// nearest.
	nearestLookSec  = 0.4
	furthestLookSec = 2.0
	usualLooks      = 64

	// A stretch more than this below the strongest is not the tone.
	keepWithinDB = 20.0

	// A weaker stretch is background if its line is heard, this much lower at most, in the strongest.
	backgroundDB = 6.0

	edgeSec         = 0.01 // how closely an edge is looked for
	edgeAllowedSec  = 0.02 // a tone this much too short is still long enough
	leastPieceSec   = 0.25 // shorter runs are what a click or a syllable leaves of a look
	leastMentionSec = 0.5  // shorter ones are no tones at all

	// Two runs of the same tone with less than this between are one: a click stands between them.
	gapSec = 0.5

	refineSec = 2.0
)

// FindTones looks for the steady tone of a channel, or for several one after another, by short
// looks some tenths of a second apart, and returns their stretches in order of time: whatever
// stands before, between and after. Steady means one frequency and one level, within 0.5 dB and
// what noise adds, for at least a second. The test signal gives two stretches of the same
// frequency, 10 dB apart. Left out is what lies more than 20 dB below the strongest stretch, or
// is heard during it as well, as hum is. Tones of 20 Hz to 0.45 of the rate are found; where hum is
// all there is, it is found as the tone.
//
// The errors are [ErrSilent], [ErrNoTone], a [TooShortError], or what reading gave.
func FindTones(s Samples) ([]Stretch, error) {
	if err := checkLength(s); err != nil {
		return nil, err
	}
	return newLookout(s).find()
}

func checkLength(s Samples) error {
	if err := checkRate(s.RateHz()); err != nil {
		return err
	}
	if sec := float64(s.Frames()) / s.RateHz(); sec < leastToneSec-edgeAllowedSec {
		return &TooShortError{Sec: math.Max(0, sec)}
	}
	return nil
}

// FindTonesAt looks for tones of known frequencies, in Hz, within 1 % of each (two that are nearer
// to one another count once): in a take behind a
// pad, where hum may be the strongest line. Otherwise it is as FindTones; strongest is judged for
// each frequency by itself. A frequency that is not found is left out while another is found.
//
// Where none is found but another steady tone stands, the error is an [OtherToneError].
func FindTonesAt(s Samples, freqsHz []float64) ([]Stretch, error) {
	if err := checkLength(s); err != nil {
		return nil, err
	}
	l := newLookout(s)
	var all []Stretch
	why := ErrNoTone
	for i, freqHz := range freqsHz {
		if err := (Stretch{FreqHz: freqHz, EndSec: 1}).check(l.rateHz); err != nil {
			return nil, err
		}
		if isNearAny(freqHz, freqsHz[:i]) {
			continue
		}
		l.wantHz = freqHz
		found, err := l.find()
		if err != nil && !isAbsence(err) {
			return nil, err
		}
		if err != nil && err != ErrNoTone {
			why = err
		}
		all = append(all, found...)
	}
	switch {
	case len(all) > 0:
		sortByTime(all)
		return all, nil
	case why != ErrNoTone:
		return nil, why
	}
	return nil, l.otherTone(freqsHz)
}

func isNearAny(freqHz float64, freqsHz []float64) bool {
	for _, other := range freqsHz {
		if math.Abs(freqHz-other) <= nearFrac*other {
			return true
		}
	}
	return false
}

func isAbsence(err error) bool {
	return errors.Is(err, ErrNoTone) || errors.Is(err, ErrTooShort) || errors.Is(err, ErrSilent)
}

func sortByTime(g []Stretch) {
	sort.SliceStable(g, func(i, j int) bool { return g[i].StartSec < g[j].StartSec })
}

// otherTone returns the error for when nothing was found at the frequencies wanted.
func (l *lookout) otherTone(wantHz []float64) error {
	l.wantHz = 0
	found, err := l.find()
	if err != nil {
		if isAbsence(err) {
			return ErrNoTone
		}
		return err
	}
	other := found[0]
	for _, g := range found {
		if g.LevelDBFS > other.LevelDBFS {
			other = g
		}
	}
	return &OtherToneError{WantHz: wantHz, FreqHz: other.FreqHz, LevelDBFS: other.LevelDBFS}
}
