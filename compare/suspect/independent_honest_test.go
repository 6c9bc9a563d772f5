package suspect_test

import (
	"fmt"
	"slices"
	"testing"
	"time"

	"padproof/compare/suspect"
)

// TestIndependentSound: a sound unit passes, or is UNPROVEN without suspects. One in a hundred may draw some: those
// that are UNPROVEN, and among them the one in twenty that departs as far as a sound unit seldom does.
func TestIndependentSound(t *testing.T) {
	units := makeUnits(t, "sound", often(230, 5060), 2)
	for _, k := range looked() {
		drawn, improbable := tally{}, tally{}
		rankings := make([]ranked, len(units))
		atOnce(len(units), func(i int) {
			u := &units[i]
			rankings[i] = ranked{made: u, verdict: u.verdict(t, k), ranking: suspect.Rank(u.evidence(k))}
		})
		for _, r := range rankings {
			drawn.add(r.listed())
			improbable.add(r.ranking.SoundP < 0.05)
			if r.listed() {
				t.Logf("  %s %s: %s %s", k.name, r.verdict, r.text(), sayRanking(r.ranking))
			}
		}
		t.Logf("%s: sound units with suspects: %v; p < 0.05: %v", k.name, drawn, improbable)
		if drawn.share() > 0.01 || improbable.yes > atMost(len(units), 0.05) {
			t.Errorf("%s: sound units with suspects: %v, want 1 %%; p < 0.05: %v, want 5 %%", k.name, drawn, improbable)
		}
	}
}

// leastShowDB is how much the lesser of two faults must change some figure that was taken: less lies within
// what tolerances and bench leave open, and the unit is to all takes one with a single fault of the list.
const leastShowDB = 0.3

// TestIndependentTwo: two parts wrong are not blamed on one.
func TestIndependentTwo(t *testing.T) {
	units := makeUnits(t, "two", often(161, 2300), 3)
	for _, k := range looked() {
		var all, showing tally
		hidden, byShow := []float64{0.1, 0.3, 1, 3, 10, 1e9}, make([]tally, 6)
		for _, r := range rankAll(t, units, k) {
			if !r.listed() {
				continue
			}
			spared := r.blamed() == ""
			all.add(spared)
			shows := float64(r.ShowsDB[boolInt(k.legs)+boolInt(k.noise)])
			if shows > leastShowDB {
				showing.add(spared)
			}
			for i, most := range hidden {
				if shows < most {
					byShow[i].add(spared)
					break
				}
			}
		}
		t.Logf("%s: by dB that the lesser shows, less than %v: %v", k.name, hidden, byShow)
		t.Logf("%s: all, those among them of which a fault hides behind the other: %v not blamed on one part", k.name, all)
		wantShare(t, k.name+": not blamed on one part, both showing", showing, 0.80)
	}
}

// blamed is the part whose faults have a weight above 0.5 together; "" where there is none. What a group
// holds of several faults that the pins can tell apart is shared among them.
func (r ranked) blamed() string {
	weight := map[string]float64{}
	for _, s := range r.ranking.Suspects {
		kept := r.of.keepDistinct(s)
		for _, f := range kept {
			if parts := r.of.partsOf(f); len(parts) == 1 {
				weight[parts[0]] += s.Weight / float64(len(kept))
			}
		}
	}
	for ref, w := range weight {
		if w > 0.5 {
			return ref
		}
	}
	return ""
}

// TestIndependentWeights holds weights against how often they are right, on mixes of faults unlike the priors.
func TestIndependentWeights(t *testing.T) {
	for _, mix := range []string{"solder", "swaps"} {
		units := makeUnits(t, mix, often(161, 7015), 4) // so that 5,000 of them do not pass
		for _, k := range looked() {
			var bins [10]tally
			for _, r := range rankAll(t, units, k) {
				if !r.listed() {
					continue
				}
				for _, s := range r.ranking.Suspects {
					bins[min(int(10*s.Weight), 9)].add(r.names(s))
				}
			}
			table := ""
			for i, b := range bins {
				table += fmt.Sprintf("  %.1f: %d/%d", float64(i)/10, b.yes, b.n)
			}
			t.Logf("%s, %s: right by weight%s", mix, k.name, table)
			sure := tally{bins[8].n + bins[9].n, bins[8].yes + bins[9].yes}
			wantShare(t, mix+", "+k.name+": of weight 0.8 to 1.0 right", sure, 0.80)
		}
	}
}

// TestIndependentTime: a search of twelve parts is quick.
func TestIndependentTime(t *testing.T) {
	const loose = 500 * time.Millisecond // for a slow machine under load; the figure printed is the one
	units := makeUnits(t, "prior", 230, 5)
	var times []time.Duration
	for i := range units {
		if u := &units[i]; len(u.of.Parts) == 12 {
			e := u.evidence(takings[len(takings)-1])
			best := time.Hour
			for range 8 { // others may be at work on this machine
				start := time.Now()
				suspect.Rank(e)
				best = min(best, time.Since(start))
			}
			times = append(times, best)
		}
	}
	slices.Sort(times)
	t.Logf("whole search, 12 parts, every take: shortest %v, median %v, longest %v of %d", times[0], times[len(times)/2], times[len(times)-1], len(times))
	if times[len(times)/2] > loose {
		t.Errorf("whole search takes %v, want at most %v", times[len(times)/2], loose)
	}
}
