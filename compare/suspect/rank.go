package suspect

import (
	"math"

	"padproof/compare"
)

// A Ranking is what may be wrong with a unit, by weight. Weights lie between 0 and 1; those of all
// faults, of none of them and of a sound unit add up to 1.
type Ranking struct {
	Suspects   []Suspect // by falling weight, those of 0.01 and more
	NoneWeight float64   // that something else explains it: two things wrong, or one that is not listed
	Sound      float64   // weight of a sound unit
	SoundP     float64   // the chance that a sound unit departs at least as far as this one
}

// A Suspect is a fault, or a group of faults that nothing taken parts.
type Suspect struct {
	Faults   []Fault // the likeliest first; those that no pin can tell apart stand side by side
	Distinct int     // how many there are when those that no pin can tell apart count as one
	Weight   float64 // that one of them is true

	// What the first of Faults gives: +Inf where nothing comes through; NaN where not taken.
	BenchLossDB, ServiceLossDB float64
	LegsOverDB, LegsPhaseDeg   float64

	// Of a drift, and of an end not as stated: the relative change, and its standard uncertainty;
	// NaN for other faults.
	DriftFrac, DriftStdU float64

	Confirm Confirm
}

// A Confirm is the reading of an ohmmeter, unit unplugged, of those not taken yet, that best parts a
// suspect from a sound unit and from the other suspects.
type Confirm struct {
	Reading  compare.OhmReading // PinA is empty where no reading tells anything
	NextOhms float64            // what it reads with Next; NaN where there is none
	Next     Fault              // the next of the group, or else the next suspect
}

// Rank scores every single fault of the drawing against what was measured. A Circuit that is nil, or
// nothing measured, gives no suspects and a SoundP of 1.
func Rank(e Evidence) Ranking {
	if e.Circuit == nil {
		return Ranking{SoundP: 1}
	}
	s := newSearch(e)
	straights := s.straights(s.ends)
	drawn := s.predict(e.Circuit, s.ends, straights)
	w := newScorer(s)
	r := Ranking{SoundP: w.soundP(drawn)}
	if s.nothing() {
		r.Sound = 1
		return r
	}
	sound := math.Log(soundPrior) + w.score(drawn) + e.Hum.score(false)
	all := s.hypotheses()
	s.scoreAll(all, drawn, straights)
	none := math.Log(nonePrior) + w.scoreNone(all, drawn)
	r.Sound, r.NoneWeight = weigh(all, sound, none)
	classes := s.classes(all)
	c := s.newConfirmer(r.Sound)
	for i, g := range s.groups(classes) {
		if g.weight >= leastWeight {
			suspect := s.suspect(g)
			suspect.Confirm = c.confirm(g, classes, i == 0)
			r.Suspects = append(r.Suspects, suspect)
		}
	}
	return r
}

// nothing tells that nothing was measured that any fault could be told by.
func (s *search) nothing() bool {
	_, hums := s.e.Hum.humSeen()
	return len(s.rows) == 0 && s.noise == nil && !hums && (s.e.Polarity == 0 || s.toneAt < 0)
}

// weigh turns scores into weights that add up to 1 with those of a sound unit and of none.
func weigh(all []*hypothesis, sound, none float64) (soundWeight, noneWeight float64) {
	most := math.Max(sound, none)
	for _, h := range all {
		h.weight = math.Log(h.prior) + h.logScore
		most = math.Max(most, h.weight)
	}
	if math.IsInf(most, -1) || math.IsNaN(most) {
		for _, h := range all {
			h.weight = 0
		}
		return 0, 1
	}
	soundWeight, noneWeight = math.Exp(sound-most), math.Exp(none-most)
	sum := soundWeight + noneWeight
	for _, h := range all {
		h.weight = math.Exp(h.weight - most)
		sum += h.weight
	}
	for _, h := range all {
		h.weight /= sum
	}
	return soundWeight / sum, noneWeight / sum
}

// suspect writes a group down.
func (s *search) suspect(g group) Suspect {
	first := g.classes[0].first()
	nan := math.NaN()
	one := Suspect{
		Distinct: len(g.classes), Weight: math.Min(g.weight, 1), BenchLossDB: nan, ServiceLossDB: nan,
		LegsOverDB: nan, LegsPhaseDeg: nan, DriftFrac: nan, DriftStdU: nan,
	}
	for _, k := range g.classes {
		for _, h := range k.members {
			if h.family == k.first().family || h.weight*within >= k.first().weight {
				one.Faults = append(one.Faults, h.fault)
			}
		}
	}
	if s.toneAt >= 0 {
		hz := s.freqs[s.toneAt]
		one.BenchLossDB = first.circuit.LossDB(first.ends, hz)
		one.ServiceLossDB = first.circuit.LossDB(s.serviceEnds(), hz)
	}
	for i, r := range s.rows {
		switch r.kind {
		case legsRow:
			one.LegsOverDB = first.mean[i]
		case phaseRow:
			one.LegsPhaseDeg = math.Remainder(first.mean[i], 360)
		}
	}
	if first.family {
		one.DriftFrac, one.DriftStdU = math.Expm1(first.in.t), math.Exp(first.in.t)*first.in.tStdU
	}
	return one
}
