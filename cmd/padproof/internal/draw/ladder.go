package draw

import (
	"slices"
	"sort"

	"gonum.org/v1/plot/vg"

	"padproof/cmd/padproof/internal/result"
)

// Rows of a ladder, from the top.
const (
	hotRow = iota
	middleRow
	coldRow
	screenRow
	rowCount
)

// A ladder is a schematic set out as the trade draws pads: the signal goes from
// left to right, hot on top, cold below it, the screen at the bottom; a part that
// lies in a leg lies level, one from leg to leg stands upright.
type ladder struct {
	*graph
	unbalanced bool
	marked     map[string]bool
	row, col   map[string]int
	series     []run // level parts between neighbours in a row, or in a lane beside it
	uprights   []upright
	columns    []column
	rowY       [rowCount]vg.Length
	last       int // column of the output
}

// A run is a level part from one node to another of its row, in a lane of its own
// above the hot or below the cold row, 0 for the row itself.
type run struct {
	part        result.DrawnPart
	left, right string
	lane        int
}

// An upright is a part from row to row in a slot of a column.
type upright struct {
	part         result.DrawnPart
	upper, lower string
	from, to     int // rows
	col, slot    int
}

// A column is a stretch of the drawing's width in which the uprights stand.
type column struct {
	left, right vg.Length
	slots       []vg.Length // where they stand
	widths      []vg.Length
}

// ladderOf sets a circuit out as a ladder; false where it is none.
func ladderOf(d *result.Drawing, marked map[string]bool) (*ladder, bool) {
	l := &ladder{graph: graphOf(d), unbalanced: d.Unbalanced, marked: marked, row: map[string]int{}, col: map[string]int{}}
	if !l.place() {
		return nil, false
	}
	for _, p := range l.parts {
		if !l.enter(p) {
			return nil, false
		}
	}
	l.stand()
	return l, true
}

// onPath is how far from either end a node lies at least that the signal passes.
const onPath = 0.01

// place gives each node a row and a column.
func (l *ladder) place() bool {
	nodes := []string{inHot, outHot}
	l.row[inHot], l.row[outHot], l.row[screenPin] = hotRow, hotRow, screenRow
	if !l.unbalanced {
		nodes = append(nodes, inCold, outCold)
		l.row[inCold], l.row[outCold] = coldRow, coldRow
	}
	for _, n := range l.inner {
		through := l.across[n] > onPath && l.across[n] < 1-onPath
		switch {
		case through && l.height[n] > 0.1:
			l.row[n] = hotRow
		case through && l.height[n] < -0.1 && !l.unbalanced:
			l.row[n] = coldRow
		default:
			l.row[n] = middleRow
		}
		nodes = append(nodes, n)
	}
	sort.SliceStable(nodes, func(i, j int) bool { return l.across[nodes[i]] < l.across[nodes[j]] })
	taken := map[[2]int]bool{}
	at, last := 0, 0.0
	for _, n := range nodes {
		if x := l.across[n]; x-last > 2*onPath {
			at, last = at+1, x
		}
		if taken[[2]int{l.row[n], at}] {
			return false
		}
		taken[[2]int{l.row[n], at}] = true
		l.col[n] = at
	}
	l.last = at
	return l.col[outHot] == at && at > 0
}

// enter takes a part in, level or upright.
func (l *ladder) enter(p result.DrawnPart) bool {
	a, b := p.A, p.B
	if l.row[a] > l.row[b] || l.row[a] == l.row[b] && l.col[a] > l.col[b] {
		a, b = b, a
	}
	p.A, p.B = a, b // as it is drawn: from left to right, from the top down
	switch {
	case l.row[a] == l.row[b]:
		return l.enterRun(p, a, b)
	case b == screenPin || l.col[a] == l.col[b]:
		l.uprights = append(l.uprights, upright{part: p, upper: a, lower: b, from: l.row[a], to: l.row[b], col: l.col[a]})
		return true
	}
	return false
}

// enterRun gives a level part the row itself, where its nodes are neighbours and
// nothing lies between them yet, or a lane of its own.
func (l *ladder) enterRun(p result.DrawnPart, left, right string) bool {
	lane, free := 0, true
	for n, row := range l.row {
		if row == l.row[left] && l.col[n] > l.col[left] && l.col[n] < l.col[right] {
			free = false
		}
	}
	for _, r := range l.series {
		if l.row[r.left] == l.row[left] {
			lane = max(lane, r.lane)
			free = free && !(r.lane == 0 && r.left == left)
		}
	}
	switch {
	case free:
		lane = 0
	case l.row[left] == middleRow:
		return false
	default:
		lane++
	}
	l.series = append(l.series, run{p, left, right, lane})
	return true
}

// stand gives each upright a slot of its column: one in which nothing stands in the
// rows between its ends.
func (l *ladder) stand() {
	l.columns = make([]column, l.last+1)
	for i := range l.uprights {
		u := &l.uprights[i]
		for u.slot = 0; l.occupied(*u, l.uprights[:i]); u.slot++ {
		}
		c := &l.columns[u.col]
		for len(c.widths) <= u.slot {
			c.widths = append(c.widths, 0)
		}
		width := bodyWidth/2 + 22 + textWidth(u.part, l.marked[u.part.Ref])
		if l.marked[u.part.Ref] {
			width += 6
		}
		c.widths[u.slot] = max(c.widths[u.slot], width)
	}
}

func (l *ladder) occupied(u upright, by []upright) bool {
	return slices.ContainsFunc(by, func(o upright) bool {
		return o.col == u.col && o.slot == u.slot && o.from < u.to && u.from < o.to
	})
}

// lanes is how many lanes lie beside a row.
func (l *ladder) lanes(row int) int {
	most := 0
	for _, r := range l.series {
		if l.row[r.left] == row {
			most = max(most, r.lane)
		}
	}
	return most
}
