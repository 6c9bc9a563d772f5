package ledger

import (
	"context"
	"errors"
	"strings"
	"testing"
)

// Where the answer to a commit was lost, the ledger itself says what became of it.
func TestAfterCommit(t *testing.T) {
	onBoth(t, func(t *testing.T, where string) {
		ctx := context.Background()
		l := open(t, where, Options{})
		written, err := l.Append(ctx, record("bench", 1))
		if err != nil {
			t.Fatal(err)
		}
		lost := errors.New("the line went dead")
		if got, err := l.afterCommit(ctx, []Receipt{written}, lost); err != nil || len(got) != 1 || got[0] != written {
			t.Errorf("afterCommit of what was written = %v, %v, want %v", got, err, written)
		}
		other := Receipt{Station: "bench", Sequence: 2, Hash: strings.Repeat("0", 64)}
		if got, err := l.afterCommit(ctx, []Receipt{other}, lost); got != nil || !errors.Is(err, lost) {
			t.Errorf("afterCommit of what was not = %v, %v, want %v", got, err, lost)
		}
		_ = l.db.Close()
		if _, err := l.afterCommit(ctx, []Receipt{written}, lost); ReasonOf(err) != Unknown {
			t.Errorf("afterCommit with nobody to ask = %v, want it not known", err)
		}
	})
}
