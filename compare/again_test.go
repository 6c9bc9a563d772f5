package compare

import (
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"padproof/analysis"
	"padproof/compare/uncertainty"
)

// steady is a tone as a good take gives it.
func steady(levelDBFS, stdErrDB float64) analysis.Tone {
	return analysis.Tone{FreqHz: toneHz, LevelDBFS: levelDBFS, StartSec: 1, EndSec: 5, Blocks: 8, StdErrDB: stdErrDB, ScatterDB: stdErrDB * 2.8}
}

func again(levelDBFS, stdErrDB float64) *analysis.Tone {
	t := steady(levelDBFS, stdErrDB)
	return &t
}

func uOf(t *testing.T, terms []uncertainty.Term) float64 {
	t.Helper()
	u, err := uncertainty.Budget{Terms: terms}.ExpandedU(0.95)
	if err != nil {
		t.Fatal(err)
	}
	return u
}

func termNamed(r LossReading, source string) (uncertainty.Term, bool) {
	for _, term := range r.Terms {
		if term.Source == source {
			return term, true
		}
	}
	return uncertainty.Term{}, false
}

func TestReadLossTwice(t *testing.T) {
	g := Gains{LinearityDB: 0.01, DriftDB: 0.05}
	plain := ReadLoss(steady(-6, 0.001), steady(-20, 0.001), g)
	alone := ReadLossTwice(Twice{First: steady(-6, 0.001)}, Twice{First: steady(-20, 0.001)}, g)
	within(t, "loss without repeats", alone.LossDB, plain.LossDB, 1e-12)
	within(t, "U without repeats", uOf(t, alone.Terms), uOf(t, plain.Terms), 1e-12)

	r := ReadLossTwice(Twice{steady(-6, 0.001), again(-6.02, 0.001)}, Twice{steady(-20, 0.001), again(-20.006, 0.001)}, g)
	within(t, "loss of the means", r.LossDB, 13.993, 1e-9)
	if _, ok := termNamed(r, "gain drift"); ok {
		t.Error("with before-again the gain drift still counts")
	}
	for source, want := range map[string]uncertainty.Term{
		"before against before-again":   {StandardU: 0.01, Sensitivity: 1, Dof: math.Inf(1)},
		"after against after-again":     {StandardU: 0.003, Sensitivity: 1, Dof: 1},
		"repeatability of before":       {StandardU: 0.001, Sensitivity: 0.5, Dof: 7},
		"repeatability of before-again": {StandardU: 0.001, Sensitivity: 0.5, Dof: 7},
	} {
		got, ok := termNamed(r, source)
		if !ok || math.Abs(got.StandardU-want.StandardU) > 1e-9 || got.Dof != want.Dof || got.Sensitivity != want.Sensitivity {
			t.Errorf("%s: %+v, want %+v", source, got, want)
		}
	}
	only := ReadLossTwice(Twice{First: steady(-6, 0.001)}, Twice{steady(-20, 0.001), again(-20, 0.001)}, g)
	if _, ok := termNamed(only, "gain drift"); !ok {
		t.Error("with after-again alone the gain drift must count")
	}
}

// A gain that moves one way through the takes, and plugs that read anew each time: the true loss
// lies inside U in at least 95 %.
func TestReadLossTwiceCovers(t *testing.T) {
	random := rand.New(rand.NewPCG(4, 17))
	const trials = 4000
	inside := 0
	for range trials {
		drift, plugs := 0.05*(2*random.Float64()-1), 0.004
		noisy := func(levelDBFS float64) analysis.Tone {
			return steady(levelDBFS+0.001*random.NormFloat64(), 0.001)
		}
		again := func(levelDBFS float64) *analysis.Tone { x := noisy(levelDBFS); return &x }
		part := random.Float64() // when in the session after was recorded
		r := ReadLossTwice(
			Twice{noisy(-6), again(-6 + drift)},
			Twice{noisy(-20 + part*drift + plugs*random.NormFloat64()), again(-20 + part*drift + plugs*random.NormFloat64())},
			Gains{LinearityDB: 0.005, DriftDB: 0.05})
		if math.Abs(r.LossDB-14) <= uOf(t, r.Terms) {
			inside++
		}
	}
	if share := float64(inside) / trials; share < 0.94 {
		t.Errorf("true loss inside U in %.3f, want at least 0.95", share)
	}
}

// channel_match_db counts twice: two rectangles of a half-width of 0.1 dB are a triangle of 0.2,
// of which 95 % lies within 0.2 (1 - sqrt(0.05)) = 0.1553 dB; taken as normal it would be 0.1600.
func TestReadLossBoth(t *testing.T) {
	r := ReadLossBoth(steady(-6, 1e-6), steady(-20, 1e-6), 0.1, Gains{DriftDB: 0.05})
	within(t, "loss", r.LossDB, 14, 1e-9)
	if u := uOf(t, r.Terms); u < 0.1553 || u > 0.1601 {
		t.Errorf("U = %.4f dB, want 0.1553 to 0.1600", u)
	}
	if p := BothProblems(steady(-20, 1e-4), steady(-6, 1e-4), ReadLossBoth(steady(-20, 1e-4), steady(-6, 1e-4), 0.1, Gains{})); len(p) != 1 || p[0].Name != SwappedTakes {
		t.Errorf("channels swapped: %+v, want swapped", p)
	}
	if p := BothProblems(steady(-6, 1e-4), steady(-6, 1e-4), ReadLossBoth(steady(-6, 1e-4), steady(-6, 1e-4), 0.1, Gains{})); len(p) != 1 || p[0].Name != SameRecording {
		t.Errorf("one signal in both: %+v, want same-recording", p)
	}
	if p := BothProblems(steady(-6, 1e-4), steady(-20, 2e-4), r); len(p) != 0 {
		t.Errorf("sound: %+v, want no problem", p)
	}
}

func TestJudgeBypass(t *testing.T) {
	tests := []struct {
		name    string
		bypass  float64
		driftDB float64
		want    Verdict
		reason  string
	}{
		{"straight", -6.005, 0.005, Pass, ""},
		{"pad still in", -20, 0.005, Fail, ""},
		{"a little loss", -6.2, 0.005, Fail, ""},
		{"drift too large to tell", -6.0, 0.06, Unproven, "before-again"},
	}
	for _, tt := range tests {
		f, err := JudgeBypass(Twice{First: steady(-6, 0.001)}, steady(tt.bypass, 0.001), Gains{DriftDB: tt.driftDB}, PlusMinus(0, 0.05), Guarded)
		if err != nil {
			t.Fatal(err)
		}
		within(t, tt.name+": loss", f.Measured, -6-tt.bypass, 1e-9)
		if f.Verdict != tt.want || !strings.Contains(f.Reason, tt.reason) {
			t.Errorf("%s: %s (%s), want %s (%s)", tt.name, f.Verdict, f.Reason, tt.want, tt.reason)
		}
		if f.Budget.Terms[1].Source != "repeatability of bypass" {
			t.Errorf("%s: budget names %q, want bypass", tt.name, f.Budget.Terms[1].Source)
		}
	}
	// Gain raised on purpose for bypass is taken off: before -6, bypass recorded 20 dB up.
	f, err := JudgeBypass(Twice{First: steady(-26, 0.001)}, steady(-6, 0.001), Gains{AfterDB: 20}, PlusMinus(0, 0.05), Guarded)
	if err != nil || f.Verdict != Pass {
		t.Errorf("gain raised: %s %.3f dB, %v, want PASS", f.Verdict, f.Measured, err)
	}
	if f := NoBypass(PlusMinus(0, 0.05)); f.Verdict != Unproven || !strings.Contains(f.Reason, "bypass.wav") {
		t.Errorf("no take: %s (%s), want UNPROVEN naming bypass.wav", f.Verdict, f.Reason)
	}
	if f := NoBypass(NoLimit()); f.Verdict != None {
		t.Errorf("no take, no limit: %s, want none", f.Verdict)
	}
}
