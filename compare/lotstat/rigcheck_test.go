package lotstat

import (
	"math"
	"math/rand/v2"
	"strings"
	"testing"
	"time"
)

var morning = time.Date(2025, 3, 3, 6, 0, 0, 0, time.UTC)

// shifts are readings eight hours apart.
func shifts(deviationsDB ...float64) []RigReading {
	var readings []RigReading
	for i, d := range deviationsDB {
		readings = append(readings, RigReading{At: morning.Add(time.Duration(i) * 8 * time.Hour), DeviationDB: d, StdUDB: 0.005})
	}
	return readings
}

var shiftRule = RigRule{KnownStdUDB: 0.05, MaxAge: 12 * time.Hour}

func rigAt(t *testing.T, readings []RigReading, rule RigRule, at time.Time) RigCheck {
	t.Helper()
	return must[RigCheck](t)(CheckRig(readings, rule, at))
}

func TestRigStates(t *testing.T) {
	for _, c := range []struct {
		what     string
		readings []RigReading
		rule     RigRule
		after    time.Duration // since the first reading
		state    RigState
		words    string
	}{
		{"none", nil, shiftRule, 0, RigMissing, "measure the reference pad"},
		{"only later ones", shifts(0), shiftRule, -time.Hour, RigMissing, "no rig check yet"},
		{"fresh", shifts(0.03), shiftRule, 12 * time.Hour, RigOK, "+0.03 dB off"},
		{"old", shifts(0.03), shiftRule, 12*time.Hour + time.Second, RigTooOld, "12 hours old, 12 hours are allowed"},
		{"no age set", shifts(0.03), RigRule{KnownStdUDB: 0.05}, 1000 * time.Hour, RigOK, ""},
		{"within 2 √(0.05² + 0.005²) = 0.1005", shifts(0.1004), shiftRule, 0, RigOK, ""},
		{"beyond it", shifts(-0.1006), shiftRule, 0, RigOut, "-0.10 dB off its known loss, 0.10 dB are allowed"},
		{"beyond what is allowed besides", shifts(0.06), RigRule{KnownStdUDB: 0.05, WithinDB: 0.05}, 0, RigOut, "0.05 dB are allowed"},
		{"allowed alone", shifts(0.06), RigRule{WithinDB: 0.07}, 0, RigOK, ""},
		{"out and old", shifts(0.3), shiftRule, 90 * time.Hour, RigOut, ""},
		{"the last one counts", shifts(0.3, 0.01), shiftRule, 8 * time.Hour, RigOK, ""},
		{"the last one by then", shifts(0.01, 0.3), shiftRule, 7 * time.Hour, RigOK, ""},
		{"not read", shifts(0.01, math.NaN()), shiftRule, 8 * time.Hour, RigOut, "could not be read"},
		{"infinite", shifts(math.Inf(1)), shiftRule, 0, RigOut, "could not be read"},
	} {
		got := rigAt(t, c.readings, c.rule, morning.Add(c.after))
		if got.State != c.state || !strings.Contains(got.Text, c.words) {
			t.Errorf("%s: %q, %q, want %q, %q", c.what, got.State, got.Text, c.state, c.words)
		}
	}
}

// Readings come in any order.
func TestRigOrder(t *testing.T) {
	r := shifts(0.3, 0.01)
	r[0], r[1] = r[1], r[0]
	got := rigAt(t, r, shiftRule, morning.Add(9*time.Hour))
	if got.State != RigOK || len(got.Points) != 2 || !got.Points[0].Out {
		t.Errorf("readings the other way round = %+v", got)
	}
}

// The history narrows the limits, an outlier does not widen them, and a bench
// that has changed is out though it agrees with the known loss.
func TestRigHistory(t *testing.T) {
	steady := []float64{0.010, 0.014, 0.009, 0.012, 0.011, 0.008, 0.013, 0.010, 0.012, 0.009, 0.011, 0.013}
	last := func(deviations []float64) RigPoint {
		got := rigAt(t, shifts(deviations...), shiftRule, morning.Add(1000*time.Hour))
		return got.Points[len(got.Points)-1]
	}
	few := last(append(steady[:7:7], 0.08))
	if few.Out {
		t.Errorf("seven readings before: %+v", few)
	}
	moved := last(append(steady[:12:12], 0.08))
	if !moved.Out || !strings.Contains(moved.Text, "the bench has changed") {
		t.Errorf("twelve readings before: %+v", moved)
	}
	if again := last(append(steady[:12:12], 0.08, 0.08)); !again.Out || again.HighDB != moved.HighDB {
		t.Errorf("out again: %+v, before %+v", again, moved)
	}
	if back := last(append(steady[:12:12], 0.08, 0.012)); back.Out {
		t.Errorf("back again: %+v", back)
	}
}

// A steady bench is called out by its history in about 0.27 % of readings, by
// simulation, and hardly ever called drifting; one that moves by half a standard
// deviation a shift is.
func TestRigChance(t *testing.T) {
	rng := rand.New(rand.NewPCG(27, 28))
	const benches, readings = 3000, 20
	out, drifting, found := 0, 0, 0
	rule := RigRule{KnownStdUDB: 10}
	for range benches {
		steady, moving := make([]float64, readings), make([]float64, readings)
		for i := range steady {
			steady[i] = rng.NormFloat64()
			moving[i] = rng.NormFloat64() + 0.5*math.Max(0, float64(i-rigHistory))
		}
		got := rigAt(t, shifts(steady...), rule, morning.Add(1000*time.Hour))
		if got.Points[readings-1].Out {
			out++
		}
		if got.Drifting {
			drifting++
		}
		if got := rigAt(t, shifts(moving...), rule, morning.Add(1000*time.Hour)); got.Drifting || got.State == RigOut {
			found++
		}
	}
	near(t, "share of steady benches out", float64(out)/benches, 1-rigCoverage, 0.002)
	near(t, "share of steady benches drifting", float64(drifting)/benches, 0, 0.01)
	near(t, "share of moving benches found", float64(found)/benches, 1, 0.1)
}

func TestRigRefuses(t *testing.T) {
	for what, rule := range map[string]RigRule{
		"nothing known": {}, "negative": {KnownStdUDB: -1}, "NaN": {WithinDB: math.NaN()}, "infinite": {KnownStdUDB: math.Inf(1)},
		"a negative age": {WithinDB: 1, MaxAge: -1},
	} {
		_, err := CheckRig(shifts(0), rule, morning)
		refused(t, what, err)
	}
}
