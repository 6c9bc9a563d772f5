package generic

import (
	"encoding/csv"
	"math"
	"os"
	"os/exec"
	"slices"
	"strconv"
	"strings"
	"testing"

	"padproof/compare"
	"padproof/compare/network"
)

// The table holds textbook pads with faults solved by the circuit simulator ngspice 39 (Debian package
// ngspice); testdata/generic_table.py found their parts without the formulas used here, and made it.
const table = "testdata/generic_table.csv"

// A row of the table.
type row struct {
	network    string
	ohms, mark float64
	ends       network.Ends
	fault      string // "" for a sound pad
	lossDB     float64
}

func rows(t *testing.T) []row {
	t.Helper()
	f, err := os.Open(table)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	reader := csv.NewReader(f)
	reader.Comment = '#'
	cells, err := reader.ReadAll()
	if err != nil || len(cells) < 400 {
		t.Fatalf("%s: %d rows, %v", table, len(cells), err)
	}
	var all []row
	for _, c := range cells {
		number := func(i int) float64 {
			v, err := strconv.ParseFloat(c[i], 64)
			if err != nil {
				t.Fatal(err)
			}
			return v
		}
		drive, errD := network.ParseDrive(c[3])
		sense, errS := network.ParseSense(c[4])
		if errD != nil || errS != nil {
			t.Fatal(errD, errS)
		}
		all = append(all, row{c[0], number(1), number(2), network.Ends{SourceOhms: number(5), Drive: drive, LoadOhms: number(6), Sense: sense}, c[7], number(8)})
	}
	return all
}

// words are what the fault goes by here.
func (r row) words() string {
	end := map[bool]string{true: "input", false: "output"}[strings.HasSuffix(r.fault, "at in")]
	where := ""
	if r.network == "H" || r.network == "T" {
		where = " at the input" // the row's resistor is the first
	}
	shuntAt := ""
	if r.network == "O" || r.network == "pi" {
		shuntAt = " at the output" // the row's shunt is the last
	}
	switch {
	case strings.Contains(r.fault, "leg open"):
		return "a leg open at the " + end
	case strings.Contains(r.fault, "leg to screen"):
		return "a leg down to screen at the " + end
	case r.fault == "series open":
		return "a series resistor" + where + " open"
	}
	return "the shunt resistor" + shuntAt + map[string]string{
		"shunt open": " open", "shunt x10": " of ten times its value", "shunt /10": " of a tenth of its value",
	}[r.fault]
}

// Each pad with its fault, among the alternatives of its mark, reads what the simulator reads.
func TestAlternativesAgainstSimulator(t *testing.T) {
	for _, r := range rows(t) {
		c := Case{MarkDB: r.mark, Ohms: r.ohms, Rig: compare.Rig{Ends: r.ends}, FreqHz: 997, LossDB: r.lossDB, StdUDB: 0.01}
		i := slices.IndexFunc(Pads(c), func(p Pad) bool { return p.Circuit.Name() == r.network })
		if i < 0 {
			t.Errorf("%+v: no such pad among the alternatives", r)
			continue
		}
		p := Pads(c)[i]
		found := p.Circuit.LossDB(r.ends, 997)
		if r.fault != "" {
			found = nearestOf(c, p, r.words(), r.lossDB)
		}
		const tol = 2e-5 // dB; the ties of 1 TΩ in the simulator
		if found != r.lossDB && !(math.Abs(found-r.lossDB) <= tol) {
			t.Errorf("%s of %g Ω and %g dB, %s/%s, %q: reads %.6f dB, want %.6f", r.network, r.ohms, r.mark, r.ends.Drive, r.ends.Sense, r.fault, found, r.lossDB)
		}
	}
}

// nearestOf is what a pad with the fault of those words would read, of both legs the nearer.
func nearestOf(c Case, p Pad, text string, wantDB float64) float64 {
	found := math.NaN()
	for _, k := range c.kinds(p) {
		for _, m := range k.members {
			if m.text != text {
				continue
			}
			for _, at := range m.points {
				lossDB := at.faulty.LossDB(at.ends, c.FreqHz)
				if math.IsNaN(found) || lossDB == wantDB || math.Abs(lossDB-wantDB) < math.Abs(found-wantDB) {
					found = lossDB
				}
			}
		}
	}
	return found
}

// A leg open at the output takes some 6 dB between balanced ends, while the load is high beside the pad:
// one leg of two is left. Into 2 kΩ that one leg sags too, and it takes up to 9 dB. With other drives it takes far more, or far less, by the simulator alone.
func TestLegOpenAtTheOutput(t *testing.T) {
	sound := map[string]float64{}
	key := func(r row) string {
		return r.network + r.ends.Drive.String() + r.ends.Sense.String() + strconv.FormatFloat(r.ohms+r.mark+r.ends.LoadOhms*1000, 'g', -1, 64)
	}
	all := rows(t)
	for _, r := range all {
		if r.fault == "" {
			sound[key(r)] = r.lossDB
		}
	}
	seen := 0
	for _, r := range all {
		if !strings.HasSuffix(r.fault, "leg open at out") {
			continue
		}
		more := r.lossDB - sound[key(r)]
		balanced := r.ends.Drive == network.DriveBalanced && r.ends.Sense == network.SenseBalanced
		switch {
		case balanced && r.ends.LoadOhms == 10000 && (more < 6.0 || more > 7.0):
			t.Errorf("%s, %s: %.2f dB more between balanced ends, want some 6", r.network, r.fault, more)
		case balanced && (more < 6.0 || more > 9.5):
			t.Errorf("%s, %s: %.2f dB more into a low load, want some 6 to 9", r.network, r.fault, more)
		case !balanced && r.ends.Drive == network.DriveImpedanceBalanced && strings.HasPrefix(r.fault, "cold") && more > 0:
			t.Errorf("%s, %s: %.2f dB more from an impedance-balanced drive, want less than none", r.network, r.fault, more)
		case !balanced && r.ends.Drive != network.DriveImpedanceBalanced && !math.IsInf(more, 1):
			t.Errorf("%s, %s: %.2f dB more from a %v drive, want nothing to come through", r.network, r.fault, more, r.ends.Drive)
		}
		seen++
	}
	if seen < 60 {
		t.Errorf("%d rows with a leg open at the output, want 60 or more", seen)
	}
}

// A pad of the simulator with a fault: the fault is among what is said, and reads about what was read.
// One without is not spoken of.
func TestTrueFaultIsAmongTheLikelihoods(t *testing.T) {
	faults, among := 0, 0
	for i, r := range rows(t) {
		if i%7 != 0 { // a seventh of them says enough
			continue
		}
		c := Case{
			MarkDB: r.mark, Ohms: r.ohms, FreqHz: 997, LossDB: r.lossDB, StdUDB: 0.02,
			Rig: compare.Rig{Ends: r.ends, SourceTolFrac: 0.05, LoadTolFrac: 0.05},
		}
		if math.IsInf(r.lossDB, 1) {
			c.LossDB, c.AtLeast = 70, true
		}
		lines := Likelihoods(c)
		if r.fault == "" {
			if matched := r.network != "L" && r.network != "U"; matched && len(lines) > 0 {
				t.Errorf("a sound %s of %g Ω and %g dB: %+v, want nothing said", r.network, r.ohms, r.mark, lines)
			}
			continue
		}
		if len(lines) == 0 && agreesAnyway(c) {
			continue
		}
		checkLines(t, r, lines)
		faults++
		if slices.ContainsFunc(lines, func(l Likelihood) bool { return strings.Contains(" or "+l.Fault+" or ", " or "+r.words()+" or ") }) {
			among++
		}
	}
	// The pads are just as the textbook has them, so the six likeliest of some thirty faults in three
	// networks must nearly always hold the true one.
	if faults < 40 || among < faults*9/10 {
		t.Errorf("the true fault is among the lines in %d of %d, want nine tenths", among, faults)
	}
}

func agreesAnyway(c Case) bool { return c.agrees(Pads(c)) }

func checkLines(t *testing.T, r row, lines []Likelihood) {
	t.Helper()
	sum := 0.0
	for _, l := range lines {
		sum += l.Likelihood
		if math.IsInf(r.lossDB, 1) {
			continue
		}
		if !(l.LowDB <= l.WouldReadDB && l.WouldReadDB <= l.HighDB) || math.Abs(l.WouldReadDB-r.lossDB) > 4 {
			t.Errorf("%+v: %q would read %.2f dB (%.2f to %.2f)", r, l.Fault, l.WouldReadDB, l.LowDB, l.HighDB)
		}
		if l.Measure == "" {
			t.Errorf("%+v: %q has nothing to measure", r, l.Fault)
		}
	}
	if len(lines) > mostLines || sum > 1+1e-9 {
		t.Errorf("%+v: %d lines, likelihoods add up to %.3f", r, len(lines), sum)
	}
}

// Ohmmeter readings by hand: a U of 20 dB marked for 600 Ω, K = 10, has 270 Ω in each leg and 66.7 Ω
// across its output.
func TestMeasureOfAnOpenLeg(t *testing.T) {
	u, err := ConstantInput(false, 600, 20)
	if err != nil {
		t.Fatal(err)
	}
	open := network.Fault{Form: network.LegOpen, Pin: "out.hot"}.Apply(u)
	l := line{networks: map[string]hypothesis{"U": {sound: u, faulty: open, check: byLegs, weight: 1}}}
	const want = "with an ohmmeter out.hot to out.cold: 67 Ω sound, open with the fault; or record legs"
	if got := l.measure(); got != want {
		t.Errorf("measure = %q, want %q", got, want)
	}
}

// Legs open at either end, between floating ends: nothing comes through. The one reading named must show
// both: in.hot to in.cold would not show a break at the output.
func TestMeasureOfFaultsThatReadAlike(t *testing.T) {
	c := Case{MarkDB: 14, Ohms: 600, LossDB: 80, AtLeast: true, FreqHz: 997,
		Rig: compare.Rig{Ends: network.Ends{SourceOhms: 100, Drive: network.DriveFloating, LoadOhms: 10000}}}
	for _, l := range Likelihoods(c) {
		if l.Fault == "a leg open at the input or a leg open at the output" {
			if want := "in.hot to out.hot:"; !strings.Contains(l.Measure, want) {
				t.Errorf("measure %q, want %s", l.Measure, want)
			}
			return
		}
	}
	t.Errorf("%+v: no leg open among them", Likelihoods(c))
}

func TestNothingToSay(t *testing.T) {
	ends := network.Ends{SourceOhms: 100, LoadOhms: 10000}
	for _, c := range []Case{
		{},
		{MarkDB: 10, Ohms: 600, LossDB: math.NaN()},
		{MarkDB: 10, Ohms: 600, LossDB: math.Inf(1)},
		{MarkDB: math.NaN(), Ohms: 600, LossDB: 10},
		{MarkDB: 10, OnBench: true, LossDB: 10.2}, // within what 5 % parts may do
	} {
		c.FreqHz, c.Rig = 997, compare.Rig{Ends: ends}
		if lines := Likelihoods(c); len(lines) > 0 {
			t.Errorf("Likelihoods(%+v) = %+v, want none", c, lines)
		}
	}
	// Odd ends make no panic and no NaN.
	for _, e := range []network.Ends{{}, {SourceOhms: 0, LoadOhms: math.Inf(1)}, {SourceOhms: 1e9, LoadOhms: 1e-3}} {
		for _, l := range Likelihoods(Case{MarkDB: 10, OnBench: true, LossDB: 33, FreqHz: 997, Rig: compare.Rig{Ends: e}}) {
			if math.IsNaN(l.Likelihood) || math.IsNaN(l.WouldReadDB) {
				t.Errorf("ends %+v: %+v", e, l)
			}
		}
	}
}

func TestTableIsFresh(t *testing.T) {
	for _, tool := range []string{"python3", "ngspice"} {
		if _, err := exec.LookPath(tool); err != nil {
			t.Skipf("%s is not installed: the kept table is not made again", tool)
		}
	}
	cmd := exec.Command("python3", "generic_table.py")
	cmd.Dir = "testdata"
	fresh, err := cmd.Output()
	if err != nil {
		t.Fatal(err)
	}
	kept, err := os.ReadFile(table)
	if err != nil {
		t.Fatal(err)
	}
	if string(fresh) != string(kept) {
		t.Errorf("generic_table.py prints what %s does not hold", table)
	}
}

func BenchmarkLikelihoods(b *testing.B) {
	c := Case{MarkDB: 10, LossDB: 25, FreqHz: 997, StdUDB: 0.02, Rig: compare.Rig{Ends: network.Ends{SourceOhms: 100, LoadOhms: 10000}}}
	for b.Loop() {
		Likelihoods(c)
	}
}
