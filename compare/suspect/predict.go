package suspect

import (
	"math"

	"padproof/compare/network"
)

// A prediction is what a circuit between some ends should give, with what each doubtful figure does
// to it: transfers at all frequencies, the two legs, the ohmmeter readings.
type prediction struct {
	at    []complex128 // of each figure
	by    []complex128 // change per relative change of each parameter; params for each figure
	stdU  []float64    // of each parameter, relative
	noise network.Thermal
	cross float64 // dB that source and load do together at both ends of their rectangles
}

// figures are how many there are, and where the legs and the readings begin.
func (s *search) figures() (n, legs, meters int) {
	legs = len(s.freqs)
	meters = legs + 2
	return meters + len(s.meters), legs, meters
}

func (s *search) newPrediction() *prediction {
	n, _, _ := s.figures()
	return &prediction{at: make([]complex128, n), by: make([]complex128, n*s.params), stdU: make([]float64, s.params)}
}

// straights are the transfers of the bench without a pad.
func (s *search) straights(e network.Ends) []network.Slope {
	all := make([]network.Slope, len(s.freqs))
	for i, hz := range s.freqs {
		all[i] = s.e.Circuit.StraightSlope(e, hz)
	}
	return all
}

// through fills in the transfer at one frequency.
func (s *search) through(p *prediction, i int, c *network.Circuit, e network.Ends, straight network.Slope, buffer []complex128) {
	with := c.LoadSlope(e, s.freqs[i], buffer)
	if straight.At == 0 {
		return
	}
	t := with.At / straight.At
	p.at[i] = t
	by := p.by[i*s.params : (i+1)*s.params]
	for k := range s.parts {
		by[k] = with.Parts[k] / straight.At
	}
	ends := by[s.parts:]
	ends[sourceParam] = (with.Source - t*straight.Source) / straight.At
	ends[loadParam] = (with.Load - t*straight.Load) / straight.At
	ends[cableParam] = (with.Cable - t*straight.Cable) / straight.At
}

// doubts fills in the standard uncertainties: those of the circuit's parts and of the ends.
func (s *search) doubts(p *prediction, c *network.Circuit) {
	for i, part := range c.Parts()[:s.parts] {
		p.stdU[i] = part.TolFrac / math.Sqrt(3)
	}
	ends := s.stated()
	copy(p.stdU[s.parts:], ends[:])
}

// predict fills in all. straights are those of the ends.
func (s *search) predict(c *network.Circuit, e network.Ends, straights []network.Slope) *prediction {
	p := s.newPrediction()
	buffer := make([]complex128, s.parts+1)
	for i := range s.freqs {
		s.through(p, i, c, e, straights[i], buffer)
	}
	s.doubts(p, c)
	s.others(p, c, e)
	return p
}

// others fills in all but the transfers.
func (s *search) others(p *prediction, c *network.Circuit, e network.Ends) {
	_, legs, meters := s.figures()
	if s.hasLegs() {
		hot, cold := c.LegSlopes(e, s.e.Legs.LoadOhms, s.e.Legs.FreqHz)
		for i, l := range []network.Slope{hot, cold} {
			p.at[legs+i] = l.At
			by := p.by[(legs+i)*s.params : (legs+i+1)*s.params]
			copy(by, l.Parts[:s.parts])
			ends := by[s.parts:]
			ends[sourceParam], ends[cableParam] = l.Source, l.Cable
			ends[hotLoadParam], ends[coldLoadParam] = l.Load, l.ColdLoad
		}
	}
	for i, o := range s.meters {
		ohms, shares := o.on(c)
		if ohms > openOhms {
			p.at[meters+i] = openOhms
			continue
		}
		p.at[meters+i] = complex(ohms, 0)
		for k := range s.parts {
			p.by[(meters+i)*s.params+k] = complex(shares[k], 0)
		}
	}
	if s.noise != nil {
		p.noise = s.noise.predict(c, e.LoadOhms/s.ends.LoadOhms)
	}
	p.cross = s.crossDB(c, e)
}

func (s *search) hasLegs() bool {
	for _, r := range s.rows {
		if r.kind == legsRow || r.kind == phaseRow || r.kind == deadRow {
			return true
		}
	}
	return false
}

// crossDB is what source and load do together beyond the sum of what each does: all there is between
// matched ends, where each alone does next to nothing.
func (s *search) crossDB(c *network.Circuit, e network.Ends) float64 {
	source, load := s.e.Rig.SourceTolFrac, s.e.Rig.LoadTolFrac
	if !(source > 0 && load > 0) || s.toneAt < 0 || math.IsInf(e.LoadOhms, 1) {
		return 0
	}
	source, load = math.Min(source, 0.9), math.Min(load, 0.9)
	sum := 0.0
	for corner := range 4 {
		o, sign := e, 1.0
		for i, ohms := range []*float64{&o.SourceOhms, &o.LoadOhms} {
			half := []float64{source, load}[i]
			if corner>>i&1 == 1 {
				half, sign = -half, -sign
			}
			*ohms *= 1 + half
		}
		sum += sign * c.LossDB(o, s.freqs[s.toneAt])
	}
	if math.IsNaN(sum) || math.IsInf(sum, 0) {
		return 0
	}
	return math.Min(math.Abs(sum/4), 3)
}
