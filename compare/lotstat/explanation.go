package lotstat

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"padproof/compare/network"
	"padproof/compare/uncertainty"
)

// An Explanation is one thing that alone would shift a lot as far as it lies.
type Explanation struct {
	Refs        []string             // of the parts on one reel; empty for an end of the bench
	End         string               // "source", "load", "cable"; "" for a reel
	ChangeFrac  float64              // of the value stated: 0.035 is 3.5 % high
	Interval    uncertainty.Interval // of ChangeFrac, from that of the mean and the gain, 95 %
	TolFrac     float64
	Within      bool    // ChangeFrac lies within the tolerance
	OfTolerance float64 // size of ChangeFrac over TolFrac: what they are ranked by; NaN without a tolerance
}

// A lever is what a reel or an end does to the loss of all units.
type lever struct {
	refs    []string
	end     string
	tolFrac float64
	benchDB float64
}

// levers are the reels of a drawing and the ends of its bench. Parts of one kind,
// value and tolerance come from one reel.
func (m Model) levers() []lever {
	type reel struct {
		kind           network.Kind
		value, tolFrac float64
	}
	at := make(map[reel]int)
	var all []lever
	for _, p := range m.Parts {
		key := reel{p.Kind, p.Value, p.TolFrac}
		i, ok := at[key]
		if !ok {
			i = len(all)
			at[key] = i
			all = append(all, lever{tolFrac: p.TolFrac})
		}
		all[i].refs = append(all[i].refs, p.Ref)
		all[i].benchDB += p.BenchDB
	}
	for _, e := range m.Ends {
		if e.TolFrac > 0 {
			all = append(all, lever{end: e.Name, tolFrac: e.TolFrac, benchDB: e.BenchDB})
		}
	}
	return all
}

// The largest change that one thing is thought to explain a shift by: beyond, it
// is another value, and a fault of its own.
const mostChangeFrac = 0.5

// explanationsOf are the changes that would each explain the shift alone, the
// smallest in parts of its tolerance first. The sensitivity is per relative
// change, so the change is exp(shift / sensitivity) - 1.
func explanationsOf(m Model, s Shift) []Explanation {
	var all []Explanation
	for _, l := range m.levers() {
		change := func(db float64) float64 { return math.Expm1(db / l.benchDB) }
		e := Explanation{Refs: l.refs, End: l.end, ChangeFrac: change(s.MeanDB), TolFrac: l.tolFrac, OfTolerance: math.NaN()}
		if l.benchDB == 0 || !(math.Abs(e.ChangeFrac) <= mostChangeFrac) {
			continue
		}
		a, b := change(s.interval.Low), change(s.interval.High)
		e.Interval = uncertainty.Interval{Low: math.Min(a, b), High: math.Max(a, b)}
		e.Within = math.Abs(e.ChangeFrac) <= l.tolFrac
		if l.tolFrac > 0 {
			e.OfTolerance = math.Abs(e.ChangeFrac) / l.tolFrac
		}
		all = append(all, e)
	}
	slices.SortStableFunc(all, func(a, b Explanation) int {
		switch {
		case a.rank() < b.rank():
			return -1
		case a.rank() > b.rank():
			return 1
		}
		return 0
	})
	return all
}

func (e Explanation) rank() float64 {
	if math.IsNaN(e.OfTolerance) {
		return math.Inf(1)
	}
	return e.OfTolerance
}

// String says what it is: "the reel of R1 and R2, 3.5 % high (1.0 % allowed)".
func (e Explanation) String() string {
	side := "high"
	if e.ChangeFrac < 0 {
		side = "low"
	}
	what := "the bench's " + e.End
	if e.End == "" {
		what = "the reel of " + listed(e.Refs)
	}
	tolerance := percent(e.TolFrac) + " allowed"
	if e.Within {
		tolerance = "within its " + percent(e.TolFrac)
	}
	return fmt.Sprintf("%s, %s %s (%s)", what, percent(e.ChangeFrac), side, tolerance)
}

// listed is "R1", "R1 and R2", "R1, R2 and R3".
func listed(words []string) string {
	if len(words) < 2 {
		return strings.Join(words, "")
	}
	last := len(words) - 1
	return strings.Join(words[:last], ", ") + " and " + words[last]
}
