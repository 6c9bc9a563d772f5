package ledger

import (
	"bufio"
	"context"
	"errors"
	"fmt"
	"math/rand/v2"
	"os"
	"os/exec"
	"strings"
	"sync"
	"testing"
	"time"
)

// A writer is another process that checks units 0, 1, 2, … of its station and
// records each, a few at once where batch is not 1. It does not check what is in
// the ledger already, and says which records it was told are written.

// writeUntilKilled is the writer's life. job is "STATION|BATCH|WHERE".
func writeUntilKilled(job string) {
	parts := strings.SplitN(job, "|", 3)
	ctx := context.Background()
	l, err := OpenWith(ctx, parts[2], Options{Wait: time.Minute})
	if err != nil {
		fmt.Println("error", err)
		os.Exit(3)
	}
	batch := 1
	if _, err := fmt.Sscan(parts[1], &batch); err != nil {
		os.Exit(3)
	}
	head, err := l.Head(ctx, parts[0])
	if err != nil {
		os.Exit(3)
	}
	for n := max(0, int(head.Sequence)-3*batch); ; n += batch { // a few too early: as one does who has lost count
		if err := writeMissing(ctx, l, parts[0], n, batch); err != nil {
			fmt.Println("error", err)
			os.Exit(3)
		}
	}
}

func writeMissing(ctx context.Context, l *Ledger, station string, from, count int) error {
	var records []Record
	for n := from; n < from+count; n++ {
		r := record(station, n)
		r.Unit = fmt.Sprintf("%s-%06d", station, n)
		page, err := l.List(ctx, Filter{Unit: r.Unit, Takes: TakesOf(r.Answer)}, Place{}, 1)
		if err != nil {
			return err
		}
		if len(page.Rows) == 0 {
			records = append(records, r)
		}
	}
	receipts, err := l.AppendAll(ctx, records)
	for _, r := range receipts {
		fmt.Println(r.Sequence, r.Hash, r.Station)
	}
	return err
}

// A victim is a writer that is to be killed.
type victim struct {
	*exec.Cmd
	begun    chan struct{} // closed at its first report, or its end
	reported func() []Receipt
}

// start runs a writer and gathers what it reports until it ends.
func start(t *testing.T, where, station string, batch int) victim {
	t.Helper()
	self, err := os.Executable()
	if err != nil {
		t.Fatal(err)
	}
	cmd := exec.Command(self)
	cmd.Env = append(os.Environ(), fmt.Sprintf("LEDGER_TEST_WRITER=%s|%d|%s", station, batch, where))
	out, err := cmd.StdoutPipe()
	if err != nil {
		t.Fatal(err)
	}
	if err := cmd.Start(); err != nil {
		t.Fatal(err)
	}
	begun := make(chan struct{})
	begin := sync.OnceFunc(func() { close(begun) })
	var reported []Receipt
	var reading sync.WaitGroup
	reading.Go(func() {
		defer begin()
		for lines := bufio.NewScanner(out); lines.Scan(); {
			var r Receipt
			if n, err := fmt.Sscan(lines.Text(), &r.Sequence, &r.Hash); n == 2 && err == nil && len(r.Hash) == 64 {
				r.Station = station
				reported = append(reported, r)
				begin()
			} else if strings.HasPrefix(lines.Text(), "error") {
				t.Errorf("the writer of %s: %s", station, lines.Text())
			}
		}
	})
	return victim{cmd, begun, func() []Receipt { reading.Wait(); _ = cmd.Wait(); return reported }}
}

func kills(usual int) int {
	if os.Getenv("PADPROOF_LONG") != "" {
		return 200
	}
	return usual
}

// Writers killed at any moment lose no record that they reported, and write none
// twice; the ledger opens and verifies each time.
func TestKilledWriters(t *testing.T) {
	for name, usual := range map[string]int{"sqlite": 60, "postgres": 20} {
		t.Run(name, func(t *testing.T) {
			t.Parallel()
			where := ""
			if name == "sqlite" {
				where = inFile(t)
			} else {
				where = onServer(t)
			}
			killWriters(t, where, kills(usual))
		})
	}
}

func killWriters(t *testing.T, where string, count int) {
	random := rand.New(rand.NewPCG(417, 0))
	reported := map[string]Receipt{}
	const together = 2
	for round := range (count + together - 1) / together {
		var victims []victim
		for w := range together {
			victims = append(victims, start(t, where, fmt.Sprintf("bench%d", w), 1+6*w))
		}
		for _, v := range victims {
			if round%4 != 0 { // every fourth time they may die while they open the ledger
				<-v.begun
			}
			time.Sleep(time.Duration(random.IntN(60)) * time.Millisecond)
			if err := v.Process.Kill(); err != nil && !errors.Is(err, os.ErrProcessDone) {
				t.Fatal(err)
			}
		}
		for _, v := range victims {
			for _, r := range v.reported() {
				reported[r.String()] = r
			}
		}
		if !holds(t, where, reported) {
			t.Fatalf("after round %d", round)
		}
	}
	if len(reported) < count {
		t.Errorf("%d writers reported %d records: too few to show anything", count, len(reported))
	}
	t.Logf("%d writers killed, %d records reported", count, len(reported))
}

// holds looks whether a ledger is sound, has every record that was reported, and no
// unit twice.
func holds(t *testing.T, where string, reported map[string]Receipt) bool {
	t.Helper()
	ctx := context.Background()
	l, err := OpenWith(ctx, where, Options{})
	if err != nil {
		t.Error(err)
		return false
	}
	defer func() { _ = l.Close() }()
	v, err := l.Verify(ctx)
	if err != nil || len(v.Faults) > 0 {
		t.Errorf("Verify = %+v, %v, want no faults", v, err)
		return false
	}
	there, units := map[string]string{}, map[string]bool{}
	err = l.Each(ctx, Filter{}, func(r Row, _ []byte) error {
		if units[r.Unit] {
			t.Errorf("%s is there twice", r.Unit)
		}
		units[r.Unit] = true
		there[r.Receipt.String()] = r.Hash
		return nil
	})
	if err != nil {
		t.Error(err)
	}
	for name, r := range reported {
		if there[name] != r.Hash {
			t.Errorf("%s was reported with the hash %s, and is there with %q", name, r.Hash, there[name])
		}
	}
	return !t.Failed()
}
