package analysis

import (
	"math"
	"math/cmplx"
	"sort"
)

// An Event is one thing that happened to a tone. Neighbouring ones count as one.
type Event struct {
	AtSec, EndSec float64
	DB            float64 // departure of the level; of a crackle, the burst's level over the tone's
	JumpDeg       float64 // jump of the phase where samples were lost or repeated, else 0
	What          string
	Stays         bool // the level does not come back within three quarters of a second
}

// What an [Event] is.
const (
	LevelStep = "level step" // the level departs and stays, or departs by less than 1 dB and returns
	Dropout   = "dropout"    // the tone is lost for a while, or samples are: its phase jumps
	Crackle   = "crackle"    // noise bursts out beside the tone while the tone stays
)

const (
	returnsWithin = 15 // blocks
	dropoutDB     = 1.0

	// A gap takes from the level what it adds to the leftover; a burst only adds.
	shareOfGap = 0.4
)

// events sorts out what goes with what: a jump of the phase belongs to the dip of level about it,
// and so does a flare of the leftover.
func (v *view) events() []Event {
	var all []Event
	leaps, flares := v.leaps, v.flares
	for _, e := range v.excursions {
		rad, flared := 0.0, 0.0
		leaps = without(leaps, func(l leap) bool {
			with := l.at >= e.from-3 && l.at <= e.to+3
			if with {
				rad = l.rad
			}
			return with
		})
		flares = without(flares, func(f flare) bool {
			with := f.from <= e.to+2 && f.to >= e.from-2
			if with {
				flared = math.Max(flared, f.most)
			}
			return with
		})
		all = append(all, v.named(e, rad, flared))
	}
	for _, l := range leaps {
		flares = without(flares, func(f flare) bool { return f.from <= l.at+3 && f.to >= l.at-3 })
		atSec := (float64(l.at) + 0.5) * v.t.HopSec
		departDB := DBFromRatio(cmplx.Abs(v.block(l.at)) / v.peak)
		all = append(all, Event{AtSec: atSec, EndSec: atSec, DB: departDB, JumpDeg: degrees(l.rad), What: Dropout})
	}
	for _, f := range flares {
		all = append(all, Event{AtSec: float64(f.from) * v.t.HopSec, EndSec: float64(f.to+1) * v.t.HopSec, DB: DBFromRatio(math.Sqrt(f.most)), What: Crackle})
	}
	sort.SliceStable(all, func(i, j int) bool { return all[i].AtSec < all[j].AtSec })
	return all
}

// without returns what does not go with something.
func without[T any](all []T, goes func(T) bool) []T {
	var rest []T
	for _, x := range all {
		if !goes(x) {
			rest = append(rest, x)
		}
	}
	return rest
}

func degrees(rad float64) float64 { return rad * 180 / math.Pi }

// named says what an excursion is.
func (v *view) named(e excursion, rad, flared float64) Event {
	hopSec := v.t.HopSec
	event := Event{AtSec: float64(e.from+1) * hopSec, EndSec: float64(e.to+1) * hopSec, DB: e.extreme, JumpDeg: degrees(rad)}
	returns := e.to-e.from < returnsWithin
	lostPart := 1 - RatioFromDB(e.extreme)
	isGap := lostPart > shareOfGap*flared && lostPart < flared/shareOfGap
	switch {
	case rad != 0 || e.lost || returns && (e.extreme < -dropoutDB || isGap):
		event.What = Dropout
	case returns && flared > lostPart*lostPart && math.Abs(e.extreme) < dropoutDB: // a step alone leaves a quarter of that
		event.What, event.DB = Crackle, DBFromRatio(math.Sqrt(flared))
	default:
		event.What, event.Stays = LevelStep, !returns || e.from == v.from
		switch {
		case e.from == v.from && e.to < v.to-1: // the first two seconds hold more of what came after
			event.AtSec, event.DB = event.EndSec, -e.extreme
		case !returns:
			event.DB = e.held
		}
	}
	return event
}
