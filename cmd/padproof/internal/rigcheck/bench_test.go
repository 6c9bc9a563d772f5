package rigcheck

import (
	"context"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"padproof/cmd/padproof/internal/ledger"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/sheet"
	"padproof/cmd/padproof/internal/unit"
)

var morning = time.Date(2026, 11, 30, 6, 0, 0, 0, time.UTC)

const benchSheet = `name = "Bench one"
[reference]
serial = "REF-14"
loss_db = 13.57
uncertainty_db = 0.03
within_db = 0.1
every_hours = 8
required = true
`

// rigOf writes a sheet into a folder of its own and reads it.
func rigOf(t *testing.T, text string) *sheet.Rig {
	t.Helper()
	path := filepath.Join(t.TempDir(), "rig.toml")
	if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
	rig, err := sheet.ReadRig(path)
	if err != nil {
		t.Fatal(err)
	}
	return rig
}

func knownOf(t *testing.T, rig *sheet.Rig) *Known {
	t.Helper()
	known, err := KnownOf(rig)
	if err != nil {
		t.Fatal(err)
	}
	return known
}

// answerOf is what measuring the reference pad gives: a loss with a standard
// uncertainty of 0.01 dB.
func answerOf(lossDB float64, problems ...result.Problem) *result.Answer {
	return &result.Answer{
		Schema: result.CheckSchema, Unit: "REF-14", Rig: "Bench one", Verdict: "PASS",
		Checks:   []result.Check{{Name: "loss", Unit: "dB", Measured: result.Number(lossDB), AtHz: result.NumberOf(997)}},
		Budget:   []result.Term{{Check: "loss", Source: "gain", StandardU: 0.008, Sensitivity: 1}, {Check: "loss", Source: "repeats", StandardU: 0.006, Sensitivity: -1}, {Check: "noise", StandardU: 1, Sensitivity: 1}},
		Captures: []result.Capture{{Role: unit.Before, SHA256: "b"}, {Role: unit.After, SHA256: "a", Problems: problems}},
	}
}

func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s = %.6g, want %.6g ± %.2g", what, got, want, tol)
	}
}

func TestReadingOf(t *testing.T) {
	r := ReadingOf(answerOf(13.6), morning)
	if r.Void != "" || r.Through != "a" || !r.At.Equal(morning) {
		t.Errorf("ReadingOf = %+v", r)
	}
	near(t, "loss", r.LossDB, 13.6, 0)
	near(t, "its standard uncertainty, √(0.008² + 0.006²)", r.StdUDB, 0.01, 1e-12)
	if r := ReadingOf(answerOf(13.6, result.Problem{Problem: "clipped"}), morning); !math.IsNaN(r.LossDB) || r.Void != "after is clipped" {
		t.Errorf("of a clipped take: %+v", r)
	}
	if r := ReadingOf(answerOf(math.NaN()), morning); r.Void == "" {
		t.Errorf("of no loss: %+v", r)
	}
	a := answerOf(13.6)
	a.Captures = append(a.Captures, result.Capture{Role: unit.PadNoise, Problems: []result.Problem{{Problem: "clipped"}}})
	if r := ReadingOf(a, morning); r.Void != "" {
		t.Errorf("of a clipped noise take: %+v", r)
	}
}

// U is 2 √(0.015² + 0.01²) = 0.0361 dB: a reading is out beyond it, or beyond
// what is allowed; and it proves nothing where with U it may be.
func TestChartVerdicts(t *testing.T) {
	for _, c := range []struct {
		what         string
		within       string
		off          float64
		verdict      string
		state, words string
	}{
		{"on the spot", "0.1", 0, "PASS", result.RigOK, ""},
		{"within U", "0.1", 0.035, "PASS", result.RigOK, "off its known loss"},
		{"beyond U", "0.1", 0.037, "FAIL", result.RigOut, "0.036 dB are allowed"},
		{"below", "0.1", -0.037, "FAIL", result.RigOut, "are allowed"},
		{"just shown to be within", "0.05", 0.0138, "PASS", result.RigOK, ""},
		{"just not", "0.05", 0.0141, "UNPROVEN", result.RigUnproven, "within_db"},
		{"beyond what is allowed", "0.02", 0.021, "FAIL", result.RigOut, "0.02 dB are allowed"},
		{"never shown", "0.02", 0, "UNPROVEN", result.RigUnproven, "before-again"},
	} {
		rig := rigOf(t, strings.Replace(benchSheet, "within_db = 0.1", "within_db = "+c.within, 1))
		got, err := ChartOf(rig, knownOf(t, rig), []Reading{ReadingOf(answerOf(13.57+c.off), morning)}, morning)
		if err != nil {
			t.Fatal(err)
		}
		if got.Verdict != c.verdict || got.State != c.state || !strings.Contains(got.Text, c.words) {
			t.Errorf("%s: %s, %s, %q, want %s, %s, %q", c.what, got.Verdict, got.State, got.Text, c.verdict, c.state, c.words)
		}
		if (got.HoldsTo == "2026-11-30T14:00:00Z") != (c.state == result.RigOK) {
			t.Errorf("%s: holds to %q", c.what, got.HoldsTo)
		}
		near(t, c.what+": U", float64(got.Readings[0].Uncertainty), 2*math.Hypot(0.015, 0.01), 1e-12)
	}
}

// The chart keeps readings and their limits together, whatever order they come in.
func TestChartOrder(t *testing.T) {
	rig := rigOf(t, benchSheet)
	early, late := ReadingOf(answerOf(13.8), morning), ReadingOf(answerOf(13.58), morning.Add(time.Hour))
	early.Record, late.Record = "b/1", "b/2"
	future := ReadingOf(answerOf(15), morning.Add(3*time.Hour))
	c, err := ChartOf(rig, knownOf(t, rig), []Reading{late, future, early}, morning.Add(2*time.Hour))
	if err != nil {
		t.Fatal(err)
	}
	if len(c.Readings) != 2 || c.Readings[0].Record != "b/1" || !c.Readings[0].Out || c.Readings[1].Record != "b/2" || c.State != result.RigOK {
		t.Errorf("ChartOf = %+v", c)
	}
}

// A take that lies leaves the bench unproven.
func TestChartVoid(t *testing.T) {
	rig := rigOf(t, benchSheet)
	c, err := ChartOf(rig, knownOf(t, rig), []Reading{ReadingOf(answerOf(13.57, result.Problem{Problem: "clipped"}), morning)}, morning)
	if err != nil || c.State != result.RigUnproven || c.Verdict != "UNPROVEN" || !strings.Contains(c.Text, "after is clipped") {
		t.Errorf("ChartOf = %+v, %v", c, err)
	}
}

// The L pad of 900 over 100 ohms loses 20 lg 10 between 0 and a very high load;
// each part moves that by 0.9 · 20/ln 10 per relative change. A source of 100 ± 10 Ω
// makes it 20 lg 11, and adds 20 lg (1100/1090) at most.
func TestKnownOfDrawing(t *testing.T) {
	const parts = 8.685889638 * 0.9 * 0.001 * math.Sqrt2 / 1.7320508
	for _, c := range []struct {
		source       string
		loss, stdUDB float64
	}{
		{"source_ohms = 0\ntolerance = \"0%\"", 20, parts},
		{"source_ohms = 100\ntolerance = \"10%\"", 20 * math.Log10(11),
			math.Hypot(8.685889638*0.001/1.7320508*math.Hypot(900./1100, 1000./1100), 20*math.Log10(1100./1090)/1.7320508)},
	} {
		rig := rigOf(t, "[output]\n"+c.source+"\n[input]\nload_ohms = 1e9\ntolerance = \"0%\"\ncable_pF = 0\n[reference]\nserial = \"R\"\npad = \"ref.toml\"\n")
		drawing := "network = \"L\"\nparts = [\n{ ref = \"R1\", value = \"900\", tolerance = \"0.1%\" },\n{ ref = \"R2\", value = \"100\", tolerance = \"0.1%\" },\n]\n"
		if err := os.WriteFile(rig.Reference.PadFile, []byte(drawing), 0o644); err != nil {
			t.Fatal(err)
		}
		known := knownOf(t, rig)
		stdU, err := known.stdUDB(math.NaN())
		if err != nil {
			t.Fatal(err)
		}
		near(t, "known loss", known.lossDB(math.NaN()), c.loss, 1e-4)
		near(t, "its standard uncertainty", stdU, c.stdUDB, 2e-5)
	}
}

func TestBelongs(t *testing.T) {
	rig := rigOf(t, benchSheet)
	for folder, fits := range map[string]bool{"REF-14": true, "ref-14": true, "a/REF-14/monday": true, "0417": false, "REF-14/a/b": false} {
		if err := Belongs(&unit.Unit{Folder: folder}, rig); (err == nil) != fits {
			t.Errorf("Belongs(%s) = %v", folder, err)
		}
	}
}

// lineLedger is an empty ledger.
func lineLedger(t *testing.T) *ledger.Ledger {
	t.Helper()
	l, err := ledger.OpenWith(context.Background(), filepath.Join(t.TempDir(), "line.db"), ledger.Options{AllowSimulated: true})
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { _ = l.Close() })
	return l
}

// keep records a rig check.
func keep(t *testing.T, l *ledger.Ledger, station string, at time.Time, a *result.Answer) {
	t.Helper()
	r, err := ledger.FromAnswer(a)
	if err != nil {
		t.Fatal(err)
	}
	r.Kind, r.Station, r.Time = ledger.RigCheck, station, at
	if _, err := l.Append(context.Background(), r); err != nil {
		t.Fatal(err)
	}
}
