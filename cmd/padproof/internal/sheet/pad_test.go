package sheet

import (
	"fmt"
	"os"
	"path/filepath"
	"reflect"
	"strings"
	"testing"
)

// value shows a pointer's figure in messages.
func value(x *float64) string {
	if x == nil {
		return "left out"
	}
	return fmt.Sprint(*x)
}

func sameFigure(t *testing.T, name string, got *float64, want float64) {
	t.Helper()
	if got == nil || !near(*got, want) {
		t.Errorf("%s = %s, want %v", name, value(got), want)
	}
}

// The example drawing, every key that a sheet can have.
func TestReadPadExample(t *testing.T) {
	p, err := ReadPad("testdata/saltmarsh_pad.toml")
	if err != nil {
		t.Fatal(err)
	}
	if p.Name != "Saltmarsh 14 line pad" || p.Network != "U" || p.File != "testdata/saltmarsh_pad.toml" {
		t.Errorf("name, network, file = %q, %q, %q", p.Name, p.Network, p.File)
	}
	want := []Part{
		{Ref: "R1", Kind: Resistor, Value: 560, Code: "560", TolFrac: 0.01, Line: 4},
		{Ref: "R2", Kind: Resistor, Value: 560, Code: "560", TolFrac: 0.01, Line: 5},
		{Ref: "R3", Kind: Resistor, Value: 330, Code: "330", TolFrac: 0.01, Line: 6},
	}
	if !reflect.DeepEqual(p.Parts, want) {
		t.Errorf("parts = %+v, want %+v", p.Parts, want)
	}
	sameFigure(t, "service source", p.Service.SourceOhms, 120)
	sameFigure(t, "service load", p.Service.LoadOhms, 2700)
	sameFigure(t, "service cable", p.Service.CablePF, 800)
	if d, s := p.Service.DriveFor(false), p.Service.SenseFor(true); d != "balanced" || s != "unbalanced" {
		t.Errorf("service drive and sense left out = %q, %q, want balanced, unbalanced", d, s)
	}
	l := p.Limits
	sameFigure(t, "loss_plus_minus_db", l.LossPlusMinusDB, 0.3)
	sameFigure(t, "loss_nominal_db", l.LossNominalDB, 14)
	sameFigure(t, "response_plus_minus_db", l.ResponsePlusMinusDB, 0.2)
	sameFigure(t, "flatness_plus_minus_db", l.FlatnessPlusMinusDB, 0.5)
	sameFigure(t, "response_from_hz", &l.ResponseFromHz, 20)
	sameFigure(t, "response_to_hz", &l.ResponseToHz, 20000)
	sameFigure(t, "noise_over_thermal_db", l.NoiseOverThermalDB, 3)
	sameFigure(t, "noise_max_dbu", l.NoiseMaxDBu, -110)
	sameFigure(t, "distortion_max_db", l.DistortionMaxDB, -80)
	sameFigure(t, "hum_max_dbu", l.HumMaxDBu, -90)
	sameFigure(t, "leg_match_db", l.LegMatchDB, 1)
	sameFigure(t, "steady_within_db", l.SteadyWithinDB, 0.05)
	sameFigure(t, "bypass_within_db", l.BypassWithinDB, 0.05)
	if !l.SamePolarity || l.RequireTestSignal || l.Decision != "guarded" {
		t.Errorf("same_polarity, require_test_signal, decision = %v, %v, %q", l.SamePolarity, l.RequireTestSignal, l.Decision)
	}
	if p.LineOf("R3") != 6 || p.LineOf("R9") != 0 || p.Line("limits.decision") != 31 {
		t.Errorf("lines of R3, R9, decision = %d, %d, %d, want 6, 0, 31", p.LineOf("R3"), p.LineOf("R9"), p.Line("limits.decision"))
	}
	if e := p.Errorf("R2", "mend", "part %s hangs", "R2"); e.Error() != "testdata/saltmarsh_pad.toml:5: part R2 hangs" {
		t.Errorf("Errorf = %q", e.Error())
	}
	if e := p.Errorf("", "", "no way through"); e.Line != 2 {
		t.Errorf("Errorf without a part at line %d, want the network's, 2", e.Line)
	}
}

func TestReadPadBench(t *testing.T) {
	p, err := ReadPad("testdata/bench_pad.toml")
	if err != nil {
		t.Fatal(err)
	}
	if len(p.Parts) != 3 || p.Service != nil || p.Limits.LossNominalDB != nil {
		t.Errorf("parts, service, nominal = %d, %v, %s", len(p.Parts), p.Service, value(p.Limits.LossNominalDB))
	}
	sameFigure(t, "loss_plus_minus_db", p.Limits.LossPlusMinusDB, 0.5)
}

// part writes the sheet of a network out of refs.
func padOf(network string, refs ...string) string {
	var b strings.Builder
	fmt.Fprintf(&b, "network = %q\nparts = [\n", network)
	for _, ref := range refs {
		fmt.Fprintf(&b, "{ ref = %q, value = \"100\" },\n", ref)
	}
	return b.String() + "]\n"
}

// Every network reads with its own refs, and without any one of
// them the error says which is missing.
func TestNetworkRefs(t *testing.T) {
	refs := []string{"R1", "R2", "R3", "R4", "R5"}
	for network, n := range map[string]int{"L": 2, "U": 3, "T": 3, "H": 5, "pi": 3, "O": 4, "bridged-T": 4} {
		if _, err := ParsePad("pad.toml", []byte(padOf(network, refs[:n]...))); err != nil {
			t.Errorf("network %s with %v: %v", network, refs[:n], err)
		}
		for i := range n {
			short := append(append([]string{}, refs[:i]...), refs[i+1:n]...)
			_, err := ParsePad("pad.toml", []byte(padOf(network, short...)))
			want := fmt.Sprintf("pad.toml:2: network %s needs %s (", network, refs[i])
			if err == nil || !strings.HasPrefix(err.Error(), want) {
				t.Errorf("network %s without %s: %v, want %q", network, refs[i], err, want)
			}
		}
	}
}

func TestPartForms(t *testing.T) {
	p, err := ParsePad("pad.toml", []byte(`network = "T"
[[parts]]
ref = "R1"
value = 560          # a plain number is ohms
tolerance = "0%"
[[parts]]
ref = "R2"
value = "4R7K"       # the letter is the tolerance
[[parts]]
ref = "R3"
value = 0
[[parts]]
ref = "C1"
value = "220p"
between = ["out.hot", "out.cold"]
[[parts]]
ref = "Lfilter"
value = "10mH"
tolerance = "10%"
between = ["in.hot", "my_node"]
[[parts]]
ref = "Rterm"
value = "600 Ω"
between = ["my_node", "screen"]
`))
	if err != nil {
		t.Fatal(err)
	}
	want := []Part{
		{Ref: "R1", Kind: Resistor, Value: 560, Code: "560", Line: 2},
		{Ref: "R2", Kind: Resistor, Value: 4.7, Code: "4R7K", TolFrac: 0.10, Line: 6},
		{Ref: "R3", Kind: Resistor, Value: 0, Code: "0", TolFrac: 0.05, TolAssumed: true, Line: 9},
		{Ref: "C1", Kind: Capacitor, Value: 220e-12, Code: "220p", TolFrac: 0.20, TolAssumed: true, Between: [2]string{"out.hot", "out.cold"}, Line: 12},
		{Ref: "Lfilter", Kind: Inductor, Value: 0.01, Code: "10mH", TolFrac: 0.10, Between: [2]string{"in.hot", "my_node"}, Line: 16},
		{Ref: "Rterm", Kind: Resistor, Value: 600, Code: "600 Ω", TolFrac: 0.05, TolAssumed: true, Between: [2]string{"my_node", "screen"}, Line: 21},
	}
	for i, w := range want {
		if i >= len(p.Parts) || p.Parts[i] != w {
			t.Errorf("part %s = %+v, want %+v", w.Ref, p.Parts[i], w)
		}
	}
}

func TestPadLeftOut(t *testing.T) {
	p, err := ParsePad("pad.toml", []byte(padOf("L", "R1", "R2")+"[service]\nload_ohms = 600\n"))
	if err != nil {
		t.Fatal(err)
	}
	want := Limits{ResponseFromHz: 20, ResponseToHz: 20000, Decision: "guarded"}
	if p.Limits != want || p.Name != "" {
		t.Errorf("limits left out = %+v, want %+v", p.Limits, want)
	}
	if p.Service == nil || p.Service.SourceOhms != nil || p.Service.CablePF != nil {
		t.Errorf("service = %+v, want the load alone", p.Service)
	}
}

// A byte-order mark and line ends of another system change nothing.
func TestPadSavedElsewhere(t *testing.T) {
	data, err := os.ReadFile("testdata/saltmarsh_pad.toml")
	if err != nil {
		t.Fatal(err)
	}
	plain, err := ParsePad("pad.toml", data)
	if err != nil {
		t.Fatal(err)
	}
	other := "\ufeff" + strings.ReplaceAll(string(data), "\n", "\r\n")
	got, err := ParsePad("pad.toml", []byte(other))
	if err != nil || !reflect.DeepEqual(got, plain) {
		t.Errorf("with mark and CRLF: %v, want the same pad", err)
	}
}

func TestReadRefusesWhatIsNoSheet(t *testing.T) {
	dir := t.TempDir()
	write := func(name, text string) string {
		path := filepath.Join(dir, name)
		if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
		return path
	}
	for _, c := range []struct{ path, text string }{
		{dir, "is a folder"},
		{filepath.Join(dir, "none.toml"), "no such file"},
		{write("empty.toml", ""), "empty"},
		{write("comments.toml", "# nothing\n\n"), "empty"},
		{write("mark.toml", "\ufeff"), "empty"},
		{write("huge.toml", strings.Repeat("# padding\n", 1<<18)), "larger than a sheet"},
		{write("utf16.toml", "\xff\xfen\x00a\x00"), "UTF-16"},
		{write("latin.toml", "name = \"A\"\nnetwork = \"\xb5\"\n"), "byte 0xB5 is not UTF-8"},
		{write("wav.toml", "RIFF\x24\x80\x00\x00WAVEfmt "), "not UTF-8"},
	} {
		_, padErr := ReadPad(c.path)
		_, rigErr := ReadRig(c.path)
		for _, err := range []error{padErr, rigErr} {
			e, ok := err.(*Error)
			if !ok || e.File != c.path || !strings.Contains(e.Text, c.text) || e.Hint == "" {
				t.Errorf("%s: %#v, want %q and a hint", filepath.Base(c.path), err, c.text)
			}
		}
	}
	_, err := ReadPad(filepath.Join(dir, "latin.toml"))
	if e, ok := err.(*Error); !ok || e.Line != 2 {
		t.Errorf("not UTF-8: %v, want line 2", err)
	}
}
