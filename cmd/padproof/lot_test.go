package main

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"fmt"
	"io/fs"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"

	"padproof/cmd/padproof/internal/result"
)

const saltmarshSheets = "../../testdata/saltmarsh/"

// rehearsedLot makes a lot of units in folders, drawn each from its tolerances on a
// bench that stays as it is stated, with R3 from a reel of so many ohms; they share
// the first unit's before.
func rehearsedLot(t *testing.T, units int, r3 string) string {
	t.Helper()
	folder := t.TempDir()
	pad, rig := readText(t, saltmarshSheets+"pad.toml"), readText(t, saltmarshSheets+"rig.toml")
	write := func(name, text string) string {
		path := filepath.Join(folder, name)
		if err := os.WriteFile(path, []byte(text), 0o666); err != nil {
			t.Fatal(err)
		}
		return path
	}
	write("pad.toml", pad)
	write("rig.toml", rig)
	steady := strings.NewReplacer(`"5%"`, `"0%"`, "linearity_db   = 0.01", "linearity_db = 0", "gain_drift_db  = 0.02", "gain_drift_db = 0").Replace(rig)
	made, bench := write("made.txt", strings.Replace(pad, `"330"`, `"`+r3+`"`, 1)), write("bench.txt", steady)
	for i := range units {
		unit := filepath.Join(folder, fmt.Sprintf("%04d", 401+i))
		status, _, stderr := command("rehearse", "--pad", made, "--rig", bench, "--out", unit, "--vary", "--seed", strconv.Itoa(i+1), "--seconds", "1.2")
		if status != 0 {
			t.Fatalf("rehearse: %d, %s", status, stderr)
		}
		for _, name := range []string{"pad.toml", "rig.toml"} {
			os.Remove(filepath.Join(unit, name))
		}
		if i == 0 {
			os.Rename(filepath.Join(unit, "before.wav"), filepath.Join(folder, "before.wav"))
		} else {
			os.Remove(filepath.Join(unit, "before.wav"))
		}
	}
	os.Remove(made)
	os.Remove(bench)
	return folder
}

func readText(t *testing.T, path string) string {
	t.Helper()
	text, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	return string(text)
}

// command runs padproof.
func command(args ...string) (status int, stdout, stderr string) {
	var out, errors bytes.Buffer
	status = run(args, &out, &errors)
	return status, out.String(), errors.String()
}

// lotOf is the lot that the last line of lot --json holds.
func lotOf(t *testing.T, stdout string) *result.Lot {
	t.Helper()
	lines := strings.Split(strings.TrimSuffix(stdout, "\n"), "\n")
	l := &result.Lot{}
	if err := json.Unmarshal([]byte(lines[len(lines)-1]), l); err != nil || l.Schema != result.LotSchema {
		t.Fatalf("the last line is no lot: %v, %.200q", err, lines[len(lines)-1])
	}
	return l
}

// R3 of all units from a reel of 341.5 Ω, 3.5 % high: the lot says so, low losses and
// all, and names a reel before anything else.
func TestLotSuspectsTheReel(t *testing.T) {
	folder := rehearsedLot(t, 22, "341.5")
	_, stdout, stderr := command("lot", folder)
	if !strings.Contains(stdout, "suspect the reel of R3, 3.") || !strings.Contains(stdout, "% high") || stderr != "" {
		t.Errorf("the lot says %s%s", stdout, stderr)
	}
	_, stdout, _ = command("lot", folder, "--json")
	l := lotOf(t, stdout)
	if l.Units != 22 || len(l.Drawings) != 1 || len(l.Drawings[0].Says) == 0 {
		t.Fatalf("lot %+v", l)
	}
	says := l.Drawings[0].Says[0]
	_, rest, _ := strings.Cut(says, "suspect the reel of R3, ")
	text, _, found := strings.Cut(rest, " % high")
	percent, err := strconv.ParseFloat(text, 64)
	if !found || err != nil || math.Abs(percent-3.5) > 0.5 {
		t.Errorf("%q: R3 is %v %% high (%v), want 3.5 ± 0.5", says, percent, err)
	}
}

// JSON lines are JSON each; CSV holds the JSON's figures; one worker and two give the
// same bytes; yield, mean, spread and capability are scipy's.
func TestLotFigures(t *testing.T) {
	folder := rehearsedLot(t, 12, "333")
	if err := os.WriteFile(filepath.Join(folder, "0405", "after.wav"), []byte("no WAV"), 0o666); err != nil {
		t.Fatal(err)
	}
	table := filepath.Join(t.TempDir(), "lot.csv")
	status, one, stderr := command("lot", folder, "--json", "--workers", "1", "--csv", table)
	if status != exitNoCheck || stderr != "" {
		t.Fatalf("status %d, %s", status, stderr)
	}
	if _, two, _ := command("lot", folder, "--json", "--workers", "2"); one != two {
		t.Error("two workers give another answer than one")
	}
	lines := strings.Split(strings.TrimSuffix(one, "\n"), "\n")
	if len(lines) != 13 {
		t.Errorf("%d lines, want one for each of 12 units and one for the lot", len(lines))
	}
	for i, line := range lines {
		var head struct{ Schema, Unit, Verdict string }
		if err := json.Unmarshal([]byte(line), &head); err != nil {
			t.Fatalf("line %d: %v", i+1, err)
		}
		if want := fmt.Sprintf("%04d", 401+i); i < 12 && (head.Schema != result.CheckSchema || head.Unit != want || (head.Verdict == "") != (i == 4)) {
			t.Errorf("line %d is %+v, want unit %s", i+1, head, want)
		}
	}
	l := lotOf(t, one)
	sameAsCSV(t, l, table)
	sameAsScipy(t, l, table)
}

// sameAsCSV reads the table back by encoding/csv.
func sameAsCSV(t *testing.T, l *result.Lot, path string) {
	t.Helper()
	file, err := os.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	records, err := csv.NewReader(file).ReadAll()
	if err != nil || len(records) != len(l.Rows)+1 {
		t.Fatalf("%d records, %v, want a head and %d", len(records), err, len(l.Rows))
	}
	column := func(record []string, name string) string { return record[slices.Index(records[0], name)] }
	for i, r := range l.Rows {
		record := records[i+1]
		if column(record, "unit") != r.Unit || column(record, "verdict") != r.Verdict || column(record, "reason") != r.Reason || (r.Error != nil) != (column(record, "error") != "") {
			t.Errorf("record %q, want that of %+v", record, r)
		}
		for _, c := range r.Checks {
			for name, want := range map[string]result.Number{c.Name: c.Measured, c.Name + "_uncertainty": c.Uncertainty} {
				if got, err := strconv.ParseFloat(column(record, name), 64); want.OK() && (err != nil || got != float64(want)) {
					t.Errorf("%s of %s = %v (%v) in the table, want %v", name, r.Unit, got, err, want)
				}
			}
		}
	}
}

// sameAsScipy holds the lot's statistics against scipy's, worked from the table.
func sameAsScipy(t *testing.T, l *result.Lot, path string) {
	t.Helper()
	python := "/usr/bin/python3"
	if exec.Command(python, "-c", "import scipy").Run() != nil {
		t.Skip("python3-scipy is not here")
	}
	f := l.Drawings[0].Figures[0]
	cmd := exec.Command(python, "testdata/lot_figures.py", path, fmt.Sprint(float64(f.Low)), fmt.Sprint(float64(f.High)))
	text, err := cmd.CombinedOutput()
	if err != nil {
		t.Fatalf("%v: %s", err, text)
	}
	want := map[string]float64{}
	if err := json.Unmarshal(text, &want); err != nil {
		t.Fatalf("%v: %s", err, text)
	}
	for name, got := range map[string]result.Number{
		"yield": l.Yield.Value, "yield_low": l.Yield.Low, "yield_high": l.Yield.High,
		"mean": f.Mean.Value, "mean_low": f.Mean.Low, "mean_high": f.Mean.High, "sd": f.SD.Value, "sd_low": f.SD.Low, "sd_high": f.SD.High,
		"cp": f.Overall.Cp.Value, "cpk": f.Overall.Cpk.Value, "within_sd": f.Within.SD, "within_cpk": f.Within.Cpk.Value,
		"chart_low": f.Chart.Low, "chart_high": f.Chart.High, "range_high": f.Chart.RangeHigh,
	} {
		if w, known := want[name]; !known || math.Abs(float64(got)-w) > 1e-4*math.Max(1e-3, math.Abs(w)) {
			t.Errorf("%s = %v, want scipy's %v", name, got, w)
		}
	}
}

// Ctrl-C in the middle of a lot leaves whole pages of the units that are done, and
// nothing half-written: no table, no page of the lot.
func TestInterruptedLot(t *testing.T) {
	folder := rehearsedLot(t, 8, "330")
	out := t.TempDir()
	var stdout interrupting
	var stderr bytes.Buffer
	status := run([]string{"lot", folder, "--json", "--workers", "2", "--csv", filepath.Join(out, "lot.csv"),
		"--report", filepath.Join(out, "lot.html"), "--reports", filepath.Join(out, "units")}, &stdout, &stderr)
	if status != exitNoCheck || !strings.Contains(stderr.String()+stdout.String(), "interrupted; ") {
		t.Errorf("status %d, %s%s, want %d and a word about the interruption", status, &stderr, &stdout.Buffer, exitNoCheck)
	}
	pages := 0
	err := filepath.WalkDir(out, func(path string, d fs.DirEntry, err error) error {
		switch {
		case err != nil || d.IsDir():
		case filepath.Dir(path) == filepath.Join(out, "units") && strings.HasSuffix(readText(t, path), "</html>\n"):
			pages++
		default:
			t.Errorf("left behind: %s", path)
		}
		return err
	})
	if err != nil || pages == 0 || pages > 7 {
		t.Errorf("%d whole pages, %v, want some of 8", pages, err)
	}
}

// interrupting sends what Ctrl-C sends when the second line is written to it.
type interrupting struct {
	bytes.Buffer
	lines int
}

func (i *interrupting) Write(b []byte) (int, error) {
	if i.lines++; i.lines == 2 {
		self, err := os.FindProcess(os.Getpid())
		if err == nil {
			err = self.Signal(os.Interrupt)
		}
		if err != nil {
			return 0, err
		}
	}
	return i.Buffer.Write(b)
}
