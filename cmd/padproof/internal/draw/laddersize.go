package draw

import (
	"math"

	"gonum.org/v1/plot/vg"

	"padproof/cmd/padproof/internal/result"
)

// Distances of a ladder.
const (
	laneHeight   = 46
	markedHeight = 14 // more, where a level part is marked
	rowHeight    = 78
	idleHeight   = 36 // to a screen that nothing is joined to
	pinLead      = 32
	blockWidth   = 62
	blockGap     = 18
	gapLeast     = 50 // between columns
)

func (l *ladder) laneStep() vg.Length {
	for _, r := range l.series {
		if l.marked[r.part.Ref] {
			return laneHeight + markedHeight
		}
	}
	return laneHeight
}

// setRows gives the rows their heights and returns that of all.
func (l *ladder) setRows() vg.Length {
	uses := [rowCount]bool{hotRow: true, screenRow: true, coldRow: !l.unbalanced}
	for _, row := range l.row {
		uses[row] = true
	}
	y := vg.Length(30) + vg.Length(l.lanes(hotRow))*l.laneStep()
	for row := range rowCount {
		if !uses[row] {
			continue
		}
		if row > hotRow {
			y += l.distanceTo(row)
		}
		l.rowY[row] = y
		if row == coldRow {
			y += vg.Length(l.lanes(coldRow)) * l.laneStep()
		}
	}
	return y + 26
}

// distanceTo is how far a row lies below the one above it.
func (l *ladder) distanceTo(row int) vg.Length {
	if row == screenRow && !l.unbalanced && !l.used[screenPin] {
		return idleHeight + l.laneStep() - laneHeight
	}
	return rowHeight + l.laneStep() - laneHeight
}

// setColumns gives columns and slots their places, and returns where the last ends.
func (l *ladder) setColumns(x vg.Length) vg.Length {
	for i := range l.columns {
		c := &l.columns[i]
		c.left, c.right = x, x
		for _, width := range c.widths {
			c.slots = append(c.slots, x+9)
			x += width
			c.right = x
		}
		if i < l.last {
			x += l.gapAfter(i)
		}
	}
	return x
}

// gapAfter is the room for the level parts that start at a column.
func (l *ladder) gapAfter(col int) vg.Length {
	gap := vg.Length(gapLeast)
	for _, r := range l.series {
		if l.col[r.left] == col {
			gap = max(gap, textWidth(r.part, l.marked[r.part.Ref])+14)
		}
	}
	return gap
}

func (l *ladder) isMarked(p result.DrawnPart) bool { return l.marked[p.Ref] }

// middleOf is the middle of the gap after a column.
func (l *ladder) middleOf(left string) vg.Length {
	c := l.columns[l.col[left]]
	return c.right + l.gapAfter(l.col[left])/2
}

func mean(a, b vg.Length) vg.Length { return vg.Length((float64(a) + float64(b)) / 2) }

func minMax(xs []vg.Length) (low, high vg.Length) {
	low, high = vg.Length(math.Inf(1)), vg.Length(math.Inf(-1))
	for _, x := range xs {
		low, high = min(low, x), max(high, x)
	}
	return low, high
}
