package main_test

import (
	"fmt"
	"math"
	"path/filepath"
	"sort"
	"strings"
	"testing"
)

const (
	quietSNRDB    = 60.0  // from here on the bench loss must be within quietTolDB
	quietTolDB    = 0.01  // of the loss in the takes
	quietUDB      = 0.005 // largest U of a bench known exactly
	simulatorTol  = 0.001 // model against circuit simulator, dB
	toneTolHz     = 0.05
	coverageShare = 0.95
	passShare     = 0.97
)

// TestIndependent holds the program against units simulated without any of
// its code. Losses are a circuit simulator's. All draws are seeded, so a run
// repeats; the statistical bounds are those that a program which just keeps
// the stated share would break once in a thousand seeds (see atMost).
func TestIndependent(t *testing.T) {
	b := newSimBench(t)
	for _, s := range []struct {
		name string
		run  func(*testing.T, *simBench)
	}{
		{"scripts", testScripts},
		{"accuracy", testAccuracy},
		{"service", testService},
		{"faults600", testFaults600},
		{"coverage", testCoverage},
		{"lies", testLies},
		{"odd", testOdd},
		{"flavours", testFlavours},
	} {
		t.Run(s.name, func(t *testing.T) { s.run(t, b) })
	}
}

// testScripts has the simulation check itself against closed forms.
func testScripts(t *testing.T, b *simBench) {
	needTools(t, "ngspice")
	b.script(t, filepath.Join(scripts, "selftest.py"))
}

// testAccuracy: on a bench known exactly the loss is right for every network,
// drive, sense, rate and tone: within 0.01 dB where after is quiet, within U
// where it is not, and U itself is small where it is.
func testAccuracy(t *testing.T, b *simBench) {
	units := b.makeAndCheck(t, "accuracy")
	var quietErrors, quietU, noisyErrors, modelErrors, toneErrors []float64
	noisy, outside := 0, 0
	for _, o := range units {
		e, u := o.benchErrorDB(), o.loss.U.f()
		modelDB := math.Abs((o.loss.Bench.Expected - o.BenchStated).f())
		modelErrors = append(modelErrors, modelDB)
		if !(modelDB <= simulatorTol) {
			t.Errorf("%v: designed bench loss = %.5f, the simulator says %.5f ± %g", o, o.loss.Bench.Expected, o.BenchStated, simulatorTol)
		}
		if len(o.answer.Captures) == 2 {
			toneHz := math.Abs((o.answer.Captures[0].ToneHz - o.BeforeToneHz).f())
			toneErrors = append(toneErrors, toneHz)
			if !(toneHz <= toneTolHz) {
				t.Errorf("%v: tone at %.4f Hz, want %.4f ± %g", o, o.answer.Captures[0].ToneHz, o.BeforeToneHz, toneTolHz)
			}
		} else {
			t.Errorf("%v: %d captures, want 2: %s", o, len(o.answer.Captures), o.says())
			continue
		}
		if o.SNRDB >= quietSNRDB {
			quietErrors, quietU = append(quietErrors, e), append(quietU, u)
			if !(e <= quietTolDB && u <= quietUDB) {
				t.Errorf("%v: bench loss = %.4f with U %.4f, want %.4f ± %g, U up to %g: %s",
					o, o.loss.Bench.Measured, u, o.RecordedDB, quietTolDB, quietUDB, o.says())
			}
			for i, want := range []simValue{o.BeforeDBFS, o.AfterDBFS} {
				if got := o.answer.Captures[i].LevelDBFS; !(math.Abs((got - want).f()) <= quietTolDB) {
					t.Errorf("%v: level of %s = %.4f dBFS, want %.4f ± %g", o, o.answer.Captures[i].Role, got, want, quietTolDB)
				}
			}
			continue
		}
		noisy++
		noisyErrors = append(noisyErrors, e)
		if !(e <= u) {
			outside++
			t.Logf("outside U: %v, SNR %.1f dB, hum %v: off by %.4f, U %.4f", o, o.SNRDB, o.Hum, e, u)
		}
		// Whatever U says: no estimate may be off by more than six times what
		// the noise allows the best one. Hum beside the tone leaks in, and U may
		// say how much.
		room := 6*o.BoundDB.f() + 0.002
		if o.Hum {
			room += 3 * u
		}
		if !(e <= room) {
			t.Errorf("%v: off by %.4f dB at SNR %.1f dB, want within %.4f", o, e, o.SNRDB, room)
		}
	}
	if most := atMost(noisy, 1-coverageShare); outside > most {
		t.Errorf("%d of %d noisy units outside U, want at most %d", outside, noisy, most)
	}
	t.Logf("bench loss, quiet after: worst |error| %.5f dB, worst U %.5f dB, over %d units", worst(quietErrors), worst(quietU), len(quietErrors))
	t.Logf("bench loss, noisy after: worst |error| %.4f dB, %d of %d outside U", worst(noisyErrors), outside, noisy)
	t.Logf("designed loss against the simulator: worst %.6f dB; tone: worst %.4f Hz", worst(modelErrors), worst(toneErrors))
}

// testService: the true loss in service lies inside U, and sound units pass
// unless this bench cannot see a part.
func testService(t *testing.T, b *simBench) {
	args := []string{}
	if long() {
		args = []string{"--count", "3000"}
	}
	units := b.makeAndCheck(t, "service", args...)
	var errorsDB, ratio []float64
	counts := map[string]int{}
	outside, bad := 0, 0
	same, sameBad := 0, 0
	for _, o := range units {
		e, u := o.serviceErrorDB(), o.loss.U.f()
		errorsDB, ratio = append(errorsDB, e), append(ratio, e/u)
		if !(e <= u) {
			outside++
		}
		if d := math.Abs((o.loss.Expected - o.ServiceStat).f()); !(d <= simulatorTol) {
			t.Errorf("%v: designed service loss = %.5f, the simulator says %.5f ± %g", o, o.loss.Expected, o.ServiceStat, simulatorTol)
		}
		if o.SNRDB >= quietSNRDB && !(o.benchErrorDB() <= quietTolDB) {
			t.Errorf("%v: bench loss = %.4f, want %.4f ± %g", o, o.loss.Bench.Measured, o.RecordedDB, quietTolDB)
		}
		verdict := o.answer.Verdict
		if verdict == "UNPROVEN" && onlyUnseen(o) {
			verdict = "UNPROVEN by an unseen part"
		}
		counts[o.Label+": "+verdict]++
		if verdict != "PASS" && verdict != "UNPROVEN by an unseen part" {
			bad++
			t.Logf("sound, yet not proven: %v: %s", o, o.says())
		}
		// Between the ends of the bench itself nothing can be unseen.
		if o.Label == "same ends" {
			same++
			if verdict != "PASS" {
				sameBad++
			}
		}
	}
	n := len(units)
	if most := atMost(n, 1-coverageShare); outside > most {
		t.Errorf("true service loss outside U in %d of %d, want at most %d", outside, n, most)
	}
	if most := atMost(n, 1-passShare); bad > most {
		t.Errorf("%d of %d sound units neither PASS nor unseen, want at most %d", bad, n, most)
	}
	if most := atMost(same, 1-passShare); sameBad > most {
		t.Errorf("%d of %d sound units in service at their bench are no PASS, want at most %d", sameBad, same, most)
	}
	t.Logf("service loss: inside U in %d of %d (%.1f %%), worst |error| %.3f dB, median |error|/U %.2f",
		n-outside, n, 100*float64(n-outside)/float64(n), worst(errorsDB), median(ratio))
	t.Logf("sound units: %s", tally(counts))
}

// onlyUnseen tells whether a part in unseen is all that keeps the loss from
// passing: the figure with its U lies inside the limits.
func onlyUnseen(o simOutcome) bool {
	l := o.loss
	return len(o.answer.Unseen) > 0 && l.Verdict == "UNPROVEN" && l.Measured-l.U >= l.Low && l.Measured+l.U <= l.High
}

// testFaults600: none of four faults of the 600 ohm pads may pass for
// 600 ohm service on the word of a 100 ohm, 10 kohm bench.
func testFaults600(t *testing.T, b *simBench) {
	counts := map[string]int{}
	sound, failed := 0, 0
	for _, o := range b.makeAndCheck(t, "faults600") {
		what := o.Label + " " + o.Fault
		if o.Fault == "" {
			what = o.Label + " sound"
			sound++
			if o.answer.Verdict == "FAIL" {
				failed++
			}
		}
		counts[what+": "+o.answer.Verdict]++
		if o.Fault != "" && o.answer.Verdict == "PASS" {
			t.Errorf("%v: PASS, true service loss %.3f: %s", o, o.ServiceDB, o.says())
		}
	}
	if most := atMost(sound, 1-passShare); failed > most {
		t.Errorf("%d of %d sound pads FAIL, want at most %d", failed, sound, most)
	}
	t.Logf("%s", tally(counts))
}

// testCoverage: 93 to 98 % inside U where repeatability makes it, at least
// 94 % where one rectangle does.
func testCoverage(t *testing.T, b *simBench) {
	args := []string{}
	if long() {
		args = []string{"--count", "8000"}
	}
	inside, all := map[string]int{}, map[string]int{}
	for _, o := range b.makeAndCheck(t, "coverage", args...) {
		all[o.Label]++
		if o.serviceErrorDB() <= o.loss.U.f() {
			inside[o.Label]++
		}
	}
	rectangles, in := 0, 0
	for label, n := range all {
		t.Logf("%s: inside U in %d of %d (%.1f %%)", label, inside[label], n, 100*float64(inside[label])/float64(n))
		if label != "repeatability" {
			rectangles, in = rectangles+n, in+inside[label]
		}
	}
	n, got := all["repeatability"], inside["repeatability"]
	if low, high := atLeast(n, 0.93), atMost(n, 0.98); got < low || got > high {
		t.Errorf("repeatability: inside U in %d of %d, want %d to %d", got, n, low, high)
	}
	if low := atLeast(rectangles, 0.94); in < low {
		t.Errorf("one rectangle: inside U in %d of %d, want at least %d", in, rectangles, low)
	}
}

// testLies: recordings that lie never become a PASS and are named for what
// they are; the same pad recorded honestly is a PASS.
func testLies(t *testing.T, b *simBench) {
	for _, o := range b.makeAndCheck(t, "lies") {
		switch passed := o.answer.Verdict == "PASS"; {
		case passed && o.Expect == "not-pass":
			t.Errorf("%v: PASS: %s", o, o.says())
		case !passed && o.Expect == "pass":
			t.Errorf("%v: no PASS: %s", o, o.says())
		}
		if o.Problem != "" && !o.names(o.Problem) {
			t.Errorf("%v: %s is not among the problems: %s", o, o.Problem, o.says())
		}
	}
}

// testOdd: unusual takes of a sound pad are a PASS, with the right loss.
func testOdd(t *testing.T, b *simBench) {
	for _, o := range b.makeAndCheck(t, "odd") {
		if o.answer.Verdict != "PASS" || !(o.benchErrorDB() <= quietTolDB) {
			t.Errorf("%v: %s, want PASS and a bench loss of %.4f ± %g", o, o.says(), o.RecordedDB, quietTolDB)
		}
	}
}

func worst(values []float64) float64 {
	most := math.NaN()
	for _, v := range values {
		if !(most >= v) {
			most = v
		}
	}
	return most
}

func median(values []float64) float64 {
	if len(values) == 0 {
		return math.NaN()
	}
	sorted := append([]float64(nil), values...)
	sort.Float64s(sorted)
	return sorted[len(sorted)/2]
}

func tally(counts map[string]int) string {
	var lines []string
	for what, n := range counts {
		lines = append(lines, fmt.Sprintf("%s %d", what, n))
	}
	sort.Strings(lines)
	return strings.Join(lines, "; ")
}
