package analysis

import "math"

// A toneRun is a row of neighbouring looks that show one tone at one level.
type toneRun struct {
	first, last int // of the looks
	meanSquare  float64
	freqHz      float64
}

func (r toneRun) levelDBFS() float64 { return DBFSFromMeanSquare(r.meanSquare) }

// find is FindTones, or FindTonesAt for one frequency.
func (l *lookout) find() ([]Stretch, error) {
	looks, err := l.survey()
	if err != nil {
		return nil, err
	}
	if looks, err = l.closeUp(looks); err != nil {
		return nil, err
	}
	if allSilent(looks) {
		return nil, ErrSilent
	}
	found, longest, err := l.stretches(looks)
	if err != nil {
		return nil, err
	}
	if found, err = l.refineAll(longEnough(joined(found))); err != nil {
		return nil, err
	}
	switch {
	case len(found) > 0:
		return l.withoutBackground(found)
	case longest.seconds() >= leastMentionSec && longest.seconds() < leastToneSec-edgeAllowedSec:
		return nil, &TooShortError{FreqHz: longest.FreqHz, Sec: longest.seconds()}
	}
	return nil, ErrNoTone
}

// stretches finds the edges of what may be a second of tone, which two looks at least show, and
// also returns the longest of all that stands out for some time at least.
func (l *lookout) stretches(looks []line) (found []Stretch, longest Stretch, err error) {
	single := toneRun{first: -1}
	for _, r := range runsOf(looks) {
		if r.first == r.last {
			if single.first < 0 || r.meanSquare > single.meanSquare {
				single = r
			}
			continue
		}
		g, err := l.stretch(looks, r)
		if err != nil {
			return nil, longest, err
		}
		if g.seconds() > longest.seconds() {
			longest = g
		}
		if g.seconds() >= leastPieceSec { // what a click leaves of a look is none
			found = append(found, g)
		}
	}
	if len(found) == 0 && single.first >= 0 {
		longest, err = l.stretch(looks, single)
	}
	return found, longest, err
}

func (g Stretch) seconds() float64 { return g.EndSec - g.StartSec }

// survey looks evenly over the whole channel, its two ends included.
func (l *lookout) survey() ([]line, error) {
	spacing := math.Max(nearestLookSec, math.Min(l.lastSec/usualLooks, furthestLookSec))
	half := float64(l.shortLook()) / l.rateHz / 2
	count := int(math.Ceil((l.lastSec - 2*half) / spacing))
	looks := make([]line, 0, count+1)
	for i := range count + 1 {
		found, err := l.look(half + (l.lastSec-2*half)*float64(i)/float64(count))
		if err != nil {
			return nil, err
		}
		looks = append(looks, found)
	}
	return looks, nil
}

// closeUp looks again between two looks, as often as needed, unless both show the same tone and it
// is not a weak one.
func (l *lookout) closeUp(looks []line) ([]line, error) {
	most := FloorDBFS
	for _, a := range looks {
		if a.found {
			most = math.Max(most, DBFSFromMeanSquare(a.meanSquare))
		}
	}
	all := looks[:1:1]
	for _, next := range looks[1:] {
		between, err := l.between(all[len(all)-1], next, most-keepWithinDB)
		if err != nil {
			return nil, err
		}
		all = append(append(all, between...), next)
	}
	return all, nil
}

func (l *lookout) between(a, b line, leastDBFS float64) ([]line, error) {
	if b.at-a.at <= nearestLookSec*1.001 || a.same(b) && DBFSFromMeanSquare(a.meanSquare) > leastDBFS {
		return nil, nil
	}
	middle, err := l.look((a.at + b.at) / 2)
	if err != nil {
		return nil, err
	}
	before, err := l.between(a, middle, leastDBFS)
	if err != nil {
		return nil, err
	}
	after, err := l.between(middle, b, leastDBFS)
	return append(append(before, middle), after...), err
}

func allSilent(looks []line) bool {
	for _, a := range looks {
		if !a.silent {
			return false
		}
	}
	return true
}

func runsOf(looks []line) []toneRun {
	var runs []toneRun
	for i, a := range looks {
		if !a.found {
			continue
		}
		if i > 0 && looks[i-1].same(a) {
			r := &runs[len(runs)-1]
			seen := float64(r.last - r.first + 1)
			r.meanSquare = (r.meanSquare*seen + a.meanSquare) / (seen + 1)
			r.freqHz = (r.freqHz*seen + a.freqHz) / (seen + 1)
			r.last = i
			continue
		}
		runs = append(runs, toneRun{first: i, last: i, meanSquare: a.meanSquare, freqHz: a.freqHz})
	}
	return runs
}

// stretch finds the edges of a run.
func (l *lookout) stretch(looks []line, r toneRun) (Stretch, error) {
	g := Stretch{FreqHz: r.freqHz, LevelDBFS: r.levelDBFS(), StartSec: 0, EndSec: l.lastSec}
	first, last := looks[r.first], looks[r.last]
	if r.first > 0 {
		edge, err := l.edge(first, looks[r.first-1].at)
		if err != nil {
			return g, err
		}
		g.StartSec = edge.fromSec + windowTailFrac(steadyWithinDB)*edge.longSec
	}
	if r.last+1 < len(looks) {
		edge, err := l.edge(last, looks[r.last+1].at)
		if err != nil {
			return g, err
		}
		g.EndSec = edge.fromSec + (1-windowTailFrac(steadyWithinDB))*edge.longSec
	}
	return g, nil
}

// edge halves the time between a look that shows the tone and one that does not, and returns the
// outermost look that shows it.
func (l *lookout) edge(with line, withoutSec float64) (line, error) {
	reference := with
	for math.Abs(with.at-withoutSec) > edgeSec {
		middle, err := l.look((with.at + withoutSec) / 2)
		if err != nil {
			return with, err
		}
		if reference.same(middle) {
			with = middle
		} else {
			withoutSec = middle.at
		}
	}
	return with, nil
}

// joined makes one of neighbouring stretches of the same tone and level with a short gap between.
func joined(all []Stretch) []Stretch {
	var out []Stretch
	for _, g := range all {
		if n := len(out); n > 0 {
			b := &out[n-1]
			if g.StartSec-b.EndSec < gapSec && math.Abs(g.LevelDBFS-b.LevelDBFS) < steadyWithinDB &&
				math.Abs(g.FreqHz-b.FreqHz) < 0.001*g.FreqHz {
				b.EndSec = g.EndSec
				continue
			}
		}
		out = append(out, g)
	}
	return out
}

func longEnough(all []Stretch) []Stretch {
	var out []Stretch
	for _, g := range all {
		if g.seconds() >= leastToneSec-edgeAllowedSec {
			out = append(out, g)
		}
	}
	return out
}
