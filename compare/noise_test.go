package compare

import (
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"padproof/analysis"
	"padproof/compare/network"
)

// A simulated bench for noise: what the rig truly is beside what its sheet says.
type noiseScene struct {
	pad        *network.Circuit // as built
	drawn      *network.Circuit
	bench      NoiseBench
	rigOver    float64 // the rig's own noise over the expected thermal noise, dB
	seconds    float64
	realLoad   bool    // the load is a resistor and makes noise
	amps       float64 // the true noise current
	gainOffDB  float64 // true gain over the stated
	driftDB    float64 // of rig-noise against pad-noise
	tempC      float64
	unitFactor float64 // the unit's noise over thermal, as a power
}

const sceneRateHz = 48000

// takes draws the spectra of both noise takes. Bins are drawn independent, each with the scatter
// that makes the sum of many scatter as that of a true spectrum does.
func (s noiseScene) takes(random *rand.Rand) (pad, rig *analysis.Noise) {
	e := s.bench.Ends
	e.Drive = network.DriveFloating
	plugEnds := e
	e.SourceOhms, plugEnds.SourceOhms = s.bench.PadPlugOhms, s.bench.NoisePlugOhms
	kelvin := 273.15 + s.tempC
	own := s.drawn.ThermalDensity(e, 1000, kelvin).UnitVV * math.Pow(10, s.rigOver/10)
	share := 0.0
	if s.realLoad {
		share = 1
	}
	padDensity := func(f float64) float64 {
		t := s.pad.ThermalDensity(e, f, kelvin)
		return s.unitFactor*t.UnitVV + share*t.LoadVV + s.amps*s.amps*t.OhmsSq + own
	}
	rigDensity := func(f float64) float64 {
		t := s.pad.StraightThermalDensity(plugEnds, f, kelvin)
		return t.UnitVV + share*t.LoadVV + s.amps*s.amps*t.OhmsSq + own
	}
	gain := math.Pow(10, s.gainOffDB/10)
	return s.take(random, padDensity, gain), s.take(random, rigDensity, gain*math.Pow(10, -s.driftDB/10))
}

func (s noiseScene) take(random *rand.Rand, density func(freqHz float64) float64, gain float64) *analysis.Noise {
	const bins = 1024 // wide ones: nothing here is narrow
	const share = 16384 / bins
	segments := int(s.seconds*sceneRateHz/16384) - 1
	n := &analysis.Noise{
		ToSec: s.seconds, Band: analysis.FreqRange{LowHz: 20, HighHz: 20000},
		Spectrum: &analysis.Spectrum{RateHz: sceneRateHz, BinHz: sceneRateHz / 2 / bins, Segments: segments * share, MeanSquare: make([]float64, bins+1)},
	}
	perVolts := 1 / (2 * 0.6 * math.Pow(10, s.bench.FullScaleDBu/10))
	for k := range n.Spectrum.MeanSquare {
		mean := density(math.Max(1, float64(k)*n.Spectrum.BinHz)) * n.Spectrum.BinHz * gain * perVolts
		// A wide bin stands for share true ones, which the number of segments makes up for; 2.92 is
		// the window's figure (see analysis).
		n.Spectrum.MeanSquare[k] = mean * (1 + math.Sqrt(2.92/float64(segments)/share)*random.NormFloat64())
	}
	return n
}

func sceneBench(load float64) NoiseBench {
	return NoiseBench{
		Ends:         network.Ends{LoadOhms: load, Sense: network.SenseBalanced, CableFarads: 3e-10},
		FullScaleDBu: -32, GainDriftDB: 0.02, PadPlugOhms: 100, TempC: 21,
	}
}

func mustJudge(t *testing.T, k NoiseCase) UnitNoise {
	t.Helper()
	n, err := JudgeNoise(k)
	if err != nil {
		t.Fatal(err)
	}
	return n
}

// Sound pads from 100 ohm to 5 kilohm of output impedance on rigs 0 to 14 dB over thermal, the load
// a resistor or not, a noise current of 1 pA, everything else off by what the sheet admits: the
// truth lies within U in 92 to 99 of 100.
func TestNoiseCoverage(t *testing.T) {
	random := rand.New(rand.NewPCG(3, 1))
	pads := []*network.Circuit{
		circuit(t, "U", 0.01, 560, 560, 330),
		circuit(t, "U", 0.01, 1000, 1000, 120),
		circuit(t, "O", 0.01, 1100, 430, 430, 1100),
		circuit(t, "U", 0.01, 10000, 10000, 6800),
	}
	inside, shown, all, beyond := 0, 0, 0, 0
	for range 800 {
		pad := pads[random.IntN(len(pads))]
		b := sceneBench([]float64{10000, 2700, 47000}[random.IntN(3)])
		b.CalibrationUDB, b.TempHalfC = 0.2, 2
		b.LowAmps, b.HighAmps = 1e-12, 1e-12
		s := noiseScene{
			pad: pad, drawn: pad, bench: b, rigOver: 14 * random.Float64(), seconds: 20 + 40*random.Float64(),
			realLoad: random.IntN(2) == 1, amps: 1e-12, gainOffDB: 0.1 * random.NormFloat64(),
			driftDB: 0.02 * (2*random.Float64() - 1), tempC: 21 + 2*(2*random.Float64()-1), unitFactor: 1 + 2*float64(random.IntN(2)),
		}
		padTake, rigTake := s.takes(random)
		n := mustJudge(t, NoiseCase{Circuit: pad, Bench: b, PadNoise: padTake, RigNoise: rigTake})
		all++
		truth := 10 * math.Log10(s.unitFactor)
		if truth > n.Over.Bound {
			beyond++
		}
		if math.IsNaN(n.Over.Measured) {
			continue
		}
		shown++
		if math.Abs(n.Over.Measured-truth) <= n.Over.UDB {
			inside++
		}
	}
	t.Logf("inside U in %.1f %% of %d readings, %d takes", 100*float64(inside)/float64(shown), shown, all)
	if part := float64(inside) / float64(shown); part < 0.92 || part > 0.99 {
		t.Errorf("inside U in %.1f %% of %d readings, want 92 to 99", 100*part, shown)
	}
	if beyond > all*4/100 {
		t.Errorf("the truth lies above the bound in %d of %d, want 2.5 in 100", beyond, all)
	}
	if shown < all*9/10 {
		t.Errorf("%d readings of %d takes, want nine in ten", shown, all)
	}
}

// With the calibration nil and the rig 10 dB over thermal, two takes of 60 s give U of 0.5 dB at
// most; 20 dB over, takes of half a minute prove nothing and say what would.
func TestNoiseTargets(t *testing.T) {
	random := rand.New(rand.NewPCG(5, 1))
	pad := circuit(t, "U", 0.01, 560, 560, 330)
	for range 20 {
		s := noiseScene{pad: pad, drawn: pad, bench: sceneBench(10000), rigOver: 10, seconds: 60, tempC: 21, unitFactor: 1}
		padTake, rigTake := s.takes(random)
		n := mustJudge(t, NoiseCase{pad, s.bench, padTake, rigTake})
		if !(n.Over.UDB <= 0.5) {
			t.Errorf("rig 10 dB over, 60 s: U = %g dB, want 0.5 at most", n.Over.UDB)
		}
		if v, reason := n.JudgeOver(Guarded, AtMost(3)); v != Pass {
			t.Errorf("rig 10 dB over, 60 s: %s, %s", v, reason)
		}
	}
	for range 20 {
		for _, seconds := range []float64{10, 60} {
			s := noiseScene{pad: pad, drawn: pad, bench: sceneBench(10000), rigOver: 20, seconds: seconds, tempC: 21, unitFactor: 1}
			padTake, rigTake := s.takes(random)
			n := mustJudge(t, NoiseCase{pad, s.bench, padTake, rigTake})
			v, reason := n.JudgeOver(Guarded, AtMost(3))
			settle := n.Settle(n.Over, AtMost(3))
			if v != Unproven || !n.Drowned || !(settle.RigLowerDB > 1) || !strings.Contains(reason, "dBu") {
				t.Errorf("rig 20 dB over, %g s: %s (%.2f ± %.2f, bound %.2f), %s", seconds, v, n.Over.Measured, n.Over.UDB, n.Over.Bound, reason)
			}
		}
	}
}

// What is said to settle a case settles it.
func TestNoiseSettles(t *testing.T) {
	random := rand.New(rand.NewPCG(6, 1))
	pad := circuit(t, "U", 0.01, 560, 560, 330)
	bench := sceneBench(10000)
	bench.GainDriftDB = 0.003
	start := noiseScene{pad: pad, drawn: pad, bench: bench, rigOver: 20, seconds: 10, tempC: 21, unitFactor: 1}
	for range 10 {
		padTake, rigTake := start.takes(random)
		n := mustJudge(t, NoiseCase{pad, bench, padTake, rigTake})
		settle := n.Settle(n.Over, AtMost(3))
		if math.IsNaN(settle.Seconds) || math.IsNaN(settle.RigLowerDB) {
			t.Fatalf("settling %+v, want a length and a level", settle)
		}
		longer, quieter := start, start
		longer.seconds = settle.Seconds * 1.02
		quieter.rigOver -= settle.RigLowerDB + 0.1
		for what, s := range map[string]noiseScene{"longer": longer, "quieter": quieter} {
			passed := 0
			for range 20 {
				padTake, rigTake := s.takes(random)
				if v, _ := mustJudge(t, NoiseCase{pad, bench, padTake, rigTake}).JudgeOver(Guarded, AtMost(3)); v == Pass {
					passed++
				}
			}
			if passed < 18 {
				t.Errorf("%s, as said (%+v): %d of 20 pass, want 18 at least", what, settle, passed)
			}
		}
	}
}

// Takes without scatter: every figure by hand. A pad of 600 ohm output impedance on a load of 3 kilohm,
// the load a resistor, the rig's own noise as strong as the pad's.
func TestNoiseByHand(t *testing.T) {
	pad := circuit(t, "L", 0, 500, 1e12)
	bench := NoiseBench{
		Ends:         network.Ends{LoadOhms: 3000, Sense: network.SenseUnbalanced},
		FullScaleDBu: -30, PadPlugOhms: 100, NoisePlugOhms: 150, TempC: 26.85, LowAmps: 2e-12, HighAmps: 2e-12,
	}
	const fourKT = 4 * 1.380649e-23 * 300
	unit := fourKT * 600 * math.Pow(3000./3600, 2)
	load, z := fourKT/3000*500*500, 500.
	plug, plugLoad, plugZ := fourKT*150*math.Pow(3000./3150, 2), fourKT/3000*math.Pow(3000*150./3150, 2), 3000*150./3150
	const amps, widthHz = 4e-24, 19980.
	flat := func(density float64) *analysis.Noise {
		n := &analysis.Noise{ToSec: 60, Band: analysis.FreqRange{LowHz: 20, HighHz: 20000},
			Spectrum: &analysis.Spectrum{RateHz: 48000, BinHz: 48000. / 32768, Segments: 170, MeanSquare: make([]float64, 16385)}}
		for k := range n.Spectrum.MeanSquare {
			n.Spectrum.MeanSquare[k] = density * n.Spectrum.BinHz / (1.2 * math.Pow(10, -3))
		}
		return n
	}
	n := mustJudge(t, NoiseCase{pad, bench, flat(2*unit + load/2 + amps*z*z), flat(unit + plug + plugLoad/2 + amps*plugZ*plugZ)})
	near := func(what string, got, want float64) {
		t.Helper()
		if !(math.Abs(got-want) <= 1e-6) {
			t.Errorf("%s = %.9g, want %.9g", what, got, want)
		}
	}
	dBu := func(density float64) float64 { return 10 * math.Log10(density*widthHz/0.6) }
	near("Measured over thermal", n.Over.Measured, 0)
	near("ExpectedDBu", n.ExpectedDBu, dBu(unit))
	near("Level.Measured", n.Level.Measured, dBu(unit))
	near("RigDBu", n.RigDBu, dBu(unit+plug+plugLoad/2+amps*plugZ*plugZ))
	ranging := (load - plugLoad) / 2 / unit
	near("range of the load", n.Over.value.ranging, ranging)
	// Nothing else is in doubt but the averaging: 2/dof = 2.9265/170 bins of the 13640 in the band.
	part := math.Sqrt(2.92645 / 170 / (widthHz * 32768 / 48000))
	ofRig := (unit + plug + plugLoad/2 + amps*plugZ*plugZ) / unit
	ofPad := (2*unit + load/2 + amps*z*z) / unit
	u := 1.959964 * part * math.Hypot(ofRig, ofPad)
	if got := n.Over.value.u; math.Abs(got/u-1) > 1e-3 {
		t.Errorf("U of averaging = %g, want %g", got, u)
	}
	bench.GainDriftDB, bench.CalibrationUDB = 0.1, 0.4
	n2 := mustJudge(t, NoiseCase{pad, bench, flat(2*unit + load/2 + amps*z*z), flat(unit + plug + plugLoad/2 + amps*plugZ*plugZ)})
	wants := map[string]float64{ // parts of the expected, to first order: a part is 10/ln 10 dB
		driftTerm:       0.1 / math.Sqrt(3) * ofRig * math.Ln10 / 10,
		calibrationTerm: 0.2 * (ofPad - ofRig) * math.Ln10 / 10,
		padTerm:         part * ofPad, rigTerm: part * ofRig, loadTerm: ranging / math.Sqrt(3), currentTerm: 0,
	}
	for _, term := range n2.Over.Budget.Terms {
		if want := wants[term.Source]; math.Abs(term.Contribution()-want) > 1e-3*want+1e-9 {
			t.Errorf("%s contributes %g, want %g", term.Source, term.Contribution(), want)
		}
		delete(wants, term.Source)
	}
	if len(wants) > 0 {
		t.Errorf("not in the budget: %v", wants)
	}
	near("High", n.Over.High, 10*math.Log10(1+ranging+n.Over.value.u))
	near("Low", n.Over.Low, 10*math.Log10(1-ranging-n.Over.value.u))
	near("UDB", n.Over.UDB, -n.Over.Low)
}

// Cuts of either take are left out of both, and of the expected; so is a whine of the rig's that is
// not in pad-noise, while one in pad-noise counts.
func TestNoiseBands(t *testing.T) {
	take := func(cuts []analysis.FreqRange, lines ...analysis.NoiseLine) *analysis.Noise {
		return &analysis.Noise{Band: analysis.FreqRange{LowHz: 20, HighHz: 20000}, Cuts: cuts, Lines: lines}
	}
	whine := analysis.NoiseLine{FreqHz: 8000, MeanSquare: 1, Span: analysis.FreqRange{LowHz: 7990, HighHz: 8010}}
	weak := whine
	weak.MeanSquare = 0.5
	hum := []analysis.FreqRange{{LowHz: 40, HighHz: 60}}
	for _, row := range []struct {
		name     string
		pad, rig *analysis.Noise
		want     []analysis.FreqRange
	}{
		{"hum in rig", take(nil), take(hum), []analysis.FreqRange{{LowHz: 20, HighHz: 40}, {LowHz: 60, HighHz: 20000}}},
		{"hum in pad", take(hum), take(nil), []analysis.FreqRange{{LowHz: 20, HighHz: 40}, {LowHz: 60, HighHz: 20000}}},
		{"whine in rig", take(nil), take(nil, whine), []analysis.FreqRange{{LowHz: 20, HighHz: 7990}, {LowHz: 8010, HighHz: 20000}}},
		{"more in rig", take(nil, weak), take(nil, whine), []analysis.FreqRange{{LowHz: 20, HighHz: 7990}, {LowHz: 8010, HighHz: 20000}}},
		{"whine in both", take(nil, whine), take(nil, whine), []analysis.FreqRange{{LowHz: 20, HighHz: 20000}}},
		{"whine in pad", take(nil, whine), take(nil), []analysis.FreqRange{{LowHz: 20, HighHz: 20000}}},
	} {
		got := commonBands(row.pad, row.rig)
		if len(got) != len(row.want) {
			t.Errorf("%s: bands %v, want %v", row.name, got, row.want)
			continue
		}
		for i := range got {
			if got[i] != row.want[i] {
				t.Errorf("%s: bands %v, want %v", row.name, got, row.want)
			}
		}
	}
}

// What is wrong is named or fails; what is sound does neither.
func TestNoiseVerdicts(t *testing.T) {
	random := rand.New(rand.NewPCG(8, 1))
	pad := circuit(t, "U", 0.01, 560, 560, 330)
	sound := noiseScene{pad: pad, drawn: pad, bench: sceneBench(10000), rigOver: 6, seconds: 30, tempC: 21, unitFactor: 1}
	sound.bench.CalibrationUDB = 0.2
	for _, row := range []struct {
		name    string
		change  func(s *noiseScene, k *NoiseCase)
		over    Verdict // limit 3 dB
		level   Verdict // limit 3 dB over what is expected
		problem string
		says    string
	}{
		{"sound", func(*noiseScene, *NoiseCase) {}, Pass, Pass, "", ""},
		{"noisy part", func(s *noiseScene, _ *NoiseCase) { s.unitFactor = 4 }, Fail, Fail, "", ""},
		{"on the limit", func(s *noiseScene, _ *NoiseCase) { s.unitFactor = 2 }, Unproven, Unproven, "", "upper limit"},
		{"gain 6 dB under what is stated", func(s *noiseScene, _ *NoiseCase) { s.gainOffDB = -6 }, Unproven, Unproven, BelowThermal, "noise_full_scale_dbu"},
		{"gain 1.5 dB lower in pad-noise", func(s *noiseScene, _ *NoiseCase) { s.driftDB = -1.5 }, Unproven, Unproven, BelowThermal, "gain"},
		{"no level", func(_ *noiseScene, k *NoiseCase) { k.Bench.FullScaleDBu = math.NaN() }, Unproven, Unproven, "", "full_scale_dbu"},
		{"no rig-noise", func(_ *noiseScene, k *NoiseCase) { k.RigNoise = nil }, Unproven, Unproven, "", "rig-noise.wav"},
		{"coarse", func(_ *noiseScene, k *NoiseCase) { k.RigNoise.Coarse = true }, Unproven, Unproven, "", "24 bits"},
		{"poor calibration", func(_ *noiseScene, k *NoiseCase) { k.Bench.CalibrationUDB = 6 }, Unproven, Unproven, "", "uncertainty_db"},
	} {
		for range 10 {
			s := sound
			var k NoiseCase
			row.change(&s, &NoiseCase{RigNoise: new(analysis.Noise)})
			k = NoiseCase{Circuit: pad, Bench: s.bench}
			k.PadNoise, k.RigNoise = s.takes(random)
			row.change(&s, &k)
			n := mustJudge(t, k)
			over, overWhy := n.JudgeOver(Guarded, AtMost(3))
			level, levelWhy := n.JudgeLevel(Guarded, AtMost(n.ExpectedDBu+3))
			if over != row.over || level != row.level || n.Problem.Name != row.problem {
				t.Errorf("%s: over %s (%s), level %s (%s), problem %q, want %s, %s, %q; %.2f ± %.2f dB", row.name, over, overWhy, level, levelWhy,
					n.Problem.Name, row.over, row.level, row.problem, n.Over.Measured, n.Over.UDB)
			}
			if !strings.Contains(overWhy, row.says) {
				t.Errorf("%s: reason %q, want %q in it", row.name, overWhy, row.says)
			}
		}
	}
	s := sound
	s.rigOver = 25
	padTake, rigTake := s.takes(random)
	n := mustJudge(t, NoiseCase{pad, s.bench, padTake, rigTake})
	if v, why := n.JudgeLevel(Guarded, AtMost(n.ExpectedDBu+20)); v != Pass {
		t.Errorf("drowned, but 20 dB of room: %s, %s", v, why)
	}
	if v, _ := n.JudgeOver(Guarded, NoLimit()); v != None {
		t.Errorf("no limit: %q, want none", v)
	}
	if _, err := JudgeNoise(NoiseCase{Circuit: pad}); err == nil {
		t.Error("no pad-noise: no error")
	}
}

// Sound units are hardly ever called quieter than physics allows, nor do they fail.
func TestNoiseNoFalseAlarm(t *testing.T) {
	random := rand.New(rand.NewPCG(9, 1))
	pad := circuit(t, "U", 0.01, 1000, 1000, 120)
	alarms, fails, passes := 0, 0, 0
	const takes = 500
	for range takes {
		s := noiseScene{pad: pad, drawn: pad, bench: sceneBench(10000), rigOver: 12 * random.Float64(), seconds: 30, tempC: 21,
			realLoad: random.IntN(2) == 1, driftDB: 0.02 * (2*random.Float64() - 1), unitFactor: 1}
		s.bench.CalibrationUDB = 0.2
		s.gainOffDB = 0.1 * random.NormFloat64()
		padTake, rigTake := s.takes(random)
		n := mustJudge(t, NoiseCase{pad, s.bench, padTake, rigTake})
		if n.Problem.Name != "" {
			alarms++
		}
		switch v, _ := n.JudgeOver(Guarded, AtMost(3)); v {
		case Fail:
			fails++
		case Pass:
			passes++
		}
	}
	if alarms > takes*6/1000 || fails > 0 || passes < takes*98/100 {
		t.Errorf("of %d sound takes %d are below-thermal, %d FAIL, %d PASS; want 0.6 %% at most, none, 98 %%", takes, alarms, fails, passes)
	}
}

// The whole way with audio: white noise for the rig, and for the pad at its own level.
func TestNoiseOfAudio(t *testing.T) {
	pad := circuit(t, "U", 0.01, 560, 560, 330)
	bench := sceneBench(10000)
	bench.Ends.CableFarads = 0
	e := bench.Ends
	e.SourceOhms, e.Drive = bench.PadPlugOhms, network.DriveFloating
	unit := pad.ThermalDensity(e, 1000, 273.15+21).UnitVV
	inside := 0
	for seed := range uint64(6) {
		record := func(density, humVolts float64, seed uint64) *analysis.Noise {
			random := rand.New(rand.NewPCG(seed, 11))
			perVolt := 1 / math.Sqrt(1.2*math.Pow(10, bench.FullScaleDBu/10))
			a := &audio{x: make([]float64, 15*48000)}
			for i := range a.x {
				a.x[i] = 0.001 + perVolt*(math.Sqrt(density*24000)*random.NormFloat64()+humVolts*math.Sin(2*math.Pi*50.07*float64(i)/48000))
			}
			n, err := analysis.MeasureNoise(a, 0, math.Inf(1), 0)
			if err != nil {
				t.Fatal(err)
			}
			return n
		}
		factor := []float64{1, 3}[seed%2]
		n := mustJudge(t, NoiseCase{pad, bench, record((4+factor)*unit, 3e-6, 100+seed), record(4*unit, 0, 200+seed)})
		truth := 10 * math.Log10(factor)
		if math.Abs(n.Over.Measured-truth) <= n.Over.UDB {
			inside++
		}
		if n.Over.UDB > 0.5 || math.Abs(n.Over.Measured-truth) > 2*n.Over.UDB {
			t.Errorf("measured %.2f ± %.2f dB, want %.2f", n.Over.Measured, n.Over.UDB, truth)
		}
		if len(n.Bands) < 10 {
			t.Errorf("%d bands, want those between ten lines of hum", len(n.Bands))
		}
	}
	if inside < 5 {
		t.Errorf("%d of 6 inside U, want 5 at least", inside)
	}
}

type audio struct{ x []float64 }

func (*audio) RateHz() float64 { return 48000 }
func (a *audio) Frames() int64 { return int64(len(a.x)) }
func (a *audio) ReadAt(dst []float64, frame int64) (int, error) {
	return copy(dst, a.x[min(frame, a.Frames()):]), nil
}

// Powers are the volts squared that the takes were made of: rig-noise is the rig's own and the plug's,
// pad-noise over it is the unit's thermal noise, with no noise of the load or the current.
func TestPowers(t *testing.T) {
	pad := circuit(t, "U", 0.01, 560, 560, 330)
	s := noiseScene{drawn: pad, pad: pad, bench: sceneBench(10000), seconds: 60, tempC: 21, unitFactor: 1}
	k := NoiseCase{Circuit: pad, Bench: s.bench}
	k.PadNoise, k.RigNoise = s.takes(rand.New(rand.NewPCG(5, 5)))
	p, ok := k.Powers()
	if !ok {
		t.Fatal("Powers tells nothing of two good takes")
	}
	e := s.bench.Ends
	e.Drive, e.SourceOhms = network.DriveFloating, s.bench.PadPlugOhms
	unit := pad.ThermalNoise(e, 294.15, []network.Band{{LowHz: 20, HighHz: 20000}}).UnitVV
	if got := p.PadVV - p.RigVV; math.Abs(got/unit-1) > 4*math.Hypot(p.PadStdUFrac*p.PadVV, p.RigStdUFrac*p.RigVV)/unit+0.01 {
		t.Errorf("PadVV - RigVV = %v, want %v (thermal)", got, unit)
	}
	k.RigNoise = nil
	if p, ok := k.Powers(); !ok || !math.IsNaN(p.RigVV) {
		t.Errorf("without rig-noise Powers = %+v, %v, want a RigVV of NaN", p, ok)
	}
	if _, ok := (NoiseCase{Circuit: pad}).Powers(); ok {
		t.Error("Powers of no take at all are some")
	}
}
