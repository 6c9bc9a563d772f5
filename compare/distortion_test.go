package compare

import (
	"math"
	"strings"
	"testing"
)

// What the pad adds lies between difference and sum: -80 and -90 dB make -81... no more than
// 20 lg(10^-4 + 10^-4.5) = -77.61 and no less than 20 lg(10^-4 - 10^-4.5) = -83.30 dB.
func TestJudgeDistortion(t *testing.T) {
	clean := func(seed uint64) *recording { return record(toneHz, -10, 0, 4).noise(-100, seed) }
	with := func(db float64, seed uint64) *recording { return clean(seed).harmonic(3, db) }
	tests := []struct {
		name          string
		before, after *recording
		limitDB       float64
		want          Verdict
		reason        string
	}{
		{"nothing shows", clean(1), clean(2), -90, Pass, ""},
		{"the rig's alone", with(-100, 1), with(-100, 2), -80, Pass, ""},
		{"the pad's", with(-100, 1), with(-60, 2), -80, Fail, ""},
		{"sum keeps", with(-90, 1), with(-80, 2), -77, Pass, ""},
		{"sum breaks, difference keeps", with(-90, 1), with(-80, 2), -78, Unproven, "less distortion"},
		{"difference keeps just", with(-90, 1), with(-80, 2), -83, Unproven, "less distortion"},
		{"difference breaks", with(-90, 1), with(-80, 2), -84, Fail, ""},
		{"rig as bad as the unit", with(-60, 1), with(-60, 2), -80, Unproven, "the rig itself shows -60.0 dB"},
		{"drowned", clean(1), record(toneHz, -70, 0, 4).noise(-90, 2), -80, Unproven, "noise of after hides"},
	}
	for _, tt := range tests {
		f, err := JudgeDistortion(toneOf(t, tt.before), toneOf(t, tt.after), 0.01, AtMost(tt.limitDB), Guarded)
		if err != nil {
			t.Fatal(err)
		}
		if f.Verdict != tt.want || !strings.Contains(f.Reason, tt.reason) {
			t.Errorf("%s: %s, %.2f ± %.2f dB, adds %.2f to %.2f (%s), want %s (%s)", tt.name, f.Verdict, f.Measured, f.UDB, f.LowDB, f.HighDB, f.Reason, tt.want, tt.reason)
		}
		if tt.name == "sum keeps" {
			within(t, "as recorded", f.Measured, -80, 0.1)
			within(t, "the rig's", f.RigDB, -90, 0.3)
			within(t, "sum", f.HighDB, 20*math.Log10(1e-4+math.Pow(10, -4.5)), 0.2)
			within(t, "difference", f.LowDB, 20*math.Log10(1e-4-math.Pow(10, -4.5)), 0.2)
		}
	}
	if f, _ := JudgeDistortion(toneOf(t, clean(1)), toneOf(t, clean(2)), 0.01, NoLimit(), Guarded); f.Verdict != None || f.MostDB > -95 {
		t.Errorf("no limit: %s, at most %.1f dB, want no verdict and a bound below -95", f.Verdict, f.MostDB)
	}
}
