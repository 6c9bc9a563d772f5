package analysis

import (
	"math"
	"math/cmplx"

	"gonum.org/v1/gonum/stat/distuv"
)

// A Steadiness says how evenly a tone stands over a part of a recording.
//
// Each block of the [Track] is held against the running median of the two seconds before it, those
// of the first two seconds against the median of these. So a step shows in full where it happens
// and a drift of some tenths of a decibel a minute hardly at all. A departure shorter than a block
// (50 ms at half height) shows in the share of the block that it fills. Common practice, no source.
type Steadiness struct {
	FromSec, ToSec float64 // the part that was judged
	Blocks         int     // in it; 0: too short, or no tone there, and nothing below is filled in

	DepartureDB float64 // LargestDB less NoiseDB, at least 0
	LargestDB   float64 // largest departure of a block, without sign; at most 120
	AtSec       float64 // the middle of that block
	NoiseDB     float64 // the largest that the noise beside the tone would show in half of such takes
	BlockDB     float64 // standard deviation of one block by that noise

	Events []Event // in order of time
}

const (
	runningBlocks = 40  // 2 s
	lostFrac      = 0.1 // below this part of the usual level the tone is lost
	deepestDB     = 120.0
	insetSec      = 0.03

	leastEventDB = 0.03
	eventSigmas  = 6.0

	crackleTimes    = 16.0 // over the usual leftover
	crackleToneFrac = 1e-7 // and over this part of the tone's power
)

// Steady judges the tone, as measured in the same pass as the track, between two times. For the
// test signal these are where the stage begins and ends; for a plain tone [ToneSpan] says them.
// Blocks that do not lie wholly between them, 0.03 s from either end for the edges, are left out.
func Steady(t *Track, tone Tone, fromSec, toSec float64) Steadiness {
	v := newView(t, tone)
	v.between(fromSec, toSec)
	s := Steadiness{FromSec: fromSec, ToSec: toSec}
	if v.to-v.from < leastBlocks || !v.settled() {
		return s
	}
	s.Blocks = v.to - v.from
	v.levels(&s)
	v.bursts()
	v.jumps()
	s.Events = v.events()
	// The median of the largest of n magnitudes of a normal variable.
	n := float64(s.Blocks)
	s.BlockDB = v.sigmaDB()
	s.NoiseDB = s.BlockDB * distuv.UnitNormal.Quantile((1+math.Pow(0.5, 1/n))/2)
	s.DepartureDB = math.Max(0, s.LargestDB-s.NoiseDB)
	return s
}

// A view is a tone in a track.
type view struct {
	t        *Track
	freqHz   float64
	peak     float64
	sigma    float64 // scatter of a block's amplitude by noise, as a part of it
	from, to int     // blocks

	usual, rest running
	excursions  []excursion
	flares      []flare
	leaps       []leap
}

// An excursion is a run of blocks that depart.
type excursion struct {
	from, to int     // the last included
	extreme  float64 // dB, with sign
	held     float64 // dB, where it ends or 0.75 s after it began
	lost     bool
}

// A flare is a run of hops with more leftover than usual.
type flare struct {
	from, to int
	most     float64 // mean square over the tone's
}

// A leap is a jump of phase about a block.
type leap struct {
	at  int
	rad float64
}

func newView(t *Track, tone Tone) *view {
	v := &view{t: t, freqHz: tone.FreqHz, peak: PeakFromDBFS(tone.LevelDBFS)}
	// A block under its window lets 1.5 times as much noise through as a plain fit as long.
	longSec := 2 * t.HopSec
	v.sigma = tone.NoiseStdErrDB / dbPerPart * math.Sqrt(1.5*(tone.EndSec-tone.StartSec)/longSec)
	if tone.Spectrum == nil { // then the noise is known as a whole only
		v.sigma = RatioFromDB(tone.NoiseDBFS-tone.LevelDBFS) * math.Sqrt(1.5/(2*bandHighHz*longSec))
	}
	return v
}

func (v *view) sigmaDB() float64 { return dbPerPart * v.sigma }

// block returns the amplitude in a block, turned so that the tone stands still.
func (v *view) block(b int) complex128 {
	offHz := v.t.FreqHz(b) - v.freqHz
	return complex128(v.t.blocks[b]) * cmplx.Rect(1, 2*math.Pi*offHz*v.t.MiddleSec(b))
}

// between takes the blocks that lie wholly between two times.
func (v *view) between(fromSec, toSec float64) {
	v.from = max(0, int(math.Ceil((fromSec+insetSec)/v.t.HopSec)))
	v.to = min(v.t.Len(), int(math.Floor((toSec-insetSec)/v.t.HopSec))-1)
}

// settled sets the running medians up with what the first two seconds hold; false where there is
// no tone in them.
func (v *view) settled() bool {
	for b := v.from; b < v.to && v.usual.count() < runningBlocks; b++ {
		if a := cmplx.Abs(v.block(b)); a > lostFrac*v.peak {
			v.usual.add(a)
			v.rest.add(float64(v.t.leftover[b]))
		}
	}
	return v.usual.count() >= leastBlocks
}

// levels goes through the blocks and notes where their level departs.
func (v *view) levels(s *Steadiness) {
	leastDB := math.Max(leastEventDB, eventSigmas*v.sigmaDB())
	v.eachDeparture(func(b int, departDB float64, lost bool) {
		if size := math.Abs(departDB); size > s.LargestDB {
			s.LargestDB, s.AtSec = size, v.t.MiddleSec(b)
		}
		a, usual := cmplx.Abs(v.block(b)), v.usual.median()
		if math.Abs(departDB) > leastDB && math.Abs(a-usual) > eventSigmas*v.usual.scatter() {
			v.excursions = grown(v.excursions, b, departDB, lost)
		}
	})
}

// eachDeparture gives the departure of each block from the running median, which it moves on.
func (v *view) eachDeparture(yield func(b int, departDB float64, lost bool)) {
	for b := v.from; b < v.to; b++ {
		a, usual := cmplx.Abs(v.block(b)), v.usual.median()
		lost := a < lostFrac*usual
		yield(b, math.Max(-deepestDB, math.Min(deepestDB, DBFromRatio(a/usual))), lost)
		if !lost && b >= v.from+runningBlocks {
			v.usual.turn(a)
		}
	}
}

// grown adds a block to the last excursion where it lies at most two blocks behind, else begins one.
func grown(all []excursion, b int, db float64, lost bool) []excursion {
	if n := len(all); n == 0 || b > all[n-1].to+3 {
		return append(all, excursion{b, b, db, db, lost})
	}
	e := &all[len(all)-1]
	e.to, e.lost = b, e.lost || lost
	if math.Abs(db) > math.Abs(e.extreme) {
		e.extreme = db
	}
	if e.to-e.from <= returnsWithin { // later the median follows
		e.held = db
	}
	return all
}

// bursts notes where the leftover flares up.
func (v *view) bursts() {
	toneSquare := v.peak * v.peak / 2
	last := min(v.to, len(v.t.leftover)-1)
	for h := v.from; h <= last; h++ {
		left := float64(v.t.leftover[h])
		if left > crackleTimes*v.rest.median() && left > crackleToneFrac*toneSquare {
			if n := len(v.flares); n == 0 || h > v.flares[n-1].to+3 {
				v.flares = append(v.flares, flare{from: h})
			}
			f := &v.flares[len(v.flares)-1]
			f.to, f.most = h, math.Max(f.most, left/toneSquare)
			continue // kept out of what is usual
		}
		if h >= v.from+runningBlocks {
			v.rest.turn(left)
		}
	}
}

// ToneSpan returns where a tone stands in a recording as a whole: from its first steady second or
// so to its last, whatever happened between, its edges trimmed. Only the part of the recording
// that was fitted near the tone's frequency is looked at. The tone's own steady part is the least
// that is returned. In a recording of the test signal the span takes in both levels of the tone.
func ToneSpan(t *Track, tone Tone) (fromSec, toSec float64) {
	v := newView(t, tone)
	low, high := v.fitted(tone.StartSec)
	v.from, v.to = low, high
	first, last := int(math.Round(tone.StartSec/t.HopSec)), int(math.Round(tone.EndSec/t.HopSec))-1
	for b := low; b < first; b++ {
		if v.stands(b, 1) {
			first = min(b+1, first) // the first hop may hold some of the edge
			break
		}
	}
	for b := high - 1; b >= last; b-- {
		if v.stands(b, -1) {
			last = max(b, last)
			break
		}
	}
	return float64(first) * t.HopSec, float64(last+1) * t.HopSec
}

const (
	standBlocks   = 6
	standWithinDB = 0.05
	standRad      = 0.5
)

// fitted returns the blocks about a time that were fitted at one frequency, within 1 %.
func (v *view) fitted(atSec float64) (low, high int) {
	spans := v.t.spans
	if len(spans) == 0 {
		return 0, 0
	}
	here := 0
	for i, s := range spans {
		if float64(s.from)*v.t.HopSec <= atSec {
			here = i
		}
	}
	alike := func(i int) bool { return math.Abs(spans[i].freqHz/v.freqHz-1) < nearFrac }
	first, next := here, here+1
	for first > 0 && alike(first-1) {
		first--
	}
	for next < len(spans) && alike(next) {
		next++
	}
	low, high = spans[first].from, v.t.Len()
	if next < len(spans) {
		high = min(high, spans[next].from)
	}
	return low, high
}

// stands says whether the tone stands in the blocks from b on, or before it: there, level, its
// phase going on. What fades in or out is passed over.
func (v *view) stands(b, step int) bool {
	within := v.peak * (RatioFromDB(standWithinDB) - 1 + 2*eventSigmas*v.sigma)
	usual := cmplx.Abs(v.block(b))
	for k := range standBlocks {
		at := b + k*step
		if at < v.from || at >= v.to || v.lost(at) || math.Abs(cmplx.Abs(v.block(at))-usual) > within {
			return false
		}
		if k > 0 && math.Abs(turnOf(v.block(at-step), v.block(at))) > standRad {
			return false
		}
	}
	return true
}

// LevelBetween returns the mean level of the tone between two times, the standard error that the
// noise beside it makes, and how many blocks that rests on: for the last half second of each level
// of the test signal, whose difference shows automatic gain. With no block wholly between the two
// it returns [FloorDBFS], 0 and 0.
func LevelBetween(t *Track, tone Tone, fromSec, toSec float64) (levelDBFS, stdErrDB float64, blocks int) {
	v := newView(t, tone)
	from := max(0, int(math.Ceil(fromSec/t.HopSec-1e-6)))
	to := min(t.Len(), int(math.Floor(toSec/t.HopSec+1e-6))-1)
	if to <= from {
		return FloorDBFS, 0, 0
	}
	total := 0i
	for b := from; b < to; b++ {
		total += v.block(b)
	}
	levelDBFS = DBFSFromPeak(cmplx.Abs(total) / float64(to-from))
	// So many blocks hold the noise of half as many and half a block more.
	seconds := float64(to-from+1) * t.HopSec
	here := v.sigma * RatioFromDB(math.Min(deepestDB, tone.LevelDBFS-levelDBFS))
	return levelDBFS, dbPerPart * here * math.Sqrt(2*t.HopSec/1.5/seconds), to - from
}
