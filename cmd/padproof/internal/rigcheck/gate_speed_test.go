package rigcheck

import (
	"context"
	"os"
	"path/filepath"
	"testing"
	"time"

	"padproof/cmd/padproof/internal/ledger"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/unit"
)

// A year of three shifts a day.
func BenchmarkHold(b *testing.B) {
	ctx := context.Background()
	l, err := ledger.Open(ctx, filepath.Join(b.TempDir(), "line.db"))
	if err != nil {
		b.Fatal(err)
	}
	defer l.Close()
	var all []ledger.Record
	for i := range 1000 {
		r, err := ledger.FromAnswer(answerOf(13.57))
		if err != nil {
			b.Fatal(err)
		}
		r.Kind, r.Station, r.Time = ledger.RigCheck, "b", morning.Add(time.Duration(i)*8*time.Hour)
		all = append(all, r)
	}
	if _, err := l.AppendAll(ctx, all); err != nil {
		b.Fatal(err)
	}
	path := filepath.Join(b.TempDir(), "rig.toml")
	if err := os.WriteFile(path, []byte(benchSheet), 0o644); err != nil {
		b.Fatal(err)
	}
	g := gateTo(l)
	at := morning.Add(1000 * 8 * time.Hour).Add(-time.Hour)
	for b.Loop() {
		a := &result.Answer{Verdict: "PASS"}
		if err := g.Hold(ctx, &unit.Unit{RigFile: path}, a, at); err != nil || a.Verdict != "PASS" {
			b.Fatal(a.Reason, err)
		}
	}
}
