package lot

import (
	"errors"
	"fmt"
	"slices"
	"strings"

	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/unit"
	"padproof/compare"
)

// A Tally keeps a line of each unit of a lot.
type Tally struct {
	lot    result.Lot
	groups []*group

	through map[string][]string // whose a recording through the pad is, by hash and channel
	copied  []string            // the keys of those that more than one unit has
}

// A group is the units of one drawing and one set of limits.
type group struct {
	pad, rig string
	limits   limits // what tells groups of one pad apart
	rows     []int  // of the lot
	figures  []*figure
	first    *unit.Unit // the sheets are its
}

// A figure is one check of a group: what each unit that has it read.
type figure struct {
	name, unit   string
	limit        compare.Limit
	expected     float64
	units        []string
	values, stdU []float64
	deviations   []benchDeviation // of the loss
	freqHz       float64
}

// NewTally begins the tally of a lot by its name.
func NewTally(name string) *Tally {
	return &Tally{through: map[string][]string{}, lot: result.Lot{Schema: result.LotSchema, Lot: name, Drawings: []result.LotDrawing{}, Rows: []result.LotRow{}, Warnings: []string{}}}
}

// Add takes in what became of a unit and returns its row. describe turns an error
// into the form of the result.
func (t *Tally) Add(o Outcome, describe func(error) *result.Error) *result.LotRow {
	t.lot.Units++
	row := result.LotRow{Unit: o.Unit.Serial, Drawing: -1, Checks: []result.LotCheck{}}
	if o.Answer == nil {
		err := o.Err
		if err == nil {
			err = errors.New("there is no answer")
		}
		t.lot.NotChecked++
		row.Error = describe(err)
	} else {
		t.count(o.Answer)
		t.fill(&row, o)
	}
	t.lot.Rows = append(t.lot.Rows, row)
	return &t.lot.Rows[len(t.lot.Rows)-1]
}

func (t *Tally) count(a *result.Answer) {
	switch compare.Verdict(a.Verdict) {
	case compare.Pass:
		t.lot.Passed++
	case compare.Fail:
		t.lot.Failed++
	default:
		t.lot.Unproven++
	}
	t.lot.Simulated = t.lot.Simulated || a.Simulated
}

// fill enters an answer into its row and its group.
func (t *Tally) fill(row *result.LotRow, o Outcome) {
	a := o.Answer
	row.Verdict, row.Reason = a.Verdict, reasonOf(a)
	for _, c := range a.Checks {
		row.Checks = append(row.Checks, result.LotCheck{Name: c.Name, Verdict: c.Verdict, Measured: c.Measured, Uncertainty: c.Uncertainty})
	}
	if len(a.Suspects) > 0 {
		weight := a.Suspects[0].Weight // a copy: the row must not keep the answer
		row.Suspect, row.Weight = a.Suspects[0].Fault, &weight
	}
	for _, take := range a.Captures {
		for _, p := range take.Problems {
			row.Problems = append(row.Problems, take.Role+": "+p.Problem)
		}
	}
	t.keepCopies(a)
	n, g := t.groupOf(a, o.Unit)
	row.Drawing = n
	g.rows = append(g.rows, len(t.lot.Rows))
	for _, c := range a.Checks {
		g.add(c, a, o)
	}
}

// reasonOf is why a unit does not pass: its own reason, else those of its checks.
func reasonOf(a *result.Answer) string {
	if a.Verdict == string(compare.Pass) {
		return ""
	}
	var reasons []string
	if a.Reason != "" {
		reasons = append(reasons, a.Reason)
	}
	for _, c := range a.Checks {
		if c.Verdict == a.Verdict {
			text := c.Name
			if c.Reason != "" {
				text += ": " + c.Reason
			}
			reasons = append(reasons, text)
		}
	}
	return strings.Join(reasons, "; ")
}

// keepCopies enters whose recording through the pad a unit's is.
func (t *Tally) keepCopies(a *result.Answer) {
	for _, c := range a.Captures {
		if (c.Role != unit.After && c.Role != unit.Both) || c.SHA256 == "" {
			continue
		}
		key := fmt.Sprint(c.SHA256, " ", c.Channel)
		units := t.through[key]
		if len(units) == 1 {
			t.copied = append(t.copied, key)
		}
		t.through[key] = append(units, a.Unit)
	}
}

// copies says which units share one recording through the pad: all but one of them
// were never recorded. Which, no recording can tell.
func (t *Tally) copies() []string {
	const most = 5
	var notes []string
	for _, key := range t.copied {
		units := t.through[key]
		named := strings.Join(units[:min(most, len(units))], ", ")
		if more := len(units) - most; more > 0 {
			named += fmt.Sprintf(" and %d more", more)
		}
		notes = append(notes, fmt.Sprintf("one recording through the pad stands for %d units, %s: record each anew", len(units), named))
	}
	return notes
}

// groupOf finds the group of an answer, or begins it.
func (t *Tally) groupOf(a *result.Answer, u *unit.Unit) (int, *group) {
	own := limitsOf(a)
	i := slices.IndexFunc(t.groups, func(g *group) bool { return g.pad == a.Pad && g.rig == a.Rig && g.limits.alike(own) })
	if i < 0 {
		i = len(t.groups)
		t.groups = append(t.groups, &group{pad: a.Pad, rig: a.Rig, limits: own, first: u})
	}
	return i, t.groups[i]
}

// Name is the lot's.
func (t *Tally) Name() string { return t.lot.Lot }

// Warn notes what belongs to no unit.
func (t *Tally) Warn(texts ...string) { t.lot.Warnings = append(t.lot.Warnings, texts...) }
