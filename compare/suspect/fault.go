package suspect

import (
	"math"

	"padproof/compare/network"
)

// An End is an end of the bench.
type End int

// The ends. A fault of the unit is of NoEnd.
const (
	NoEnd End = iota
	SourceEnd
	LoadEnd
)

// A Fault is one thing wrong: with the unit, or with what is said of the bench.
type Fault struct {
	network.Fault         // of the unit; of no meaning for an end of the bench
	End           End     // the end of the bench that is not as stated
	Ratio         float64 // its true impedance over the stated one
}

// String returns the fault as people read it: "R3 open", "R3 drifted +12 %", "source not as stated".
func (f Fault) String() string {
	if f.End != NoEnd {
		return network.EndFault{Load: f.End == LoadEnd, Ohms: math.NaN()}.String()
	}
	return f.Fault.String()
}

// Parts returns the refs that the fault is about: one, two, or none.
func (f Fault) Parts() []string {
	if f.End != NoEnd {
		return nil
	}
	return f.Fault.Parts()
}

// Apply returns the circuit and the ends with the fault in them.
func (f Fault) Apply(c *network.Circuit, e network.Ends) (*network.Circuit, network.Ends) {
	switch f.End {
	case SourceEnd:
		e.SourceOhms *= f.Ratio
	case LoadEnd:
		e.LoadOhms *= f.Ratio
	default:
		c = f.Fault.Apply(c)
	}
	return c, e
}
