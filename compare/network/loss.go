package network

import (
	"math"
	"math/cmplx"
)

// LossDB returns the insertion loss at a frequency: 20 lg of the load voltage straight
// through over the load voltage with the pad, same source, drive, load, sense and
// cable (FED-STD-1037C, "insertion loss"). It is +Inf when nothing comes through.
func (c *Circuit) LossDB(e Ends, freqHz float64) float64 {
	return lossOf(c.transfer(c.values, e.bounded(), angular(freqHz)))
}

// ResponseDB returns LossDB at each frequency.
func (c *Circuit) ResponseDB(e Ends, freqsHz []float64) []float64 {
	lossDB := make([]float64, len(freqsHz))
	for i, f := range freqsHz {
		lossDB[i] = c.LossDB(e, f)
	}
	return lossDB
}

// Transfer returns the load voltage with the pad over the load voltage straight
// through, with its phase: −1 is a pad of no loss that turns the polarity over. It is
// 0 when nothing comes through.
func (c *Circuit) Transfer(e Ends, freqHz float64) complex128 {
	return c.transfer(c.values, e.bounded(), angular(freqHz))
}

// LoadVolts returns the voltage across the load per volt of EMF, straight through and
// with the pad.
func (c *Circuit) LoadVolts(e Ends, freqHz float64) (straight, withPad complex128) {
	e = e.bounded()
	omega := angular(freqHz)
	return c.loadVolts(nil, e, omega), c.loadVolts(c.values, e, omega)
}

// Legs is the voltage of each leg of the output to screen, per volt of EMF.
type Legs struct {
	Hot, Cold complex128
}

// LegVolts returns the leg voltages straight through and with the pad, when each leg is
// loaded to screen by legsLoadOhms (+Inf for none) in place of the load. The sense of
// the ends has no part in it; the cable stays. Cold is 0 for an unbalanced network and
// for an unbalanced drive straight through.
func (c *Circuit) LegVolts(e Ends, legsLoadOhms, freqHz float64) (straight, withPad Legs) {
	e = e.bounded()
	e.Sense = SenseBalanced
	e.LoadOhms = 2 * atLeast(legsLoadOhms, minEndOhms)
	omega := angular(freqHz)
	return c.legVolts(nil, e, omega), c.legVolts(c.values, e, omega)
}

func (c *Circuit) legVolts(values []float64, e Ends, omega float64) Legs {
	s := c.through(values, e, omega)
	defer s.end()
	legs := Legs{s.volts(outHot, screen), s.volts(outCold, screen)}
	if s.floating {
		// Equal loads, however high, put the middle of a floating output at screen.
		mid := (legs.Hot + legs.Cold) / 2
		legs = Legs{legs.Hot - mid, legs.Cold - mid}
	}
	return legs
}

func (c *Circuit) transfer(values []float64, e Ends, omega float64) complex128 {
	return c.loadVolts(values, e, omega) / c.loadVolts(nil, e, omega)
}

func (c *Circuit) loadVolts(values []float64, e Ends, omega float64) complex128 {
	s := c.through(values, e, omega)
	v := s.loadVolts()
	s.end()
	return v
}

// lossOf turns a transfer into a loss.
func lossOf(transfer complex128) float64 {
	if transfer == 0 {
		return math.Inf(1)
	}
	return -20 * math.Log10(cmplx.Abs(transfer))
}

// sizeOf turns a loss into the size of the transfer.
func sizeOf(lossDB float64) float64 { return math.Pow(10, -lossDB/20) }
