package proof

import (
	"fmt"
	"slices"
	"strings"

	"padproof/cmd/padproof/internal/nearest"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/sheet"
	"padproof/cmd/padproof/internal/unit"
	"padproof/compare"
)

// A Meter is what an ohmmeter may be off by; nil figures are those of the unit's
// own sheet, else those of [compare.MeterTolFrac] and [compare.MeterPlusOhms].
type Meter struct {
	TolFrac, PlusOhms *float64
}

// readOhms takes in the readings of the unit's sheet and those beside it.
func (c *check) readOhms(u *unit.Unit, o Options) error {
	if u.OhmsFile == "" && len(o.Ohms) == 0 {
		return nil
	}
	if c.Circuit == nil || c.mark != nil {
		return &result.Error{File: u.OhmsFile, Text: "ohmmeter readings are held against a drawing, and there is none", Hint: "give a pad.toml, or leave the readings out"}
	}
	own := &sheet.Ohms{}
	if u.OhmsFile != "" {
		var err error
		if own, err = sheet.ReadOhms(u.OhmsFile); err != nil {
			return err
		}
	}
	c.answer.Simulated = own.Simulated
	meter := Meter{own.MeterTolFrac, own.MeterPlusOhms}
	for _, r := range own.Readings {
		if err := c.addReading(r, meter, own); err != nil {
			return err
		}
	}
	if o.Meter.TolFrac != nil {
		meter.TolFrac = o.Meter.TolFrac
	}
	if o.Meter.PlusOhms != nil {
		meter.PlusOhms = o.Meter.PlusOhms
	}
	for _, r := range o.Ohms {
		if err := c.addReading(r, meter, nil); err != nil {
			return err
		}
	}
	for _, s := range c.ohms {
		c.answer.Ohms = append(c.answer.Ohms, c.ohmSeen(s))
	}
	return nil
}

// addReading enters a reading, once; from is the sheet that it stands in, nil for
// the command line.
func (c *check) addReading(r sheet.Reading, m Meter, from *sheet.Ohms) error {
	seen := compare.OhmSeen{
		PinA: r.Pins[0], PinB: r.Pins[1], Joined: r.Joined, Ohms: r.Ohms,
		TolFrac: orElse(m.TolFrac, compare.MeterTolFrac), PlusOhms: orElse(m.PlusOhms, compare.MeterPlusOhms),
	}
	fail := func(hint, format string, args ...any) error {
		if from == nil {
			return &result.Error{Text: "--ohms: " + fmt.Sprintf(format, args...), Hint: hint}
		}
		return from.Errorf(r, hint, format, args...)
	}
	for _, node := range []string{r.Pins[0], r.Pins[1], r.Joined[0], r.Joined[1]} {
		if hint, missing := c.noNode(node); missing {
			return fail(hint, "the drawing has no %q", node)
		}
	}
	if seen.Reading().Shorted(c.Circuit) {
		return fail("name the pins of the other end; in an unbalanced network in.cold, out.cold and screen are one",
			"%s and %s are joined, and the meter is on them", r.Joined[0], r.Joined[1])
	}
	for _, s := range c.ohms {
		switch {
		case !s.Same(c.Circuit, seen):
		case s.Ohms == seen.Ohms:
			return nil
		default:
			return fail("keep the one that is true", "%s was read twice, %s and %s", seen.Reading().How(), s.Shown(), seen.Shown())
		}
	}
	c.ohms = append(c.ohms, seen)
	return nil
}

func orElse(x *float64, other float64) float64 {
	if x == nil {
		return other
	}
	return *x
}

// noNode tells a node that the drawing has not, with the mend; "" is none at all.
func (c *check) noNode(node string) (hint string, missing bool) {
	nodes := c.Circuit.Nodes()
	if node == "" || slices.Contains(nodes, node) {
		return "", false
	}
	near, _ := nearest.Word(node, nodes)
	return fmt.Sprintf("did you mean %s? its nodes are %s", near, strings.Join(nodes, ", ")), true
}

// ohmSeen is a reading in the form of the result.
func (c *check) ohmSeen(s compare.OhmSeen) result.OhmSeen {
	low, high := s.Good(c.Circuit)
	one := result.OhmSeen{
		Pins: []string{s.PinA, s.PinB}, Joined: []string{}, Ohms: result.Number(s.Ohms),
		GoodLow: result.Number(low), GoodHigh: result.Number(high),
		MeterTol: result.Number(s.TolFrac), MeterPlus: result.Number(s.PlusOhms),
		Agrees: s.Fits(c.Circuit), Text: s.Text(c.Circuit),
	}
	if s.Joined != [2]string{} {
		one.Joined = s.Joined[:]
	}
	return one
}
