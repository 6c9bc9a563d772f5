package generic

import (
	"fmt"
	"math"

	"padproof/compare/network"
)

// A hypothesis is one pad with one thing wrong, or a whole range of it.
type hypothesis struct {
	text    string // what is said of it, the same for all pads
	sound   *network.Circuit
	faulty  *network.Circuit
	ends    network.Ends // of the rig, as they would be
	readsDB float64
	weight  float64 // prior share times density
	check   check
	amount  string // of a range: the best of it
}

// A check is how a kind of fault is looked for.
type check int

const (
	byOhms    check = iota
	byLegs          // ohmmeter, or the legs takes
	byTurning       // turn the pad round
	byPolarity
	bySource
	byLoad
	byMark
	byKind // see which parts are in it
	byLooking
)

// A kind of fault has as much weight beforehand as any other.
type kind struct {
	check   check
	members []member
}

// A member is one fault of a kind, over a range of sizes where it has one.
type member struct {
	text   string
	points []point
}

// A point is a circuit and its ends, and how it is told in words where it is one of a range.
type point struct {
	faulty *network.Circuit
	ends   network.Ends
	amount string
}

// hypotheses are everything that is thought of, with weights.
func (c Case) hypotheses(pads []Pad) []hypothesis {
	var all []hypothesis
	for _, p := range pads {
		for _, k := range c.kinds(p) {
			for _, m := range k.members {
				h := c.weigh(p, k.check, m)
				h.weight /= float64(len(k.members) * len(pads))
				all = append(all, h)
			}
		}
	}
	return append(all, c.otherMeanings()...)
}

// weigh is a fault of a pad, its weight the mean over its points.
func (c Case) weigh(p Pad, check check, m member) hypothesis {
	h := hypothesis{text: m.text, sound: p.Circuit, check: check}
	best := -1.0
	for _, at := range m.points {
		lossDB := at.faulty.LossDB(at.ends, c.FreqHz)
		d := c.density(at.faulty, at.ends, lossDB)
		h.weight += d / float64(len(m.points))
		if d > best {
			best = d
			h.faulty, h.ends, h.readsDB, h.amount = at.faulty, at.ends, lossDB, at.amount
		}
	}
	return h
}

// kinds are the kinds of fault that a pad can have.
func (c Case) kinds(p Pad) []kind {
	e := c.Rig.Ends
	var kinds []kind
	for _, form := range []struct {
		form network.FaultForm
		word string
	}{{network.PartOpen, "open"}, {network.PartShort, "short"}, {network.PartTimesTen, "of ten times its value"}, {network.PartTenth, "of a tenth of its value"}} {
		k := kind{check: byOhms}
		for _, part := range p.Circuit.Parts() {
			faulty := network.Fault{Form: form.form, Ref: part.Ref}.Apply(p.Circuit)
			k.members = append(k.members, member{roleOf(p.Circuit.Name(), part.Ref) + " " + form.word, []point{{faulty: faulty, ends: e}}})
		}
		kinds = append(kinds, k)
	}
	drifts := kind{check: byOhms}
	for _, part := range p.Circuit.Parts() {
		drifts.members = append(drifts.members, member{roleOf(p.Circuit.Name(), part.Ref) + " of another value", drifted(p.Circuit, part, e)})
	}
	kinds = append(kinds, drifts)
	kinds = append(kinds, c.legKinds(p)...)
	return append(kinds,
		kind{bySource, []member{{"the source is not as stated", c.otherEnd(p, e.SourceOhms, func(e *network.Ends, ohms float64) { e.SourceOhms = ohms })}}},
		kind{byLoad, []member{{"the load is not as stated", c.otherEnd(p, e.LoadOhms, func(e *network.Ends, ohms float64) { e.LoadOhms = ohms })}}},
	)
}

// legKinds are those of legs and plugs.
func (c Case) legKinds(p Pad) []kind {
	by := map[network.FaultForm]*kind{
		network.LegOpen: {check: byLegs}, network.LegToScreen: {check: byLegs},
		network.LegsCrossed: {check: byPolarity}, network.EndsSwapped: {check: byTurning},
	}
	for _, f := range p.Circuit.LegFaults() {
		k := by[f.Form]
		k.members = append(k.members, member{legText(f), []point{{faulty: f.Apply(p.Circuit), ends: c.Rig.Ends}}})
	}
	var kinds []kind
	for _, form := range []network.FaultForm{network.LegOpen, network.LegToScreen, network.LegsCrossed, network.EndsSwapped} {
		if k := by[form]; len(k.members) > 0 {
			kinds = append(kinds, *k)
		}
	}
	return kinds
}

func legText(f network.Fault) string {
	end := map[string]string{"in.hot": "input", "in.cold": "input", "out.hot": "output", "out.cold": "output"}[f.Pin]
	switch f.Form {
	case network.LegOpen:
		return "a leg open at the " + end
	case network.LegToScreen:
		return "a leg down to screen at the " + end
	}
	return f.String()
}

// roleOf says what a part of a network is, in words that hold for other networks too.
func roleOf(name, ref string) string {
	const series, shunt = "a series resistor", "the shunt resistor"
	switch name + " " + ref {
	case "T R1", "H R1", "H R2":
		return series + " at the input"
	case "T R2", "H R3", "H R4":
		return series + " at the output"
	case "pi R1", "O R1":
		return shunt + " at the input"
	case "pi R3", "O R4":
		return shunt + " at the output"
	case "L R2", "U R3", "T R3", "H R5":
		return shunt
	}
	return series
}

// drifted are other values of a part, from 3 % to threefold both ways: a step of 4.5 % moves no loss
// by more than what tolerances do.
func drifted(c *network.Circuit, part network.Part, e network.Ends) []point {
	const steps, least, most = 24, 1.03, 3.0
	var all []point
	for i := range steps {
		factor := least * math.Pow(most/least, float64(i)/(steps-1))
		for _, f := range []float64{factor, 1 / factor} {
			all = append(all, point{c.With(part.Ref, part.Value*f), e, fmt.Sprintf("about %+.0f %%", 100*(f-1))})
		}
	}
	return all
}

// otherEnd are other impedances of one end of the rig, up to ten times either way.
func (c Case) otherEnd(p Pad, stated float64, set func(e *network.Ends, ohms float64)) []point {
	const steps = 40 // each side, 6 % each
	if !(stated > 0) || math.IsInf(stated, 0) {
		return nil
	}
	var all []point
	for i := -steps; i <= steps; i++ {
		if i == 0 {
			continue
		}
		e := c.Rig.Ends
		ohms := stated * math.Pow(10, float64(i)/steps)
		set(&e, ohms)
		all = append(all, point{p.Circuit, e, fmt.Sprintf("about %s, not %s", ohmsText(ohms), ohmsText(stated))})
	}
	return all
}

// otherMeanings are pads that are sound but other than the mark was taken for, and no pad at all.
func (c Case) otherMeanings() []hypothesis {
	var all []hypothesis
	e := c.Rig.Ends
	add := func(text string, check check, pads []Pad, share float64) {
		for _, p := range pads {
			h := c.weigh(p, check, member{text, []point{{faulty: p.Circuit, ends: e}}})
			h.weight *= share / float64(len(pads))
			all = append(all, h)
		}
	}
	for _, ohms := range CommonOhms {
		if c.OnBench || c.Ohms > 0 && ohms != c.Ohms {
			text := fmt.Sprintf("no fault, but a mark that holds between a source and a load of %s", ohmsText(ohms))
			add(text, byMark, matchedPads(e, ohms, c.MarkDB), 1/float64(len(CommonOhms)+1))
		}
	}
	if c.Ohms > 0 && !c.OnBench {
		add("no fault, but a mark that holds on a bench like this", byMark, c.readingHere(), 1/float64(len(CommonOhms)+1))
	}
	if c.Ohms > 0 && !c.OnBench {
		add("no fault, but a pad that is matched at its input alone", byKind, dividerPads(e, c.Ohms, c.MarkDB), 1)
	}
	if !c.AtLeast {
		all = append(all, hypothesis{text: "the pad not in circuit", check: byLooking, weight: normal(c.LossDB, math.Hypot(c.StdUDB, straightDB))})
	}
	return all
}
