package rigcheck

import (
	"context"
	"errors"
	"fmt"
	"sync"
	"time"

	"padproof/cmd/padproof/internal/ledger"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/unit"
	"padproof/compare"
)

// A Gate keeps units from passing on a bench that is not shown to be in order,
// where the bench's sheet asks for that (required in [reference]). It looks into
// the ledger for each unit, so that a rig check made meanwhile counts. It may be
// used from several goroutines at once.
type Gate struct {
	// Open opens the ledger, when it is first needed; nil where none is named.
	Open    func(context.Context) (*ledger.Ledger, error)
	Station string

	mu      sync.Mutex
	ledger  *ledger.Ledger
	failed  error     // of Open
	retry   time.Time // when to open again
	benches map[benchKey]*bench
	held    []string // reasons, in the order of their coming
	count   map[string]int
}

// Hold turns a PASS into UNPROVEN, with the reason and what to do, where the sheet
// of the unit's bench asks for a rig check and the last one at the time is missing,
// too old, out, or proves nothing. A FAIL stays one, and so does an UNPROVEN; they
// get a warning. The rig check that held is noted in the answer. A nil answer is
// left alone.
//
// An error says that the ledger could not be read; the answer is then held back
// as well.
func (g *Gate) Hold(ctx context.Context, u *unit.Unit, a *result.Answer, at time.Time) error {
	if a == nil || u.RigFile == "" {
		return nil
	}
	g.mu.Lock()
	defer g.mu.Unlock()
	b, err := g.bench(u.RigFile, a.Simulated)
	if err != nil {
		g.holdBack(a, &result.RigHeld{State: result.RigMissing, Text: "what the bench's sheet asks for cannot be read: " + err.Error()})
		return nil
	}
	if b.rig.Reference == nil || !b.rig.Reference.Required {
		return nil
	}
	state, err := g.stateOf(ctx, b, a.Simulated, at)
	if err != nil {
		state = &result.RigCheck{State: result.RigMissing, Text: err.Error()}
	}
	held := &result.RigHeld{State: state.State, Text: state.Text, Drifting: state.Drifting}
	if n := len(state.Readings); n > 0 {
		held.Time, held.Record = state.Readings[n-1].Time, state.Readings[n-1].Record
	}
	g.holdBack(a, held)
	var away *ledger.Error
	if errors.As(err, &away) {
		return err
	}
	return nil
}

// Ruling says whether the state of a bench keeps its units from passing, and why;
// "" where it does not.
func Ruling(held *result.RigHeld) string {
	if held.State == result.RigOK {
		return ""
	}
	return "the bench is not shown to be in order: " + held.Text
}

// holdBack enters the state of the bench into an answer.
func (g *Gate) holdBack(a *result.Answer, held *result.RigHeld) {
	a.RigCheck = held
	reason := Ruling(held)
	switch {
	case reason == "" && held.Drifting:
		g.note("the bench: " + held.Text)
	case reason == "":
	case a.Verdict == string(compare.Pass):
		a.Verdict, a.Reason = string(compare.Unproven), reason
		g.note(reason)
	default:
		a.Warnings = append(a.Warnings, reason)
	}
}

func (g *Gate) note(text string) {
	if g.count == nil {
		g.count = map[string]int{}
	}
	if g.count[text] == 0 {
		g.held = append(g.held, text)
	}
	g.count[text]++
}

// Notes say what the gate kept back, and how many units, for the end of a lot.
func (g *Gate) Notes() []string {
	g.mu.Lock()
	defer g.mu.Unlock()
	notes := []string{}
	for _, text := range g.held {
		notes = append(notes, fmt.Sprintf("%s (%s)", text, units(g.count[text])))
	}
	return notes
}

func units(n int) string {
	if n == 1 {
		return "1 unit"
	}
	return fmt.Sprintf("%d units", n)
}
