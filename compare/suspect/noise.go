package suspect

import (
	"math"

	"padproof/compare"
	"padproof/compare/network"
)

// NoiseOf makes the evidence of two noise takes; nil where nothing can be told from them.
func NoiseOf(k compare.NoiseCase) *Noise {
	p, ok := k.Powers()
	if !ok {
		return nil
	}
	n := &Noise{Bench: k.Bench, PadVV: p.PadVV, RigVV: p.RigVV, PadStdUFrac: p.PadStdUFrac, RigStdUFrac: p.RigStdUFrac}
	for _, b := range p.Bands {
		n.Bands = append(n.Bands, network.Band(b))
	}
	return n
}

// A noiseScale is what the noise of a circuit is held against.
type noiseScale struct {
	Noise
	at     []network.Band // LowHz is a frequency, HighHz the width in Hz that it stands for
	excess float64        // of pad-noise over rig-noise
}

func newNoiseScale(n *Noise) *noiseScale {
	if n == nil || !(n.PadVV > 0) || math.IsInf(n.PadVV, 1) {
		return nil
	}
	s := &noiseScale{Noise: *n, at: octaves(n.Bands)}
	if len(s.at) == 0 {
		return nil
	}
	if !(n.RigVV >= 0) || math.IsInf(n.RigVV, 1) {
		s.RigVV = math.NaN()
	}
	s.excess = n.PadVV - s.RigVV
	return s
}

// octaves are few frequencies that stand for the bands: thermal noise bends little within one.
func octaves(bands []network.Band) []network.Band {
	var top float64
	for _, b := range bands {
		top = math.Max(top, b.HighHz)
	}
	if !(top > 0) || math.IsInf(top, 1) {
		return nil
	}
	var all []network.Band
	high := top
	for i := range 6 {
		low := high / 2
		if i == 5 {
			low = 0
		}
		width := 0.0
		for _, b := range bands {
			width += math.Max(0, math.Min(b.HighHz, high)-math.Max(b.LowHz, low))
		}
		if width > 0 {
			// Gauss's two points
			mid, half := (low+high)/2, (high-low)/2/math.Sqrt(3)
			all = append(all, network.Band{LowHz: mid - half, HighHz: width / 2}, network.Band{LowHz: mid + half, HighHz: width / 2})
		}
		high = low
	}
	return all
}

// predict is the thermal noise with a pad, less that with the noise plug.
func (s *noiseScale) predict(c *network.Circuit, loadRatio float64) network.Thermal {
	e := s.Bench.Ends
	e.Drive = network.DriveFloating
	if loadRatio > 0 {
		e.LoadOhms *= loadRatio
	}
	kelvin := 273.15 + s.Bench.TempC
	pad, plug := e, e
	pad.SourceOhms, plug.SourceOhms = s.Bench.PadPlugOhms, s.Bench.NoisePlugOhms
	var t network.Thermal
	for _, b := range s.at {
		with, without := c.ThermalDensity(pad, b.LowHz, kelvin), c.StraightThermalDensity(plug, b.LowHz, kelvin)
		t.UnitVV += b.HighHz * (with.UnitVV - without.UnitVV)
		t.LoadVV += b.HighHz * (with.LoadVV - without.LoadVV)
		t.OhmsSq += b.HighHz * (with.OhmsSq - without.OhmsSq)
	}
	return t
}

// otherNoise is the share of units that make more noise for a cause of its own: a socket, a magnet
// nearby. Less than thermal noise no cause gives; lessNoise is the share of misread takes. *Common
// practice, no source.*
const (
	otherNoise = 0.03
	lessNoise  = 0.001
)

// anything is the logarithm of the likelihood of the noise where nothing is known of the circuit.
func (s *noiseScale) anything() float64 { return math.Log(0.5) }

// A noiseDoubt is the pad's excess over the rig's noise that a circuit should show, and how well that
// is known.
type noiseDoubt struct{ mean, stdU float64 }

// loads are what the load may be: the input of an amplifier, which makes no noise, a real resistor, or
// something between, with how likely each is. *Common practice, no source.*
var loads = [...]struct{ chance, share, half float64 }{{0.45, 0, 0}, {0.45, 1, 0}, {0.1, 0.5, 0.5}}

// doubt works out what a circuit should show where the load makes that share, give or take half, of
// the noise of a resistor. The noise current counts in the middle of what it may be.
func (s *noiseScale) doubt(t network.Thermal, share, half float64) noiseDoubt {
	b := s.Bench
	lowSq, highSq := b.LowAmps*b.LowAmps, b.HighAmps*b.HighAmps
	if !(lowSq >= 0) || !(highSq < 1) {
		lowSq, highSq = 0, 0
	}
	rect := 1 / math.Sqrt(3)
	var variance float64
	add := func(x, frac float64) {
		if v := x * frac; !math.IsNaN(v) && !math.IsInf(v, 0) {
			variance += v * v
		}
	}
	add(t.LoadVV*half, rect)
	add(t.LoadVV*share, 0.03)
	add(t.OhmsSq*(highSq-lowSq)/2, rect)
	add(t.UnitVV, 0.02) // tolerances of the parts, temperature
	add(s.PadVV, s.PadStdUFrac)
	if math.IsNaN(s.RigVV) {
		add(s.PadVV, b.CalibrationUDB/2/compare.DBPerPower)
	} else {
		add(s.RigVV, s.RigStdUFrac)
		add(s.RigVV, b.GainDriftDB*rect/compare.DBPerPower)
		add(s.excess, b.CalibrationUDB/2/compare.DBPerPower)
	}
	return noiseDoubt{
		mean: t.UnitVV + t.LoadVV*share + t.OhmsSq*(lowSq+highSq)/2,
		stdU: math.Max(math.Sqrt(variance), 1e-6*s.PadVV),
	}
}

// departure is how many standard uncertainties the noise lies from that of a circuit, at the load that
// suits it best; false where there is only a bound that holds.
func (s *noiseScale) departure(t network.Thermal) (float64, bool) {
	least := math.Inf(1)
	for _, l := range loads {
		d := s.doubt(t, l.share, l.half)
		z := (s.excess - d.mean) / d.stdU
		if math.IsNaN(s.RigVV) {
			z = math.Max(0, (d.mean-s.PadVV)/d.stdU)
		}
		least = math.Min(least, math.Abs(z))
	}
	return least, !math.IsNaN(s.RigVV) || least > 0
}

// score is the logarithm of the likelihood of the noise: of pad-noise alone, the chance that the unit
// makes no more than that.
func (s *noiseScale) score(t network.Thermal) float64 {
	var sum float64
	for _, l := range loads {
		sum += l.chance * s.likelihood(s.doubt(t, l.share, l.half))
	}
	return math.Log(sum)
}

func (s *noiseScale) likelihood(d noiseDoubt) float64 {
	if math.IsNaN(s.RigVV) {
		return (1-lessNoise)*chanceBelow((s.PadVV-d.mean)/d.stdU) + lessNoise
	}
	z := (s.excess - d.mean) / d.stdU
	// In parts of pad-noise, so that the unit of the density is the same for all.
	dense := math.Exp(-z*z/2) / (d.stdU / s.PadVV * math.Sqrt(2*math.Pi))
	return (1-otherNoise-lessNoise)*dense + otherNoise*chanceBelow(z) + lessNoise
}
