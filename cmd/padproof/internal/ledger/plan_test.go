package ledger

import (
	"context"
	"regexp"
	"strings"
	"testing"
	"time"
)

// Every way to ask for a list is answered from an index, in order, with nothing
// sorted and no table read through.
func TestListPlans(t *testing.T) {
	onBoth(t, func(t *testing.T, where string) {
		ctx := context.Background()
		l := open(t, where, Options{})
		fill(t, l, 4000)
		explain := "EXPLAIN QUERY PLAN "
		through := regexp.MustCompile(`SCAN padproof_record($|\n)|USE TEMP B-TREE`)
		if IsServer(where) {
			explain, through = "EXPLAIN ", regexp.MustCompile(`Seq Scan|Sort  `)
			if _, err := l.db.ExecContext(ctx, "ANALYZE padproof_record"); err != nil {
				t.Fatal(err)
			}
			// A small table is quicker read whole: what is asked is whether an index serves.
			l.db.SetMaxOpenConns(1)
			if _, err := l.db.ExecContext(ctx, "SET enable_seqscan = off; SET enable_sort = off; SET enable_bitmapscan = off"); err != nil {
				t.Fatal(err)
			}
		}
		at := time.Date(2020, 1, 2, 0, 0, 0, 0, time.UTC)
		for name, f := range map[string]Filter{
			"all": {}, "unit": {Unit: "000100"}, "lot": {Lot: "lot 3"}, "drawing": {Drawing: "Saltmarsh 3"},
			"verdict": {Verdict: "FAIL"}, "station": {Station: "bench 2"}, "kind": {Kind: RigCheck}, "takes": {Takes: "x"},
			"dates": {From: at, To: at.AddDate(0, 0, 1)}, "both": {Verdict: "FAIL", Drawing: "Saltmarsh 3"},
			"two": {Drawing: "Saltmarsh 3", Station: "bench 2"}, "old": {Station: "bench 2", To: at},
		} {
			for _, from := range []Place{{}, {at.UnixMicro(), "bench 3", 7}} {
				q := queryOf(f, from, older)
				for _, branch := range q.branches {
					one := query{branches: []string{branch}, values: q.values}
					plan := planOf(t, l, explain+one.newest(51), q.values)
					if !strings.Contains(strings.ReplaceAll(plan, "\n", " ")+" ", indexFor(f, where)) || through.MatchString(plan) {
						t.Errorf("the plan for %s, %s is\n%s", name, branch, plan)
					}
				}
			}
		}
	})
}

// indexFor is the index that parts the records best. A server that knows how few
// there are in a test may well choose another.
func indexFor(f Filter, where string) string {
	column := f.key()
	switch {
	case IsServer(where):
		return "padproof_record_"
	case column == "" && f.Verdict != "":
		column = "verdict"
	case column == "":
		column = "at"
	}
	return "padproof_record_" + column + " "
}

func planOf(t *testing.T, l *Ledger, statement string, values []any) string {
	t.Helper()
	rows, err := l.db.QueryContext(context.Background(), l.engine.text(statement), values...)
	if err != nil {
		t.Fatal(err)
	}
	defer func() { _ = rows.Close() }()
	names, err := rows.Columns()
	if err != nil {
		t.Fatal(err)
	}
	var lines []string
	for rows.Next() {
		var ignored any
		var line string
		into := make([]any, len(names))
		for i := range into {
			into[i] = &ignored
		}
		into[len(names)-1] = &line
		if err := rows.Scan(into...); err != nil {
			t.Fatal(err)
		}
		lines = append(lines, line)
	}
	return strings.Join(lines, "\n")
}
