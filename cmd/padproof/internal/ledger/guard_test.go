package ledger

import (
	"context"
	"strings"
	"testing"
)

// The database itself refuses to change a record, to take one out, or to put one
// anywhere but behind the last.
func TestGuards(t *testing.T) {
	onBoth(t, func(t *testing.T, where string) {
		ctx := context.Background()
		l := open(t, where, Options{})
		for n := 1; n <= 3; n++ {
			if _, err := l.Append(ctx, record("bench", n)); err != nil {
				t.Fatal(err)
			}
		}
		const again = "INSERT INTO padproof_record SELECT station, @, hash, at_us, kind, verdict, unit, lot, drawing, sheet, operator, simulated, takes, body FROM padproof_record WHERE sequence = 3"
		statements := []string{
			"UPDATE padproof_record SET verdict = 'FAIL' WHERE sequence = 2",
			"UPDATE padproof_record SET body = body",
			"DELETE FROM padproof_record WHERE sequence = 3",
			strings.ReplaceAll(again, "@", "3"),
			strings.ReplaceAll(again, "@", "5"),
			strings.ReplaceAll(again, "@", "0"),
		}
		if IsServer(where) {
			statements = append(statements, "TRUNCATE padproof_record", strings.ReplaceAll(again, "@", "3")+" ON CONFLICT (station, sequence) DO UPDATE SET verdict = 'FAIL'")
		} else {
			statements = append(statements, strings.Replace(strings.ReplaceAll(again, "@", "2"), "INSERT", "INSERT OR REPLACE", 1))
		}
		for _, statement := range statements {
			if _, err := l.db.ExecContext(ctx, statement); err == nil {
				t.Errorf("%s was let through", statement)
			}
		}
		if v, err := l.Verify(ctx); err != nil || len(v.Faults) > 0 || v.Records != 3 {
			t.Errorf("Verify = %+v, %v, want 3 sound records", v, err)
		}
	})
}
