package generic

import (
	"math"

	"padproof/compare"
	"padproof/compare/network"
)

// A Case is a mark, and what a bench read.
type Case struct {
	MarkDB  float64
	Ohms    float64 // marked too; 0 where not
	OnBench bool    // the mark is what this bench should read

	Rig    compare.Rig
	FreqHz float64
	LossDB float64 // as read
	StdUDB float64 // of the reading alone: the rig comes in through the model
	// AtLeast: nothing came through, the loss is LossDB or more.
	AtLeast bool
}

// A Likelihood is something that might be wrong, or different from what the mark was taken for.
type Likelihood struct {
	Fault       string   // "a leg open at the output"
	Networks    []string // the kinds of pad in which it would read about what was read
	WouldReadDB float64  // of the likeliest of them; +Inf where nothing would come through
	LowDB       float64  // of all of them
	HighDB      float64
	Likelihood  float64 // 0 to 1
	Measure     string  // what would tell
}

// The most lines, and the least likelihood of one.
const mostLines, leastLikelihood = 6, 0.03

// roundedDB is by how much a mark may be rounded: half of a whole decibel.
const roundedDB = 0.5

// mostSpreadDB bounds what tolerances are thought to move a loss by: near a null slopes say nothing.
const mostSpreadDB = 6

// Likelihoods are what might explain the reading, the likeliest first, at most six; none where the
// reading agrees with the mark, or either is no number.
func Likelihoods(c Case) []Likelihood {
	if !(c.MarkDB > 0) || math.IsNaN(c.LossDB) || math.IsInf(c.LossDB, 0) || math.IsNaN(c.StdUDB) {
		return nil
	}
	pads := Pads(c)
	if len(pads) == 0 || c.agrees(pads) {
		return nil
	}
	return c.lines(c.hypotheses(pads))
}

// agrees reports whether a sound pad that the mark names would read what was read, within what 5 %
// parts, the rig and the reading may do. A mark with an impedance names the matched pads.
func (c Case) agrees(pads []Pad) bool {
	for _, p := range pads {
		if name := p.Circuit.Name(); c.Ohms > 0 && !c.OnBench && (name == "L" || name == "U") {
			continue
		}
		within := 2 * c.spreadDB(p.Circuit, c.Rig.Ends)
		short := p.Circuit.LossDB(c.Rig.Ends, c.FreqHz) - c.LossDB
		if math.Abs(short) <= within || c.AtLeast && short > 0 {
			return true
		}
	}
	return false
}

// spreadDB is the standard deviation of a loss by the parts, the rig and the reading.
func (c Case) spreadDB(pad *network.Circuit, e network.Ends) float64 {
	var sum float64
	for i, s := range pad.Sensitivities(e, c.FreqHz) {
		if v := s * pad.Parts()[i].TolFrac; !math.IsNaN(v) && !math.IsInf(v, 0) {
			sum += v * v / 3
		}
	}
	s := pad.EndSensitivities(e, c.FreqHz)
	for _, v := range []float64{s.SourceDB * c.Rig.SourceTolFrac, s.LoadDB * c.Rig.LoadTolFrac} {
		if !math.IsNaN(v) && !math.IsInf(v, 0) {
			sum += v * v / 3
		}
	}
	return math.Hypot(math.Min(math.Sqrt(sum), mostSpreadDB), c.StdUDB)
}

// density is how well a loss of a circuit explains the reading: per dB, or as a probability where
// nothing came through.
func (c Case) density(pad *network.Circuit, e network.Ends, lossDB float64) float64 {
	if math.IsInf(lossDB, 1) || math.IsNaN(lossDB) {
		if c.AtLeast {
			return 1
		}
		return 0
	}
	sigma := math.Hypot(c.spreadDB(pad, e), roundedDB/math.Sqrt(3))
	if c.AtLeast {
		return math.Erfc((c.LossDB-lossDB)/sigma/math.Sqrt2) / 2
	}
	return normal(c.LossDB-lossDB, sigma)
}

// normal is the density of a normal distribution.
func normal(off, sigma float64) float64 {
	z := off / sigma
	return math.Exp(-z*z/2) / (sigma * math.Sqrt(2*math.Pi))
}

// straightDB is the standard deviation of what a cable in place of the pad reads.
const straightDB = 0.05

// anythingDB is the width over which "none of these" reads anything alike.
const anythingDB = 60

// noneDensity is that of none of these. A tone that does not come through at all is as likely as not
// something else, a plug or a channel.
func (c Case) noneDensity() float64 {
	if c.AtLeast {
		return math.Max(0.5, 1-c.LossDB/anythingDB)
	}
	return 1.0 / anythingDB
}
