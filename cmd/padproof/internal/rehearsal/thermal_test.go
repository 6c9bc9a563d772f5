package rehearsal

import (
	"math"
	"testing"

	"padproof/compare/network"
)

// At 290 K (16.85 °C) a resistor of 1 Ω makes 4kT = 1.60155e-20 V² per hertz (Nyquist 1928).
const fourKT = 1.601553e-20

// rmsDBu is the whole of a noise take, at the input; white up to 24 kHz unless shaped.
func rmsDBu(samples []float64, fullScaleDBu float64) float64 {
	sum := 0.0
	for _, x := range samples {
		sum += x * x
	}
	return fullScaleDBu + 10*math.Log10(2*sum/float64(len(samples)))
}

func dBuOf(squareVolts float64) float64 { return 10 * math.Log10(squareVolts/0.6) }

// Noise of known resistances over the whole band of a take at 48 kHz, from closed forms.
func TestThermalNoiseOfResistances(t *testing.T) {
	par := func(a, b float64) float64 { return a * b / (a + b) }
	zout := par(150, 680+100) // the L pad's, its input closed by 100 Ω
	const band = 24000
	for name, tc := range map[string]struct {
		role   string
		change func(*Plan)
		want   float64 // V²
	}{
		"150 Ω alone": {rigNoise, func(p *Plan) { p.Bench.Noise.PlugOhms, p.Bench.Ends.LoadOhms = 150, 1e9 }, fourKT * 150 * band},
		"200 Ω alone": {rigNoise, func(p *Plan) { p.Bench.Noise.PlugOhms, p.Bench.Ends.LoadOhms = 200, 1e9 }, fourKT * 200 * band},
		"10 kΩ alone": {rigNoise, func(p *Plan) { p.Bench.Noise.PlugOhms, p.Bench.Ends.LoadOhms = 10e3, 1e9 }, fourKT * 10e3 * band},
		// Two resistors side by side make the noise of their parallel resistance.
		"plug beside load":    {rigNoise, func(p *Plan) { p.Bench.Noise.PlugOhms = 10e3 }, fourKT * 5e3 * band},
		"load makes no noise": {rigNoise, func(p *Plan) { p.Bench.Noise.PlugOhms, p.Bench.Noise.QuietLoad = 10e3, true }, fourKT * 10e3 / 4 * band},
		"a short": {rigNoise, func(p *Plan) { p.Bench.Noise.PlugOhms, p.Bench.Noise.InputDBu = 0, -120 },
			0.6e-12 * band / 19980},
		"noise current": {rigNoise, func(p *Plan) { p.Bench.Noise.PlugOhms, p.Bench.Noise.CurrentAmps = 10e3, 2e-12 },
			(fourKT*5e3 + 4e-24*25e6) * band},
		"pad beside load": {padNoise, func(*Plan) {}, fourKT * par(zout, 10e3) * band},
		"pad 6 dB over thermal, quiet load, gain 1 dB up": {padNoise, func(p *Plan) {
			n := &p.Bench.Noise
			n.QuietLoad, n.OverThermalDB, n.DriftDB = true, 6, 1
		}, fourKT * zout * math.Pow(10, 0.7) * math.Pow(10e3/(10e3+zout), 2) * band},
		// Through a cable of 10 nF the noise of 10 kΩ falls with f above 1/(2πRC): the integral of
		// 1/(1+(f/fc)²) is fc·atan(f/fc).
		"10 kΩ with 10 nF": {rigNoise, func(p *Plan) {
			p.Bench.Noise.PlugOhms, p.Bench.Ends.LoadOhms, p.Bench.Ends.CableFarads = 10e3, 1e9, 10e-9
		}, fourKT * 10e3 * 1591.549 * math.Atan(24000/1591.549)},
	} {
		p := plan(pad(t))
		p.NoiseSec = 10
		p.Bench.Noise = NoiseBench{FullScaleDBu: -32, InputDBu: math.Inf(-1), TempC: 16.85, PlugOhms: 150, PadPlugOhms: 100}
		tc.change(&p)
		got, want := rmsDBu(recorded(t, p, tc.role), -32), dBuOf(tc.want)
		// 480,000 samples scatter by 8.686/√960000 = 0.009 dB, four times as many behind the cable.
		if math.Abs(got-want) > 0.06 {
			t.Errorf("%s: %.3f dBu, want %.3f ± 0.06", name, got, want)
		}
	}
}

// The recorder's own noise comes on top by power, and a raised gain raises what is before it alone.
func TestNoiseTakeHasTheRecordersNoise(t *testing.T) {
	p := plan(pad(t))
	p.NoiseSec, p.NoiseDBFS = 10, -100
	p.Bench.Noise = NoiseBench{FullScaleDBu: -32, InputDBu: math.Inf(-1), TempC: 16.85, PlugOhms: 150}
	p.Bench.Ends.LoadOhms = 1e9
	want := dBuOf(fourKT*150*24000 + 0.6*math.Pow(10, -13.2)*24000/19980)
	if got := rmsDBu(recorded(t, p, rigNoise), -32); math.Abs(got-want) > 0.06 {
		t.Errorf("150 Ω in -100 dBFS of noise = %.3f dBu, want %.3f ± 0.06", got, want)
	}
}

// What the unit makes in the band, by the closed forms of a resistor and of one with a capacitor.
func TestUnitNoiseDBu(t *testing.T) {
	p := plan(pad(t))
	p.Bench.Noise = NoiseBench{TempC: 16.85, PadPlugOhms: 100, OverThermalDB: 3}
	zout := 150.0 * 780 / 930
	left := 10e3 / (10e3 + zout)
	unit, thermal := p.UnitNoiseDBu()
	if want := dBuOf(fourKT * zout * left * left * 19980); math.Abs(thermal-want) > 1e-4 || math.Abs(unit-want-3) > 1e-4 {
		t.Errorf("UnitNoiseDBu() = %.5f, %.5f, want %.5f, %.5f ± 0.0001", unit, thermal, want+3, want)
	}
	p.Bench.Ends.CableFarads = 100e-9
	beside := 1 / (1/zout + 1e-4)
	fc := 1 / (2 * math.Pi * beside * 100e-9)
	want := dBuOf(fourKT * zout * left * left * fc * (math.Atan(20000/fc) - math.Atan(20/fc)))
	if _, got := p.UnitNoiseDBu(); math.Abs(got-want) > 1e-4 {
		t.Errorf("with 100 nF: %.5f dBu, want %.5f ± 0.0001", got, want)
	}
	p.Pad = p.Pad.With("R2", math.Inf(1)).With("R1", math.Inf(1))
	if unit, _ := p.UnitNoiseDBu(); !math.IsInf(unit, -1) {
		t.Errorf("an open pad makes %v dBu, want -Inf", unit)
	}
}

// The plug of pad-noise lies leg to leg: a balanced pad shows the sum of its arms and the plug beside
// its shunt.
func TestPadPlugLiesLegToLeg(t *testing.T) {
	p := everything(t)
	p.Bench.Ends.LoadOhms = 1e9
	var err error // a resistor to screen, and no other way there, changes nothing
	p.Pad, err = network.New("U", []network.Part{{Ref: "R1", Value: 560}, {Ref: "R2", Value: 470}, {Ref: "R3", Value: 330},
		{Ref: "R4", Value: 1000, A: "out.cold", B: "screen"}})
	if err != nil {
		t.Fatal(err)
	}
	zout := 1 / (1/330.0 + 1/(560+470+100.0))
	for _, sense := range []network.Sense{network.SenseBalanced, network.SenseFloating} {
		p.Bench.Ends.Sense = sense
		if got, want := p.noiseDensity(padNoise, 1000), fourKT*zout; math.Abs(got/want-1) > 1e-5 {
			t.Errorf("%v: density %.6g V²/Hz, want %.6g", sense, got, want)
		}
	}
}
