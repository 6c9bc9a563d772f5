package rehearsal

import (
	"hash/fnv"
	"math/rand/v2"

	"padproof/compare/network"
)

// A Bench is what the takes are made on.
type Bench struct {
	Ends        network.Ends
	AfterGainDB float64 // gain raised where the pad is in the way, or bypassed, as stated
	OffsetDB    float64 // gain of those takes beyond that: a knob that moved, a level not quite true
	AgainDB     float64 // gain of before-again beyond before's
	ChannelDB   float64 // gain of the second input beyond the first's
	OutputsDB   float64 // level of the second output beyond the first's, in both

	LegsLoadOhms     float64 // each leg to screen, in the legs takes
	LoadedOhms       float64 // across the input in before-loaded; 0: not known
	BypassOhms       float64 // of each leg's contact, in bypass
	CalibrationVolts float64 // RMS, at the input in calibration; 0: not known
	FullScaleDBu     float64 // dBu of a sine that reads 0 dBFS; NaN: not known
	MainsHz          float64 // 0: not known
	Noise            NoiseBench
}

// Doubts are the half-widths of the rectangles in which a bench's figures lie
// (JCGM 100, 4.3.7).
type Doubts struct {
	SourceFrac, LoadFrac float64 // relative; the load's is that of the legs' load too
	CableFarads          float64
	DriftDB              float64 // of the gain between the takes
	LinearityDB          float64 // of their level difference
	AfterGainDB          float64 // of the gain raised for after
	ChannelDB            float64 // between two channels
	NoiseDriftDB         float64 // of the gain between the noise takes
	CurrentAmps          float64 // of the input's noise current
	TempC                float64
	ScaleDB              float64 // of both full scales; this one is a standard uncertainty, normal
}

// Draw returns one unit of the drawing and one bench, every figure drawn from its
// rectangle by the seed. Links and open parts stay as they are.
func Draw(drawing *network.Circuit, stated Bench, d Doubts, seed uint64) (*network.Circuit, Bench) {
	rng := randomFor(seed, "unit and bench")
	within := func(half float64) float64 { return half * (2*rng.Float64() - 1) }
	unit, b := drawing.Sample(rng), stated
	b.Ends.SourceOhms *= 1 + within(d.SourceFrac)
	b.Ends.LoadOhms *= 1 + within(d.LoadFrac)
	b.Ends.CableFarads += within(d.CableFarads)
	b.OffsetDB += within(d.DriftDB) + within(d.LinearityDB) + within(d.AfterGainDB)
	b.AgainDB += within(d.DriftDB)
	b.LegsLoadOhms *= 1 + within(d.LoadFrac)
	b.ChannelDB += within(d.ChannelDB)
	b.OutputsDB += within(d.ChannelDB)
	b.Noise.DriftDB += within(d.NoiseDriftDB)
	b.Noise.CurrentAmps += within(d.CurrentAmps)
	b.Noise.TempC += within(d.TempC)
	scaleDB := d.ScaleDB * rng.NormFloat64()
	b.FullScaleDBu += scaleDB
	b.Noise.FullScaleDBu += scaleDB
	return unit, b
}

// randomFor returns random numbers of a seed for one purpose: what is drawn for one leaves
// the others as they are.
func randomFor(seed uint64, purpose string) *rand.Rand {
	h := fnv.New64a()
	h.Write([]byte(purpose))
	return rand.New(rand.NewPCG(seed, h.Sum64()))
}
