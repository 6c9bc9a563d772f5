package compare

import (
	"encoding/csv"
	"math"
	"os"
	"os/exec"
	"strconv"
	"strings"
	"testing"

	"padproof/compare/network"
	"padproof/compare/uncertainty"
)

// reworkCase is a bench that reads a unit exactly, with a small doubt.
func reworkCase(t *testing.T, sound, unit *network.Circuit, bench, service network.Ends, half float64) ReworkCase {
	t.Helper()
	k := LossCase{
		Circuit: sound, Rig: Rig{Ends: bench}, Service: service,
		Reading: LossReading{LossDB: unit.LossDB(bench, toneHz), FreqHz: toneHz, Terms: []uncertainty.Term{uncertainty.FromNormal("reading", 0.005, 1)}},
	}
	loss, err := JudgeLoss(k)
	if err != nil {
		t.Fatal(err)
	}
	return ReworkCase{LossCase: k, Loss: loss, Limit: PlusMinus(sound.LossDB(service, toneHz), half), Unit: unit}
}

// From a source of nothing into no load an L pad loses 20 lg((R1+R2)/R2): the voltage divider of
// elementary circuit laws.
func TestTrimOfADivider(t *testing.T) {
	divider := func(r1, r2 float64) float64 { return 20 * math.Log10((r1+r2)/r2) }
	parallel := func(a, b float64) float64 { return a * b / (a + b) }
	ends := network.Ends{SourceOhms: 0.001, LoadOhms: math.Inf(1), Drive: network.DriveUnbalanced, Sense: network.SenseUnbalanced}
	tests := []struct {
		name     string
		r1, r2   float64 // as fitted
		ref      string
		parallel bool
		ohms     float64
		want     float64
	}{
		{"shunt high", 900, 110, "R2", true, 1100, divider(900, parallel(110, 1100))}, // 100 exactly
		{"shunt low", 900, 90, "R2", false, 10, divider(900, 100)},
		{"series low", 800, 100, "R1", false, 100, divider(900, 100)},
		{"series high", 1100, 100, "R1", true, 5100, divider(parallel(1100, 5100), 100)}, // 4950 wanted
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			sound := circuit(t, "L", 0.001, 900, 100)
			k := reworkCase(t, sound, sound.With("R1", tt.r1).With("R2", tt.r2), ends, ends, 0.2)
			r := FindRework(k)
			for _, trim := range r.Trims {
				if len(trim.Refs) != 1 || trim.Refs[0] != tt.ref || trim.Parallel != tt.parallel {
					continue
				}
				if math.Abs(trim.Ohms-tt.ohms) > 1e-9 || trim.Series != network.E24 {
					t.Errorf("%g Ω of %s, want %g of E24", trim.Ohms, trim.Series, tt.ohms)
				}
				if math.Abs(trim.ServiceLossDB-tt.want) > 1e-4 || math.Abs(trim.BenchLossDB-tt.want) > 1e-4 {
					t.Errorf("foretold %.5f dB on the bench, %.5f in service, want %.5f", trim.BenchLossDB, trim.ServiceLossDB, tt.want)
				}
				return
			}
			t.Errorf("trims %+v (%s) hold none of %s, parallel %v", r.Trims, r.Reason, tt.ref, tt.parallel)
		})
	}
}

const reworkTable = "testdata/rework_table.csv"

// Every E24 value at each place was tried by the circuit simulator ngspice (testdata/rework_table.py).
func TestTrimsAgainstSimulator(t *testing.T) {
	f, err := os.Open(reworkTable)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	reader := csv.NewReader(f)
	reader.Comment = '#'
	rows, err := reader.ReadAll()
	if err != nil || len(rows) < 12 {
		t.Fatalf("%s: %d rows, %v", reworkTable, len(rows), err)
	}
	for _, row := range rows {
		t.Run(row[0]+" "+row[2]+" "+row[3], func(t *testing.T) { checkTrimRow(t, row) })
	}
}

func checkTrimRow(t *testing.T, row []string) {
	var n [9]float64
	for i := range n {
		var err error
		if n[i], err = strconv.ParseFloat(row[4+i], 64); err != nil {
			t.Fatal(err)
		}
	}
	sound := valuesInto(t, circuit(t, row[0], 0.01, make1s(row[0])...), row[1])
	unit := valuesInto(t, sound, row[2])
	ends := func(source, load float64) network.Ends {
		if sound.Unbalanced() {
			return unbalanced(source, load)
		}
		return network.Ends{SourceOhms: source, LoadOhms: load}
	}
	k := reworkCase(t, sound, unit, ends(n[0], n[1]), ends(n[2], n[3]), 0.5)
	const tol = 2e-5 // dB; the table has nine digits, a source of 1 mΩ and more is exact
	if math.Abs(k.Loss.BenchDB-n[5]) > tol {
		t.Fatalf("the bench reads %.6f dB, want %.6f", k.Loss.BenchDB, n[5])
	}
	k.TrimTolFrac = commonTolFrac
	seen, _ := k.explained()
	for _, s := range k.sites(seen) {
		if s.placeName() != row[3] {
			continue
		}
		trim, ok := k.bestAt(s, network.E24, seen)
		if !ok {
			t.Errorf("%+v would not pass", trim)
		}
		if trim.Ohms != n[6] || math.Abs(trim.BenchLossDB-n[7]) > tol || math.Abs(trim.ServiceLossDB-n[8]) > tol {
			t.Errorf("%g Ω, bench %.6f dB, service %.6f dB, want %g Ω, %.6f, %.6f", trim.Ohms, trim.BenchLossDB, trim.ServiceLossDB, n[6], n[7], n[8])
		}
		return
	}
	t.Errorf("no site %q among %+v", row[3], k.sites(seen))
}

// placeName is the place as the table writes it.
func (s site) placeName() string {
	if len(s.refs) == 0 {
		return strings.Split(s.across[0], ".")[0]
	}
	return map[bool]string{true: "parallel ", false: "series "}[s.parallel] + strings.Join(s.refs, " ")
}

func make1s(name string) []float64 {
	ones := make([]float64, len(network.Refs(name)))
	for i := range ones {
		ones[i] = 1
	}
	return ones
}

// valuesInto puts values written "R1=560 R2=470" into a circuit.
func valuesInto(t *testing.T, c *network.Circuit, text string) *network.Circuit {
	t.Helper()
	for _, word := range strings.Fields(text) {
		ref, ohms, _ := strings.Cut(word, "=")
		v, err := strconv.ParseFloat(ohms, 64)
		if err != nil {
			t.Fatal(err)
		}
		c = c.With(ref, v)
	}
	return c
}

func TestReworkTableIsFresh(t *testing.T) {
	for _, tool := range []string{"python3", "ngspice"} {
		if _, err := exec.LookPath(tool); err != nil {
			t.Skipf("%s is not installed: the kept table is not made again", tool)
		}
	}
	cmd := exec.Command("python3", "rework_table.py")
	cmd.Dir = "testdata"
	fresh, err := cmd.Output()
	if err != nil {
		t.Fatal(err)
	}
	kept, err := os.ReadFile(reworkTable)
	if err != nil {
		t.Fatal(err)
	}
	if string(fresh) != string(kept) {
		t.Errorf("rework_table.py prints what %s does not hold", reworkTable)
	}
}
