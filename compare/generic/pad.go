package generic

import (
	"math"

	"padproof/compare/network"
)

// PartTolFrac is the tolerance taken for the parts of a pad without a drawing: that of a drawing
// that gives none.
const PartTolFrac = 0.05

// CommonOhms are impedances that pads are often marked for: common practice, no source.
var CommonOhms = []float64{50, 75, 150, 200, 600}

// benchOhms are the impedances of pads whose mark holds on the bench: a microphone's and a line's.
// Common practice, no source.
var benchOhms = []float64{150, 600}

// A Pad is a textbook pad that may bear the mark.
type Pad struct {
	Circuit *network.Circuit
	Ohms    float64 // that it is designed for
}

// Matched is the symmetrical matched pad of an impedance and a loss, in both its kinds: T and
// pi, or H and O for a balanced one. With K the voltage ratio the T's series arms are R0 (K-1)/(K+1),
// its shunt 2 R0 K/(K^2-1); the pi's series arm R0 (K^2-1)/(2K), its shunts R0 (K+1)/(K-1); H and O have
// the series arms in two halves (Bird, Electrical Circuit Theory and Technology, ch. 41). The error is
// that of [network.New], for a loss or an impedance that is not above 0.
func Matched(unbalanced bool, ohms, lossDB float64) (t, pi *network.Circuit, err error) {
	k := math.Pow(10, lossDB/20)
	arm, shunt := ohms*(k-1)/(k+1), 2*ohms*k/(k*k-1)
	series, end := ohms*(k*k-1)/(2*k), ohms*(k+1)/(k-1)
	if unbalanced {
		if t, err = padOf("T", arm, arm, shunt); err == nil {
			pi, err = padOf("pi", end, series, end)
		}
		return t, pi, err
	}
	if t, err = padOf("H", arm/2, arm/2, arm/2, arm/2, shunt); err == nil {
		pi, err = padOf("O", end, series/2, series/2, end)
	}
	return t, pi, err
}

// ConstantInput is the L pad, or the U for a balanced one, whose input shows an impedance when its output is
// loaded with the same. With K the voltage ratio the series arm is R0 (K-1)/K and the shunt
// R0/(K-1): the shunt and the load make R0/K.
func ConstantInput(unbalanced bool, ohms, lossDB float64) (*network.Circuit, error) {
	k := math.Pow(10, lossDB/20)
	series, shunt := ohms*(k-1)/k, ohms/(k-1)
	if unbalanced {
		return padOf("L", series, shunt)
	}
	return padOf("U", series/2, series/2, shunt)
}

// padOf is a standard network of the given values, in the order of its parts.
func padOf(name string, ohms ...float64) (*network.Circuit, error) {
	var parts []network.Part
	for i, v := range ohms {
		parts = append(parts, network.Part{Ref: network.Refs(name)[i], Value: v, TolFrac: PartTolFrac})
	}
	return network.New(name, parts)
}

// wirings tells which families of pads the ends are for: unbalanced, balanced, or both.
func wirings(e network.Ends) []bool {
	drive, sense := e.Drive == network.DriveUnbalanced, e.Sense == network.SenseUnbalanced
	if drive != sense {
		return []bool{true, false}
	}
	return []bool{drive}
}

// matchedPads are the symmetrical matched pads of an impedance and a loss for the ends; none where there is no
// such pad.
func matchedPads(e network.Ends, ohms, lossDB float64) []Pad {
	var all []Pad
	for _, unbalanced := range wirings(e) {
		if t, pi, err := Matched(unbalanced, ohms, lossDB); err == nil {
			all = append(all, Pad{t, ohms}, Pad{pi, ohms})
		}
	}
	return all
}

// dividerPads are the L and U pads of an impedance and a loss for the ends.
func dividerPads(e network.Ends, ohms, lossDB float64) []Pad {
	var all []Pad
	for _, unbalanced := range wirings(e) {
		if c, err := ConstantInput(unbalanced, ohms, lossDB); err == nil {
			all = append(all, Pad{c, ohms})
		}
	}
	return all
}

// Pads are the pads that the mark may mean, sound.
func Pads(c Case) []Pad {
	e := c.Rig.Ends
	switch {
	case c.OnBench:
		return c.readingHere()
	case c.Ohms > 0:
		return append(matchedPads(e, c.Ohms, c.MarkDB), dividerPads(e, c.Ohms, c.MarkDB)...)
	}
	all := c.readingHere()
	for _, ohms := range CommonOhms {
		all = append(all, matchedPads(e, ohms, c.MarkDB)...)
	}
	return all
}

// readingHere are pads that read the mark on this bench.
func (c Case) readingHere() []Pad {
	var all []Pad
	for _, ohms := range benchOhms {
		for _, build := range []func(network.Ends, float64, float64) []Pad{matchedPads, dividerPads} {
			for i := range build(c.Rig.Ends, ohms, c.MarkDB) {
				all = append(all, c.tuned(func(lossDB float64) Pad { return build(c.Rig.Ends, ohms, lossDB)[i] }))
			}
		}
	}
	return all
}

// tuned is the design loss at which the bench reads the mark, by halving: the more a pad is to
// lose, the more it loses anywhere.
func (c Case) tuned(design func(lossDB float64) Pad) Pad {
	low, high := 1e-3, 200.0
	const halvings = 40
	for range halvings {
		middle := (low + high) / 2
		if design(middle).Circuit.LossDB(c.Rig.Ends, c.FreqHz) < c.MarkDB {
			low = middle
		} else {
			high = middle
		}
	}
	return design(high)
}
