package main_test

import "testing"

const namedShare = 0.95

// testVoids: a recording that lies is never a PASS, however wide the limits,
// and is named for what it is; the same pads recorded honestly are a PASS.
func testVoids(t *testing.T, b *simBench) {
	all, named := map[string]int{}, map[string]int{}
	lies, right := 0, 0
	for _, o := range b.eachUnit(t, "lies", often(104, 780)) {
		passed := o.answer.Verdict == "PASS"
		if o.Expect == "pass" {
			if p := o.problems(); !passed || len(p) > 0 {
				t.Errorf("%v: sound, yet %s", o, o.says())
			}
			continue
		}
		lies++
		all[o.Label]++
		if passed {
			t.Errorf("%v: PASS: %s", o, o.says())
		}
		if o.namedRight() {
			right++
			named[o.Label]++
		} else {
			t.Logf("not named: %v, want %s on %q: %s", o, o.Problem, o.On, o.says())
		}
	}
	if low := atLeast(lies, namedShare); right < low {
		t.Errorf("%d of %d lies named right, want at least %d", right, lies, low)
	}
	for label, n := range all {
		if low := atLeast(n, namedShare); named[label] < low {
			t.Errorf("%s: named right in %d of %d, want at least %d", label, named[label], n, low)
		}
	}
	t.Logf("%d of %d lies named right", right, lies)
}

// testOrdinary: what people record with what they have is a PASS, and nothing
// is said to be wrong with it.
func testOrdinary(t *testing.T, b *simBench) {
	n := 0
	for _, o := range b.eachUnit(t, "ordinary", often(200, 2000)) {
		n++
		if p := o.problems(); o.answer.Verdict != "PASS" || len(p) > 0 {
			t.Errorf("%v: %s, want PASS and no problem", o, o.says())
		}
	}
	t.Logf("%d ordinary units", n)
}

// testEverything: of sound units recorded well, with every limit set, at least
// 97 % are a PASS.
func testEverything(t *testing.T, b *simBench) {
	n, passed := 0, 0
	checks := map[string]int{}
	for _, o := range b.eachUnit(t, "everything", often(20, 300)) {
		n++
		if o.answer.Verdict == "PASS" {
			passed++
			continue
		}
		t.Logf("sound, yet not proven: %v: %s", o, o.says())
		for _, c := range o.answer.Checks {
			if v := c.text("verdict"); v != "" && v != "PASS" {
				checks[c.text("name")+" "+v]++
			}
		}
		if o.answer.Verdict == "FAIL" {
			t.Errorf("%v: sound, and FAIL: %s", o, o.says())
		}
	}
	if low := atLeast(n, passShare); passed < low {
		t.Errorf("%d of %d sound units PASS, want at least %d: %s", passed, n, low, tally(checks))
	}
	t.Logf("%d of %d sound units PASS with every limit set", passed, n)
}
