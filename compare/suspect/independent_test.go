package suspect_test

import (
	"fmt"
	"maps"
	"os/exec"
	"slices"
	"strings"
	"sync"
	"testing"

	"padproof/compare/suspect"
)

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
			scorePlaces(t, all)
			meanGroup(t, all, k)
			logMisses(t, all)
			readings(t, all, k)
		})
	}
}

func scorePlaces(t *testing.T, all []ranked) {
	t.Helper()
	var first, three, amounts tally
	forms := map[string]*tally{}
	for _, r := range all {
		if !r.listed() {
			continue
		}
		first.add(r.place == 1)
		three.add(r.place >= 1 && r.place <= 3)
		if within, ok := r.amountWithin(2); ok {
			amounts.add(within)
		}
		if forms[r.Form] == nil {
			forms[r.Form] = &tally{}
		}
		forms[r.Form].add(r.place == 1)
	}
	t.Logf("%d no PASS, %d with suspects", len(all), first.n)
	for _, form := range slices.Sorted(maps.Keys(forms)) {
		t.Logf("  %-8s first %v", form, *forms[form])
	}
	wantShare(t, "first", first, 0.90)
	wantShare(t, "in the first three", three, 0.98)
	wantShare(t, "amounts within twice their standard uncertainty", amounts, 0.90)
}

// meanGroup is how many faults the first suspect holds, those counted once that are the same at every pin;
// with legs, of the networks that have two.
func meanGroup(t *testing.T, all []ranked, k taking) {
	t.Helper()
	var faults, stated, groups int
	for _, r := range all {
		if r.listed() && len(r.ranking.Suspects) > 0 && (r.Legs != nil || !k.legs) {
			faults += r.of.distinct(r.ranking.Suspects[0])
			stated += r.ranking.Suspects[0].Distinct
			groups++
		}
	}
	mean, most := float64(faults)/float64(max(groups, 1)), 2.5
	if k.legs {
		most = 1.5
	}
	t.Logf("mean group %.2f of %d, want at most %.1f (as stated: %.2f)", mean, groups, most, float64(stated)/float64(max(groups, 1)))
	if mean > most {
		t.Errorf("mean group %.2f, want at most %.1f", mean, most)
	}
}

// readings takes the readings that the search asks for, one and then another. The true fault must then be the
// foremost by itself; that a group holds it is counted beside.
func readings(t *testing.T, all []ranked, k taking) {
	var one, two, oneInGroup, twoInGroup tally
	var mu sync.Mutex
	var lost []string
	atOnce(len(all), func(i int) {
		r := all[i]
		if !r.listed() {
			return
		}
		e := r.evidence(k)
		ranking, places, foremost, said := r.ranking, [2]int{}, [2]bool{}, ""
		for n := range places {
			if len(ranking.Suspects) > 0 && ranking.Suspects[0].Confirm.Reading.PinA != "" {
				o := r.meter(t, ranking.Suspects[0].Confirm.Reading)
				said += fmt.Sprintf(" %s-%s %v %.1f;", o.PinA, o.PinB, o.Joined, o.Ohms)
				e.Ohms = append(e.Ohms, o)
				ranking = suspect.Rank(e)
			}
			places[n] = r.made.place(ranking)
			foremost[n] = r.made.foremost(ranking)
		}
		mu.Lock()
		defer mu.Unlock()
		one.add(foremost[0])
		two.add(foremost[1])
		oneInGroup.add(places[0] == 1)
		twoInGroup.add(places[1] == 1)
		if !foremost[1] {
			lost = append(lost, r.text()+said+" then "+sayRanking(ranking))
		}
	})
	if k.legs {
		wantShare(t, "first by itself after one reading", one, 0.95)
	} else { // one reading cannot part the four like arms of an H
		t.Logf("first by itself after one reading: %v", one)
	}
	wantShare(t, "first by itself after two readings", two, 0.98)
	wantShare(t, "in the first group after one reading", oneInGroup, 0.95)
	wantShare(t, "in the first group after two readings", twoInGroup, 0.98)
	for _, l := range lost[:min(len(lost), 12)] {
		t.Log("  lost: " + l)
	}
}
