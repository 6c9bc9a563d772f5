package suspect

import (
	"math"
	"slices"

	"padproof/compare"
	"padproof/compare/network"
)

// A candidate is what may be true when the ohmmeter is taken up, with what each reading would then
// give.
type candidate struct {
	weight float64
	reads  []reads
}

// reads is what a reading gives: on the scale of the meter, with its doubt.
type reads struct {
	ohms, at, stdU float64
}

func (r reads) open() bool { return r.ohms >= openOhms }

// confirmer picks readings.
type confirmer struct {
	*search
	readings []compare.OhmReading
	sound    candidate
}

func (s *search) newConfirmer(soundWeight float64) *confirmer {
	c := &confirmer{search: s}
	for _, r := range compare.Readings(s.e.Circuit) {
		if !s.read(r) {
			c.readings = append(c.readings, r)
		}
	}
	c.sound = candidate{weight: soundWeight, reads: c.readsOf(s.e.Circuit, "", 0)}
	return c
}

// read tells whether a reading was taken: taken again it says no more.
func (s *search) read(r compare.OhmReading) bool {
	at := compare.OhmSeen{PinA: r.PinA, PinB: r.PinB, Joined: r.Joined}
	return slices.ContainsFunc(s.e.Ohms, func(o Ohms) bool {
		return at.Same(s.e.Circuit, compare.OhmSeen{PinA: o.PinA, PinB: o.PinB, Joined: o.Joined})
	})
}

// readsOf are the readings of a circuit; drifting is a part whose amount is in doubt.
func (c *confirmer) readsOf(circuit *network.Circuit, drifting string, tStdU float64) []reads {
	parts := circuit.Parts()
	all := make([]reads, len(c.readings))
	for i, r := range c.readings {
		o := ohmsOf(r)
		ohms, shares := o.on(circuit)
		v := o.TolFrac * o.TolFrac / 3
		for k, p := range parts {
			doubt := p.TolFrac / math.Sqrt(3)
			if p.Ref == drifting {
				doubt = tStdU
			}
			part := shares[k] * doubt / (math.Min(ohms, openOhms) + o.scaleOhms())
			v += part * part
		}
		all[i] = reads{ohms: ohms, at: o.scale(ohms), stdU: math.Sqrt(v)}
	}
	return all
}

func (c *confirmer) candidate(k class) candidate {
	h := k.first()
	drifting := ""
	if h.family && h.fault.End == NoEnd {
		drifting = h.fault.Ref
	}
	return candidate{weight: k.weight, reads: c.readsOf(h.circuit, drifting, h.in.tStdU)}
}

// naming is the chance that after a reading the heaviest candidate is the true one: the integral of
// the largest of weight times density. Open is a reading by itself.
func naming(all []candidate, reading int) float64 {
	var total, open, sum float64
	var at []float64
	for _, c := range all {
		total += c.weight
		r := c.reads[reading]
		if r.open() {
			open = math.Max(open, c.weight)
			continue
		}
		for k := -18; k <= 18; k++ { // to six standard deviations, so that gaps between candidates count for nothing
			at = append(at, r.at+float64(k)*r.stdU/3)
		}
	}
	slices.Sort(at)
	last, lastAt := 0.0, 0.0
	for i, x := range at {
		most := 0.0
		for _, c := range all {
			r := c.reads[reading]
			z := (x - r.at) / r.stdU
			if r.open() || z*z > 37 {
				continue
			}
			most = math.Max(most, c.weight*math.Exp(-z*z/2)/(r.stdU*math.Sqrt(2*math.Pi)))
		}
		if i > 0 {
			sum += (most + last) / 2 * (x - lastAt)
		}
		last, lastAt = most, x
	}
	if total <= 0 {
		return 0
	}
	return (sum + open) / total
}

// best is the reading, of those not taken, with the highest chance of naming; of those that are as good, one that needs no
// pins joined, and of those the one that moves most against a sound unit.
func (c *confirmer) best(all []candidate, suspect candidate) (reading int, ok bool) {
	const asGood, joining = 0.01, 0.008
	chances := make([]float64, len(c.readings))
	most := 0.0
	for i := range c.readings {
		chances[i] = naming(all, i)
		if c.readings[i].Joined != [2]string{} {
			chances[i] -= joining
		}
		most = math.Max(most, chances[i])
	}
	reading, furthest := -1, -1.0
	for i, chance := range chances {
		if chance < most-asGood {
			continue
		}
		if far := apart(c.sound.reads[i], suspect.reads[i]); far > furthest {
			reading, furthest = i, far
		}
	}
	return reading, reading >= 0
}

// apart is how far two readings lie from one another, as the logarithm of their ratio.
func apart(a, b reads) float64 { return math.Abs(a.at - b.at) }

// A share of the weight that a sound unit has at least when a reading is chosen: the reading is to
// show that anything is wrong at all.
const soundAtLeast = 0.1

// confirm picks the reading for a group out of all classes.
func (c *confirmer) confirm(g group, all []class, first bool) Confirm {
	suspect := c.candidate(g.classes[0])
	var candidates []candidate
	var others []class
	var total float64
	for _, k := range all {
		mine := slices.ContainsFunc(g.classes, func(o class) bool { return o.first() == k.first() })
		if !mine {
			others = append(others, k)
		}
		if first && len(candidates) < mostCandidates || mine {
			candidates = append(candidates, c.candidate(k))
			total += k.weight
		}
	}
	if !first && len(others) > 0 {
		next := c.candidate(others[0])
		next.weight = math.Min(next.weight, g.weight)
		candidates, total = append(candidates, next), total+next.weight
	}
	sound := c.sound
	sound.weight = math.Max(sound.weight, soundAtLeast*total)
	i, ok := c.best(append(candidates, sound), suspect)
	if !ok {
		return Confirm{NextOhms: math.NaN()}
	}
	r := c.readings[i]
	r.GoodOhms, r.WrongOhms = c.sound.reads[i].ohms, suspect.reads[i].ohms
	confirm := Confirm{Reading: r, NextOhms: math.NaN()}
	if next, ok := nextOf(g, others); ok {
		confirm.Next, confirm.NextOhms = next.first().fault, c.candidate(next).reads[i].ohms
	}
	return confirm
}

// Tells reports whether the reading parts the suspect or the next one from a sound unit, on a meter of
// the usual doubt: nothing but the wiring shows of a capacitor, and nothing of the bench.
func (c Confirm) Tells() bool {
	return c.Reading.PinA != "" && (c.shows(c.Reading.WrongOhms) || !math.IsNaN(c.NextOhms) && c.shows(c.NextOhms))
}

func (c Confirm) shows(ohms float64) bool {
	o := ohmsOf(c.Reading)
	return math.Abs(o.scale(ohms)-o.scale(c.Reading.GoodOhms)) > 2*o.TolFrac
}

const mostCandidates = 12

// nextOf is the next of a group, or of the others.
func nextOf(g group, others []class) (class, bool) {
	switch {
	case len(g.classes) > 1:
		return g.classes[1], true
	case len(others) > 0:
		return others[0], true
	}
	return class{}, false
}
