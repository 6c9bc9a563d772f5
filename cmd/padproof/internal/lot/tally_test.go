package lot

import (
	"encoding/json"
	"errors"
	"fmt"
	"math"
	"testing"

	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/unit"
)

// outcome is a unit with a loss that was read and decided.
func outcome(serial, verdict string, lossDB, uDB float64) Outcome {
	return Outcome{Unit: &unit.Unit{Serial: serial}, Answer: &result.Answer{
		Unit: serial, Pad: "Saltmarsh 14", Rig: "Bench", Verdict: verdict,
		Checks: []result.Check{{
			Name: "loss", Unit: "dB", Verdict: verdict, Measured: result.Number(lossDB), Expected: 13.97,
			Low: 13.67, High: 14.27, Uncertainty: result.Number(uDB),
			Bench: &result.Figure{Measured: result.Number(lossDB - 0.4), Expected: 13.57},
		}},
		Budget: []result.Term{{Check: "loss", Source: "repeatability of after", StandardU: result.Number(uDB / 2), Sensitivity: 1}},
	}}
}

// fault is an error in the form of the result.
func fault(err error) *result.Error { return &result.Error{Text: err.Error()} }

// A lot of odd figures has its statistics, or none, and never an error: its units
// have been checked, and somebody waits for the table.
func TestLotOfOddFigures(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	for name, losses := range map[string][]float64{
		"none": {}, "one": {14}, "two alike": {14, 14}, "all alike": {14, 14, 14, 14, 14, 14, 14, 14, 14},
		"not read": {nan, nan}, "nothing through": {inf, 14, 14.01}, "far apart": {-1e300, 1e300, 14},
		"last digit": {14, math.Nextafter(14, 15), 14}, "one far": {14, 14.01, 14.02, 60},
	} {
		t.Run(name, func(t *testing.T) {
			for _, uDB := range []float64{0, 0.05, nan, inf, 1e300} {
				tally := NewTally("odd")
				for i, v := range losses {
					tally.Add(outcome(fmt.Sprint(i), "PASS", v, uDB), fault)
				}
				tally.Add(Outcome{Unit: &unit.Unit{Serial: "broken"}, Err: errors.New("no header")}, fault)
				l, err := tally.Lot()
				if err != nil {
					t.Fatalf("with U = %g dB: %v", uDB, err)
				}
				if l.Units != len(losses)+1 || l.NotChecked != 1 || l.Passed != len(losses) {
					t.Errorf("with U = %g dB: %d units, %d passed, %d not checked", uDB, l.Units, l.Passed, l.NotChecked)
				}
				if _, err := json.Marshal(l); err != nil {
					t.Errorf("with U = %g dB: %v", uDB, err)
				}
			}
		})
	}
}

// Units whose takes hold the tone a little differently are still of one drawing,
// though its loss is computed at their own tone; those of another drawing of the
// same name are not.
func TestLotOfOneDrawing(t *testing.T) {
	for _, c := range []struct {
		apartDB float64
		want    int
	}{{0, 1}, {1e-14, 1}, {3e-5, 1}, {0.009, 1}, {0.02, 2}, {math.NaN(), 2}} {
		tally := NewTally("tones")
		for i, apartDB := range []float64{0, c.apartDB, 0} {
			o := outcome(fmt.Sprint(i), "PASS", 14, 0.05)
			loss := &o.Answer.Checks[0]
			loss.Expected += result.Number(apartDB)
			loss.Low += result.Number(apartDB)
			loss.High += result.Number(apartDB)
			tally.Add(o, fault)
		}
		l, err := tally.Lot()
		if err != nil {
			t.Fatal(err)
		}
		if len(l.Drawings) != c.want {
			t.Errorf("losses drawn %g dB apart: %d drawings, want %d", c.apartDB, len(l.Drawings), c.want)
		}
	}
}

// A recording that stands for more than one unit is noted, once; units
// in the channels of one take, and shared takes, are not.
func TestLotOfCopies(t *testing.T) {
	after := func(hash string, channel int) []result.Capture {
		return []result.Capture{{Role: "before", SHA256: "shared", Channel: 1}, {Role: "after", SHA256: hash, Channel: channel}}
	}
	for name, c := range map[string]struct {
		takes [][]result.Capture
		want  int
	}{
		"own":      {[][]result.Capture{after("a", 1), after("b", 1), after("c", 1)}, 0},
		"channels": {[][]result.Capture{after("a", 1), after("a", 2), after("a", 3)}, 0},
		"no hash":  {[][]result.Capture{after("", 1), after("", 1)}, 0},
		"copied":   {[][]result.Capture{after("a", 1), after("b", 1), after("a", 1), after("a", 1)}, 1},
	} {
		tally := NewTally("copies")
		for i, takes := range c.takes {
			o := outcome(fmt.Sprint("041", i), "PASS", 14, 0.05)
			o.Answer.Captures = takes
			tally.Add(o, fault)
		}
		l, err := tally.Lot()
		if err != nil {
			t.Fatal(err)
		}
		if len(l.Warnings) != c.want {
			t.Errorf("%s: %d notes, want %d: %q", name, len(l.Warnings), c.want, l.Warnings)
		}
	}
}
