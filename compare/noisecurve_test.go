package compare

import (
	"math"
	"testing"

	"padproof/analysis"
	"padproof/compare/network"
)

// Takes without scatter: every figure by hand, as in TestNoiseByHand: a pad of 600 ohm output
// impedance on a load of 3 kilohm that is a resistor, the rig's own noise as strong as the pad's.
func TestNoiseCurve(t *testing.T) {
	pad := circuit(t, "L", 0, 500, 1e12)
	bench := NoiseBench{
		Ends:         network.Ends{LoadOhms: 3000, Sense: network.SenseUnbalanced},
		FullScaleDBu: -30, PadPlugOhms: 100, NoisePlugOhms: 150, TempC: 26.85, LowAmps: 2e-12, HighAmps: 2e-12,
	}
	const fourKT = 4 * 1.380649e-23 * 300
	unit := fourKT * 600 * math.Pow(3000./3600, 2)
	load, z := fourKT/3000*500*500, 500.
	plug, plugLoad, plugZ := fourKT*150*math.Pow(3000./3150, 2), fourKT/3000*math.Pow(3000*150./3150, 2), 3000*150./3150
	const amps = 4e-24
	flat := func(density float64) *analysis.Noise {
		n := &analysis.Noise{ToSec: 60, Band: analysis.FreqRange{LowHz: 20, HighHz: 20000},
			Spectrum: &analysis.Spectrum{RateHz: 48000, BinHz: 48000. / 32768, Segments: 170, MeanSquare: make([]float64, 16385)}}
		for k := range n.Spectrum.MeanSquare {
			n.Spectrum.MeanSquare[k] = density * n.Spectrum.BinHz / (1.2 * math.Pow(10, -3))
		}
		return n
	}
	padVV, rigVV := 2*unit+load/2+amps*z*z, unit+plug+plugLoad/2+amps*plugZ*plugZ
	k := NoiseCase{pad, bench, flat(padVV), flat(rigVV)}
	points, lines := NoiseCurve(k, 24)
	if len(points) < 238 || len(lines) != 0 {
		t.Fatalf("%d points and %d lines, want some 240 and none", len(points), len(lines))
	}
	seen := 0
	for _, p := range points {
		for what, pair := range map[string][2]float64{"Pad": {p.Pad, padVV}, "Rig": {p.Rig, rigVV}, "Thermal": {p.Thermal, unit}} {
			if math.Abs(pair[0]/pair[1]-1) > 1e-6 {
				t.Errorf("%s at %.0f Hz = %g, want %g", what, p.FreqHz, pair[0], pair[1])
			}
		}
		if !math.IsNaN(p.Unit) {
			seen++
			if math.Abs(p.Unit/unit-1) > 1e-6 {
				t.Errorf("Unit at %.0f Hz = %g, want %g", p.FreqHz, p.Unit, unit)
			}
		} else if p.FreqHz > 1000 { // narrow bands know little, wide ones enough
			t.Errorf("Unit at %.0f Hz is not there", p.FreqHz)
		}
	}
	// A rig of forty times the noise drowns it in narrow bands.
	rigVV += 40 * unit
	k.RigNoise, k.PadNoise = flat(rigVV), flat(padVV+40*unit)
	drowned, _ := NoiseCurve(k, 24)
	for _, p := range drowned {
		if p.FreqHz < 500 && !math.IsNaN(p.Unit) {
			t.Errorf("Unit at %.0f Hz = %g under a rig of forty times as much", p.FreqHz, p.Unit)
		}
	}
	k.RigNoise = nil
	alone, _ := NoiseCurve(k, 24)
	if !math.IsNaN(alone[0].Rig) || !math.IsNaN(alone[0].Unit) {
		t.Errorf("without rig-noise Rig = %g and Unit = %g, want NaN", alone[0].Rig, alone[0].Unit)
	}
	if points, lines := NoiseCurve(NoiseCase{Circuit: pad, Bench: bench}, 24); points != nil || lines != nil {
		t.Error("a curve without pad-noise")
	}
}

// A line of 1 µV² in pad-noise is one line of 1 µV², at its frequency, and not in the noise beside it.
func TestNoiseCurveLines(t *testing.T) {
	pad := circuit(t, "L", 0, 500, 1e12)
	bench := NoiseBench{Ends: network.Ends{LoadOhms: 3000, Sense: network.SenseUnbalanced}, FullScaleDBu: -30, PadPlugOhms: 100, TempC: 21}
	n := &analysis.Noise{ToSec: 60, Band: analysis.FreqRange{LowHz: 20, HighHz: 20000},
		Spectrum: &analysis.Spectrum{RateHz: 48000, BinHz: 1, Segments: 100, MeanSquare: make([]float64, 24001)}}
	for i := range n.Spectrum.MeanSquare {
		n.Spectrum.MeanSquare[i] = 1e-12
	}
	n.Spectrum.MeanSquare[150] += 1e-6 / (1.2 * math.Pow(10, -3))
	n.Cuts = []analysis.FreqRange{{LowHz: 140.5, HighHz: 158.5}}
	n.Hum = &analysis.Hum{MainsHz: 50.01, Found: true}
	points, lines := NoiseCurve(NoiseCase{Circuit: pad, Bench: bench, PadNoise: n}, 24)
	if len(lines) != 1 {
		t.Fatalf("%d lines, want 1", len(lines))
	}
	if l := lines[0]; math.Abs(l.Pad/1e-6-1) > 1e-3 || math.Abs(l.FreqHz-150.03) > 1e-9 || !l.OfMains || l.Rig != 0 {
		t.Errorf("line %+v, want 1e-6 V² at 150.03 Hz, of the mains", l)
	}
	for _, p := range points {
		if want := 1e-12 * 1.2 * math.Pow(10, -3); math.Abs(p.Pad/want-1) > 1e-6 {
			t.Errorf("Pad at %.1f Hz = %g, want %g", p.FreqHz, p.Pad, want)
		}
	}
}
