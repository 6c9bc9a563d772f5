package suspect_test

import (
	"fmt"
	"maps"
	"math"
	"runtime"
	"slices"
	"sync"
	"testing"

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

// wantShare fails the test where a share falls short.
func wantShare(t *testing.T, what string, c tally, want float64) {
	t.Helper()
	t.Logf("%s: %v, want %.0f %%", what, c, 100*want)
	if c.n == 0 || c.share() < want {
		t.Errorf("%s: %v, want %.0f %%", what, c, 100*want)
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
