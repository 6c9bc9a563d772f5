package sheet

import (
	"fmt"
	"slices"
)

// place is a part that a network must have.
type place struct{ ref, where string }

// networks are the networks with their parts, in signal
// order, hot before cold. custom has no parts of its own.
var networks = []struct {
	name  string
	parts []place
}{
	{"L", []place{{"R1", "series"}, {"R2", "shunt at the output"}}},
	{"U", []place{{"R1", "hot series"}, {"R2", "cold series"}, {"R3", "shunt at the output"}}},
	{"T", []place{{"R1", "series in"}, {"R2", "series out"}, {"R3", "shunt in the middle"}}},
	{"H", []place{{"R1", "hot in"}, {"R2", "cold in"}, {"R3", "hot out"}, {"R4", "cold out"}, {"R5", "shunt in the middle"}}},
	{"pi", []place{{"R1", "shunt in"}, {"R2", "series"}, {"R3", "shunt out"}}},
	{"O", []place{{"R1", "shunt in"}, {"R2", "hot series"}, {"R3", "cold series"}, {"R4", "shunt out"}}},
	{"bridged-T", []place{{"R1", "arm in"}, {"R2", "arm out"}, {"R3", "bridge"}, {"R4", "shunt"}}},
	{"custom", nil},
}

// Networks returns the names that a drawing's network can have.
func Networks() []string {
	var names []string
	for _, n := range networks {
		names = append(names, n.name)
	}
	return names
}

// fixedParts checks the parts of a network that places them itself: each of its
// refs is there and says nothing else about its place, every other part says
// where it sits.
func (d *document) fixedParts(p *Pad) {
	var places []place
	for _, n := range networks {
		if n.name == p.Network {
			places = n.parts
		}
	}
	for _, need := range places {
		if p.LineOf(need.ref) == 0 {
			d.fail("parts", fmt.Sprintf("network %s needs %s (%s)", p.Network, need.ref, need.where),
				fmt.Sprintf("add { ref = %q, value = \"...\" } to parts", need.ref))
		}
	}
	for i, part := range p.Parts {
		own := slices.ContainsFunc(places, func(at place) bool { return at.ref == part.Ref })
		switch {
		case own && part.Placed():
			d.fail(join(item("parts", i), "between"), fmt.Sprintf("part %s: network %s places it itself", part.Ref, p.Network),
				"leave between out, or give an added part another ref")
		case !own && !part.Placed():
			d.fail(item("parts", i), fmt.Sprintf("part %s: network %s has no such part and it does not say where it sits", part.Ref, p.Network),
				placeMend)
		}
	}
}

// customParts checks that every part of a custom network says where it sits.
func (d *document) customParts(p *Pad) {
	for i, part := range p.Parts {
		if !part.Placed() {
			d.fail(item("parts", i), fmt.Sprintf("part %s does not say where it sits, as every part of a custom network must", part.Ref),
				placeMend)
		}
	}
}

const placeMend = `add the two nodes it joins: between = ["out.hot", "out.cold"]`
