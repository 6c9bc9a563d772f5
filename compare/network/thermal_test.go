package network

import (
	"math"
	"math/cmplx"
	"os"
	"os/exec"
	"testing"
)

const ngspiceNoiseTable = "testdata/ngspice_noise_table.csv"

// The noise of pads simulated by ngspice 39. Its Boltzmann constant is that of 2014, a part in two
// million lower, its zero of the Celsius scale is right.
func TestThermalAgainstSimulator(t *testing.T) {
	rows := readTable(t, ngspiceNoiseTable)
	if len(rows) < 81 {
		t.Errorf("%s has %d rows, want at least 81", ngspiceNoiseTable, len(rows))
	}
	for _, row := range rows {
		c := mustNew(t, row[1], simulatedParts(t, row[1], row[2])...)
		sense, err := ParseSense(row[3])
		if err != nil {
			t.Fatal(err)
		}
		e := Ends{SourceOhms: number(t, row[4]), Drive: DriveFloating, LoadOhms: number(t, row[5]), Sense: sense, CableFarads: number(t, row[6])}
		got := c.ThermalDensity(e, number(t, row[7]), 273.15+21)
		unit, both := number(t, row[8]), number(t, row[9])
		if !near(got.UnitVV, unit, 2e-6*unit) {
			t.Errorf("%q: unit %g V²/Hz, want %g", row, got.UnitVV, unit)
		}
		if !near(got.LoadVV, both-unit, 2e-6*both) {
			t.Errorf("%q: load %g V²/Hz, want %g", row, got.LoadVV, both-unit)
		}
	}
}

func TestSimulatorNoiseTableIsFresh(t *testing.T) {
	for _, tool := range []string{"python3", "ngspice"} {
		if _, err := exec.LookPath(tool); err != nil {
			t.Skipf("%s is not installed: the kept table is not made again", tool)
		}
	}
	cmd := exec.Command("python3", "ngspice_noise_table.py")
	cmd.Dir = "testdata"
	cmd.Stderr = os.Stderr
	text, err := cmd.Output()
	if err != nil {
		t.Fatalf("ngspice_noise_table.py failed: %v", err)
	}
	kept, fresh := readTable(t, ngspiceNoiseTable), parseTable(t, string(text))
	if len(kept) != len(fresh) {
		t.Fatalf("ngspice_noise_table.py gave %d rows, want %d as kept", len(fresh), len(kept))
	}
	for i, want := range kept {
		for j := range want {
			if j < 8 && fresh[i][j] != want[j] || j >= 8 && !near(number(t, fresh[i][j]), number(t, want[j]), 1e-6*number(t, want[j])) {
				t.Errorf("ngspice_noise_table.py gave %q, want %q as kept", fresh[i], want)
			}
		}
	}
}

// A resistor by itself: the plug across an open input, and the same behind a pad of links.
func TestThermalOfAResistor(t *testing.T) {
	straight := mustNew(t, Custom, at("R1", Resistor, 0, "in.hot", "out.hot"), at("R2", Resistor, 0, "in.cold", "out.cold"))
	for _, row := range readTable(t, "testdata/thermal_noise_computed.csv")[1:] {
		ohms, kelvin := number(t, row[0]), number(t, row[1])
		e := Ends{SourceOhms: ohms, Drive: DriveFloating, LoadOhms: math.Inf(1), Sense: SenseFloating}
		bands := []Band{{number(t, row[2]), number(t, row[3])}}
		density, volts := number(t, row[5]), number(t, row[6])
		if got := math.Sqrt(straight.ThermalDensity(e, 1000, kelvin).UnitVV); !near(got, density, 1e-8*density) {
			t.Errorf("%q: %g V/√Hz, want %g", row, got, density)
		}
		for what, vv := range map[string]float64{
			"behind links": straight.ThermalNoise(e, kelvin, bands).UnitVV,
			"at the input": straight.StraightThermalNoise(e, kelvin, bands).UnitVV,
		} {
			if got := math.Sqrt(vv); !near(got, volts, 1e-8*volts) {
				t.Errorf("%q %s: %g V, want %g", row, what, got, volts)
			}
			if got := 10 * math.Log10(vv/0.6); !near(got, number(t, row[8]), 1e-4) {
				t.Errorf("%q %s: %g dBu, want %s", row, what, got, row[8])
			}
		}
	}
}

// Published figures, in the digits that they were printed with; "room" is taken as 293.15 K.
func TestThermalPublished(t *testing.T) {
	c := mustNew(t, Custom, at("R1", Resistor, 0, "in.hot", "out.hot"), at("R2", Resistor, 0, "in.cold", "out.cold"))
	seen := 0
	for _, row := range readTable(t, "testdata/thermal_noise_published.csv")[1:] {
		kelvin := 293.15
		if row[2] != "room" {
			kelvin = number(t, row[2])
		}
		e := Ends{SourceOhms: number(t, row[1]), Drive: DriveFloating, LoadOhms: math.Inf(1), Sense: SenseFloating}
		vv := c.ThermalNoise(e, kelvin, []Band{{0, number(t, row[3])}}).UnitVV
		density := c.ThermalDensity(e, 1000, kelvin).UnitVV
		got := map[string]float64{
			"nV/rtHz": 1e9 * math.Sqrt(density), "nV/rtHz/rtohm": 1e9 * math.Sqrt(density), "nV": 1e9 * math.Sqrt(vv),
			"uV": 1e6 * math.Sqrt(vv), "dBu": 10 * math.Log10(vv/0.6), "W": vv / (4 * e.SourceOhms),
		}[row[6]]
		if want := number(t, row[5]); !near(got, want, number(t, row[7])) {
			t.Errorf("%s: %g %s, want %g ± %s (%s)", row[0], got, row[6], want, row[7], row[8])
		}
		seen++
	}
	if seen < 12 {
		t.Errorf("%d published figures, want at least 12", seen)
	}
}

// Nyquist's form, 4kT Re Zout |Zl/(Zl+Zout)|², and |Z|² of the two side by side, for every network.
func TestThermalIsNyquists(t *testing.T) {
	const kelvin = 300
	for _, name := range Networks()[:7] {
		c := saltmarsh(t, name)
		for _, freqHz := range []float64{20, 1000, 20000} {
			e := Ends{SourceOhms: 150, Drive: DriveFloating, LoadOhms: 10000, Sense: SenseFloating, CableFarads: 3e-9}
			zl := 1 / complex(1/e.LoadOhms, 2*math.Pi*freqHz*e.CableFarads)
			zout := c.OutputImpedance(e, freqHz)
			got := c.ThermalDensity(e, freqHz, kelvin)
			unit := 4 * BoltzmannJPerK * kelvin * real(zout) * square(zl/(zl+zout))
			load := 4 * BoltzmannJPerK * kelvin / e.LoadOhms * square(zl*zout/(zl+zout))
			if !near(got.UnitVV, unit, 1e-9*unit) || !near(got.LoadVV, load, 1e-9*load) {
				t.Errorf("%s at %g Hz: unit %g, load %g, want %g, %g", name, freqHz, got.UnitVV, got.LoadVV, unit, load)
			}
			if z := cmplx.Abs(zl * zout / (zl + zout)); !near(math.Sqrt(got.OhmsSq), z, 1e-9*z) {
				t.Errorf("%s at %g Hz: |Z| = %g, want %g", name, freqHz, math.Sqrt(got.OhmsSq), z)
			}
		}
	}
}

// The sum over bands against Simpson's rule on many points; bands side by side add up.
func TestThermalNoiseSums(t *testing.T) {
	c := mustNew(t, "T", append(ohms(1000, 820, 120), at("C1", Capacitor, 1e-7, "in.hot", "mid"), at("L1", Inductor, 0.01, "out.hot", "screen"))...)
	e := Ends{SourceOhms: 150, Drive: DriveFloating, LoadOhms: 10000, Sense: SenseUnbalanced, CableFarads: 5e-9}
	const steps = 20000
	want, low, high := 0.0, math.Log(20), math.Log(20000)
	for i := 0; i <= steps; i++ {
		weight := map[bool]float64{true: 4, false: 2}[i%2 == 1]
		if i == 0 || i == steps {
			weight = 1
		}
		f := math.Exp(low + (high-low)*float64(i)/steps)
		want += weight / 3 * (high - low) / steps * f * c.ThermalDensity(e, f, 290).UnitVV
	}
	whole := c.ThermalNoise(e, 290, []Band{{20, 20000}}).UnitVV
	parts := c.ThermalNoise(e, 290, []Band{{20, 48}, {48, 53.5}, {53.5, 4000}, {4000, 20000}}).UnitVV
	if !near(whole, want, 1e-6*want) || !near(parts, want, 1e-6*want) {
		t.Errorf("ThermalNoise = %g, in parts %g, want %g", whole, parts, want)
	}
}

func TestThermalOdd(t *testing.T) {
	c := saltmarsh(t, "U")
	for _, e := range []Ends{{}, {SourceOhms: math.NaN(), LoadOhms: math.NaN()}, {SourceOhms: math.Inf(1), LoadOhms: math.Inf(1), Drive: DriveFloating, Sense: SenseFloating}} {
		for _, kelvin := range []float64{0, -5, math.NaN(), 300} {
			for _, f := range []float64{0, math.NaN(), 1e12} {
				got := c.ThermalDensity(e, f, kelvin)
				for _, v := range []float64{got.UnitVV, got.LoadVV, got.OhmsSq} {
					if math.IsNaN(v) || math.IsInf(v, 0) || v < 0 {
						t.Errorf("ThermalDensity(%+v, %g, %g) = %+v", e, f, kelvin, got)
					}
				}
			}
		}
	}
	e := Ends{SourceOhms: 150, LoadOhms: 1000}
	if got := c.ThermalNoise(e, 290, []Band{{200, 100}}); got != (Thermal{}) {
		t.Errorf("ThermalNoise over nothing = %+v", got)
	}
}
