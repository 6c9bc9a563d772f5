package rehearsal

import (
	"hash/fnv"
	"math/rand/v2"

	"padproof/compare/network"
)

// A Bench is what the takes are made on.
type Bench struct {
	Ends        network.Ends
	AfterGainDB float64 // gain raised for after, as stated
	OffsetDB    float64 // gain of after beyond that: a knob that moved, a level not quite true
}

// Doubts are the half-widths of the rectangles in which a bench's figures lie
// (JCGM 100, 4.3.7).
type Doubts struct {
	SourceFrac, LoadFrac float64 // relative
	CableFarads          float64
	DriftDB              float64 // of the gain between the takes
	LinearityDB          float64 // of their level difference
	AfterGainDB          float64 // of the gain raised for after
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
	return unit, b
}

// randomFor returns random numbers of a seed for one purpose: what is drawn for one leaves
// the others as they are.
func randomFor(seed uint64, purpose string) *rand.Rand {
	h := fnv.New64a()
	h.Write([]byte(purpose))
	return rand.New(rand.NewPCG(seed, h.Sum64()))
}
