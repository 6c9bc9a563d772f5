package main

import (
	"context"

	"padproof/cmd/padproof/internal/ledger"
	"padproof/cmd/padproof/internal/rigcheck"
)

// rigGate is what each unit's answer goes through before it is shown or recorded:
// gate.Hold. The ledger is that of the flags or the environment, and is opened only
// if a bench asks for rig checks; done closes it.
func (f *recordFlags) rigGate() (gate *rigcheck.Gate, done func()) {
	gate = &rigcheck.Gate{}
	place := f.place()
	if place == "" {
		return gate, func() {}
	}
	station, unnamed := f.stationName()
	gate.Station = station
	var opened *ledger.Ledger
	gate.Open = func(ctx context.Context) (*ledger.Ledger, error) {
		if unnamed != nil {
			return nil, unnamed
		}
		var err error
		opened, err = openToLook(ctx, place)
		return opened, err
	}
	return gate, func() {
		if opened != nil {
			_ = opened.Close()
		}
	}
}
