package report

import (
	"io"
	"strconv"
	"time"

	"padproof/cmd/padproof/internal/ledger"
)

// RecordsText writes a list of records, newest first, and how to go on.
func RecordsText(w io.Writer, list *ledger.Page) error {
	p := &page{w: w}
	if len(list.Rows) == 0 {
		p.line("no such records")
		return p.err
	}
	rows := [][]string{{"time (UTC)", "unit", "verdict", "lot", "drawing", "operator", "record"}}
	for _, r := range list.Rows {
		rows = append(rows, []string{shortTime(r.Time), r.Unit, verdictOf(r), r.Lot, r.Drawing.Name, r.Operator, r.Receipt.String()})
	}
	p.table("", rows)
	if list.More > 0 {
		p.line("")
		p.line("%s: --limit shows more at once, --past %q goes on from here", MoreText(list), clean(list.Rows[len(list.Rows)-1].Receipt.String()))
	}
	return p.err
}

// MoreText is how many records follow a page, as far as they were counted.
func MoreText(list *ledger.Page) string {
	if list.AtLeast {
		return grouped(list.More) + " or more"
	}
	return grouped(list.More) + " more"
}

// verdictOf marks what is no plain check of a unit.
func verdictOf(r ledger.Row) string {
	text := r.Verdict
	if r.Kind == ledger.RigCheck {
		text += " (rig)"
	}
	if r.Simulated {
		text += " SIMULATED"
	}
	return text
}

func shortTime(t time.Time) string { return t.UTC().Format("2006-01-02 15:04:05") }

// grouped writes a count with a comma at the thousands.
func grouped(n int64) string {
	text := strconv.FormatInt(n, 10)
	for at := len(text) - 3; at > 0; at -= 3 {
		text = text[:at] + "," + text[at:]
	}
	return text
}
