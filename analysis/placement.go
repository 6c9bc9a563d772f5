package analysis

import (
	"errors"
	"fmt"
	"math"
	"sort"
)

// A Placement says where the test signal of [Schedule] lies in a take.
type Placement struct {
	StartSec  float64 // where signal second 0 lies in the take, by the recorder's clock; negative where the start is cut off
	Ratio     float64 // recorder seconds per signal second; 1 + 150e-6 for a recorder 150 ppm fast
	RatioU    float64 // standard uncertainty of Ratio
	Polarity  int     // 1, -1; 0 where it cannot be told
	LevelDBFS float64 // of the opening marker, of the closing one where that alone is there
}

// TakeSec returns where a second of the signal lies in the take.
func (p Placement) TakeSec(signalSec float64) float64 { return p.StartSec + p.Ratio*signalSec }

// SignalSec returns what second of the signal a second of the take holds.
func (p Placement) SignalSec(takeSec float64) float64 { return (takeSec - p.StartSec) / p.Ratio }

// ErrNoSignal says that the test signal does not stand in a take.
var ErrNoSignal = errors.New("no test signal")

// A MarkersApartError says that both markers of the test signal are there, but not as far apart as
// any clock would have them: samples were lost between them, or put in.
type MarkersApartError struct {
	OffSec float64 // how much too far apart they are; negative where samples were lost
}

func (e *MarkersApartError) Error() string {
	if e.OffSec < 0 {
		return fmt.Sprintf("the test signal's markers lie %.3g ms too close: samples were lost between them", -1000*e.OffSec)
	}
	return fmt.Sprintf("the test signal's markers lie %.3g ms too far apart: samples were put in between them", 1000*e.OffSec)
}

const (
	// Two clocks do not differ by more.
	mostClockFrac = 200e-6
	// What stands in for the ratio where one marker alone is there: ±150 ppm, a rectangle.
	clockGuessFrac = 150e-6 / 1.7320508

	// How far from where the tone says it is a marker is looked for.
	markerWithinSec = 0.3
	// Starts that the edges of the tone give are the same within this.
	sameStartSec = 0.15
	// No stretch of the test signal's tone is longer, with both its levels made one.
	longestSignalToneSec = 6.3

	// How much of what a take holds between 0.9 and 5.3 kHz the marker must account for, as a part
	// of the power: with its partner or its tone in place, and alone. White noise alone reaches 0.02
	// once in some hours.
	leastPairedFrac = 0.06
	leastLoneFrac   = 0.25

	// Less of the turn than this is a sure polarity.
	surePolarityRad = math.Pi / 3
)

// FindSignal finds the test signal by its two markers, whatever stands before it, at any level
// that leaves a marker some 12 dB under the noise of its own band or more. The take's rate need not
// be the one it was played at.
//
// It looks where the tone's edges say that the markers are. The tone is that of tones, as [FindTones]
// or [FindTonesAt] gave them; with none, it is looked for here, and where no steady tone is found at
// all (a gain that never rests) the markers are looked for everywhere, which takes a pass of its own.
// A steady tone of another make, with no marker about it, costs next to nothing.
//
// With both markers Ratio comes from them. With one, the other cut off, Ratio is 1 and RatioU
// 87e-6, which stands for ±150 ppm. The time is that at which the marker arrives as an envelope,
// what delay the pad has at 1 to 5 kHz included. Polarity is 0 where a marker arrives turned by
// more than 60° from either, or the two disagree.
//
// The error is [ErrNoSignal], or a [MarkersApartError], with which the Placement is that of the
// opening marker alone, or what reading gave.
func FindSignal(s Samples, tones ...Stretch) (Placement, error) {
	if err := checkRate(s.RateHz()); err != nil {
		return Placement{}, err
	}
	f := newMarkerFinder(s)
	if len(tones) == 0 {
		found, err := FindTonesAt(s, []float64{ToneHz})
		var other *OtherToneError
		switch {
		case err != nil && !isAbsence(err):
			return Placement{}, err
		case errors.Is(err, ErrSilent), errors.As(err, &other) && other.FreqHz > longBelowHz:
			return Placement{}, ErrNoSignal
		case err != nil:
			return f.everywhere()
		}
		tones = found
	}
	return f.nearTones(tones)
}

// nearTones looks where the edges of a tone say.
func (f *markerFinder) nearTones(tones []Stretch) (Placement, error) {
	var lone *marks
	for _, startSec := range signalStarts(tones) {
		var m marks
		var err error
		if m.opening, err = f.near(startSec+openingMarkerSec, true); err != nil {
			return Placement{}, err
		}
		if m.closing, err = f.near(startSec+closingMarkerSec, false); err != nil {
			return Placement{}, err
		}
		if m.opening.explains >= leastPairedFrac && m.closing.explains >= leastPairedFrac {
			return f.place(m)
		}
		if lone == nil && math.Max(m.opening.explains, m.closing.explains) >= leastPairedFrac {
			lone = &m
		}
	}
	if lone == nil {
		return Placement{}, ErrNoSignal
	}
	return f.place(*lone)
}

// signalStarts returns where the signal may begin for the edges of some stretches of tone to be
// those of its own, the likeliest first.
func signalStarts(tones []Stretch) []float64 {
	var starts []float64
	for _, g := range tones {
		if math.Abs(g.FreqHz-ToneHz) > nearFrac*ToneHz || g.seconds() > longestSignalToneSec {
			continue
		}
		starts = append(starts, g.StartSec-toneStartSec, g.StartSec-toneStepSec, g.EndSec-toneStepSec, g.EndSec-toneEndSec)
	}
	sort.Float64s(starts)
	type group struct {
		startSec float64
		votes    int
	}
	var groups []group
	for _, startSec := range starts {
		if n := len(groups); n > 0 && startSec-groups[n-1].startSec < sameStartSec {
			g := &groups[n-1]
			g.votes++
			g.startSec += (startSec - g.startSec) / float64(g.votes)
			continue
		}
		groups = append(groups, group{startSec, 1})
	}
	sort.SliceStable(groups, func(i, j int) bool { return groups[i].votes > groups[j].votes })
	starts = starts[:0]
	for _, g := range groups {
		starts = append(starts, g.startSec)
	}
	return starts
}

// marks are the two markers as they were found; a sighting that is none explains nothing.
type marks struct{ opening, closing sighting }

// place makes a Placement of what was found of the markers.
func (f *markerFinder) place(m marks) (Placement, error) {
	open, close := m.opening.explains >= leastPairedFrac, m.closing.explains >= leastPairedFrac
	apartSec := closingMarkerSec - openingMarkerSec
	if open && close {
		if off := m.closing.atSec - m.opening.atSec - apartSec; math.Abs(off) > mostClockFrac*apartSec {
			p, err := f.place(marks{opening: m.opening})
			if err == nil {
				err = &MarkersApartError{OffSec: off}
			}
			return p, err
		}
		return f.placePair(m)
	}
	at, signalSec := m.opening, openingMarkerSec
	if !open {
		at, signalSec = m.closing, closingMarkerSec
	}
	if err := f.refine(&at, 1); err != nil {
		return Placement{}, err
	}
	return Placement{
		StartSec: at.atSec - signalSec, Ratio: 1, RatioU: clockGuessFrac,
		Polarity: at.polarity(), LevelDBFS: at.levelDBFS,
	}, nil
}

// placePair finds times and ratio in turns: a marker that was stretched seems to come early where
// it rises and late where it falls, until its shape is stretched alike.
func (f *markerFinder) placePair(m marks) (Placement, error) {
	const apartSec = closingMarkerSec - openingMarkerSec
	ratio := (m.closing.atSec - m.opening.atSec) / apartSec
	for range 2 {
		if err := f.refine(&m.opening, ratio); err != nil {
			return Placement{}, err
		}
		if err := f.refine(&m.closing, ratio); err != nil {
			return Placement{}, err
		}
		ratio = (m.closing.atSec - m.opening.atSec) / apartSec
	}
	p := Placement{
		StartSec: m.opening.atSec - ratio*openingMarkerSec, Ratio: ratio,
		RatioU:    math.Hypot(m.opening.sigmaSec(), m.closing.sigmaSec()) / apartSec,
		Polarity:  m.opening.polarity(),
		LevelDBFS: m.opening.levelDBFS,
	}
	if p.Polarity != m.closing.polarity() {
		p.Polarity = 0
	}
	return p, nil
}
