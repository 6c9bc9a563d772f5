package ledger

import (
	"context"
	"fmt"
)

// A Fault is one thing that is wrong with a ledger.
type Fault struct {
	Station  string `json:"station"`
	Sequence int64  `json:"sequence"` // the record it was seen at; 0 where it is none
	Fault    string `json:"fault"`    // altered, missing, moved, doubled, broken, cut-off
	Text     string `json:"text"`
}

// A Verification is what [Ledger.Verify] found. Heads are the newest records.
type Verification struct {
	Records int64     `json:"records"`
	Heads   []Receipt `json:"heads"`
	Faults  []Fault   `json:"faults"`
}

// maxFaults bounds how many faults are named.
const maxFaults = 1000

// Verify reads every record and holds it against its hash, its columns and the
// record before it. Heads kept elsewhere must be found too: of a head given with
// its station and sequence, or with its hash alone, it is told where the chain was
// cut off. Memory does not grow with the ledger.
func (l *Ledger) Verify(ctx context.Context, heads ...Receipt) (*Verification, error) {
	v := &Verification{Heads: []Receipt{}, Faults: []Fault{}}
	wanted := map[string]bool{}
	for _, h := range heads {
		wanted[h.Hash] = false
	}
	all, err := l.Heads(ctx)
	if err != nil {
		return nil, err
	}
	for _, h := range all {
		head, err := l.verifyStation(ctx, h.Station, v, wanted)
		if err != nil {
			return nil, err
		}
		v.Heads = append(v.Heads, head)
	}
	for _, h := range heads {
		if !wanted[h.Hash] {
			v.add(cutOff(h, v.Heads))
		}
	}
	return v, nil
}

func (v *Verification) add(f Fault) {
	if len(v.Faults) < maxFaults {
		v.Faults = append(v.Faults, f)
	}
}

// cutOff is the fault of a head that is in no chain.
func cutOff(head Receipt, now []Receipt) Fault {
	f := Fault{Station: head.Station, Sequence: head.Sequence, Fault: "cut-off"}
	if head.Station == "" {
		f.Text = "no record has the hash " + head.Hash + ": the end of a station's chain was cut off, or that record was altered"
		return f
	}
	for _, h := range now {
		switch {
		case h.Station != head.Station:
		case h.Sequence < head.Sequence:
			f.Text = fmt.Sprintf("the chain of %s ends at %d: %d with the hash %s was cut off", head.Station, h.Sequence, head.Sequence, head.Hash)
			return f
		default:
			f.Fault = "broken"
			f.Text = fmt.Sprintf("%s was once there with the hash %s: it was altered, or the chain was written anew", head, head.Hash)
			return f
		}
	}
	f.Text = fmt.Sprintf("no record of %s is left; it was once at %d", head.Station, head.Sequence)
	return f
}

// verifyStation walks along one chain.
func (l *Ledger) verifyStation(ctx context.Context, station string, v *Verification, wanted map[string]bool) (Receipt, error) {
	w := walk{v: v, last: Receipt{Station: station}, after: ""}
	rows, err := l.db.QueryContext(ctx, l.engine.text(sqlChain), station)
	if err != nil {
		return w.last, l.engine.explain(err)
	}
	defer func() { _ = rows.Close() }()
	for rows.Next() {
		var r Row
		var text []byte
		if err := rows.Scan(append(r.fields(), &text)...); err != nil {
			return w.last, l.engine.explain(err)
		}
		w.step(r, text)
		if _, asked := wanted[w.last.Hash]; asked {
			wanted[w.last.Hash] = true
		}
	}
	return w.last, l.engine.explain(rows.Err())
}
