package rehearsal

import (
	"math"
	"math/cmplx"

	"padproof/analysis"
	"padproof/compare/network"
)

// NoiseBench is what matters of a bench in the noise takes.
type NoiseBench struct {
	FullScaleDBu  float64 // dBu of a sine that reads 0 dBFS; NaN: not known
	InputDBu      float64 // the input's own noise voltage, white, 20 Hz to 20 kHz; -Inf for none
	CurrentAmps   float64 // the input's noise current, A per root hertz
	TempC         float64 // of everything
	PlugOhms      float64 // across the input in rig-noise; 0 is a short
	PadPlugOhms   float64 // leg to leg across the pad's input in pad-noise
	QuietLoad     bool    // the load is no real resistor: it makes no noise of its own
	OverThermalDB float64 // what the unit makes more than its thermal noise
	DriftDB       float64 // gain of pad-noise above that of rig-noise
}

const (
	boltzmann = 1.380649e-23 // J/K, exact (SI)
	zeroC     = 273.15       // K
)

// noiseSource is the impedance that closes the rig's input in a noise take.
func (p Plan) noiseSource(role string, freqHz float64) complex128 {
	if role == rigNoise {
		return complex(p.Bench.Noise.PlugOhms, 0)
	}
	e := p.Bench.Ends
	e.SourceOhms, e.Drive = p.Bench.Noise.PadPlugOhms, network.DriveFloating
	return p.Pad.OutputImpedance(e, freqHz)
}

// loaded returns a source impedance beside load and cable, and how much of the source's open
// voltage is left there.
func (p Plan) loaded(source complex128, freqHz float64) (ohms complex128, left float64) {
	e := p.Bench.Ends
	load := complex(1/e.LoadOhms, 2*math.Pi*freqHz*e.CableFarads)
	if cmplx.IsInf(source) {
		return 1 / load, 0
	}
	return source / (1 + source*load), 1 / cmplx.Abs(1+source*load)
}

// noiseDensity returns the noise at the rig's input terminals in V² per hertz: thermal noise
// 4kT·Re Z (H. Nyquist 1928) of what closes the input, through its divider with the load; the
// load's own, through its; the input's current through all of it, and the input's voltage.
func (p Plan) noiseDensity(role string, freqHz float64) float64 {
	n := p.Bench.Noise
	source := p.noiseSource(role, freqHz)
	ohms, left := p.loaded(source, freqHz)
	density := n.CurrentAmps * n.CurrentAmps
	if !n.QuietLoad {
		density += n.thermal() / p.Bench.Ends.LoadOhms
	}
	density *= square(cmplx.Abs(ohms))
	if left > 0 {
		own := n.thermal() * real(source) * left * left
		if role == padNoise {
			own *= math.Pow(10, n.OverThermalDB/10)
		}
		density += own
	}
	return density + square(voltsFromDBu(n.InputDBu))/(bandToHz-bandFromHz)
}

// thermal is 4kT.
func (n NoiseBench) thermal() float64 { return 4 * boltzmann * (n.TempC + zeroC) }

// UnitNoiseDBu returns what the unit makes at the rig's input from 20 Hz to 20 kHz, and how much of
// it is thermal, in dBu. Both are -Inf where nothing comes out.
func (p Plan) UnitNoiseDBu() (unitDBu, thermalDBu float64) {
	density := func(freqHz float64) float64 {
		source := p.noiseSource(padNoise, freqHz)
		_, left := p.loaded(source, freqHz)
		if left == 0 {
			return 0
		}
		return p.Bench.Noise.thermal() * real(source) * left * left
	}
	thermalDBu = dBuFromVolts(math.Sqrt(overBand(density)))
	return thermalDBu + p.Bench.Noise.OverThermalDB, thermalDBu
}

// overBand sums a density up from 20 Hz to 20 kHz, by Simpson's rule over the logarithm.
func overBand(density func(freqHz float64) float64) float64 {
	const steps = 600
	width := math.Log(bandToHz/bandFromHz) / steps
	sum := 0.0
	for i := 0; i <= steps; i++ {
		weight := 2.0 + 2*float64(i%2)
		if i == 0 || i == steps {
			weight = 1
		}
		freqHz := bandFromHz * math.Exp(float64(i)*width)
		sum += weight * freqHz * density(freqHz)
	}
	return sum * width / 3
}

// noisePath returns the path by which white noise of RMS 1 becomes that of a noise take.
func (p Plan) noisePath(role string) path {
	gainDB := 0.0
	if role == padNoise {
		gainDB = p.Bench.Noise.DriftDB
	}
	perSample := float64(p.RateHz) / 2 // the band that white noise fills, in Hz
	fullScale := voltsFromDBu(p.Bench.Noise.FullScaleDBu) * math.Sqrt2
	return path{gainDB: gainDB, roughly: true, response: func(freqHz float64) complex128 {
		return complex(math.Sqrt(p.noiseDensity(role, freqHz)*perSample)/fullScale, 0)
	}}
}

// voltsFromDBu returns volts RMS: 0 dBu is the root of 0.6 V² (common practice).
func voltsFromDBu(dBu float64) float64 { return math.Sqrt(0.6) * analysis.RatioFromDB(dBu) }

// dBuFromVolts is the reverse.
func dBuFromVolts(volts float64) float64 { return 20 * math.Log10(volts/math.Sqrt(0.6)) }

func square(x float64) float64 { return x * x }
