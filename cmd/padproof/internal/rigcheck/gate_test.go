package rigcheck

import (
	"context"
	"errors"
	"os"
	"strings"
	"testing"
	"time"

	"padproof/cmd/padproof/internal/ledger"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/sheet"
	"padproof/cmd/padproof/internal/unit"
)

func gateTo(l *ledger.Ledger) *Gate {
	return &Gate{Station: "b", Open: func(context.Context) (*ledger.Ledger, error) { return l, nil }}
}

// held puts a unit with a verdict through the gate.
func held(t *testing.T, g *Gate, rig *sheet.Rig, verdict string, at time.Time) *result.Answer {
	t.Helper()
	a := &result.Answer{Verdict: verdict}
	if err := g.Hold(context.Background(), &unit.Unit{RigFile: rig.File}, a, at); err != nil {
		t.Fatal(err)
	}
	return a
}

// One gate over a day: a unit is judged by the rig check that held when it was
// checked, and one made meanwhile counts.
func TestGateDay(t *testing.T) {
	rig, l := rigOf(t, benchSheet), lineLedger(t)
	g := gateTo(l)
	after := func(what string, d time.Duration, want, words string) {
		t.Helper()
		a := held(t, g, rig, "PASS", morning.Add(d))
		if a.Verdict != want || !strings.Contains(a.Reason, words) || a.RigCheck == nil {
			t.Errorf("%s: %s, %q, %+v, want %s, %q", what, a.Verdict, a.Reason, a.RigCheck, want, words)
		}
	}
	after("nothing yet", -time.Hour, "UNPROVEN", "no rig check yet")
	keep(t, l, "b", morning, answerOf(13.58))
	after("before it", -time.Minute, "UNPROVEN", "no rig check yet")
	after("fresh", time.Minute, "PASS", "")
	after("at the end of the shift", 8*time.Hour, "PASS", "")
	after("too old", 8*time.Hour+time.Second, "UNPROVEN", "the last rig check is 8 hours old, 8 hours are allowed: measure the reference pad")
	keep(t, l, "b", morning.Add(9*time.Hour), answerOf(14))
	after("out", 9*time.Hour+time.Minute, "UNPROVEN", "+0.43 dB off its known loss")
	keep(t, l, "b", morning.Add(10*time.Hour), answerOf(13.57, result.Problem{Problem: "clipped"}))
	after("nothing proven", 10*time.Hour+time.Minute, "UNPROVEN", "proves nothing, after is clipped")
	keep(t, l, "b", morning.Add(11*time.Hour), answerOf(13.57))
	after("mended", 11*time.Hour+time.Minute, "PASS", "")
	after("an earlier unit, now", time.Minute, "PASS", "")
	after("an earlier unit that the bench was out for", 9*time.Hour+time.Minute, "UNPROVEN", "+0.43 dB off")
	if n := g.Notes(); len(n) != 4 || !strings.Contains(n[0], "no rig check yet: measure the reference pad (2 units)") {
		t.Errorf("Notes = %q", n)
	}
}

// The gate holds a PASS back and changes no other verdict.
func TestGateVerdicts(t *testing.T) {
	rig, l := rigOf(t, benchSheet), lineLedger(t)
	for _, c := range []struct{ verdict, want string }{{"PASS", "UNPROVEN"}, {"FAIL", "FAIL"}, {"UNPROVEN", "UNPROVEN"}} {
		a := held(t, gateTo(l), rig, c.verdict, morning)
		said := a.Reason
		if c.verdict != "PASS" {
			if a.Reason != "" || len(a.Warnings) != 1 {
				t.Fatalf("%s: reason %q, warnings %q", c.verdict, a.Reason, a.Warnings)
			}
			said = a.Warnings[0]
		}
		if a.Verdict != c.want || !strings.Contains(said, "no rig check yet") || a.RigCheck.State != result.RigMissing {
			t.Errorf("%s through the gate: %+v, want %s", c.verdict, a, c.want)
		}
	}
	keep(t, l, "b", morning, answerOf(13.57))
	for _, verdict := range []string{"PASS", "FAIL", "UNPROVEN"} {
		if a := held(t, gateTo(l), rig, verdict, morning); a.Verdict != verdict || a.Reason != "" || len(a.Warnings) > 0 || a.RigCheck.Record != "b/1" {
			t.Errorf("%s on a bench in order: %+v", verdict, a)
		}
	}
}

// Readings of another station, of another rig, and simulated ones do not count
// for a real unit; nor do real ones for a simulated unit.
func TestGateOthers(t *testing.T) {
	rig, l := rigOf(t, benchSheet), lineLedger(t)
	keep(t, l, "c", morning, answerOf(13.57))
	elsewhere := answerOf(13.57)
	elsewhere.Rig = "Bench two"
	keep(t, l, "b", morning, elsewhere)
	rehearsed := answerOf(13.57)
	rehearsed.Simulated = true
	keep(t, l, "b", morning, rehearsed)
	if a := held(t, gateTo(l), rig, "PASS", morning); a.Verdict != "UNPROVEN" {
		t.Errorf("a real unit: %+v", a.RigCheck)
	}
	a := &result.Answer{Verdict: "PASS", Simulated: true}
	if err := gateTo(l).Hold(context.Background(), &unit.Unit{RigFile: rig.File}, a, morning); err != nil || a.Verdict != "PASS" {
		t.Errorf("a simulated unit: %+v, %v", a, err)
	}
}

// Where nothing is asked for nothing is looked at; what cannot be read holds back.
func TestGateAsksOnly(t *testing.T) {
	never := &Gate{Open: func(context.Context) (*ledger.Ledger, error) { panic("opened unasked") }}
	for _, text := range []string{"name = \"Bench one\"\n", strings.Replace(benchSheet, "required = true", "", 1)} {
		if a := held(t, never, rigOf(t, text), "PASS", morning); a.Verdict != "PASS" || a.RigCheck != nil {
			t.Errorf("a bench that asks for nothing: %+v", a)
		}
	}
	if err := never.Hold(context.Background(), &unit.Unit{}, nil, morning); err != nil {
		t.Error(err)
	}
	rig := rigOf(t, benchSheet)
	if a := held(t, &Gate{}, rig, "PASS", morning); a.Verdict != "UNPROVEN" || !strings.Contains(a.Reason, "name it with --ledger") {
		t.Errorf("no ledger: %+v", a)
	}
	away := &ledger.Error{Where: "line.db", Reason: ledger.Busy, Text: "is locked"}
	calls := 0
	g := &Gate{Open: func(context.Context) (*ledger.Ledger, error) { calls++; return nil, away }}
	for _, d := range []time.Duration{0, time.Second, time.Minute} {
		a := &result.Answer{Verdict: "PASS"}
		err := g.Hold(context.Background(), &unit.Unit{RigFile: rig.File}, a, morning.Add(d))
		if !errors.Is(err, away) || a.Verdict != "UNPROVEN" || !strings.Contains(a.Reason, "is locked") {
			t.Errorf("a ledger that is locked: %+v, %v", a, err)
		}
	}
	if calls != 2 {
		t.Errorf("a ledger that is locked was tried %d times, want 2: at once and a minute later", calls)
	}
	if err := os.WriteFile(rig.File, []byte("nonsense = 1\n"), 0o644); err != nil {
		t.Fatal(err)
	}
	if a := held(t, &Gate{}, rig, "PASS", morning); a.Verdict != "UNPROVEN" {
		t.Errorf("a sheet that cannot be read: %+v", a)
	}
}
