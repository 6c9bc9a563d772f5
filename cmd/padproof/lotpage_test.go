package main

import (
	"context"
	"fmt"
	"math/rand/v2"
	"path/filepath"
	"strings"
	"testing"

	"padproof/cmd/padproof/internal/lot"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/unit"
)

// A lot's page stands before the same eyes as a unit's: one of the demo, one of many
// units with the worst of names and two drawings.
func TestPagesOfLotsInABrowser(t *testing.T) {
	lookAt(t, func(folder string) []string {
		demo, many := filepath.Join(folder, "lot.html"), filepath.Join(folder, "lot-many.html")
		if _, stdout, stderr := command("lot", "../../testdata/saltmarsh", "--report", demo, "--reports", filepath.Join(folder, "lot-units")); stderr != "" {
			t.Fatal(stdout, stderr)
		}
		if err := writeLotReport(context.Background(), many, lotOfMany(t), pageTime); err != nil {
			t.Fatal(err)
		}
		return []string{demo, many}
	})
}

// lotOfMany is a lot of 150 units of two drawings; some fail, could not be checked,
// or have names that would break a page that trusted them; the level drifts. No
// browser wants more rows than that to show what is wrong with one.
func lotOfMany(t *testing.T) *result.Lot {
	t.Helper()
	rng := rand.New(rand.NewPCG(5, 6))
	tally := lot.NewTally(`<script>alert(1)</script> "12" ` + strings.Repeat("0417", 40))
	tally.Warn("no takes in the folders \u202egnp, " + strings.Repeat("x", 300))
	for i := range 150 {
		u := &unit.Unit{Serial: fmt.Sprintf("%04d", 401+i)}
		switch i {
		case 20:
			u.Serial = `<img src=x onerror=alert(1)>"'&` + strings.Repeat("0417", 60)
		case 21:
			u.Serial = "\u202egnp \u05d0\u05d1 🎛️"
		case 22:
			tally.Add(lot.Outcome{Unit: u, Err: &result.Error{File: strings.Repeat("folder/", 40) + "after.wav", Text: "this is text, not WAV", Hint: "name the recording itself"}}, describe)
			continue
		}
		dB := 14 + 0.05*rng.NormFloat64() + 0.002*float64(i)
		a := &result.Answer{Unit: u.Serial, Pad: "Saltmarsh 14 line pad", Rig: "Workbench", Verdict: "PASS"}
		if i%3 == 0 {
			a.Pad = "Saltmarsh </style> " + strings.Repeat("14", 60)
		}
		check := result.Check{Name: "loss", Verdict: "PASS", Unit: "dB", Measured: result.Number(dB), Expected: 13.97, Low: 13.7, High: 14.3, Uncertainty: 0.036}
		if dB > 14.3 || i == 50 {
			check.Verdict, a.Verdict = "FAIL", "FAIL"
			a.Suspects = []result.Suspect{{Fault: "R3 is 360 or R1 drifted " + strings.Repeat("9", 10*(i%7)), Weight: 0.87}}
		}
		a.Checks = []result.Check{check, {Name: "noise", Verdict: "PASS", Unit: "dB", Measured: result.Number(rng.Float64()), Expected: 0, Low: result.Missing, High: 3, Uncertainty: 0.7}}
		tally.Add(lot.Outcome{Unit: u, Answer: a}, describe).Report = "lot-units/0417.html"
	}
	l, err := tally.Lot()
	if err != nil {
		t.Fatal(err)
	}
	return l
}

// Names of pages are safe everywhere, and no two are one to any file system.
func TestPageNames(t *testing.T) {
	taken := map[string]bool{}
	for _, tt := range []struct{ serial, want string }{
		{"0417", "0417"}, {"SM-12.b", "SM-12.b"}, {"sm-12.B", "sm-12.B-2"}, {"04 17", "04_17"}, {"04/17", "04_17-2"}, {"..", "_"}, {"", "_-2"}, {".hidden.", "hidden"},
		{"con", "_con"}, {"COM7.x", "_COM7.x"}, {"com", "com"}, {"COM12", "COM12"}, {`a:b*c?"<>|\`, "a_b_c______"}, {"Prüfling", "Prüfling"}, {"Pru\u0308fling", "Prüfling-2"}, {"a\x00\u202eb\xff", "a__b_"},
	} {
		if got := pageName(tt.serial, taken); got != tt.want {
			t.Errorf("pageName(%q) = %q, want %q", tt.serial, got, tt.want)
		}
	}
	long, second := pageName(strings.Repeat("ü", 200), taken), pageName(strings.Repeat("ü", 200), taken)
	if len(long) > 150 || second == long || len(second) > 155 {
		t.Errorf("long names %q, %q", long, second)
	}
}

func TestLinkFrom(t *testing.T) {
	for _, tt := range []struct{ from, to, want string }{
		{"out", "out/units/0417.html", "units/0417.html"}, {"out", "units/0417.html", "../units/0417.html"}, {".", "0417.html", "0417.html"},
		{"out", "out/a b%#?.html", "a%20b%25%23%3F.html"}, {"out", "out/a:b.html", "./a:b.html"}, {"out", "out/ü.html", "%C3%BC.html"},
	} {
		if got := linkFrom(tt.from)(tt.to); got != tt.want {
			t.Errorf("the link from %q to %q is %q, want %q", tt.from, tt.to, got, tt.want)
		}
	}
}
