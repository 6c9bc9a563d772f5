package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"strings"
	"syscall"
	"time"

	"github.com/spf13/cobra"

	"padproof/cmd/padproof/internal/arrival"
	"padproof/cmd/padproof/internal/lot"
	"padproof/cmd/padproof/internal/proof"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/rigcheck"
	"padproof/cmd/padproof/internal/sheet"
	"padproof/cmd/padproof/internal/unit"
)

// A watching is one run of watch.
type watching struct {
	watchFlags
	folder   string
	out, err io.Writer
	asJSON   bool

	arrivals *arrival.Watcher
	named    *sheet.Lot    // lot.toml
	shared   *proof.Shared // of the shared files as they are
	sharedOf string        // their fingerprint

	book  book
	open  func() (book, error) // opens the ledger anew
	pages *pages
	gate  *rigcheck.Gate // holds units back while the bench is not in order

	rows     func(*result.LotRow) error
	status   *statusLine
	away     trouble // of the folder
	stuck    trouble // of the ledger
	saidTest bool    // that simulated results are not recorded
	saidPad  bool    // that there is no drawing
	waiting  []arrival.Waiting
	count    watchCount
}

// watchCount is what has become of units.
type watchCount struct{ passed, failed, unproven, notChecked, known int }

func newWatching(cmd *cobra.Command, folder string, f watchFlags, b book) *watching {
	w := &watching{watchFlags: f, folder: folder, out: coloured(cmd.OutOrStdout()), err: cmd.ErrOrStderr(), asJSON: wantsJSON(cmd),
		named: &sheet.Lot{}, shared: &proof.Shared{}, book: b, status: newStatusLine(cmd.ErrOrStderr()), gate: &rigcheck.Gate{}}
	o := arrival.Options{Settle: f.settle, Expect: f.expect, NeedsDrawing: f.pad == "", AsIs: f.once, Channels: w.readLotSheet,
		FullEvery: max(time.Second, 2*f.settle)}
	if f.once {
		o.Patience = f.settle
	}
	w.arrivals = arrival.New(folder, o)
	w.pages = &pages{folder: f.reports, owed: map[string]owedPage{}}
	return w
}

// readLotSheet reads lot.toml for the watcher.
func (w *watching) readLotSheet(path string) (map[int]string, error) {
	named, err := sheet.ReadLot(path)
	if err != nil {
		return nil, err
	}
	w.named = named
	return named.Channels, nil
}

// run watches until ctx ends, or with --once until all that is there was looked
// at.
func (w *watching) run(ctx context.Context) error {
	var begun time.Time // when the first look was over
	for ctx.Err() == nil {
		lookedAt := time.Now()
		seen, err := w.look()
		took := time.Since(lookedAt)
		if begun.IsZero() {
			begun = lookedAt.Add(took)
		}
		if err != nil && w.once {
			return err
		}
		busy := false
		if seen != nil {
			if busy, err = w.take(ctx, seen); err != nil {
				return w.ended(ctx, err)
			}
			if w.once && !busy && w.enough(seen, lookedAt.Sub(begun)) {
				return w.endOnce(ctx, seen)
			}
		}
		w.settlePages(ctx)
		if !busy {
			sleep(ctx, w.pause(took))
		}
	}
	return w.ended(ctx, ctx.Err())
}

// enough reports whether all that is there has had time to settle, so long after
// the first look. What lot.toml names is seen only when that has settled itself.
func (w *watching) enough(seen *arrival.Seen, since time.Duration) bool {
	return since >= w.settle && len(seen.Settling) == 0 || since >= 3*w.settle
}

// pause is how long to wait for the next look: so long that looking takes a fifth
// of the time at most.
func (w *watching) pause(lookTook time.Duration) time.Duration {
	const most = time.Second
	return max(min(w.settle/2, most), 4*lookTook)
}

func sleep(ctx context.Context, d time.Duration) {
	t := time.NewTimer(d)
	defer t.Stop()
	select {
	case <-ctx.Done():
	case <-t.C:
	}
}

// look looks at the folder once and tells what belongs to no unit.
func (w *watching) look() (*arrival.Seen, error) {
	seen, err := w.arrivals.Look()
	if err != nil {
		w.say(w.away.begins(err, "waiting for it to come back"))
		return nil, err
	}
	w.say(w.away.ends(w.folder + " can be read again"))
	for _, fault := range seen.Faults {
		w.status.clear()
		printError(w.err, describe(fault))
		if w.once {
			w.count.notChecked++
		}
	}
	for _, text := range seen.Strays {
		w.say("padproof: note: " + text)
	}
	if seen.Shared != w.sharedOf { // what other shared files have shown is of no use any more
		w.shared, w.sharedOf = &proof.Shared{}, seen.Shared
	}
	w.waiting = seen.Waiting
	for _, u := range seen.Waiting {
		if strings.Contains(u.Lacks, "pad.toml") && !w.saidPad {
			w.saidPad = true
			w.say("padproof: note: unit " + u.Serial + " waits for a drawing: put pad.toml into " + w.folder + ", or name one with --pad")
		}
	}
	w.status.show(fmt.Sprintf("watching: %d checked, %d being written, %d wait for a file", w.count.checked(), len(seen.Settling), len(seen.Waiting)))
	return seen, nil
}

// batch is how many units are checked between two looks, for each worker.
const batch = 8

// take checks the units that are due, or the first of many, and reports whether
// there were any.
func (w *watching) take(ctx context.Context, seen *arrival.Seen) (busy bool, err error) {
	due := seen.Due[:min(len(seen.Due), batch*w.workers)]
	var all []*unit.Unit
	byUnit := map[*unit.Unit]pending{}
	for _, a := range due {
		p, err := w.ready(ctx, a)
		if err != nil {
			return true, err
		}
		if p != nil {
			all = append(all, p.unit)
			byUnit[p.unit] = *p
		}
	}
	if len(all) == 0 {
		return len(due) > 0, nil
	}
	return true, lot.Run(ctx, all, w.workers, proof.Options{Shared: w.shared, Curves: w.pages.folder != ""}, func(o lot.Outcome) error {
		return w.took(ctx, byUnit[o.Unit], o)
	})
}

// took takes in what became of a unit: it is recorded first, then reported.
func (w *watching) took(ctx context.Context, p pending, o lot.Outcome) error {
	if !w.arrivals.Unchanged(p.arrived) || o.Answer != nil && unchanged(p.sheets, p.unit) != nil {
		return nil // what was read may be half of this and half of that; it is due again
	}
	if o.Answer == nil {
		return w.notChecked(p, o.Err)
	}
	if err := w.holdToRigCheck(ctx, p.unit, o.Answer); err != nil {
		return err
	}
	known, err := w.record(ctx, p, o.Answer)
	var refused *refusedError
	switch {
	case errors.As(err, &refused):
		return w.notChecked(p, refused.err)
	case err != nil:
		return err
	case known:
		w.count.add(o.Answer.Verdict, true)
		w.arrivals.Done(p.arrived)
		return nil
	}
	if err := w.pages.add(ctx, w, o.Answer); err != nil {
		w.arrivals.Failed(p.arrived, err.Error(), tryAgain)
		return nil
	}
	o.Answer.Curves = nil // the page has them
	if err := w.print(o); err != nil {
		return err
	}
	w.count.add(o.Answer.Verdict, false)
	w.arrivals.Done(p.arrived)
	return nil
}

// tryAgain is how long to wait before something that a system call refused is
// tried once more.
const tryAgain = 10 * time.Second

// notChecked tells of a unit that could not be checked. What a system call refused
// may go through later.
func (w *watching) notChecked(p pending, err error) error {
	if err == nil {
		err = errors.New("there is no answer")
	}
	pause := time.Duration(0)
	var refused syscall.Errno
	if errors.As(err, &refused) && !errors.Is(err, os.ErrNotExist) {
		pause = tryAgain
	}
	if !w.arrivals.Failed(p.arrived, describe(err).Error(), pause) {
		return nil
	}
	w.count.notChecked++
	return w.print(lot.Outcome{Unit: p.unit, Err: err})
}
