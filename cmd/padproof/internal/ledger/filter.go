package ledger

import (
	"fmt"
	"strings"
	"time"
)

// A Filter picks records; a field left out picks all. Names are matched whole.
type Filter struct {
	Station string
	Unit    string
	Lot     string
	Drawing string // the pad's name
	Verdict string
	Kind    string    // [UnitCheck] or [RigCheck]
	Takes   string    // as [TakesOf] gives it
	From    time.Time // at or after
	To      time.Time // before
}

// where turns the filter into a condition with its values; numbering begins at $1.
func (f Filter) where() (string, []any) {
	var terms []string
	var values []any
	add := func(term string, value any) {
		values = append(values, value)
		terms = append(terms, fmt.Sprintf(term, len(values)))
	}
	for _, one := range []struct{ column, value string }{
		{"unit", f.Unit}, {"lot", f.Lot}, {"takes", f.Takes}, {"drawing", f.Drawing},
		{"station", f.Station}, {"verdict", f.Verdict}, {"kind", f.Kind},
	} {
		if one.value != "" {
			add(one.column+" = $%d", one.value)
		}
	}
	if !f.From.IsZero() {
		add("at_us >= $%d", f.From.UnixMicro())
	}
	if !f.To.IsZero() {
		add("at_us < $%d", f.To.UnixMicro())
	}
	if len(terms) == 0 {
		return "1 = 1", nil
	}
	return strings.Join(terms, " AND "), values
}
