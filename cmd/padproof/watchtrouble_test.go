package main

import (
	"bytes"
	"context"
	"os"
	"path/filepath"
	"strings"
	"sync"
	"testing"
	"time"

	"padproof/cmd/padproof/internal/ledger"
	"padproof/cmd/padproof/internal/lot"
	"padproof/cmd/padproof/internal/proof"
)

// A sickBook is a ledger that fails in its first calls.
type sickBook struct {
	*ledger.Ledger
	mu      sync.Mutex
	appends []error // of the calls of Append, in turn; then all is well
	written bool    // a failing Append writes all the same
	lists   []error
}

func (s *sickBook) next(of *[]error) error {
	s.mu.Lock()
	defer s.mu.Unlock()
	if len(*of) == 0 {
		return nil
	}
	err := (*of)[0]
	*of = (*of)[1:]
	return err
}

func (s *sickBook) List(ctx context.Context, f ledger.Filter, from ledger.Place, limit int) (*ledger.Page, error) {
	if err := s.next(&s.lists); err != nil {
		return nil, err
	}
	return s.Ledger.List(ctx, f, from, limit)
}

func (s *sickBook) Append(ctx context.Context, r ledger.Record) (ledger.Receipt, error) {
	if err := s.next(&s.appends); err != nil {
		if s.written {
			if _, err := s.Ledger.Append(ctx, r); err != nil {
				return ledger.Receipt{}, err
			}
		}
		return ledger.Receipt{}, err
	}
	return s.Ledger.Append(ctx, r)
}

// A safeBuffer may be written and read at once.
type safeBuffer struct {
	mu sync.Mutex
	bytes.Buffer
}

func (b *safeBuffer) Write(p []byte) (int, error) {
	b.mu.Lock()
	defer b.mu.Unlock()
	return b.Buffer.Write(p)
}

func (b *safeBuffer) String() string {
	b.mu.Lock()
	defer b.mu.Unlock()
	return b.Buffer.String()
}

// A bench is a watch in this process.
type bench struct {
	*watching
	out, err safeBuffer
	ledger   *ledger.Ledger
	lot      string
}

func benchWith(t *testing.T, sick *sickBook, change func(*watchFlags)) *bench {
	t.Helper()
	dir := t.TempDir()
	b := &bench{lot: filepath.Join(dir, "lot")}
	layLot(t, b.lot)
	write(t, filepath.Join(b.lot, "0417", "after.wav"), small(t, -26))
	var err error
	if b.ledger, err = ledger.Open(t.Context(), filepath.Join(dir, "line.db")); err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { _ = b.ledger.Close() })
	sick.Ledger = b.ledger
	f := watchFlags{settle: 30 * time.Millisecond, workers: 1, recording: recordFlags{station: "bench 1"}}
	if change != nil {
		change(&f)
	}
	cmd := newWatch()
	cmd.SetOut(&b.out)
	cmd.SetErr(&b.err)
	b.watching = newWatching(cmd, b.lot, f, sick)
	return b
}

// until runs the watch until something is so, and ends it as Ctrl-C does.
func (b *bench) until(t *testing.T, so func() bool) {
	t.Helper()
	ctx, stop := context.WithCancel(t.Context())
	defer stop()
	ended := make(chan error, 1)
	go func() { ended <- b.run(ctx) }()
	for late := time.Now().Add(20 * time.Second); !so(); time.Sleep(5 * time.Millisecond) {
		if time.Now().After(late) {
			t.Fatalf("waited in vain; printed:\n%ssaid:\n%s", b.out.String(), b.err.String())
		}
	}
	stop()
	if err := <-ended; err != nil {
		t.Errorf("watch ended with %v", err)
	}
}

func (b *bench) records(t *testing.T) int {
	t.Helper()
	page, err := b.ledger.List(t.Context(), ledger.Filter{}, ledger.Place{}, 100)
	if err != nil {
		t.Fatal(err)
	}
	return len(page.Rows)
}

// Whatever the ledger does, a unit is reported once, and only when it is recorded;
// it is recorded once, and what is wrong is said once.
func TestSickLedger(t *testing.T) {
	full := &ledger.Error{Where: "line.db", Reason: ledger.Full, Text: "the disk is full", Hint: "make room"}
	lost := &ledger.Error{Where: "line.db", Reason: ledger.Unknown, Text: "the server went away; it is not known whether the record was written"}
	for _, c := range []struct {
		name string
		sick *sickBook
		says string
	}{
		{"full disk", &sickBook{appends: []error{full, full}}, "the disk is full"},
		{"not known, and not written", &sickBook{appends: []error{lost}}, "not known"},
		{"not known, but written", &sickBook{appends: []error{lost}, written: true}, "not known"},
		{"away before it was asked", &sickBook{lists: []error{lost}}, "not known"},
	} {
		t.Run(c.name, func(t *testing.T) {
			t.Parallel()
			b := benchWith(t, c.sick, nil)
			b.until(t, func() bool { return strings.Contains(b.out.String(), "0417") })
			if n := b.records(t); n != 1 {
				t.Errorf("%d records, want 1", n)
			}
			if n := strings.Count(b.out.String(), "0417"); n != 1 {
				t.Errorf("0417 was printed %d times:\n%s", n, b.out.String())
			}
			said := b.err.String()
			if strings.Count(said, c.says) != 1 || !strings.Contains(said, "the ledger can be used again") {
				t.Errorf("said:\n%s\nwant %q once, and when it has passed", said, c.says)
			}
		})
	}
	t.Run("full until Ctrl-C", func(t *testing.T) {
		t.Parallel()
		b := benchWith(t, &sickBook{appends: []error{full, full, full, full, full, full}}, nil)
		b.until(t, func() bool { return strings.Contains(b.err.String(), "disk is full") })
		if b.records(t) != 0 || strings.Contains(b.out.String(), "0417") {
			t.Errorf("a unit that was not recorded was reported:\n%s", b.out.String())
		}
	})
	t.Run("refused for good", func(t *testing.T) {
		t.Parallel()
		b := benchWith(t, &sickBook{appends: []error{&ledger.Error{Reason: ledger.Refused, Text: "the serial is too long"}}}, nil)
		b.until(t, func() bool { return strings.Contains(b.out.String(), "too long") })
		if !strings.Contains(b.out.String(), "0417      not checked") {
			t.Errorf("printed:\n%s", b.out.String())
		}
	})
	t.Run("once", func(t *testing.T) {
		t.Parallel()
		b := benchWith(t, &sickBook{appends: []error{full}}, func(f *watchFlags) { f.once = true })
		if err := b.run(t.Context()); ledger.ReasonOf(err) != ledger.Full || b.out.String() != "" {
			t.Errorf("run = %v, printed %q, want the full disk and nothing printed", err, b.out.String())
		}
	})
}

// A page that cannot be written is written later, from the record; the unit is
// reported meanwhile.
func TestPageOwed(t *testing.T) {
	reports := filepath.Join(t.TempDir(), "pages")
	b := benchWith(t, &sickBook{}, func(f *watchFlags) { f.reports = reports })
	b.until(t, func() bool { return strings.Contains(b.out.String(), "0417") })
	said := b.err.String()
	if !strings.Contains(said, "pages wait until they can be written") || !strings.Contains(said, "pages that could not be written to "+reports+": 1") {
		t.Errorf("said:\n%s", said)
	}
	if err := os.Mkdir(reports, 0o755); err != nil {
		t.Fatal(err)
	}
	b.pages.next = time.Time{}
	page := filepath.Join(reports, "0417.html")
	b.until(t, func() bool { return strings.Contains(b.err.String(), "all pages are written") })
	text, err := os.ReadFile(page)
	if err != nil || !bytes.Contains(text, []byte("20.0")) {
		t.Errorf("page: %v\n%s", err, text)
	}
	if b.records(t) != 1 {
		t.Errorf("%d records, want 1", b.records(t))
	}
}

// A file that is replaced while its unit is checked spoils no record: what was read
// is dropped, and the unit is checked as it is then.
func TestReplacedMeanwhile(t *testing.T) {
	b := benchWith(t, &sickBook{}, nil)
	for range 3 {
		if _, err := b.look(); err != nil {
			t.Fatal(err)
		}
		time.Sleep(b.settle)
	}
	seen, err := b.look()
	if err != nil || len(seen.Due) != 1 {
		t.Fatalf("due: %v, %v, want 0417", seen, err)
	}
	p, err := b.ready(t.Context(), seen.Due[0])
	if err != nil {
		t.Fatal(err)
	}
	answer, err := proof.Check(p.unit, proof.Options{})
	if err != nil {
		t.Fatal(err)
	}
	write(t, filepath.Join(b.lot, "0417", "after.wav"), small(t, -16))
	if err := b.took(t.Context(), *p, lot.Outcome{Unit: p.unit, Answer: answer}); err != nil || b.records(t) != 0 || b.out.String() != "" {
		t.Errorf("took = %v, %d records, printed %q, want nothing of it", err, b.records(t), b.out.String())
	}
	b.until(t, func() bool { return strings.Contains(b.out.String(), "0417") })
	if !strings.Contains(b.out.String(), "FAIL") || b.records(t) != 1 {
		t.Errorf("%d records, printed:\n%s\nwant the one of the take that is there", b.records(t), b.out.String())
	}
}

// What shared files have shown is kept while they are what they were, and let go
// when one is recorded anew: memory does not grow with the days.
func TestSharedLetGo(t *testing.T) {
	b := benchWith(t, &sickBook{}, nil)
	b.until(t, func() bool { return strings.Contains(b.out.String(), "0417") })
	kept := b.shared
	write(t, filepath.Join(b.lot, "0418", "after.wav"), small(t, -26))
	b.until(t, func() bool { return strings.Contains(b.out.String(), "0418") })
	if b.shared != kept {
		t.Error("what the shared files have shown was let go though they are as they were")
	}
	write(t, filepath.Join(b.lot, "before.wav"), small(t, -7))
	write(t, filepath.Join(b.lot, "0419", "after.wav"), small(t, -27))
	b.until(t, func() bool { return strings.Contains(b.out.String(), "0419") })
	if b.shared == kept {
		t.Error("what the old before has shown is kept")
	}
	if b.records(t) != 3 {
		t.Errorf("%d records, want 3", b.records(t))
	}
}

// A unit in the ledger is not even read again after a restart because a shared file
// has changed since.
func TestNotReadAgain(t *testing.T) {
	b := benchWith(t, &sickBook{}, nil)
	b.until(t, func() bool { return strings.Contains(b.out.String(), "0417") })
	write(t, filepath.Join(b.lot, "before.wav"), small(t, -7))
	cmd := newWatch()
	cmd.SetErr(&b.err)
	again := newWatching(cmd, b.lot, b.watchFlags, b.book)
	for range 10 {
		seen, err := again.look()
		if err != nil {
			t.Fatal(err)
		}
		for _, a := range seen.Due {
			if p, err := again.ready(t.Context(), a); p != nil || err != nil {
				t.Errorf("%s is to be checked again (%v)", a.Serial, err)
			}
		}
		if again.count.known == 1 {
			return
		}
		time.Sleep(again.settle)
	}
	t.Error("0417 was not found in the ledger")
}

// A unit without a drawing, or without a take, waits and is named.
func TestWaits(t *testing.T) {
	b := benchWith(t, &sickBook{}, nil)
	if err := os.Remove(filepath.Join(b.lot, "pad.toml")); err != nil {
		t.Fatal(err)
	}
	b.until(t, func() bool { return strings.Contains(b.err.String(), "0417 waits for a drawing") })
	said := b.err.String()
	if b.out.String() != "" || strings.Count(said, "waits for a drawing") != 1 || !strings.Contains(said, "padproof: waiting: 0417 for pad.toml") {
		t.Errorf("printed %q, said:\n%s", b.out.String(), said)
	}
	write(t, filepath.Join(b.lot, "pad.toml"), []byte(smallPad))
	b.until(t, func() bool { return strings.Contains(b.out.String(), "0417      PASS") })
}

// The line that is written over is taken away before anything is printed.
func TestStatusLine(t *testing.T) {
	var screen bytes.Buffer
	s := &statusLine{w: &screen}
	s.show("a long line")
	s.show("short")
	s.clear()
	s.clear()
	if got, want := screen.String(), "\rpadproof: a long line\rpadproof: short      \r               \r"; got != want {
		t.Errorf("screen: %q, want %q", got, want)
	}
	if newStatusLine(&screen).show("x"); strings.Contains(screen.String(), "x") {
		t.Error("a status line on what is no terminal")
	}
}
