package ledger

import "fmt"

// A walk goes along one station's chain.
type walk struct {
	v     *Verification
	last  Receipt // the record before; its hash is what its bytes give
	after string  // the hash that it was stored with
	loose bool    // that record was none of its place, which was said: nothing follows from it
}

func (w *walk) fault(r Row, kind, format string, args ...any) {
	w.v.add(Fault{Station: r.Station, Sequence: r.Sequence, Fault: kind,
		Text: r.Receipt.String() + " " + fmt.Sprintf(format, args...)})
}

// step holds one record against itself and against the one before.
func (w *walk) step(r Row, text []byte) {
	w.v.Records++
	before := w.last
	w.last = Receipt{Station: r.Station, Sequence: r.Sequence, Hash: hashOf(text)}
	stored := w.after
	w.after = r.Hash
	loose := w.loose
	w.loose = false
	e, err := decode(text)
	switch {
	case err != nil:
		w.fault(r, "altered", "was altered: its body cannot be read (%v)", err)
		return
	case r.Hash != e.Hash:
		w.fault(r, "altered", "was altered: it does not have its hash any more")
	case e.Station != r.Station || e.Sequence != r.Sequence:
		w.moved(r, e)
		w.loose = true
		return
	default:
		if name := differs(r, e); name != "" {
			w.fault(r, "altered", "was altered: its column %s is not what its body says", name)
		}
	}
	switch {
	case r.Sequence != before.Sequence+1:
		w.gap(r, before.Sequence)
	case !loose && e.Previous != before.Hash && e.Previous != stored: // where stored fits, the fault is the record's before and was said there
		w.fault(r, "broken", "does not carry the hash of the record before it: that one was altered or replaced, or this one was")
	}
}

// moved tells a record under another's number from one that is there twice.
func (w *walk) moved(r Row, e Entry) {
	if e.Station == r.Station && e.Sequence < r.Sequence {
		w.fault(r, "doubled", "is %s once more, or was moved here from there", e.Receipt)
		return
	}
	w.fault(r, "moved", "is %s in another's place", e.Receipt)
}

func (w *walk) gap(r Row, before int64) {
	switch missing := r.Sequence - before - 1; {
	case missing == 1:
		w.fault(r, "missing", "follows a gap: %d is missing", before+1)
	case missing > 1:
		w.fault(r, "missing", "follows a gap: %d to %d are missing", before+1, r.Sequence-1)
	default:
		w.fault(r, "doubled", "is there twice")
	}
}

// differs names the first column that does not repeat the body.
func differs(r Row, e Entry) string {
	for _, one := range []struct {
		name string
		same bool
	}{
		{"at_us", r.Time.Equal(e.Record.Time)}, {"kind", r.Kind == e.Record.Kind}, {"verdict", r.Verdict == e.Record.Verdict},
		{"unit", r.Unit == e.Record.Unit}, {"lot", r.Lot == e.Record.Lot}, {"drawing", r.Drawing.Name == e.Record.Drawing.Name},
		{"sheet", r.Drawing.SHA256 == e.Record.Drawing.SHA256}, {"operator", r.Operator == e.Record.Operator},
		{"simulated", r.Simulated == e.Record.Simulated}, {"takes", r.takes == TakesOf(e.Record.Answer)},
	} {
		if !one.same {
			return one.name
		}
	}
	return ""
}
