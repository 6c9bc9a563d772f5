package network

import (
	"encoding/csv"
	"math"
	"math/cmplx"
	"os"
	"os/exec"
	"strconv"
	"strings"
	"testing"
)

// The table holds pads solved by the circuit simulator ngspice 39 (Debian package
// ngspice), nine digits of each figure; testdata/ngspice_table.py made it.
const ngspiceTable = "testdata/ngspice_table.csv"

// The simulator's figures are written with nine digits and carry its own rounding.
const (
	simFrac  = 1e-7  // of a figure
	simVolts = 1e-9  // per volt of EMF
	simDB    = 1e-6  // of a loss
	simDeg   = 1e-5  // of a phase
	simOhms  = 1e-6  // of an impedance of few ohms
	simWatts = 1e-12 // of a part's dissipation
)

// A simulated table, read back.
type simulated struct {
	t        *testing.T
	circuits map[string]*Circuit
	ends     map[string]simulatedEnds
	checked  map[string]int
}

type simulatedEnds struct {
	circuit  *Circuit
	name     string
	ends     Ends
	legsOhms float64
}

func TestAgainstSimulator(t *testing.T) {
	s := simulated{t, map[string]*Circuit{}, map[string]simulatedEnds{}, map[string]int{}}
	for _, cells := range readTable(t, ngspiceTable) {
		s.checked[cells[0]]++
		switch cells[0] {
		case "circuit":
			s.circuits[cells[1]] = mustNew(t, cells[2], simulatedParts(t, cells[2], cells[3])...)
		case "ends":
			s.readEnds(cells)
		case "ac":
			s.checkAC(cells)
		case "watts":
			s.checkWatts(cells)
		case "ohms":
			s.checkOhms(cells)
		case "phantom":
			s.checkPhantom(cells)
		default:
			t.Fatalf("%s: no such row: %q", ngspiceTable, cells)
		}
	}
	for kind, least := range map[string]int{"circuit": 19, "ends": 228, "ac": 700, "watts": 228, "ohms": 500, "phantom": 20} {
		if s.checked[kind] < least {
			t.Errorf("%s has %d rows of %s, want at least %d", ngspiceTable, s.checked[kind], kind, least)
		}
	}
}

// TestSimulatorTableIsFresh makes the table again and compares.
func TestSimulatorTableIsFresh(t *testing.T) {
	for _, tool := range []string{"python3", "ngspice"} {
		if _, err := exec.LookPath(tool); err != nil {
			t.Skipf("%s is not installed: the kept table is not made again", tool)
		}
	}
	cmd := exec.Command("python3", "ngspice_table.py")
	cmd.Dir = "testdata"
	cmd.Stderr = os.Stderr
	text, err := cmd.Output()
	if err != nil {
		t.Fatalf("ngspice_table.py failed: %v", err)
	}
	kept, fresh := readTable(t, ngspiceTable), parseTable(t, string(text))
	if len(kept) != len(fresh) {
		t.Fatalf("ngspice_table.py gave %d rows, want %d as kept", len(fresh), len(kept))
	}
	for i, want := range kept {
		if got := fresh[i]; !sameCells(got, want) {
			t.Errorf("ngspice_table.py gave %q, want %q as kept", got, want)
		}
	}
}

// sameCells compares text as text and numbers within rounding.
func sameCells(got, want []string) bool {
	if len(got) != len(want) {
		return false
	}
	for i := range got {
		g, errG := strconv.ParseFloat(got[i], 64)
		w, errW := strconv.ParseFloat(want[i], 64)
		if errG != nil || errW != nil {
			if got[i] != want[i] {
				return false
			}
			continue
		}
		if !near(g, w, 1e-9+simFrac*min(math.Abs(w), 1e9)) {
			return false
		}
	}
	return true
}

func readTable(t *testing.T, path string) [][]string {
	t.Helper()
	text, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	return parseTable(t, string(text))
}

func parseTable(t *testing.T, text string) [][]string {
	t.Helper()
	r := csv.NewReader(strings.NewReader(text))
	r.Comment = '#'
	r.FieldsPerRecord = -1
	rows, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	return rows
}

// simulatedParts reads "R1=560 C1=1e-9@out.hot~out.cold".
func simulatedParts(t *testing.T, network, text string) []Part {
	t.Helper()
	kinds := map[byte]Kind{'R': Resistor, 'C': Capacitor, 'L': Inductor}
	var parts []Part
	for _, word := range strings.Fields(text) {
		ref, rest, _ := strings.Cut(word, "=")
		value, nodes, _ := strings.Cut(rest, "@")
		a, b, _ := strings.Cut(nodes, "~")
		parts = append(parts, Part{Ref: ref, Kind: kinds[ref[0]], Value: number(t, value), A: a, B: b})
	}
	return parts
}

func number(t *testing.T, text string) float64 {
	t.Helper()
	x, err := strconv.ParseFloat(text, 64)
	if err != nil {
		t.Fatal(err)
	}
	return x
}

func (s *simulated) numbers(cells []string) []float64 {
	s.t.Helper()
	xs := make([]float64, len(cells))
	for i, c := range cells {
		xs[i] = number(s.t, c)
	}
	return xs
}

func (s *simulated) readEnds(cells []string) {
	drive, err := ParseDrive(cells[3])
	if err != nil {
		s.t.Fatal(err)
	}
	sense, err := ParseSense(cells[4])
	if err != nil {
		s.t.Fatal(err)
	}
	x := s.numbers(cells[5:])
	e := Ends{SourceOhms: x[0], Drive: drive, LoadOhms: x[1], Sense: sense, CableFarads: x[2]}
	s.ends[cells[1]] = simulatedEnds{s.circuits[cells[2]], strings.Join(cells[2:], " "), e, x[3]}
}

func (s *simulated) checkAC(cells []string) {
	at, x := s.ends[cells[1]], s.numbers(cells[2:])
	c, e, f := at.circuit, at.ends, x[0]
	complexAt := func(i int) complex128 { return complex(x[3+2*i], x[4+2*i]) }
	report := func(what string, got, want any) {
		s.t.Errorf("%s: %s at %g Hz = %v, want %v", at.name, what, f, got, want)
	}
	if got := c.LossDB(e, f); !near(got, x[1], simDB) {
		report("LossDB", got, x[1])
	}
	if !math.IsInf(x[1], 1) {
		if got := cmplx.Phase(c.Transfer(e, f)) * 180 / math.Pi; !near(math.Remainder(got-x[2], 360), 0, simDeg) {
			report("phase of Transfer", got, x[2])
		}
	}
	straight, withPad := c.LoadVolts(e, f)
	legsStraight, legs := c.LegVolts(e, at.legsOhms, f)
	transfer := cmplx.Rect(sizeOf(x[1]), x[2]*math.Pi/180)
	for _, v := range []struct {
		what      string
		got, want complex128
		least     float64
	}{
		{"LoadVolts straight", straight, complexAt(0), simVolts},
		{"LoadVolts with pad", withPad, complexAt(0) * transfer, simVolts},
		{"InputImpedance", c.InputImpedance(e, f), complexAt(1), simOhms},
		{"OutputImpedance", c.OutputImpedance(e, f), complexAt(2), simOhms},
		{"LegVolts hot", legs.Hot, complexAt(3), simVolts},
		{"LegVolts cold", legs.Cold, complexAt(4), simVolts},
		{"LegVolts hot straight", legsStraight.Hot, complexAt(5), simVolts},
		{"LegVolts cold straight", legsStraight.Cold, complexAt(6), simVolts},
	} {
		if v.got != v.want && !(cmplx.Abs(v.got-v.want) <= v.least+simFrac*min(cmplx.Abs(v.want), 1e9)) {
			report(v.what, v.got, v.want)
		}
	}
}

func (s *simulated) checkWatts(cells []string) {
	at, x := s.ends[cells[1]], s.numbers(cells[2:])
	got := at.circuit.Dissipation(at.ends, x[0], x[1])
	for i, want := range x[2:] {
		if !near(got[i], want, simWatts+simFrac*want) {
			s.t.Errorf("%s: Dissipation(%g Hz, %g V) of part %d = %v, want %v", at.name, x[0], x[1], i, got[i], want)
		}
	}
}

func (s *simulated) checkOhms(cells []string) {
	var joined [][2]string
	if a, b, ok := strings.Cut(cells[4], "~"); ok {
		joined = append(joined, [2]string{a, b})
	}
	want := number(s.t, cells[5])
	if got := s.circuits[cells[1]].Ohms(cells[2], cells[3], joined...); !near(got, want, simFrac*min(want, 1e9)) {
		s.t.Errorf("%s: Ohms(%s, %s, %v) = %v, want %v", cells[1], cells[2], cells[3], joined, got, want)
	}
}

func (s *simulated) checkPhantom(cells []string) {
	x := s.numbers(cells[2:])
	got, ok := s.circuits[cells[1]].PhantomDrop(x[0])
	want := Phantom{
		Hot:  PhantomLeg{LostVolts: x[1], LeftVolts: x[2], Blocked: x[3] == 1},
		Cold: PhantomLeg{LostVolts: x[4], LeftVolts: x[5], Blocked: x[6] == 1},
	}
	same := func(a, b PhantomLeg) bool {
		return a.Blocked == b.Blocked && near(a.LostVolts, b.LostVolts, 1e-6) && near(a.LeftVolts, b.LeftVolts, 1e-6)
	}
	if !ok || !same(got.Hot, want.Hot) || !same(got.Cold, want.Cold) {
		s.t.Errorf("%s: PhantomDrop(%g A) = %+v, %v, want %+v, true", cells[1], x[0], got, ok, want)
	}
}
