package suspect_test

import (
	"bufio"
	"bytes"
	"encoding/json"
	"math"
	"os"
	"os/exec"
	"strconv"
	"strings"
	"testing"

	"padproof/compare/network"

	"gonum.org/v1/gonum/stat/distuv"
)

// script makes the units. It shares no code with padproof.
const script = "../../testdata/independent/suspects.py"

// A number is one of JSON, NaN where that has null.
type number float64

func (n *number) UnmarshalJSON(text []byte) error {
	f := math.NaN()
	if string(text) != "null" {
		if err := json.Unmarshal(text, &f); err != nil {
			return err
		}
	}
	*n = number(f)
	return nil
}

// A drawing is one that units are made of.
type drawing struct {
	Design     string         `json:"design"`
	Network    string         `json:"network"`
	Classes    map[string]int `json:"classes"` // by words; the same number: no reading at any pin differs
	Direct     map[string]int `json:"direct"`  // the same number: no ohmmeter reading differs
	Unbalanced bool           `json:"unbalanced"`
	Parts      []struct {
		Ref   string  `json:"ref"`
		Kind  string  `json:"kind"`
		Value float64 `json:"value"`
		Tol   float64 `json:"tol"`
		A     string  `json:"a"`
		B     string  `json:"b"`
	} `json:"parts"`
	circuit *network.Circuit
}

func (d *drawing) build(t testing.TB) {
	var parts []network.Part
	for _, p := range d.Parts {
		kind := map[string]network.Kind{"R": network.Resistor, "C": network.Capacitor, "L": network.Inductor}[p.Kind]
		parts = append(parts, network.Part{Ref: p.Ref, Kind: kind, Value: p.Value, TolFrac: p.Tol, A: p.A, B: p.B})
	}
	var err error
	if d.circuit, err = network.New(d.Network, parts); err != nil {
		t.Fatalf("%s: %v", d.Design, err)
	}
}

// A made is a unit as suspects.py made it; its doc says what each key is.
type made struct {
	Unit    string   `json:"unit"`
	Design  string   `json:"design"`
	Fault   string   `json:"fault"`
	Form    string   `json:"form"`
	Ref     string   `json:"ref"`
	Refs    []string `json:"refs"`
	Ratio   number   `json:"ratio"`
	ShowsDB []number `json:"shows_db"`
	Rig     struct {
		Source    float64       `json:"source"`
		SourceTol float64       `json:"source_tol"`
		Load      float64       `json:"load"`
		LoadTol   float64       `json:"load_tol"`
		Cable     float64       `json:"cable"`
		CableTol  float64       `json:"cable_tol"`
		LegsLoad  float64       `json:"legs_load"`
		Drive     network.Drive `json:"drive"`
		Sense     network.Sense `json:"sense"`
	} `json:"rig"`
	GainStdDB float64 `json:"gain_std_db"`
	Loss      struct {
		DB      float64 `json:"db"`
		Std     float64 `json:"std"`
		AtLeast bool    `json:"at_least"`
	} `json:"loss"`
	Response [][3]float64 `json:"response"`
	Polarity int          `json:"polarity"`
	Legs     *struct {
		DB       float64 `json:"db"`
		Std      float64 `json:"std"`
		Phase    number  `json:"phase"`
		PhaseStd number  `json:"phase_std"`
		DeadHot  bool    `json:"dead_hot"`
		DeadCold bool    `json:"dead_cold"`
		Before   bool    `json:"before"`
	} `json:"legs"`
	Noise struct {
		Plug  float64 `json:"plug"`
		PadVV float64 `json:"pad_vv"`
		RigVV float64 `json:"rig_vv"`
		Part  float64 `json:"part"`
	} `json:"noise"`
	Ohms map[string]number `json:"ohms"` // by pins; null is over range
	of   *drawing
}

const toneHz = 997

// python is an interpreter that has numpy; the test is skipped where there is none.
func python(t testing.TB) string {
	t.Helper()
	names := []string{"python3", "/usr/bin/python3"}
	if named := os.Getenv("PYTHON"); named != "" {
		names = []string{named}
	}
	for _, name := range names {
		if exec.Command(name, "-c", "import numpy").Run() == nil {
			return name
		}
	}
	t.Skipf("no Python with numpy among %q: install python3-numpy, or name an interpreter in PYTHON", names)
	return ""
}

// long tells whether the long runs were asked for.
func long() bool { return os.Getenv("PADPROOF_LONG") == "1" }

// often is how many units there are, usually and in a long run.
func often(usual, atLength int) int {
	if long() {
		return atLength
	}
	return usual
}

// makeUnits makes units of a mix. The same seed gives the same ones.
func makeUnits(t testing.TB, mix string, count, seed int) []made {
	t.Helper()
	cmd := exec.Command(python(t), script, "--mix", mix, "--count", strconv.Itoa(count), "--seed", strconv.Itoa(seed))
	cmd.Stderr = os.Stderr
	out, err := cmd.Output()
	if err != nil {
		t.Fatalf("%s: %v", script, err)
	}
	drawings := map[string]*drawing{}
	var units []made
	lines := bufio.NewScanner(bytes.NewReader(out))
	lines.Buffer(nil, 1<<20)
	for lines.Scan() {
		if strings.HasPrefix(lines.Text(), `{"design"`) {
			var d drawing
			if err := json.Unmarshal(lines.Bytes(), &d); err != nil {
				t.Fatal(err)
			}
			d.build(t)
			drawings[d.Design] = &d
			continue
		}
		var u made
		if err := json.Unmarshal(lines.Bytes(), &u); err != nil {
			t.Fatal(err)
		}
		u.of = drawings[u.Design]
		units = append(units, u)
	}
	if len(units) != count {
		t.Fatalf("%s: %d units, want %d: %v", mix, len(units), count, lines.Err())
	}
	return units
}

// atMost is the count that an event of chance p in n trials passes once in a thousand times.
func atMost(n int, p float64) int {
	d := distuv.Binomial{N: float64(n), P: p}
	k := 0
	for k < n && d.CDF(float64(k)) < 0.999 {
		k++
	}
	return k
}
