package compare

import (
	"math"
	"strings"
	"testing"

	"padproof/analysis"
)

func steadyOf(t *testing.T, r *recording) *analysis.Steadiness {
	t.Helper()
	_, _, s := measured(t, r)
	return &s
}

func scaledFrom(db, fromSec, toSec float64) func(atSec, x float64) float64 {
	return func(atSec, x float64) float64 {
		if atSec >= fromSec && atSec < toSec {
			return x * math.Pow(10, db/20)
		}
		return x
	}
}

func TestJudgeSteadiness(t *testing.T) {
	sound := func(seed uint64) *recording { return record(toneHz, -20, 0, 5).noise(-80, seed) }
	step := func(db float64) *recording {
		return record(toneHz, -20, 0, 5).each(scaledFrom(db, 2.6, 9)).noise(-80, 5)
	}
	crackling := func(seed uint64) *recording {
		return sound(seed).each(func(at, x float64) float64 {
			if at > 3 && at < 3.004 {
				return x + 0.01*math.Sin(1e5*at*at)
			}
			return x
		})
	}
	tests := []struct {
		name                string
		before, after, flex *recording
		want                Verdict
		from, reason        string
	}{
		{"sound", sound(1), sound(2), sound(3), Pass, "", ""},
		{"after alone", nil, sound(2), nil, Pass, "after", ""},
		{"after steps", sound(1), step(0.2), sound(3), Fail, "after", ""},
		{"flex loses contact", sound(1), sound(2), step(-3), Fail, "flex", ""},
		{"on the limit", sound(1), step(0.05), nil, Unproven, "after", "record after again"},
		{"the source steps too", step(0.2), step(0.2), nil, Unproven, "after", "steadier generator"},
		{"flex crackles", sound(1), sound(2), crackling(3), Unproven, "", "flex crackles at 3.0 s"},
		{"so does before", crackling(1), sound(2), crackling(3), Pass, "", ""},
		{"nothing", nil, nil, nil, Unproven, "", "4 s"},
	}
	for _, tt := range tests {
		c := SteadyCase{Limit: AtMost(0.05)}
		for _, take := range []struct {
			r  *recording
			to **analysis.Steadiness
		}{{tt.before, &c.Before}, {tt.after, &c.After}, {tt.flex, &c.Flex}} {
			if take.r != nil {
				*take.to = steadyOf(t, take.r)
			}
		}
		f, err := JudgeSteadiness(c)
		if err != nil {
			t.Fatal(err)
		}
		if f.Verdict != tt.want || tt.from != "" && f.From != tt.from || !strings.Contains(f.Reason, tt.reason) {
			t.Errorf("%s: %s from %s, %.4f ± %.4f dB (%s), want %s from %s (%s)", tt.name, f.Verdict, f.From, f.Measured, f.UDB, f.Reason, tt.want, tt.from, tt.reason)
		}
	}
}

// A dip of one block that lies on the limit passes in no more than a few takes, however much noise
// is taken off.
func TestSteadinessAtTheLimitHardlyPasses(t *testing.T) {
	passes, takes := 0, 60
	for seed := range takes {
		// 0.15 dB for 0.1 s about the middle of a block: all of the block shows it.
		r := record(toneHz, -20, 0, 4).each(scaledFrom(-0.15, 2.40, 2.50)).noise(-48, uint64(seed))
		f, err := JudgeSteadiness(SteadyCase{After: steadyOf(t, r), Limit: AtMost(0.15)})
		if err != nil {
			t.Fatal(err)
		}
		if f.Verdict == Pass {
			passes++
		}
	}
	if passes > 4 {
		t.Errorf("%d of %d takes on the limit pass, want at most about 2.5 %%", passes, takes)
	}
}
