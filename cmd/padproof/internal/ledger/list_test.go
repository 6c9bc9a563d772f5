package ledger

import (
	"cmp"
	"context"
	"fmt"
	"slices"
	"testing"
	"time"
)

// picks says by hand what a filter picks.
func picks(f Filter, r Record) bool {
	return (f.Station == "" || f.Station == r.Station) && (f.Unit == "" || f.Unit == r.Unit) && (f.Lot == "" || f.Lot == r.Lot) &&
		(f.Drawing == "" || f.Drawing == r.Drawing.Name) && (f.Verdict == "" || f.Verdict == r.Verdict) &&
		(f.Kind == "" || f.Kind == r.Kind) && (f.Takes == "" || f.Takes == TakesOf(r.Answer)) &&
		(f.From.IsZero() || !r.Time.Before(f.From)) && (f.To.IsZero() || r.Time.Before(f.To))
}

// Paging through a list gives exactly the records that a plain loop picks, newest
// first, each once, whatever the size of a page, and says how many follow.
func TestListPages(t *testing.T) {
	onBoth(t, func(t *testing.T, where string) {
		ctx := context.Background()
		l := open(t, where, Options{})
		var all []Record
		for n := range 600 {
			r := record(fmt.Sprintf("bench %d", n%3), n)
			r.Time = time.Date(2026, 11, 1, 0, n/4, 0, 0, time.UTC) // four at one time
			r.Verdict = verdicts[n%7%3]
			r.Drawing.Name = fmt.Sprintf("Saltmarsh %d", n%5)
			r.Unit = fmt.Sprintf("%04d", n/2)
			r.Kind = UnitCheck
			if n%11 == 0 {
				r.Kind = RigCheck
			}
			all = append(all, r)
		}
		receipts, err := l.AppendAll(ctx, all)
		if err != nil {
			t.Fatal(err)
		}
		half := time.Date(2026, 11, 1, 1, 0, 0, 0, time.UTC)
		for i, f := range []Filter{{}, {Unit: "0007"}, {Lot: "lot 2"}, {Drawing: "Saltmarsh 3"}, {Verdict: "FAIL"}, {Station: "bench 1"},
			{Kind: RigCheck}, {Kind: UnitCheck, Station: "bench 0"}, {From: half}, {To: half}, {Verdict: "PASS", Lot: "lot 1", From: half},
			{Drawing: "Saltmarsh 3", Station: "bench 1"}, {Kind: RigCheck, Drawing: "Saltmarsh 1", To: half}, {Takes: TakesOf(all[5].Answer)},
			{Unit: "9999"}} {
			var picked []int
			for n, r := range all {
				if picks(f, r) {
					picked = append(picked, n)
				}
			}
			slices.SortFunc(picked, func(a, b int) int { // by time, then station, then sequence
				return cmp.Or(all[b].Time.Compare(all[a].Time), cmp.Compare(all[b].Station, all[a].Station),
					cmp.Compare(receipts[b].Sequence, receipts[a].Sequence))
			})
			var want []string
			for _, n := range picked {
				want = append(want, receipts[n].String())
			}
			for _, limit := range []int{1 + 6*i, 50, 1000} {
				if got := throughPages(t, l, f, limit, len(want)); !slices.Equal(got, want) {
					t.Errorf("List(%+v) in pages of %d = %d records %.5v…, want %d %.5v…", f, limit, len(got), got, len(want), want)
				}
			}
		}
	})
}

func throughPages(t *testing.T, l *Ledger, f Filter, limit, want int) []string {
	t.Helper()
	var got []string
	var from Place
	for {
		page, err := l.List(context.Background(), f, from, limit)
		if err != nil {
			t.Fatal(err)
		}
		for _, r := range page.Rows {
			got = append(got, r.Receipt.String())
		}
		if page.More != int64(want-len(got)) || page.AtLeast {
			t.Fatalf("List(%+v) says %d more (at least: %v) behind %d, want %d", f, page.More, page.AtLeast, len(got), want-len(got))
		}
		if page.More == 0 {
			return got
		}
		from = page.Next
	}
}
