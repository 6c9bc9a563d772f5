package ledger

import (
	"context"
	"encoding/json"
	"fmt"
	"os"
	"strings"
	"testing"
	"time"
)

// size is how many records a list must stay quick over.
func size() int {
	if os.Getenv("PADPROOF_LONG") != "" {
		return 1_000_000
	}
	return 4_000
}

// manyRecord is the n-th of a great many, on 8 stations, in lots of 500, of 20
// drawings, one in 50 of which fails.
func manyRecord(n int) Record {
	r := Record{
		Station: fmt.Sprintf("bench %d", n%8), Time: time.Date(2020, 1, 1, 0, 0, n*60, 0, time.UTC), Verdict: "PASS",
		Unit: fmt.Sprintf("%06d", n/2), Lot: fmt.Sprintf("lot %d", n/500), Drawing: Drawing{Name: fmt.Sprintf("Saltmarsh %d", n/8%20)},
		Answer: manyAnswer,
	}
	if n%50 == 7 {
		r.Verdict = "FAIL"
	}
	return r
}

// manyAnswer is of the length of a short answer.
var manyAnswer = json.RawMessage(`{"verdict":"PASS","checks":[` + strings.Repeat(`{"name":"loss","measured":13.99,"expected":13.97},`, 40) + `{}]}`)

func fill(t testing.TB, l *Ledger, n int) {
	t.Helper()
	began := time.Now()
	const batch = 2000
	for from := 0; from < n; from += batch {
		var records []Record
		for i := from; i < min(from+batch, n); i++ {
			records = append(records, manyRecord(i))
		}
		if _, err := l.AppendAll(context.Background(), records); err != nil {
			t.Fatal(err)
		}
	}
	t.Logf("%d records in %v, %.0f a second", n, time.Since(began).Round(time.Millisecond), float64(n)/time.Since(began).Seconds())
}

// Lists and single records come within 100 ms, whatever is asked for.
func TestManyRecords(t *testing.T) {
	onBoth(t, func(t *testing.T, where string) {
		ctx := context.Background()
		l := open(t, where, Options{})
		n := size()
		fill(t, l, n)
		if !IsServer(where) { /* no statistics needed */
		} else if _, err := l.db.ExecContext(ctx, "VACUUM ANALYZE padproof_record"); err != nil {
			t.Fatal(err)
		}
		mid := time.Date(2020, 1, 1, 0, 0, n*30, 0, time.UTC)
		for _, f := range []struct {
			name   string
			filter Filter
			from   Place
		}{
			{"all", Filter{}, Place{}},
			{"all, far back", Filter{}, Place{mid.UnixMicro(), "bench 0", 1}},
			{"unit", Filter{Unit: manyRecord(n / 3).Unit}, Place{}},
			{"lot", Filter{Lot: manyRecord(n / 3).Lot}, Place{}},
			{"drawing", Filter{Drawing: "Saltmarsh 3"}, Place{}},
			{"verdict", Filter{Verdict: "FAIL"}, Place{}},
			{"verdict, rare", Filter{Verdict: "UNPROVEN"}, Place{}},
			{"station", Filter{Station: "bench 3"}, Place{}},
			{"dates", Filter{From: mid, To: mid.Add(24 * time.Hour)}, Place{}},
			{"verdict of a lot", Filter{Verdict: "FAIL", Lot: manyRecord(n / 3).Lot}, Place{}},
			{"verdict of a drawing", Filter{Verdict: "FAIL", Drawing: "Saltmarsh 3"}, Place{}},
			{"verdict of a drawing, none", Filter{Verdict: "FAIL", Drawing: "Saltmarsh 4"}, Place{}},
			{"verdict of a station, none", Filter{Verdict: "FAIL", Station: "bench 2"}, Place{}},
			{"all verdicts of a station", Filter{Verdict: "PASS", Station: "bench 2"}, Place{}},
			{"drawing of a station", Filter{Drawing: "Saltmarsh 4", Station: "bench 2"}, Place{}},
			{"drawing of a station, none", Filter{Drawing: "Saltmarsh 99", Station: "bench 2"}, Place{}},
			{"rig checks", Filter{Kind: RigCheck}, Place{}},
			{"old, of a verdict", Filter{Verdict: "PASS", To: mid}, Place{}},
			{"old, of a station", Filter{Station: "bench 2", To: mid}, Place{}},
		} {
			page, took := quickest(t, func() (*Page, error) { return l.List(ctx, f.filter, f.from, 50) })
			t.Logf("%-28s %3d rows, %5d more: %v", f.name, len(page.Rows), page.More, took)
			if took > 100*time.Millisecond {
				t.Errorf("List(%s) over %d records took %v, want 100 ms or less", f.name, n, took)
			}
		}
		_, took := quickest(t, func() (*Page, error) { _, err := l.Show(ctx, "bench 5", int64(n/16)); return &Page{}, err })
		t.Logf("%-28s %v", "show", took)
		if took > 100*time.Millisecond {
			t.Errorf("Show over %d records took %v, want 100 ms or less", n, took)
		}
	})
}

// quickest is the best of a few calls: the first may wait for the disk, and others
// may use the machine.
func quickest(t *testing.T, call func() (*Page, error)) (*Page, time.Duration) {
	t.Helper()
	var page *Page
	best := time.Hour
	for range 5 {
		began := time.Now()
		var err error
		if page, err = call(); err != nil {
			t.Fatal(err)
		}
		best = min(best, time.Since(began))
	}
	return page, best
}
