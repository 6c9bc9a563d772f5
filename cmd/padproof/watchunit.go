package main

import (
	"context"

	"padproof/cmd/padproof/internal/arrival"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/unit"
)

// A pending unit is due, and what it was when it fell due.
type pending struct {
	arrived arrival.Unit
	unit    *unit.Unit
	sheets  []usedFile
}

// ready opens a unit that is due. It returns nil if the unit needs no check: it is
// in the ledger, or it cannot be opened, which is told.
func (w *watching) ready(ctx context.Context, a arrival.Unit) (*pending, error) {
	u, err := w.openUnit(a)
	if err != nil {
		return nil, w.notChecked(pending{arrived: a, unit: &unit.Unit{Serial: a.Serial}}, err)
	}
	p := &pending{arrived: a, unit: u}
	p.sheets, _ = sheetsOf(u) // one that cannot be read: the check will say why
	entry, err := w.recordedBefore(ctx, p)
	if err != nil || entry == nil {
		return p, err
	}
	w.count.add(entry.Record.Verdict, true)
	w.arrivals.Done(a)
	return nil, w.pages.mend(ctx, w, entry)
}

// openUnit finds the files of a unit that has arrived.
func (w *watching) openUnit(a arrival.Unit) (u *unit.Unit, err error) {
	switch a.Layout {
	case unit.FlatLot:
		u, err = unit.OpenSerial(a.Folder, a.Serial)
	case unit.ChannelLot:
		u, err = w.openChannel(a)
	default:
		u, err = unit.Open(a.Folder)
	}
	if err != nil {
		return nil, err
	}
	if w.pad != "" {
		u.PadFile, u.Inherited[w.pad] = w.pad, true
	}
	if w.rig != "" {
		u.RigFile, u.Inherited[w.rig] = w.rig, true
	}
	return u, nil
}

func (w *watching) openChannel(a arrival.Unit) (*unit.Unit, error) {
	found, err := unit.OpenLot(a.Folder, w.named.Channels)
	if err != nil {
		return nil, err
	}
	for _, u := range found.Units {
		if u.Channel == a.Channel && u.Serial == a.Serial {
			return u, nil
		}
	}
	return nil, &result.Error{File: a.Folder, Text: "lot.toml has changed"}
}
