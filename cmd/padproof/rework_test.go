package main

import (
	"bytes"
	"encoding/json"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

const reworkRig = `[output]
source_ohms = 100
tolerance = "2%"
[input]
load_ohms = 10000
tolerance = "2%"
cable_pF = 300
[calibration]
gain_drift_db = 0.01
linearity_db = 0.005
`

// reworkParts are the parts of a U pad as custom parts, so that a trim can sit in series with each.
const reworkParts = `
  { ref = "R1", value = "560", tolerance = "0.1%", between = ["in.hot", "R1end"] },
  { ref = "R2", value = "560", tolerance = "0.1%", between = ["in.cold", "R2end"] },
  { ref = "R3", value = "330", tolerance = "0.1%", between = ["R3end", "out.cold"] },
`

// A unit that fails is rehearsed, the trim that the answer offers is drawn into it, and it is rehearsed and
// checked again: the loss lies within its limits, and is what was foretold. The fault, the takes and
// the trimmed drawing have nothing of the search in them.
func TestTrimmedUnitReadsWhatWasForetold(t *testing.T) {
	for _, fault := range []string{"R3 is 360", "R3 drifted -9 %", "R3 drifted +14 %"} {
		t.Run(fault, func(t *testing.T) {
			dir := t.TempDir()
			drawing := `network = "U"
parts = [ { ref = "R1", value = "560", tolerance = "0.1%" }, { ref = "R2", value = "560", tolerance = "0.1%" }, { ref = "R3", value = "330", tolerance = "0.1%" } ]
[service]
source_ohms = 120
load_ohms = 2700
[limits]
loss_plus_minus_db = 0.4
`
			writeFile(t, filepath.Join(dir, "pad.toml"), drawing)
			writeFile(t, filepath.Join(dir, "rig.toml"), reworkRig)
			first, _ := rehearsedAnswer(t, dir, filepath.Join(dir, "pad.toml"), "faulty", fault)
			if first.Verdict != "FAIL" || len(first.Rework) == 0 {
				t.Fatalf("%s with %d reworks (%q), want a FAIL with some", first.Verdict, len(first.Rework), first.Notes)
			}
			for i, r := range first.Rework {
				if r.How == "replace" {
					continue
				}
				trimmed := filepath.Join(dir, fmt.Sprintf("trimmed%d.toml", i))
				writeFile(t, trimmed, trimmedDrawing(r))
				name := fmt.Sprintf("unit%d", i)
				again, trueServiceDB := rehearsedAnswer(t, dir, trimmed, name, fault)
				loss := again.loss()
				if loss.Verdict != "PASS" {
					t.Errorf("%s: %s, want PASS", r.Text, loss.Verdict)
				}
				for _, c := range []struct {
					what           string
					got, want, tol float64
				}{
					{"on the bench", loss.Bench.Measured, r.Bench.Loss, r.Bench.U},
					{"in service, in truth", trueServiceDB, r.Service.Loss, r.Service.U},
					{"in service, by the check", loss.Measured, r.Checked.Loss, r.Checked.U + r.Bench.U},
				} {
					if !(math.Abs(c.got-c.want) <= c.tol) {
						t.Errorf("%s: %.3f dB %s, want %.3f ± %.3f", r.Text, c.got, c.what, c.want, c.tol)
					}
				}
				if trueServiceDB < loss.Low || trueServiceDB > loss.High {
					t.Errorf("%s: %.3f dB in service, outside %.2f to %.2f", r.Text, trueServiceDB, loss.Low, loss.High)
				}
			}
		})
	}
}

type reworkAnswer struct {
	Verdict string
	Notes   []string
	Rework  []reworkLine
	Checks  []reworkCheck
}

type reworkCheck struct {
	Name, Verdict       string
	Measured, Low, High float64
	Bench               struct{ Measured float64 }
}

type reworkLine struct {
	How, Part, Text         string
	Between                 []string
	Ohms                    float64
	Bench, Service, Checked struct{ Loss, U float64 }
}

func (a reworkAnswer) loss() reworkCheck {
	for _, c := range a.Checks {
		if c.Name == "loss" {
			return c
		}
	}
	return reworkCheck{}
}

// rehearsedAnswer rehearses a drawing with a fault and checks it by pad.toml one folder up. What the
// unit loses in service, in truth, comes with it.
func rehearsedAnswer(t *testing.T, dir, drawing, name, fault string) (a reworkAnswer, trueServiceDB float64) {
	t.Helper()
	var out, errs bytes.Buffer
	folder := filepath.Join(dir, name)
	if status := run([]string{"rehearse", "--pad", drawing, "--rig", filepath.Join(dir, "rig.toml"), "--out", folder, "--seconds", "2", "--fault", fault, "--json"}, &out, &errs); status != 0 {
		t.Fatalf("rehearse: %s", errs.String())
	}
	if err := os.Remove(filepath.Join(folder, "pad.toml")); err != nil { // the one above serves
		t.Fatal(err)
	}
	var made struct {
		Truth struct {
			ServiceDB float64 `json:"service_loss_db"`
		}
	}
	if err := json.Unmarshal(out.Bytes(), &made); err != nil {
		t.Fatal(err)
	}
	out.Reset()
	run([]string{"check", folder, "--json"}, &out, &errs)
	if err := json.Unmarshal(out.Bytes(), &a); err != nil {
		t.Fatalf("%v in %s%s", err, out.String(), errs.String())
	}
	return a, made.Truth.ServiceDB
}

// trimmedDrawing draws the trim in as a person would: a resistor more, beside the part or behind it.
func trimmedDrawing(r reworkLine) string {
	ends := map[string]string{"R1": "out.hot", "R2": "out.cold", "R3": "out.hot"}
	extra := ""
	refs := strings.Split(r.Part, " and ")
	if r.Part == "" {
		refs = nil
		extra = fmt.Sprintf("  { ref = \"R9\", value = \"%g\", between = [%q, %q] },\n", r.Ohms, r.Between[0], r.Between[1])
	}
	parts := reworkParts
	for i, ref := range refs {
		near := map[string]string{"R1": "in.hot", "R2": "in.cold", "R3": "out.cold"}[ref]
		if r.How == "series" {
			near = ref + "end"
			extra += fmt.Sprintf("  { ref = \"R%d\", value = \"%g\", between = [%q, %q] },\n", 7+i, r.Ohms, near, ends[ref])
			delete(ends, ref) // its end is a node of its own now
			continue
		}
		extra += fmt.Sprintf("  { ref = \"R%d\", value = \"%g\", between = [%q, %q] },\n", 7+i, r.Ohms, near, ends[ref])
	}
	for ref, pin := range ends {
		parts = strings.ReplaceAll(parts, ref+"end", pin)
	}
	return "network = \"custom\"\nparts = [" + parts + extra + "]\n[service]\nsource_ohms = 120\nload_ohms = 2700\n"
}

func writeFile(t *testing.T, path, text string) {
	t.Helper()
	if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
}
