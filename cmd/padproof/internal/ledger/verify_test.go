package ledger

import (
	"context"
	"fmt"
	"slices"
	"strings"
	"testing"
)

// unguard takes the guards away, as one who tampers would.
func unguard(t *testing.T, l *Ledger) {
	t.Helper()
	statements := "DROP TRIGGER padproof_record_no_update; DROP TRIGGER padproof_record_no_delete; DROP TRIGGER padproof_record_next"
	if IsServer(l.where) {
		statements = "ALTER TABLE padproof_record DISABLE TRIGGER USER"
	}
	change(t, l, statements)
}

func change(t *testing.T, l *Ledger, statement string, values ...any) {
	t.Helper()
	if _, err := l.db.ExecContext(context.Background(), l.engine.text(statement), values...); err != nil {
		t.Fatalf("%s: %v", statement, err)
	}
}

// forge puts another body under a record's number, with its right hash.
func forge(t *testing.T, l *Ledger, sequence int64, old, new string) {
	t.Helper()
	e, err := l.Show(context.Background(), "bench", sequence)
	if err != nil {
		t.Fatal(err)
	}
	text := strings.Replace(string(e.Body), old, new, 1)
	if text == string(e.Body) {
		t.Fatalf("nothing to forge in %s", text)
	}
	change(t, l, "UPDATE padproof_record SET body = $1, hash = $2 WHERE station = 'bench' AND sequence = $3", []byte(text), hashOf([]byte(text)), sequence)
}

// Each way of tampering is found, and the record named.
func TestVerifyFinds(t *testing.T) {
	const flip = "UPDATE padproof_record SET sequence = -sequence WHERE station = 'bench' AND sequence IN (4, 5)"
	for _, c := range []struct {
		name   string
		tamper func(t *testing.T, l *Ledger)
		want   []string // STATION/SEQUENCE fault
	}{
		{"nothing", func(*testing.T, *Ledger) {}, nil},
		{"a figure", func(t *testing.T, l *Ledger) {
			change(t, l, "UPDATE padproof_record SET body = $1 WHERE station = 'bench' AND sequence = 4", []byte(strings.Replace(bodyOf(t, l, 4), "0004", "0005", 1)))
		}, []string{"bench/4 altered"}},
		{"no body", func(t *testing.T, l *Ledger) {
			change(t, l, "UPDATE padproof_record SET body = $1 WHERE station = 'bench' AND sequence = 4", []byte("{"))
		}, []string{"bench/4 altered"}},
		{"a column", func(t *testing.T, l *Ledger) {
			change(t, l, "UPDATE padproof_record SET verdict = 'FAIL' WHERE station = 'bench' AND sequence = 4")
		}, []string{"bench/4 altered"}},
		{"the time column", func(t *testing.T, l *Ledger) {
			change(t, l, "UPDATE padproof_record SET at_us = at_us + 1 WHERE station = 'bench' AND sequence = 9")
		}, []string{"bench/9 altered"}},
		{"a hash", func(t *testing.T, l *Ledger) {
			change(t, l, "UPDATE padproof_record SET hash = $1 WHERE station = 'bench' AND sequence = 4", strings.Repeat("0", 64))
		}, []string{"bench/4 altered"}},
		{"forged with its hash", func(t *testing.T, l *Ledger) { forge(t, l, 4, `"verdict":"PASS"`, `"verdict":"FAIL"`) },
			[]string{"bench/4 altered", "bench/5 broken"}},
		{"one taken out", func(t *testing.T, l *Ledger) {
			change(t, l, "DELETE FROM padproof_record WHERE station = 'bench' AND sequence = 4")
		}, []string{"bench/5 missing"}},
		{"several taken out", func(t *testing.T, l *Ledger) {
			change(t, l, "DELETE FROM padproof_record WHERE station = 'bench' AND sequence BETWEEN 4 AND 6")
		}, []string{"bench/7 missing"}},
		{"the first taken out", func(t *testing.T, l *Ledger) {
			change(t, l, "DELETE FROM padproof_record WHERE station = 'bench' AND sequence = 1")
		}, []string{"bench/2 missing"}},
		{"two swapped", func(t *testing.T, l *Ledger) {
			change(t, l, flip)
			change(t, l, "UPDATE padproof_record SET sequence = 9 + sequence WHERE station = 'bench' AND sequence < 0")
		}, []string{"bench/4 moved", "bench/5 doubled"}},
		{"one doubled", func(t *testing.T, l *Ledger) {
			change(t, l, "INSERT INTO padproof_record SELECT station, 11, hash, at_us, kind, verdict, unit, lot, drawing, sheet, operator, simulated, takes, body FROM padproof_record WHERE station = 'bench' AND sequence = 10")
		}, []string{"bench/11 doubled"}},
		{"moved to another station", func(t *testing.T, l *Ledger) {
			change(t, l, "UPDATE padproof_record SET station = 'other', sequence = 2 WHERE station = 'bench' AND sequence = 10")
		}, []string{"other/2 moved"}},
		{"a chain renumbered", func(t *testing.T, l *Ledger) {
			change(t, l, "DELETE FROM padproof_record WHERE station = 'bench' AND sequence = 1")
			change(t, l, "UPDATE padproof_record SET sequence = -sequence WHERE station = 'bench'")
			change(t, l, "UPDATE padproof_record SET sequence = -1 - sequence WHERE station = 'bench'")
		}, []string{"bench/1 moved", "bench/2 moved", "bench/3 moved", "bench/4 moved", "bench/5 moved", "bench/6 moved", "bench/7 moved", "bench/8 moved", "bench/9 moved"}},
	} {
		t.Run(c.name, func(t *testing.T) {
			onBoth(t, func(t *testing.T, where string) {
				ctx := context.Background()
				l := tenAndOne(t, where)
				unguard(t, l)
				c.tamper(t, l)
				v, err := l.Verify(ctx)
				if err != nil {
					t.Fatal(err)
				}
				var got []string
				for _, f := range v.Faults {
					got = append(got, fmt.Sprintf("%s/%d %s", f.Station, f.Sequence, f.Fault))
				}
				if !slices.Equal(got, c.want) {
					t.Errorf("Verify finds %v, want %v\n%+v", got, c.want, v.Faults)
				}
			})
		})
	}
}

// A tail cut off shows only against a head.
func TestVerifyHead(t *testing.T) {
	onBoth(t, func(t *testing.T, where string) {
		ctx := context.Background()
		l := tenAndOne(t, where)
		head, err := l.Head(ctx, "bench")
		if err != nil || head.Sequence != 10 {
			t.Fatalf("Head = %v, %v, want bench/10", head, err)
		}
		unguard(t, l)
		hashAlone := Receipt{Hash: head.Hash}
		if v, err := l.Verify(ctx, head, hashAlone); err != nil || len(v.Faults) > 0 {
			t.Errorf("Verify = %+v, %v, want no faults", v, err)
		}
		other := Receipt{Station: "bench", Sequence: 9, Hash: strings.Repeat("1", 64)}
		if v, err := l.Verify(ctx, other); err != nil || len(v.Faults) != 1 || v.Faults[0].Fault != "broken" {
			t.Errorf("Verify(%v) = %+v, %v, want a record with another hash", other, v, err)
		}
		change(t, l, "DELETE FROM padproof_record WHERE station = 'bench' AND sequence > 7")
		if v, err := l.Verify(ctx); err != nil || len(v.Faults) > 0 {
			t.Errorf("Verify with no head = %+v, %v, want no faults: nothing can show it", v, err)
		}
		for _, h := range []Receipt{head, hashAlone} {
			if v, err := l.Verify(ctx, h); err != nil || len(v.Faults) != 1 || v.Faults[0].Fault != "cut-off" {
				t.Errorf("Verify(%v) = %+v, %v, want a chain cut off", h, v, err)
			}
		}
		change(t, l, "DELETE FROM padproof_record WHERE station = 'bench'")
		if v, err := l.Verify(ctx, head); err != nil || len(v.Faults) != 1 || v.Faults[0].Fault != "cut-off" {
			t.Errorf("Verify of a chain that is gone = %+v, %v, want a chain cut off", v, err)
		}
	})
}

func bodyOf(t *testing.T, l *Ledger, sequence int64) string {
	t.Helper()
	e, err := l.Show(context.Background(), "bench", sequence)
	if err != nil {
		t.Fatal(err)
	}
	return string(e.Body)
}

// tenAndOne has ten records of a bench and one of another.
func tenAndOne(t *testing.T, where string) *Ledger {
	t.Helper()
	l := open(t, where, Options{})
	records := []Record{record("other", 100)}
	for n := 1; n <= 10; n++ {
		records = append(records, record("bench", n))
	}
	if _, err := l.AppendAll(context.Background(), records); err != nil {
		t.Fatal(err)
	}
	return l
}
