package main

import (
	"bytes"
	"context"
	"encoding/json"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"padproof/cmd/padproof/internal/result"
)

// browserChecks is where the checks of pages lie that need a browser.
const browserChecks = "../../.ci/browser"

// A page stands before the eyes of a browser, a validator and an accessibility
// checker, on the screen and on paper. PADPROOF_PAGES names a folder to keep the
// pages in, with pictures and prints of each.
func TestPagesInABrowser(t *testing.T) {
	lookAt(t, func(folder string) []string {
		var paths []string
		for name, a := range pagesToLookAt(t) {
			path := filepath.Join(folder, name+".html")
			if err := writeReport(context.Background(), path, a, pageTime); err != nil {
				t.Fatal(err)
			}
			paths = append(paths, path)
		}
		return paths
	})
}

var pageTime = time.Date(2026, 3, 1, 9, 30, 0, 0, time.FixedZone("", 3600))

// lookAt has the pages looked at that are written into a folder.
func lookAt(t *testing.T, write func(folder string) []string) {
	t.Helper()
	for what, missing := range map[string]bool{
		"node": !onPath("node"), "pdftotext (poppler-utils)": !onPath("pdftotext"),
		"/usr/bin/chromium": !exists("/usr/bin/chromium"), "npm ci in .ci/browser": !exists(filepath.Join(browserChecks, "node_modules")),
	} {
		if missing {
			t.Skipf("pages are not looked at: this wants %s", what)
		}
	}
	args := []string{"look.mjs"}
	folder := os.Getenv("PADPROOF_PAGES")
	if folder == "" {
		folder = t.TempDir()
	} else {
		args = append(args, "--into", folder)
	}
	for _, path := range write(folder) {
		if info, err := os.Stat(path); err != nil || info.Size() > 1<<20 {
			t.Errorf("page %s has %d bytes (%v), want under a megabyte", path, info.Size(), err)
		}
		args = append(args, path)
	}
	cmd := exec.Command("node", args...)
	cmd.Dir = browserChecks
	if wrong, err := cmd.CombinedOutput(); err != nil {
		t.Errorf("%v:\n%s", err, wrong)
	}
}

func onPath(program string) bool {
	_, err := exec.LookPath(program)
	return err == nil
}

func exists(path string) bool {
	_, err := os.Stat(path)
	return err == nil
}

// pagesToLookAt are answers of every kind: a rehearsed unit that passes, one that
// fails with suspects, one that is unproven, with problems, one with no drawing; and
// one with the worst of names.
func pagesToLookAt(t *testing.T) map[string]*result.Answer {
	pass := answerOf(t, "check", "../../testdata/saltmarsh/0417")
	fail := answerOf(t, "check", "../../testdata/saltmarsh/0418", "--ohms", "out.hot,out.cold=358")
	fail.Simulated = false // a rehearsal says so on every sheet, and this one is to do without
	fail.Suspects, fail.Unexplained = suspectsToLookAt(), result.NumberOf(0.04)
	marked := answerOf(t, "check", "--rig", "../../testdata/saltmarsh/rig.toml", "--marked-loss-db", "20", "--within-db", "0.5", "--on-this-bench",
		"--before", "../../testdata/saltmarsh/0418/before.wav", "--after", "../../testdata/saltmarsh/0418/after.wav")
	unproven := answerOf(t, "check", "--rig", "../../testdata/saltmarsh/rig.toml",
		"--before", "../../testdata/saltmarsh/0417/before.wav", "--after", "../../testdata/saltmarsh/0418/after.wav")
	unproven.Unseen = []result.Unseen{{Part: "R2", Text: "facing 10 kΩ a series part hardly shows; read in.cold to out.cold, a sound unit reads 560 Ω"}}
	unproven.Captures[1].Problems = append(unproven.Captures[1].Problems, result.Problem{Problem: "clipped", AtSec: 3.2, Text: "peaks are cut off; lower the gain and record again"})
	unproven.Warnings = append(unproven.Warnings, "befor.wav is no role and was left out; did you mean before.wav?")
	return map[string]*result.Answer{"pass": pass, "fail": fail, "unproven": unproven, "marked": marked, "names": nastyAnswer(t)}
}

// nastyAnswer has names that would break a page that trusted them.
func nastyAnswer(t *testing.T) *result.Answer {
	a := answerOf(t, "check", "../../testdata/saltmarsh/0418")
	a.Suspects, a.Unexplained = suspectsToLookAt(), result.NumberOf(0.5)
	a.Unit = `<img src=x onerror=alert(1)>"'&` + strings.Repeat("0417", 75)
	a.Pad = "\u202egnp\u2066 אבג \u05d0\u05d1 🎛️👩‍🔧 </style><script>"
	a.Rig = strings.Repeat("Wörkbench ", 30) + "</title>"
	a.Captures[0].File = strings.Repeat("x", 300) + ".wav"
	a.Suspects[0].Fault, a.Suspects[0].Parts = `R"<3>'`+strings.Repeat("9", 300), []string{`R"<3>'` + strings.Repeat("9", 300)}
	a.Sheets[0].Text = "name = \"\u202e</pre><script>alert(1)</script>\x00\"\n" + strings.Repeat("# long ", 400) + strings.Repeat("\nline", 200)
	a.Notes = append(a.Notes, strings.Repeat("n", 400), "\u05d0\u05d1\u05d2 before.wav: 3 dB")
	return a
}

func suspectsToLookAt() []result.Suspect {
	one := func(fault string, parts []string, weight, loss, wrong result.Number) result.Suspect {
		return result.Suspect{
			Fault: fault, Parts: parts, Weight: weight, Predicted: map[string]result.Number{"loss_db": loss, "service_loss_db": loss + 0.4},
			Confirm: result.Confirm{
				Pins: []string{"out.hot", "out.cold"}, Joined: []string{"in.hot", "in.cold"}, GoodOhms: 254.9, FaultOhms: wrong, NextOhms: result.NumberOf(254.9),
				How: "read out.hot to out.cold with in.hot and in.cold joined: a sound unit reads 254.9 Ω",
			},
		}
	}
	drifted := one("R1 drifted", []string{"R1"}, 0.07, 12.9, 255.1)
	drifted.ByPercent, drifted.ByPercentU = result.NumberOf(-8.4123), result.NumberOf(1.23)
	return []result.Suspect{one("R3 is 360", []string{"R3"}, 0.87, 12.95, 272.4), drifted, one("in and out swapped", nil, 0.01, 13.3, result.Missing)}
}

// answerOf is what the command says as JSON, read back.
func answerOf(t *testing.T, args ...string) *result.Answer {
	t.Helper()
	var stdout, stderr bytes.Buffer
	run(append(args, "--json"), &stdout, &stderr)
	a := &result.Answer{}
	if err := json.Unmarshal(stdout.Bytes(), a); err != nil || a.Verdict == "" {
		t.Fatalf("%v: %v: %s%s", args, err, &stdout, &stderr)
	}
	return a
}
