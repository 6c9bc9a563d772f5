package ledger

import (
	"context"
	"encoding/json"
	"fmt"
	"path/filepath"
	"testing"
	"time"
)

// record is one of the n-th unit of a lot at a station.
func record(station string, n int) Record {
	r := Record{
		Station: station, Time: time.Date(2026, 11, 30, 8, 0, n, 0, time.UTC), Verdict: "PASS",
		Unit: fmt.Sprintf("%04d", n), Lot: fmt.Sprintf("lot %d", n/100), Drawing: Drawing{Name: "Saltmarsh 14 line pad"},
		Tool:   "v0.0.0-test",
		Answer: json.RawMessage(fmt.Sprintf(`{"schema":"padproof.check.1","unit":"%04d","verdict":"PASS","captures":[{"role":"after","sha256":"%064x"}]}`, n, n)),
	}
	r.AddFile("pad", "pad.toml", []byte("name = \"Saltmarsh 14 line pad\" # <µ>\n"))
	return r
}

func open(t *testing.T, where string, o Options) *Ledger {
	t.Helper()
	l, err := OpenWith(context.Background(), where, o)
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { _ = l.Close() })
	return l
}

func inFile(t *testing.T) string { return filepath.Join(t.TempDir(), "ledger.db") }

func TestAppendAndShow(t *testing.T) {
	ctx := context.Background()
	l := open(t, inFile(t), Options{})
	for n := 1; n <= 3; n++ {
		got, err := l.Append(ctx, record("bench 1", n))
		if err != nil {
			t.Fatal(err)
		}
		if got.Sequence != int64(n) || len(got.Hash) != 64 {
			t.Errorf("Append = %v %q, want sequence %d and a SHA-256", got, got.Hash, n)
		}
		e, err := l.Show(ctx, "bench 1", int64(n))
		if err != nil {
			t.Fatal(err)
		}
		if e.Hash != got.Hash || e.Record.Unit != fmt.Sprintf("%04d", n) {
			t.Errorf("Show = %v of %s, want %v of %04d", e.Receipt, e.Record.Unit, got, n)
		}
	}
	v, err := l.Verify(ctx)
	if err != nil || len(v.Faults) > 0 || v.Records != 3 {
		t.Errorf("Verify = %+v, %v, want 3 sound records", v, err)
	}
}
