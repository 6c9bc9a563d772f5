package draw

import (
	"math"
	"slices"
	"strconv"

	"padproof/cmd/padproof/internal/result"
)

// mostLevelDB is the furthest that a level track is drawn: further would hide the
// limits. What lies beyond is given in words.
const mostLevelDB = 2.0

// mostEvents are pointed out by words.
const mostEvents = 6

// Level draws how the tone stands in after, and in flex, against time.
func Level(a *result.Answer) *Picture {
	title := titleOf(a, "Level against time")
	if a == nil || a.Curves == nil || !anyLevel(a.Curves.Level) {
		return nothing("level", title, "no tone stands long enough")
	}
	p := &Picture{Name: "level", Title: title, Says: levelSays(a), Simulated: a.Simulated, Width: usualWidth, Height: usualHeight}
	p.paint = func(s *sheet) { levelFrame(a).paint(s) }
	return p
}

func anyLevel(curves []result.LevelCurve) bool {
	for _, c := range curves {
		if anyDrawable(numbers(c.AtSec), numbers(c.DB)) {
			return true
		}
	}
	return false
}

func levelFrame(a *result.Answer) *frame {
	time, reach := nowhere(), span{-1, 1}
	limit := result.Missing
	if c := checkOf(a, "steadiness"); c != nil {
		limit = c.High
	}
	reach.take(float64(limit), -float64(limit))
	widest := math.Max(mostLevelDB, reach.high)
	for _, c := range a.Curves.Level {
		for _, at := range numbers(c.AtSec) {
			if math.Abs(at) <= furthestX {
				time.low, time.high = math.Min(time.low, at), math.Max(time.high, at)
			}
		}
		reach.take(numbers(c.DB)...)
	}
	caption := "dB against the level just before"
	if reach.low < -widest || reach.high > widest {
		caption += "; cut off at ±" + strconv.FormatFloat(widest, 'g', 3, 64)
	}
	reach.low, reach.high = math.Max(reach.low, -widest), math.Min(reach.high, widest)
	f := &frame{x: between(time.low, time.high, "time in the take, s"), y: evenly(reach.low, reach.high, caption)}
	if limit.OK() {
		f.flat(float64(limit), asLimit, "limit +"+give(limit))
		f.flat(-float64(limit), asLimit, "limit -"+give(limit))
	}
	for i, c := range a.Curves.Level {
		l := asMeasured
		if i > 0 {
			l = asThird
		}
		f.curves = append(f.curves, curve{numbers(c.AtSec), numbers(c.DB), l, c.Role})
		for _, e := range strongest(c.Events, mostEvents) {
			f.notes = append(f.notes, note{x: float64(e.AtSec), y: within(float64(e.DB), widest), text: e.What + " " + fixed(e.DB, 1) + " dB", mark: true})
		}
	}
	return f
}

func within(v, most float64) float64 { return math.Max(-most, math.Min(most, v)) }

// strongest are the events that count most, in order of time.
func strongest(events []result.Event, most int) []result.Event {
	if len(events) <= most {
		return events
	}
	var out []result.Event
	least := sizeOfNth(events, most)
	for _, e := range events {
		if math.Abs(float64(e.DB)) >= least && len(out) < most {
			out = append(out, e)
		}
	}
	return out
}

// sizeOfNth is the size of the n-th largest event.
func sizeOfNth(events []result.Event, n int) float64 {
	var sizes []float64
	for _, e := range events {
		sizes = append(sizes, math.Abs(float64(e.DB)))
	}
	slices.Sort(sizes)
	return sizes[len(sizes)-n]
}

func levelSays(a *result.Answer) string {
	c := checkOf(a, "steadiness")
	if c == nil || !c.Measured.OK() {
		return "The level of the tone against time, held against the two seconds before."
	}
	says := "The level of the tone departs by " + largest(c.Measured, c.Uncertainty) + " from that of the two seconds before"
	if c.From != "" && c.AtSec != nil && c.AtSec.OK() {
		says += " (" + c.From + ", at " + fixed(*c.AtSec, 1) + " s)"
	}
	var events []string
	for _, e := range strongest(c.Events, 3) {
		events = append(events, e.What+" at "+fixed(e.AtSec, 1)+" s")
	}
	if len(events) > 0 {
		says += "; " + join(events)
		if more := len(c.Events) - len(events); more > 0 {
			says += " and " + strconv.Itoa(more) + " more"
		}
	}
	return says + "; " + verdictWords(c)
}
