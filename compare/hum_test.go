package compare

import (
	"math"
	"strings"
	"testing"

	"padproof/analysis"
)

// humOf is a hum of a level in dBFS with a relative standard uncertainty of its power.
func humOf(levelDBFS, part float64) *analysis.Hum {
	power := math.Pow(10, levelDBFS/10) / 2
	return &analysis.Hum{MainsHz: 50, Found: true, MeanSquare: power, StdU: part * power}
}

func TestHumFigure(t *testing.T) {
	k := HumCase{Unit: HumSources{Noise: HumReading{humOf(-70, 0), -30}, Tone: HumReading{humOf(-20, 0), 18}}, CalibrationUDB: 0.2}
	k.Rig.Silence = HumReading{humOf(-100, 0), 18}
	f, err := JudgeHum(k)
	if err != nil {
		t.Fatal(err)
	}
	near := func(what string, got, want, tol float64) {
		t.Helper()
		if !(math.Abs(got-want) <= tol) {
			t.Errorf("%s = %.6f, want %.6f", what, got, want)
		}
	}
	near("Measured", f.Measured, -100, 1e-9)
	near("RigDBu", f.RigDBu, -82, 1e-9)
	near("U of the calibration alone", f.UDB, 0.2, 0.01)
	if f.From != FromPadNoise {
		t.Errorf("From = %q", f.From)
	}

	// A tenth of the power in doubt: ± 1.96 tenths, to dB by hand.
	k.Unit.Noise, k.CalibrationUDB = HumReading{humOf(-70, 0.1), -30}, 0
	f, err = JudgeHum(k)
	if err != nil {
		t.Fatal(err)
	}
	near("High", f.High, -100+10*math.Log10(1.1959964), 1e-6)
	near("Low", f.Low, -100+10*math.Log10(1-0.1959964), 1e-6)

	for want, sources := range map[string]HumSources{
		FromPadNoise: {HumReading{humOf(-70, 0), 0}, HumReading{humOf(-70, 0), 0}, HumReading{humOf(-70, 0), 0}},
		FromSilence:  {HumReading{}, HumReading{humOf(-70, 0), 0}, HumReading{humOf(-70, 0), 0}},
		FromTone:     {HumReading{}, HumReading{}, HumReading{humOf(-70, 0), 0}},
	} {
		if f, err := JudgeHum(HumCase{Unit: sources}); err != nil || f.From != want {
			t.Errorf("From = %q, %v, want %q", f.From, err, want)
		}
	}
}

func TestHumVerdicts(t *testing.T) {
	hidden := humOf(-80, 0)
	hidden.Lines = []analysis.HumLine{{Harmonic: 5, Hidden: true}}
	none := &analysis.Hum{MainsHz: 50, MeanSquare: -1e-13, StdU: 1e-12}
	nan := math.NaN()
	for _, row := range []struct {
		name    string
		unit    HumReading
		rig     HumReading
		verdict Verdict
		says    string
	}{
		{"well under", HumReading{humOf(-100, 0.01), 0}, HumReading{}, Pass, ""},
		{"well over", HumReading{humOf(-80, 0.01), 0}, HumReading{humOf(-100, 0.01), 0}, Fail, ""},
		{"over, rig unknown", HumReading{humOf(-80, 0.01), 0}, HumReading{}, Fail, ""},
		{"over, but so is the rig", HumReading{humOf(-80, 0.01), 0}, HumReading{humOf(-85, 0.01), 0}, Unproven, "the rig's own hum, -85.0 dBu"},
		{"under, though the rig is over", HumReading{humOf(-100, 0.01), 0}, HumReading{humOf(-85, 0.01), 0}, Pass, ""},
		{"just under", HumReading{humOf(-90.1, 0.05), 0}, HumReading{}, Unproven, "upper limit"},
		{"none", HumReading{none, 0}, HumReading{}, Pass, ""},
		{"none, in strong noise", HumReading{none, 40}, HumReading{}, Unproven, "under the noise"},
		{"under a tone", HumReading{hidden, -20}, HumReading{}, Unproven, "1 of the ten lines"},
		{"over, under a tone", HumReading{hidden, 0}, HumReading{}, Fail, ""},
		{"no level", HumReading{humOf(-100, 0), nan}, HumReading{}, Unproven, "full_scale_dbu"},
		{"nothing", HumReading{}, HumReading{}, Unproven, "pad-noise.wav"},
		{"not a trace", HumReading{&analysis.Hum{}, 0}, HumReading{}, Pass, ""},
	} {
		f, err := JudgeHum(HumCase{Unit: HumSources{Noise: row.unit}, Rig: HumSources{Noise: row.rig}, CalibrationUDB: 0.2})
		if err != nil {
			t.Fatal(err)
		}
		verdict, reason := f.Judge(Guarded, AtMost(-90))
		if verdict != row.verdict || !strings.Contains(reason, row.says) || (verdict == Unproven) != (reason != "") {
			t.Errorf("%s: %s, %q, want %s, %q", row.name, verdict, reason, row.verdict, row.says)
		}
		if v, _ := f.Judge(Guarded, NoLimit()); v != None {
			t.Errorf("%s, no limit: %q", row.name, v)
		}
	}
}
