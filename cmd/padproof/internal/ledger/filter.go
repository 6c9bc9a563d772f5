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

// verdicts are all that a record can have.
var verdicts = []string{"PASS", "FAIL", "UNPROVEN"}

// A query is a filter, and where a list goes on, as SQL.
type query struct {
	branches []string // conditions of which each record meets at most one
	values   []any
}

// condition adds a term, its value numbered.
func (q *query) term(term string, values ...any) string {
	numbers := make([]any, 0, len(values))
	for _, v := range values {
		q.values = append(q.values, v)
		numbers = append(numbers, len(q.values))
	}
	return fmt.Sprintf(term, numbers...)
}

// Which way a list goes on from a place.
const (
	older = "<"
	newer = ">"
)

// queryOf turns a filter into SQL that an index answers. Most indexes lead with a
// name, then the verdict, then the time; so where a name is asked for and no
// verdict is, there is a branch for each verdict, and what they give is merged. Of several names the one whose index parts the records best is searched by;
// the others are marked as conditions only.
func queryOf(f Filter, from Place, side string) query {
	var q query
	key := f.key()
	var terms []string
	for _, one := range f.names() {
		switch {
		case one.value == "":
		case one.column == key:
			terms = append(terms, q.term(one.column+" = $%d", one.value))
		default:
			terms = append(terms, q.term("@ONLY@"+one.column+" = $%d", one.value))
		}
	}
	if !f.From.IsZero() {
		terms = append(terms, q.term("at_us >= $%d", f.From.UnixMicro()))
	}
	if !f.To.IsZero() {
		terms = append(terms, q.term("at_us < $%d", f.To.UnixMicro()))
	}
	if from != (Place{}) {
		terms = append(terms, q.term("(at_us, station, sequence) "+side+" ($%d, $%d, $%d)", from.AtMicros, from.Station, from.Sequence))
	}
	switch {
	case f.Verdict != "":
		q.branches = []string{and(append(terms, q.term("verdict = $%d", f.Verdict)))}
	case key == "" || key == "unit" || key == "takes":
		q.branches = []string{and(terms)}
	default:
		for _, verdict := range verdicts {
			q.branches = append(q.branches, and(append(terms[:len(terms):len(terms)], "verdict = '"+verdict+"'")))
		}
	}
	return q
}

// key is the column to search by, "" for the time or the verdict.
func (f Filter) key() string {
	rig := f.Kind
	if rig != RigCheck { // nearly all are of the other kind
		rig = ""
	}
	for _, one := range []struct{ column, value string }{
		{"takes", f.Takes}, {"unit", f.Unit}, {"lot", f.Lot}, {"kind", rig}, {"station", f.Station}, {"drawing", f.Drawing},
	} {
		if one.value != "" {
			return one.column
		}
	}
	return ""
}

// names are the columns that are matched whole, but for the verdict.
func (f Filter) names() []struct{ column, value string } {
	return []struct{ column, value string }{
		{"takes", f.Takes}, {"unit", f.Unit}, {"lot", f.Lot}, {"kind", f.Kind}, {"station", f.Station}, {"drawing", f.Drawing},
	}
}

func and(terms []string) string {
	if len(terms) == 0 {
		return "1 = 1"
	}
	return strings.Join(terms, " AND ")
}

// newest is the statement for the newest records, newest first.
func (q query) newest(limit int) string {
	return q.ordered(rowColumns, "at_us DESC, station DESC, sequence DESC", limit)
}

// oldest is the statement for the oldest records with their bodies, oldest first.
func (q query) oldest(limit int) string {
	return q.ordered(rowColumns+", body", "at_us, station, sequence", limit)
}

// ordered takes the first of each branch, which an index gives in order, and puts
// those few in order.
func (q query) ordered(columns, order string, limit int) string {
	rest := fmt.Sprintf(" ORDER BY %s LIMIT %d", order, limit)
	if len(q.branches) == 1 {
		return selected(columns, q.branches[0]) + rest
	}
	var all []string
	for i, branch := range q.branches {
		all = append(all, fmt.Sprintf("SELECT * FROM (%s%s) AS branch%d", selected(columns, branch), rest, i))
	}
	return strings.Join(all, " UNION ALL ") + rest
}

// count counts up to a bound.
func (q query) count(bound int) string {
	var all []string
	for i, branch := range q.branches {
		all = append(all, fmt.Sprintf("SELECT * FROM (%s LIMIT %d) AS branch%d", selected("1 AS one", branch), bound, i))
	}
	return fmt.Sprintf("SELECT count(*) FROM (%s LIMIT %d) AS picked", strings.Join(all, " UNION ALL "), bound)
}

func selected(columns, branch string) string {
	return "SELECT " + columns + " FROM padproof_record WHERE " + branch
}
