package compare

import (
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"padproof/compare/network"
)

func ends(drive network.Drive, sense network.Sense, source, load, farads float64) network.Ends {
	return network.Ends{SourceOhms: source, Drive: drive, LoadOhms: load, Sense: sense, CableFarads: farads}
}

// Two dividers by hand: with r the ratio of the levels, R across the input and Rl the load,
// Rs = (r - 1) / (1/R - (r - 1)/Rl) (closed form of E Rl/(Rl+Rs) over E Rp/(Rp+Rs), Rp = R || Rl).
func TestFindSourceClosedForm(t *testing.T) {
	const load, across = 10000, 600
	for _, e := range []network.Ends{
		ends(network.DriveBalanced, network.SenseBalanced, 1, load, 0),
		ends(network.DriveFloating, network.SenseFloating, 1, load, 0),
		ends(network.DriveUnbalanced, network.SenseUnbalanced, 1, load, 0),
	} {
		for _, source := range []float64{5, 100, 600, 3000} {
			both := across * load / (across + load + 0.0)
			ratio := load / (load + source) / (both / (both + source))
			f, err := FindSource(SourceCase{
				Before: Twice{First: steady(-6, 0.001)}, Loaded: steady(-6-20*math.Log10(ratio), 0.001),
				LoadedOhms: across, Rig: Rig{Ends: e},
			})
			if err != nil {
				t.Fatal(err)
			}
			within(t, e.Drive.String()+" source", f.Ohms, source, 1e-6*source)
			within(t, "closed form", (ratio-1)/(1./across-(ratio-1)/load), source, 1e-9*source)
		}
	}
}

// With drawn benches, resistors and noise the true source lies inside U in at least 95 %.
func TestFindSourceCovers(t *testing.T) {
	random := rand.New(rand.NewPCG(6, 6))
	flat := func() float64 { return 2*random.Float64() - 1 }
	cases := map[string]struct {
		ends  network.Ends
		gains Gains
	}{
		"good bench":     {ends(network.DriveBalanced, network.SenseBalanced, 100, 10000, 300e-12), Gains{LinearityDB: 0.01, DriftDB: 0.005}},
		"drifting bench": {ends(network.DriveImpedanceBalanced, network.SenseBalanced, 200, 10000, 300e-12), Gains{LinearityDB: 0.01, DriftDB: 0.05}},
		"low load":       {ends(network.DriveUnbalanced, network.SenseUnbalanced, 600, 600, 0), Gains{LinearityDB: 0.02}},
	}
	for name, tt := range cases {
		const trials = 400
		inside := 0
		for range trials {
			rig := Rig{Ends: tt.ends, SourceTolFrac: 0.5, LoadTolFrac: 0.05, CableTolFarads: 0.2 * tt.ends.CableFarads}
			truth := tt.ends
			truth.SourceOhms *= 1 + 0.3*flat()
			truth.LoadOhms *= 1 + rig.LoadTolFrac*flat()
			truth.CableFarads += rig.CableTolFarads * flat()
			resistor := 600 * (1 + 0.01*flat())
			dropDB, err := benchAcross{truth, resistor, toneHz}.dropDB(truth.SourceOhms)
			if err != nil {
				t.Fatal(err)
			}
			dropDB += tt.gains.LinearityDB*flat() + tt.gains.DriftDB*flat()
			f, err := FindSource(SourceCase{
				Before:     Twice{First: steady(-6+0.002*random.NormFloat64(), 0.002)},
				Loaded:     steady(-6-dropDB+0.002*random.NormFloat64(), 0.002),
				LoadedOhms: 600, LoadedTolFrac: 0.01, Rig: rig, Gains: tt.gains,
			})
			if err != nil {
				t.Fatal(err)
			}
			if math.Abs(f.Ohms-truth.SourceOhms) <= f.UOhms {
				inside++
			}
		}
		// 400 at 95 % scatter by 1.1 %.
		if share := float64(inside) / trials; share < 0.925 {
			t.Errorf("%s: true source inside U in %.3f, want at least 0.95", name, share)
		}
	}
}

func TestFindSourceRefuses(t *testing.T) {
	rig := Rig{Ends: ends(network.DriveBalanced, network.SenseBalanced, 100, 10000, 0)}
	for name, tt := range map[string]struct {
		loaded, ohms float64
		text         string
	}{
		"no drop":          {-6, 600, "does not drop"},
		"rises":            {-5, 600, "does not drop"},
		"drops too far":    {-60, 600, "more than 600 Ω"},
		"resistor unknown": {-7, 0, "loaded_ohms"},
		"not a level":      {math.NaN(), 600, "drops"},
	} {
		_, err := FindSource(SourceCase{Before: Twice{First: steady(-6, 0.001)}, Loaded: steady(tt.loaded, 0.001), LoadedOhms: tt.ohms, Rig: rig})
		if err == nil || !strings.Contains(err.Error(), tt.text) {
			t.Errorf("%s: %v, want an error that says %q", name, err, tt.text)
		}
	}
}

func TestFoundSourceOnRig(t *testing.T) {
	f := FoundSource{Ohms: 98.2, UOhms: 1.13}
	r := f.On(Rig{Ends: ends(network.DriveBalanced, network.SenseBalanced, 150, 10000, 0), SourceTolFrac: 0.1})
	within(t, "source", r.Ends.SourceOhms, 98.2, 0)
	// A rectangle's standard uncertainty is its half-width over sqrt 3; U is twice it.
	within(t, "standard uncertainty", r.SourceTolFrac*98.2/math.Sqrt(3), 1.13/2, 1e-9)
	want := "[output]\nsource_ohms = 98.2\ntolerance   = \"1.2%\""
	if got := strings.Join(f.Lines(), "\n"); got != want {
		t.Errorf("lines\n%s\nwant\n%s", got, want)
	}
}

// 0 dBu is sqrt(0.6) V: a tone of 0.7746 V that reads -18 dBFS makes full scale 18 dBu.
func TestFindFullScale(t *testing.T) {
	tone := steady(-18, 0.0005)
	tone.FreqHz = 200
	f, err := FindFullScale(tone, math.Sqrt(0.6), 0.1, 0)
	if err != nil {
		t.Fatal(err)
	}
	within(t, "full scale", f.DBu, 18, 1e-9)
	within(t, "U", f.UDB, 0.098, 0.001) // 1.96 times half of 0.1
	if f.Warning != "" {
		t.Errorf("warning %q at 200 Hz, want none", f.Warning)
	}
	if got, want := strings.Join(f.Lines(), "\n"), "[calibration]\nfull_scale_dbu = 18\nuncertainty_db = 0.099"; got != want {
		t.Errorf("lines\n%s\nwant\n%s", got, want)
	}
	tone.FreqHz = 997
	if f, _ = FindFullScale(tone, 0.775, 0.1, 0.01); !strings.Contains(f.Warning, "100 to 400 Hz") {
		t.Errorf("warning %q at 997 Hz, want one", f.Warning)
	}
	for _, volts := range []float64{0, -1, math.NaN(), math.Inf(1)} {
		if _, err := FindFullScale(tone, volts, 0.1, 0); err == nil {
			t.Errorf("%g V: no error", volts)
		}
	}
}
