package lot

import (
	"context"
	"fmt"
	"sync"

	"padproof/cmd/padproof/internal/proof"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/unit"
)

// An Outcome is what became of one unit: an answer, or why there is none.
type Outcome struct {
	Unit   *unit.Unit
	Answer *result.Answer // nil where the unit could not be checked
	Err    error
}

// ahead is how many units may be finished before the one that all wait for: a
// single slow unit holds the workers up only beyond that.
const ahead = 64

// Run checks units, so many at a time, and hands each outcome to each, in the
// order of the units and one at a time. An error of each ends the run, and so
// does the end of ctx; units that are being checked then are dropped. No goroutine
// is left when it returns. Where o.Err is nil, the end of ctx ends the reading of
// takes as well, so that long ones keep nobody waiting.
func Run(ctx context.Context, units []*unit.Unit, workers int, o proof.Options, each func(Outcome) error) error {
	if o.Shared == nil {
		o.Shared = &proof.Shared{}
	}
	workers = max(1, min(workers, len(units)))
	o.Workers = max(1, 2/workers)
	ctx, stop := context.WithCancel(ctx)
	defer stop()
	if o.Err == nil {
		o.Err = ctx.Err
	}
	slots := make([]chan Outcome, len(units))
	for i := range slots {
		slots[i] = make(chan Outcome, 1)
	}
	next, room := make(chan int), make(chan struct{}, ahead)
	var wait sync.WaitGroup
	defer wait.Wait()
	defer stop()
	for range workers {
		wait.Go(func() {
			for i := range next {
				slots[i] <- one(units[i], o)
			}
		})
	}
	wait.Go(func() {
		defer close(next)
		for i := range units {
			select {
			case room <- struct{}{}:
			case <-ctx.Done():
				return
			}
			select {
			case next <- i:
			case <-ctx.Done():
				return
			}
		}
	})
	for i := range units {
		select {
		case done := <-slots[i]:
			if ctx.Err() != nil { // it may be half done
				return ctx.Err()
			}
			<-room
			if err := ctx.Err(); err != nil {
				return err // the unit may have been dropped half-way
			}
			if err := each(done); err != nil {
				return err
			}
		case <-ctx.Done():
			return ctx.Err()
		}
	}
	return nil
}

// one checks a unit. A fault of the program is that unit's alone.
func one(u *unit.Unit, o proof.Options) (out Outcome) {
	out.Unit = u
	defer func() {
		if r := recover(); r != nil {
			out.Answer, out.Err = nil, fmt.Errorf("a fault in padproof itself: %v", r)
		}
	}()
	if out.Err = u.Ready(); out.Err == nil {
		out.Answer, out.Err = proof.Check(u, o)
	}
	return out
}
