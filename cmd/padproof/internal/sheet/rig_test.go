package sheet

import (
	"slices"
	"strings"
	"testing"
)

func assumedKeys(r *Rig) []string {
	var keys []string
	for _, a := range r.Assumed {
		keys = append(keys, a.Key)
	}
	return keys
}

func figure(t *testing.T, name string, got, want float64) {
	t.Helper()
	if !near(got, want) {
		t.Errorf("%s = %v, want %v", name, got, want)
	}
}

// The example bench states every figure.
func TestReadRigExample(t *testing.T) {
	r, err := ReadRig("testdata/saltmarsh_rig.toml")
	if err != nil {
		t.Fatal(err)
	}
	if r.Name != "Workbench interface, line out 1 to line in 1" || len(r.Assumed) != 0 {
		t.Errorf("name %q, assumed %v, want nothing assumed", r.Name, r.Assumed)
	}
	c := r.Calibration
	for _, f := range []struct {
		name      string
		got, want float64
	}{
		{"temperature_c", r.TemperatureC, 21}, {"temperature half-width", r.TemperatureHalfC, 0}, {"mains_hz", r.MainsHz, 50},
		{"source_ohms", r.Output.SourceOhms, 100}, {"output tolerance", r.Output.TolFrac, 0.10},
		{"load_ohms", r.Input.LoadOhms, 10000}, {"input tolerance", r.Input.TolFrac, 0.05},
		{"legs_load_ohms", r.LegsLoadOhms(false), 5000}, {"cable_pF", r.Input.CablePF, 300}, {"cable half-width", r.Input.CableHalfPF, 15},
		{"uncertainty_db", c.UncertaintyDB, 0.2}, {"linearity_db", c.LinearityDB, 0.01}, {"gain_drift_db", c.GainDriftDB, 0.05},
		{"after_gain_db", c.AfterGainDB, 0}, {"after_gain_uncertainty_db", c.AfterGainUncertaintyDB, 0},
		{"noise_gain_drift_db", c.NoiseGainDriftDB, 0.02}, {"channel_match_db", c.ChannelMatchDB, 0.1},
		{"noise_current_pA", c.NoiseCurrentPA, 0}, {"noise current half-width", c.NoiseCurrentHalfPA, 0},
		{"noise_plug_ohms", c.NoisePlugOhms, 0}, {"pad_plug_ohms", c.PadPlugOhms, 100},
	} {
		figure(t, f.name, f.got, f.want)
	}
	sameFigure(t, "full_scale_dbu", c.FullScaleDBu, 18)
	sameFigure(t, "noise_full_scale_dbu", c.NoiseFullScaleDBu, -32)
	sameFigure(t, "loaded_ohms", c.LoadedOhms, 600)
	sameFigure(t, "calibration_volts", c.CalibrationVolts, 0.775)
	if r.Drive(true) != "balanced" || r.Sense(true) != "balanced" {
		t.Errorf("written drive, sense = %q, %q", r.Drive(true), r.Sense(true))
	}
	if r.Line("input.cable_pF") != 15 {
		t.Errorf("line of cable_pF = %d, want 15", r.Line("input.cable_pF"))
	}
}

func TestReadRigBench(t *testing.T) {
	r, err := ReadRig("testdata/bench_rig.toml")
	if err != nil {
		t.Fatal(err)
	}
	figure(t, "output tolerance", r.Output.TolFrac, 0.01)
	figure(t, "cable half-width", r.Input.CableHalfPF, 3)
	figure(t, "noise full scale as full scale", *r.Calibration.NoiseFullScaleDBu, 18)
	want := []string{"input.sense", "input.legs_load_ohms", "calibration.noise_full_scale_dbu", "calibration.gain_drift_db",
		"calibration.noise_gain_drift_db", "calibration.channel_match_db", "calibration.noise_current_pA",
		"calibration.noise_plug_ohms", "calibration.pad_plug_ohms"}
	if got := assumedKeys(r); !slices.Equal(got, want) {
		t.Errorf("assumed %v, want %v", got, want)
	}
}

// The cautious defaults, figure by figure.
func TestRigDefaults(t *testing.T) {
	check := func(r *Rig, tolFrac float64) {
		t.Helper()
		c := r.Calibration
		for _, f := range []struct {
			name      string
			got, want float64
		}{
			{"temperature", r.TemperatureC, 23}, {"temperature half-width", r.TemperatureHalfC, 5}, {"mains", r.MainsHz, 0},
			{"source", r.Output.SourceOhms, 150}, {"source tolerance", r.Output.TolFrac, tolFrac},
			{"load", r.Input.LoadOhms, 10000}, {"load tolerance", r.Input.TolFrac, tolFrac},
			{"cable low", r.Input.CablePF - r.Input.CableHalfPF, 0}, {"cable high", r.Input.CablePF + r.Input.CableHalfPF, 500},
			{"legs load, balanced", r.LegsLoadOhms(false), 5000}, {"legs load, unbalanced", r.LegsLoadOhms(true), 10000},
			{"calibration", c.UncertaintyDB, 0.5}, {"linearity", c.LinearityDB, 0.02}, {"gain drift", c.GainDriftDB, 0.05},
			{"noise gain drift", c.NoiseGainDriftDB, 0.02}, {"channels", c.ChannelMatchDB, 0.1},
			{"after gain", c.AfterGainDB, 0}, {"after gain doubt", c.AfterGainUncertaintyDB, 0},
			{"current low", c.NoiseCurrentPA - c.NoiseCurrentHalfPA, 0}, {"current high", c.NoiseCurrentPA + c.NoiseCurrentHalfPA, 2},
			{"noise plug", c.NoisePlugOhms, 0}, {"pad plug", c.PadPlugOhms, 150},
		} {
			figure(t, f.name, f.got, f.want)
		}
		if c.FullScaleDBu != nil || c.NoiseFullScaleDBu != nil || c.LoadedOhms != nil || c.CalibrationVolts != nil {
			t.Errorf("full scale, noise full scale, loaded, volts: want all left out")
		}
		if r.Drive(false) != "balanced" || r.Sense(false) != "balanced" || r.Drive(true) != "unbalanced" || r.Sense(true) != "unbalanced" {
			t.Errorf("drive and sense left out: want those of the network")
		}
		want := []string{"temperature_c", "output.source_ohms", "output.drive", "input.load_ohms", "input.sense", "input.legs_load_ohms",
			"input.cable_pF", "calibration.uncertainty_db", "calibration.linearity_db", "calibration.gain_drift_db",
			"calibration.noise_gain_drift_db", "calibration.channel_match_db", "calibration.noise_current_pA",
			"calibration.noise_plug_ohms", "calibration.pad_plug_ohms"}
		if got := assumedKeys(r); !slices.Equal(got, want) {
			t.Errorf("assumed %v, want %v", got, want)
		}
		for _, a := range r.Assumed {
			if strings.Contains(a.Text, "%!") || a.Text == "" {
				t.Errorf("assumption %s in words: %q", a.Key, a.Text)
			}
		}
	}
	bare, err := ParseRig("rig.toml", []byte("name = \"Bench\"\n"))
	if err != nil {
		t.Fatal(err)
	}
	check(bare, 0.10)
	check(DefaultRig(), 0.50)
}

// Tolerances: what is written, what is taken for one left out, and that one
// written for a figure left out makes no default more certain.
func TestRigTolerances(t *testing.T) {
	for _, c := range []struct {
		name, text            string
		source, load, cableHi float64 // tolerances; upper end of the cable in pF
		assumed               string  // a key that must be assumed
		stated                string  // a key that must not be
	}{
		{"nil", "[output]\nsource_ohms = 100\ntolerance = \"0%\"\n[input]\nload_ohms = 1e4\ntolerance = \"0%\"\ncable_pF = 300", 0, 0, 300, "", "input.tolerance"},
		{"left out", "[output]\nsource_ohms = 100\n[input]\nload_ohms = 10000\ncable_pF = 300", 0.10, 0.10, 330, "output.tolerance", "output.source_ohms"},
		{"cable alone", "[input]\ntolerance = \"20%\"\ncable_pF = 100", 0.10, 0.20, 120, "input.load_ohms", "input.cable_pF"},
		{"tolerance alone", "[output]\ntolerance = \"1%\"\n[input]\ntolerance = \"1%\"", 0.10, 0.10, 500, "output.source_ohms", "output.tolerance"},
		{"no cable", "[input]\ncable_pF = 0", 0.10, 0.10, 0, "input.tolerance", "input.cable_pF"},
	} {
		r, err := ParseRig("rig.toml", []byte(c.text))
		if err != nil {
			t.Errorf("%s: %v", c.name, err)
			continue
		}
		figure(t, c.name+": source tolerance", r.Output.TolFrac, c.source)
		figure(t, c.name+": load tolerance", r.Input.TolFrac, c.load)
		figure(t, c.name+": cable", r.Input.CablePF+r.Input.CableHalfPF, c.cableHi)
		if (c.assumed != "" && !r.Assumes(c.assumed)) || r.Assumes(c.stated) {
			t.Errorf("%s: assumed %v, want %q in it and %q not", c.name, assumedKeys(r), c.assumed, c.stated)
		}
	}
}

func TestRigPlugAndLegs(t *testing.T) {
	r, err := ParseRig("rig.toml", []byte("[output]\nsource_ohms = 40\n[input]\nsense = \"floating\"\nload_ohms = 2000\n[calibration]\nafter_gain_db = 20\n"))
	if err != nil {
		t.Fatal(err)
	}
	figure(t, "pad plug left out", r.Calibration.PadPlugOhms, 40)
	figure(t, "legs load, floating sense", r.LegsLoadOhms(false), 2000)
	if !r.Assumes("calibration.after_gain_uncertainty_db") {
		t.Errorf("assumed %v, want the doubt of the added gain in it", assumedKeys(r))
	}
}
