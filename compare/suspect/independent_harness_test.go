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

	"padproof/compare"
	"padproof/compare/network"
	"padproof/compare/suspect"
	"padproof/compare/uncertainty"

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

func (u *made) ends() network.Ends {
	return network.Ends{SourceOhms: u.Rig.Source, Drive: u.Rig.Drive, LoadOhms: u.Rig.Load, Sense: u.Rig.Sense, CableFarads: u.Rig.Cable}
}

func (u *made) rig() compare.Rig {
	return compare.Rig{Ends: u.ends(), SourceTolFrac: u.Rig.SourceTol, LoadTolFrac: u.Rig.LoadTol, CableTolFarads: u.Rig.CableTol * u.Rig.Cable}
}

// A taking is which takes there are of a unit.
type taking struct {
	name                string
	signal, legs, noise bool // the test signal (response and polarity), legs, both noise takes
}

var takings = []taking{
	{name: "loss alone"},
	{name: "test signal", signal: true},
	{name: "test signal and legs", signal: true, legs: true},
	{name: "every take", signal: true, legs: true, noise: true},
}

// looked are the takings that a run looks at.
func looked() []taking {
	if long() {
		return takings
	}
	return []taking{takings[0], takings[2]}
}

// evidence is what those takes show of a unit.
func (u *made) evidence(k taking) suspect.Evidence {
	e := suspect.Evidence{
		Circuit: u.of.circuit, Rig: u.rig(), ToneHz: toneHz, GainStdUDB: u.GainStdDB,
		Loss: []suspect.Point{{FreqHz: toneHz, LossDB: u.Loss.DB, StdUDB: u.Loss.Std, AtLeast: u.Loss.AtLeast}},
	}
	if k.signal {
		e.Polarity = u.Polarity
		for _, p := range u.Response {
			e.Response = append(e.Response, suspect.Point{FreqHz: p[0], LossDB: p[1], StdUDB: p[2]})
		}
	}
	if l := u.Legs; k.legs && l != nil {
		e.Legs = &suspect.Legs{
			FreqHz: toneHz, LoadOhms: u.Rig.LegsLoad, OverDB: l.DB, StdUDB: l.Std, PhaseDeg: float64(l.Phase), PhaseStdUDeg: float64(l.PhaseStd),
			DeadHot: l.DeadHot, DeadCold: l.DeadCold,
		}
	}
	if k.noise {
		e.Noise = u.noise()
	}
	return e
}

func (u *made) noise() *suspect.Noise {
	return &suspect.Noise{
		Bench: compare.NoiseBench{
			Ends: u.ends(), LoadTolFrac: u.Rig.LoadTol, CableTolFarads: u.Rig.CableTol * u.Rig.Cable,
			FullScaleDBu: 0, CalibrationUDB: 0.2, GainDriftDB: 0.02, PadPlugOhms: u.Noise.Plug, TempC: 21, TempHalfC: 2,
		},
		Bands: []network.Band{{LowHz: 20, HighHz: 20000}},
		PadVV: u.Noise.PadVV, RigVV: u.Noise.RigVV, PadStdUFrac: u.Noise.Part, RigStdUFrac: u.Noise.Part,
	}
}

// meter takes a reading of the unit.
func (u *made) meter(t testing.TB, r compare.OhmReading) suspect.Ohms {
	t.Helper()
	key := r.PinA + "," + r.PinB
	if r.Joined != [2]string{} {
		key += "|" + r.Joined[0] + "," + r.Joined[1]
	}
	ohms, ok := u.Ohms[key]
	if !ok {
		t.Fatalf("%s: the units have no reading %q", u.Design, key)
	}
	if math.IsNaN(float64(ohms)) {
		ohms = number(math.Inf(1))
	}
	return suspect.Ohms{PinA: r.PinA, PinB: r.PinB, Joined: r.Joined, Ohms: float64(ohms)}
}

// Limits that units are judged by, in dB.
const (
	lossLimitDB     = 0.5
	responseLimitDB = 0.3
	legsLimitDB     = 1.0
	legsPhaseDeg    = 30
)

// verdict is that of the checks that the takes allow: loss carried over to service (the bench), legs
// where both are drawn within 20 dB of one another, response, and the same polarity.
func (u *made) verdict(t testing.TB, k taking) compare.Verdict {
	t.Helper()
	all := []compare.Verdict{u.lossVerdict(t)}
	if k.signal {
		if u.Polarity < 0 {
			all = append(all, compare.Fail)
		}
		drawn := func(hz float64) float64 {
			return u.of.circuit.LossDB(u.ends(), hz) - u.of.circuit.LossDB(u.ends(), toneHz)
		}
		for _, p := range u.Response {
			if math.Abs(p[1]-drawn(p[0])) > responseLimitDB+3*p[2] {
				all = append(all, compare.Fail)
			}
		}
	}
	if k.legs && u.Legs != nil {
		all = append(all, u.legsVerdict())
	}
	verdict, _ := compare.Combine(all...)
	return verdict
}

func (u *made) lossVerdict(t testing.TB) compare.Verdict {
	expected := u.of.circuit.LossDB(u.ends(), toneHz)
	limit := compare.PlusMinus(expected, lossLimitDB)
	if u.Loss.AtLeast {
		if u.Loss.DB > limit.High {
			return compare.Fail
		}
		return compare.Unproven
	}
	l, err := compare.JudgeLoss(compare.LossCase{
		Circuit: u.of.circuit, Rig: u.rig(), Service: u.ends(),
		Reading: compare.LossReading{LossDB: u.Loss.DB, FreqHz: toneHz, Terms: []uncertainty.Term{
			uncertainty.FromNormal("reading", u.Loss.Std, 1), uncertainty.FromNormal("gain", u.GainStdDB, 1),
		}},
	})
	if err != nil {
		t.Fatalf("%s: %v", u.Unit, err)
	}
	v, _ := compare.Decide(compare.Guarded, l.ServiceDB, l.UDB, limit, l.ServiceExpectedDB)
	return v
}

func (u *made) legsVerdict() compare.Verdict {
	_, with := u.of.circuit.LegVolts(u.ends(), u.Rig.LegsLoad, toneHz)
	drawn := 20 * math.Log10(absOf(with.Hot)/absOf(with.Cold))
	l := u.Legs
	if !(math.Abs(drawn) <= 20) || l.DeadHot && l.DeadCold {
		return compare.None
	}
	turn := math.Remainder(float64(l.Phase)-degrees(with.Hot/with.Cold), 360)
	if l.DeadHot || l.DeadCold || math.Abs(turn) > legsPhaseDeg {
		return compare.Fail
	}
	v, _ := compare.Decide(compare.Guarded, l.DB-drawn, 2*l.Std, compare.PlusMinus(0, legsLimitDB), 0)
	return v
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
