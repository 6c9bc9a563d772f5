package suspect

import (
	"math"
	"slices"
)

// A kind of hypotheses is one fault, in all the ways it may be written.
type class struct {
	members []*hypothesis // the likeliest first
	weight  float64
}

func (c class) first() *hypothesis { return c.members[0] }

// leastWeight is what is worth a word.
const leastWeight = 0.01

// classes puts together what no pin can tell apart, the likeliest first. What weighs next to nothing
// is left out.
func (s *search) classes(all []*hypothesis) []class {
	const nothing = 5e-4
	sorted := slices.Clone(all)
	slices.SortStableFunc(sorted, func(a, b *hypothesis) int { return heavier(a.weight, b.weight) })
	var classes []class
	for _, h := range sorted {
		if h.weight < nothing {
			break
		}
		i := slices.IndexFunc(classes, func(c class) bool { return s.alike(c.first(), h) })
		if i < 0 {
			classes = append(classes, class{members: []*hypothesis{h}, weight: h.weight})
			continue
		}
		classes[i].members = append(classes[i].members, h)
		classes[i].weight += h.weight
	}
	slices.SortStableFunc(classes, func(a, b class) int { return heavier(a.weight, b.weight) })
	return classes
}

func heavier(a, b float64) int {
	switch {
	case a > b:
		return -1
	case a < b:
		return 1
	}
	return 0
}

// A group is what nothing taken parts.
type group struct {
	classes []class
	weight  float64
}

// within is how many times one weight of a group may be another.
const within = 3

// groups joins classes whose weights are within three times of one another and whose predictions
// agree.
func (s *search) groups(classes []class) []group {
	var groups []group
	taken := make([]bool, len(classes))
	for i, lead := range classes {
		if taken[i] {
			continue
		}
		g := group{classes: []class{lead}, weight: lead.weight}
		for k := i + 1; k < len(classes); k++ {
			if !taken[k] && classes[k].weight*within >= lead.weight && s.agree(lead.first(), classes[k].first()) {
				taken[k] = true
				g.classes = append(g.classes, classes[k])
				g.weight += classes[k].weight
			}
		}
		groups = append(groups, g)
	}
	slices.SortStableFunc(groups, func(a, b group) int { return heavier(a.weight, b.weight) })
	return groups
}

// agree tells whether two hypotheses give the same for all that was measured, within its doubt. Of a
// bound both have said what they can by their weights.
func (s *search) agree(a, b *hypothesis) bool {
	const doubts = 1.645 // two such figures agree in nine cases of ten
	for i, r := range s.rows[:s.known] {
		d := a.mean[i] - b.mean[i]
		if r.kind == phaseRow {
			d = math.Remainder(d, 360)
		}
		if math.Abs(d) > doubts*math.Hypot(a.stdU[i], b.stdU[i]) {
			return false
		}
	}
	return true
}
