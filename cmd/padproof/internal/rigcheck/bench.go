package rigcheck

import (
	"context"
	"errors"
	"fmt"
	"os"
	"slices"
	"time"

	"padproof/cmd/padproof/internal/ledger"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/sheet"
)

// A benchKey tells a sheet, as it was at a time, and the kind of readings.
type benchKey struct {
	file      string
	size      int64
	at        time.Time
	simulated bool
}

// A bench is what is known of one rig.
type bench struct {
	rig      *sheet.Rig
	known    *Known
	readings []Reading
	state    *result.RigCheck
	judged   time.Time // when state was so
	until    time.Time // when it ends by age; zero: never
}

// reopenAfter is how long a ledger that could not be opened is left alone.
const reopenAfter = 10 * time.Second

// bench reads a sheet, once while it stays as it is.
func (g *Gate) bench(file string, simulated bool) (*bench, error) {
	info, err := os.Stat(file)
	if err != nil {
		return nil, err
	}
	key := benchKey{file, info.Size(), info.ModTime(), simulated}
	if b := g.benches[key]; b != nil {
		return b, nil
	}
	b := &bench{}
	if b.rig, err = sheet.ReadRig(file); err != nil {
		return nil, err
	}
	if b.rig.Reference != nil {
		if b.known, err = KnownOf(b.rig); err != nil {
			return nil, err
		}
	}
	if g.benches == nil {
		g.benches = map[benchKey]*bench{}
	}
	g.benches[key] = b
	return b, nil
}

// stateOf is the state of a bench at a time.
func (g *Gate) stateOf(ctx context.Context, b *bench, simulated bool, at time.Time) (*result.RigCheck, error) {
	if g.Open == nil {
		return nil, errors.New("no ledger is named that holds its rig checks: name it with --ledger")
	}
	l, err := g.open(ctx, at)
	if ledger.ReasonOf(err) == ledger.Missing {
		return ChartOf(b.rig, b.known, nil, at)
	}
	if err != nil {
		return nil, fmt.Errorf("its rig checks cannot be read: %w", err)
	}
	more, err := g.newer(ctx, l, b, simulated)
	if err != nil {
		return nil, fmt.Errorf("its rig checks cannot be read: %w", err)
	}
	if more || !b.holds(at) {
		if b.state, err = ChartOf(b.rig, b.known, b.readings, at); err != nil {
			return nil, err
		}
		b.judged, b.until = at, holdsTo(b.state, hours(b.rig.Reference.EveryHours))
	}
	return b.state, nil
}

func (g *Gate) open(ctx context.Context, at time.Time) (*ledger.Ledger, error) {
	if g.ledger != nil {
		return g.ledger, nil
	}
	if g.failed != nil && at.Before(g.retry) {
		return nil, g.failed
	}
	g.ledger, g.failed = g.Open(ctx)
	g.retry = at.Add(reopenAfter)
	return g.ledger, g.failed
}

// newer takes in the readings that came since, and says whether there are any.
func (g *Gate) newer(ctx context.Context, l *ledger.Ledger, b *bench, simulated bool) (bool, error) {
	var from time.Time
	if n := len(b.readings); n > 0 {
		from = b.readings[n-1].At
	}
	found, err := Readings(ctx, l, g.Station, b.rig, simulated, from)
	before := len(b.readings)
	for _, r := range found {
		if !slices.ContainsFunc(b.readings, func(known Reading) bool { return known.Record == r.Record }) {
			b.readings = append(b.readings, r)
		}
	}
	return len(b.readings) > before, err
}

// holds says that the state worked out last is still that at a time: nothing but
// age, or a reading dated later, changes it.
func (b *bench) holds(at time.Time) bool {
	if b.state == nil || at.Before(b.judged) || len(b.state.Readings) != len(b.readings) {
		return false
	}
	return b.until.IsZero() || !at.After(b.until)
}
