package suspect_test

import (
	"fmt"
	"maps"
	"math"
	"os/exec"
	"runtime"
	"slices"
	"strings"
	"sync"
	"testing"
	"time"

	"padproof/compare"
	"padproof/compare/network"
	"padproof/compare/suspect"
)

// A ranked is a unit that is no PASS, and what the search says of it.
type ranked struct {
	*made
	verdict compare.Verdict
	ranking suspect.Ranking
	place   int // of the true fault, from 1; 0 where it is not listed
}

// listed tells whether suspects are shown: for FAIL, and for UNPROVEN where a sound unit is improbable.
func (r ranked) listed() bool {
	return r.verdict == compare.Fail || r.verdict == compare.Unproven && r.ranking.SoundP < 0.05
}

// rankAll ranks the units that do not pass, as many at once as there are processors.
func rankAll(t testing.TB, units []made, k taking) []ranked {
	t.Helper()
	all := make([]ranked, len(units))
	atOnce(len(units), func(i int) {
		u := &units[i]
		all[i] = ranked{made: u, verdict: u.verdict(t, k)}
		if all[i].verdict != compare.Pass {
			all[i].ranking = suspect.Rank(u.evidence(k))
			all[i].place = u.place(all[i].ranking)
		}
	})
	return slices.DeleteFunc(all, func(r ranked) bool { return r.verdict == compare.Pass })
}

func atOnce(n int, do func(i int)) {
	var wg sync.WaitGroup
	next := make(chan int)
	for range runtime.NumCPU() {
		wg.Go(func() {
			for i := range next {
				do(i)
			}
		})
	}
	for i := range n {
		next <- i
	}
	close(next)
	wg.Wait()
}

// place is that of the true fault among the suspects.
func (u *made) place(r suspect.Ranking) int {
	return 1 + slices.IndexFunc(r.Suspects, u.names)
}

// A tally counts how often something came true.
type tally struct{ n, yes int }

func (c *tally) add(yes bool) {
	c.n++
	if yes {
		c.yes++
	}
}

func (c tally) share() float64 { return float64(c.yes) / float64(max(c.n, 1)) }

func (c tally) String() string {
	return fmt.Sprintf("%d of %d, %.1f %%", c.yes, c.n, 100*c.share())
}

// wantShare fails the test where a share falls short; in a usual run, of few units, where it does so by more
// than chance would once in a thousand times.
func wantShare(t *testing.T, what string, c tally, want float64) {
	t.Helper()
	t.Logf("%s: %v, want %.0f %%", what, c, 100*want)
	least := want * float64(c.n)
	if !long() {
		least = float64(c.n - atMost(c.n, 1-want))
	}
	if c.n == 0 || float64(c.yes) < least {
		t.Errorf("%s: %v, want %.0f %%", what, c, 100*want)
	}
}

// The units' own model against the simulator, where that is installed.
func TestIndependentModel(t *testing.T) {
	py := python(t)
	if _, err := exec.LookPath("ngspice"); err != nil {
		t.Skip("ngspice is not installed")
	}
	out, err := exec.Command(py, script, "--selfcheck").CombinedOutput()
	t.Logf("%s", out)
	if err != nil {
		t.Errorf("%s --selfcheck: %v", script, err)
	}
}

// Every fault that the units may have is looked for, and no other.
func TestIndependentList(t *testing.T) {
	seen := map[string]bool{}
	for _, u := range makeUnits(t, "sound", 23, 1) {
		if seen[u.Design] {
			continue
		}
		seen[u.Design] = true
		found := map[string]bool{}
		for _, f := range suspect.Faults(u.of.circuit) {
			found[f.String()] = true
			if _, ok := u.of.Classes[f.String()]; !ok {
				t.Errorf("%s: %q is looked for, and no unit has it", u.Design, f)
			}
		}
		for words, class := range u.of.Classes {
			if class != 0 && !found[words] {
				t.Errorf("%s: %q is not looked for", u.Design, words)
			}
		}
	}
}

// TestIndependentSearch scores the search on units with one fault, each as likely as another.
func TestIndependentSearch(t *testing.T) {
	units := makeUnits(t, "prior", often(230, 5060), 1)
	for _, k := range looked() {
		t.Run(strings.ReplaceAll(k.name, " ", "-"), func(t *testing.T) {
			all := rankAll(t, units, k)
			var first, three tally
			var group, groups int
			var amounts tally
			forms := map[string]*tally{}
			for _, r := range all {
				if !r.listed() {
					continue
				}
				if within, ok := r.amountWithin(2); ok {
					amounts.add(within)
				}
				first.add(r.place == 1)
				three.add(r.place >= 1 && r.place <= 3)
				if forms[r.Form] == nil {
					forms[r.Form] = &tally{}
				}
				forms[r.Form].add(r.place == 1)
				if len(r.ranking.Suspects) > 0 && (r.Legs != nil || !k.legs) {
					group += r.of.distinct(r.ranking.Suspects[0])
					groups++
				}
			}
			mean := float64(group) / float64(max(groups, 1))
			t.Logf("%d units, %d no PASS, %d listed; mean group %.2f", len(units), len(all), first.n, mean)
			for form, c := range forms {
				t.Logf("  %-8s first %v", form, *c)
			}
			logMisses(t, all)
			wantShare(t, "amounts within twice their standard uncertainty", amounts, 0.90)
			wantShare(t, "first", first, 0.90)
			wantShare(t, "in the first three", three, 0.98)
			most := 2.5
			if k.legs {
				most = 1.5
			}
			if mean > most {
				t.Errorf("mean group %.2f, want at most %.1f", mean, most)
			}
			after(t, all, k)
		})
	}
}

// amountWithin tells, where the first suspect is the true part's drift, or the true end, whether its
// amount lies within so many of its standard uncertainties, and the part's tolerance.
func (r ranked) amountWithin(times float64) (within, ok bool) {
	if len(r.ranking.Suspects) == 0 || math.IsNaN(float64(r.Ratio)) {
		return false, false
	}
	s := r.ranking.Suspects[0]
	f, tol := s.Faults[0], 0.0
	switch {
	case f.End != suspect.NoEnd && f.String() == r.Fault && s.DriftFrac*(float64(r.Ratio)-1) > 0:
	case f.End == suspect.NoEnd && f.Form == network.PartDrifted && r.Form == "drift" && f.Ref == r.Ref && s.DriftFrac*(float64(r.Ratio)-1) > 0:
		tol = r.of.tol(f.Ref) * float64(r.Ratio)
	default:
		return false, false
	}
	return math.Abs(s.DriftFrac-float64(r.Ratio)+1) <= times*s.DriftStdU+tol, true
}

// logMisses says what the true faults were taken for, the oftenest first.
func logMisses(t *testing.T, all []ranked) {
	count, sample := map[string]int{}, map[string]string{}
	for _, r := range all {
		if r.listed() && r.place != 1 {
			as := fmt.Sprintf("none of these (%.1f)", r.ranking.NoneWeight)
			if len(r.ranking.Suspects) > 0 {
				as = formOf(r.ranking.Suspects[0].Faults[0])
			}
			key := r.Form + " taken for " + as
			count[key]++
			sample[key] = r.text() + " " + sayRanking(r.ranking)
		}
	}
	keys := slices.Collect(maps.Keys(count))
	slices.SortFunc(keys, func(a, b string) int { return count[b] - count[a] })
	for _, key := range keys[:min(len(keys), 14)] {
		t.Logf("  %3d %s, like %s", count[key], key, sample[key])
	}
}

// formOf is the form of a fault as the units name it.
func formOf(f suspect.Fault) string {
	if f.End != suspect.NoEnd {
		return f.String()
	}
	return map[network.FaultForm]string{
		network.PartOpen: "open", network.PartShort: "short", network.PartTimesTen: "x10", network.PartTenth: "/10", network.PartIs: "is",
		network.PartDrifted: "drift", network.PartsSwapped: "swap", network.LegOpen: "leg open", network.LegToScreen: "leg to screen",
		network.LegsCrossed: "crossed", network.EndsSwapped: "turned",
	}[f.Form]
}

// after takes the readings that the search asks for, one and then another.
func after(t *testing.T, all []ranked, k taking) {
	var one, two tally
	var mu sync.Mutex
	var lost []string
	atOnce(len(all), func(i int) {
		r := all[i]
		if !r.listed() {
			return
		}
		e := r.evidence(k)
		ranking, places, said := r.ranking, [2]int{}, ""
		for n := range places {
			if len(ranking.Suspects) > 0 && ranking.Suspects[0].Confirm.Reading.PinA != "" {
				o := r.meter(t, ranking.Suspects[0].Confirm.Reading)
				said += fmt.Sprintf(" %s-%s %v %.1f;", o.PinA, o.PinB, o.Joined, o.Ohms)
				e.Ohms = append(e.Ohms, o)
				ranking = suspect.Rank(e)
			}
			places[n] = r.made.place(ranking)
		}
		mu.Lock()
		defer mu.Unlock()
		one.add(places[0] == 1)
		two.add(places[1] == 1)
		if places[1] != 1 {
			lost = append(lost, r.text()+said+" then "+sayRanking(ranking))
		}
	})
	wantShare(t, "first after one reading", one, 0.95)
	wantShare(t, "first after two readings", two, 0.98)
	for _, l := range lost[:min(len(lost), 12)] {
		t.Log("  lost: " + l)
	}
}

func (u *made) text() string {
	return fmt.Sprintf("%s %s, %s (%.4g) %v to %v %g/%g:", u.Unit, u.Design, u.Fault, u.Ratio, u.Rig.Drive, u.Rig.Sense, u.Rig.Source, u.Rig.Load)
}

func sayRanking(r suspect.Ranking) string {
	text := fmt.Sprintf("sound %.2f none %.2f p %.3g", r.Sound, r.NoneWeight, r.SoundP)
	for _, s := range r.Suspects[:min(len(r.Suspects), 4)] {
		text += fmt.Sprintf("; %.2f", s.Weight)
		if !math.IsNaN(s.DriftStdU) {
			text += fmt.Sprintf(" (%.3g ± %.2g)", s.DriftFrac, s.DriftStdU)
		}
		for i, f := range s.Faults {
			text += []string{" or ", " "}[boolInt(i == 0)] + f.String()
			if f.End != suspect.NoEnd {
				text += fmt.Sprintf(" (%.3g)", f.Ratio)
			}
		}
	}
	return text
}

func boolInt(b bool) int {
	if b {
		return 1
	}
	return 0
}

// TestIndependentSound: a sound unit draws no suspects.
func TestIndependentSound(t *testing.T) {
	units := makeUnits(t, "sound", often(230, 5060), 2)
	for _, k := range looked() {
		all := rankAll(t, units, k)
		listed := 0
		for _, r := range all {
			if r.listed() {
				listed++
			}
		}
		improbable := make([]bool, len(units))
		atOnce(len(units), func(i int) { improbable[i] = suspect.Rank(units[i].evidence(k)).SoundP < 0.05 })
		var p tally
		for _, yes := range improbable {
			p.add(yes)
		}
		t.Logf("%s: %d sound units, %d no PASS, %d of them with suspects; p < 0.05: %v", k.name, len(units), len(all), listed, p)
		if most := atMost(len(units), 0.05); listed > 0 && listed > atMost(len(all), 0.05) || p.yes > most {
			t.Errorf("%s: %d sound units with suspects, p < 0.05 in %d, want at most %d of %d", k.name, listed, p.yes, most, len(units))
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
			for range 3 { // others may be at work on this machine
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
