package main

import (
	"context"
	"errors"
	"fmt"
	"math/rand/v2"
	"os"
	"path/filepath"
	"testing"
	"time"

	"padproof/cmd/padproof/internal/ledger"
)

// A killing is a command that is to be killed while it records.
type killing struct {
	args    []string // before the folder
	resumes bool     // goes on where it was; else it gets a folder of its own each time
}

// killings are the commands that record many units.
func killings() map[string]killing {
	all := map[string]killing{"watch": {[]string{"watch", "--settle", "20ms"}, true}}
	if newLot().Flags().Lookup("ledger") != nil {
		all["lot"] = killing{[]string{"lot"}, false}
	}
	return all
}

// Killed at any moment, no record is lost that was reported and none is doubled;
// the ledger opens and verifies each time.
func TestKilled(t *testing.T) {
	rounds := 20
	if os.Getenv("PADPROOF_LONG") != "" {
		rounds = 200
	}
	for name, k := range killings() {
		t.Run(name, func(t *testing.T) { k.run(t, rounds) })
	}
}

func (k killing) run(t *testing.T, rounds int) {
	random := rand.New(rand.NewPCG(417, 6))
	dir := t.TempDir()
	db, lot := filepath.Join(dir, "line.db"), filepath.Join(dir, "lot")
	good := small(t, -26)
	reported := map[string]string{} // hash by record
	args := func() []string {
		return append(k.args[:len(k.args):len(k.args)], "--json", "--workers", "2", "--ledger", db, "--station", "bench 1", lot)
	}
	serials, printed := 0, 0
	for round := range rounds {
		if round == 0 || !k.resumes {
			lot = filepath.Join(dir, fmt.Sprintf("lot%d", round))
			layLot(t, lot)
		}
		for range 6 {
			serials++
			write(t, filepath.Join(lot, fmt.Sprintf("%04d", serials), "after.wav"), good)
		}
		p := begin(t, args()...)
		if round%4 != 0 { // every fourth time it may die while it opens the ledger
			p.await("a unit", func() bool { return len(p.units) > 0 })
		}
		time.Sleep(time.Duration(random.IntN(60)) * time.Millisecond)
		if err := p.Process.Kill(); err != nil && !errors.Is(err, os.ErrProcessDone) {
			t.Fatal(err)
		}
		p.finish()
		for _, a := range p.units {
			printed++
			if a.Recorded == nil {
				t.Fatalf("round %d: %s was printed and not recorded", round, a.Unit)
			}
			reported[fmt.Sprintf("%s/%d", a.Recorded.Station, a.Recorded.Sequence)] = a.Recorded.Hash
		}
		if k.holds(t, db, reported); t.Failed() {
			t.Fatalf("after round %d", round)
		}
	}
	if !k.resumes {
		t.Logf("%d kills, %d units reported of %d", rounds, printed, serials)
		return
	}
	p := begin(t, append(args(), "--once")...)
	if status := p.finish(); status != exitPass {
		t.Errorf("the last run ended with %d: %q", status, p.says)
	}
	if got := k.holds(t, db, reported); got != serials {
		t.Errorf("%d units are in the ledger, want %d", got, serials)
	}
	t.Logf("%d kills, %d units reported, %d in the last run", rounds, printed, len(p.units))
	if len(p.units) == serials {
		t.Error("no round recorded anything: too little to show")
	}
}

// holds looks whether the ledger is sound, has every record that was reported, and
// no unit twice; it returns how many units there are.
func (k killing) holds(t *testing.T, db string, reported map[string]string) int {
	t.Helper()
	ctx := context.Background()
	l, err := ledger.Open(ctx, db)
	if err != nil {
		t.Fatal(err)
	}
	defer func() { _ = l.Close() }()
	if v, err := l.Verify(ctx); err != nil || len(v.Faults) > 0 {
		t.Errorf("verify: %+v, %v, want no faults", v, err)
	}
	there, units := map[string]string{}, map[string]bool{}
	err = l.Each(ctx, ledger.Filter{}, func(r ledger.Row, _ []byte) error {
		if units[r.Unit] {
			t.Errorf("%s was recorded twice", r.Unit)
		}
		units[r.Unit], there[r.Receipt.String()] = true, r.Hash
		return nil
	})
	if err != nil {
		t.Error(err)
	}
	for record, hash := range reported {
		if there[record] != hash {
			t.Errorf("%s was reported with the hash %s, and is there with %q", record, hash, there[record])
		}
	}
	return len(units)
}
