package suspect

import (
	"math"

	"padproof/compare"
	"padproof/compare/network"
)

// A meter is read on a scale, ln(ohms + scaleOhms), on which its half-width is the same everywhere.
// Over range begins at overOhms at the latest; no prediction is over openOhms.
const (
	meterTolFrac  = 0.005
	meterPlusOhms = 0.2
	overOhms      = 2e6
	openOhms      = 2e7
)

// filled gives a reading the meter's own doubt where none is said.
func (o Ohms) filled() Ohms {
	if !(o.TolFrac > 0) && !(o.PlusOhms > 0) {
		o.TolFrac, o.PlusOhms = meterTolFrac, meterPlusOhms
	}
	o.TolFrac = math.Max(1e-4, math.Min(o.TolFrac, 1))
	o.PlusOhms = math.Max(1e-3, math.Min(o.PlusOhms, 1e6))
	return o
}

func (o Ohms) scaleOhms() float64 { return o.PlusOhms / o.TolFrac }

func (o Ohms) scale(ohms float64) float64 {
	return math.Log(math.Min(math.Max(ohms, 0), openOhms) + o.scaleOhms())
}

func (s *search) meter(o Ohms) {
	if math.IsNaN(o.Ohms) || o.Ohms < 0 {
		return
	}
	o = o.filled()
	r := row{kind: ohmsRow, at: len(s.meters), observed: o.scale(o.Ohms), variance: o.TolFrac * o.TolFrac / 3}
	if o.Ohms >= overOhms {
		r.bound, r.observed = 1, o.scale(overOhms)
	}
	s.meters = append(s.meters, o)
	s.rows = append(s.rows, r)
}

// on is what the reading gives on a circuit, with its slopes.
func (o Ohms) on(c *network.Circuit) (float64, []float64) {
	if o.Joined == [2]string{} {
		return c.OhmsSlope(o.PinA, o.PinB)
	}
	return c.OhmsSlope(o.PinA, o.PinB, o.Joined)
}

func ohmsOf(r compare.OhmReading) Ohms {
	return Ohms{PinA: r.PinA, PinB: r.PinB, Joined: r.Joined}.filled()
}
