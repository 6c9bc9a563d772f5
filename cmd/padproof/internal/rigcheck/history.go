package rigcheck

import (
	"context"
	"encoding/json"
	"strings"
	"time"

	"padproof/cmd/padproof/internal/ledger"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/sheet"
)

// Readings are the rig checks that a ledger keeps of a station, a rig and its
// reference pad, oldest first: the simulated ones, or the others. from leaves out
// what is older, as does the sheet's chart_from.
func Readings(ctx context.Context, l *ledger.Ledger, station string, rig *sheet.Rig, simulated bool, from time.Time) ([]Reading, error) {
	f := ledger.Filter{Station: strings.TrimSpace(station), Unit: rig.Reference.Serial, Kind: ledger.RigCheck, From: rig.Reference.ChartFrom}
	if from.After(f.From) {
		f.From = from
	}
	var all []Reading
	err := l.Each(ctx, f, func(row ledger.Row, body []byte) error {
		var stored struct{ Answer result.Answer }
		if row.Simulated != simulated || json.Unmarshal(body, &stored) != nil || stored.Answer.Rig != rig.Name {
			return nil
		}
		r := ReadingOf(&stored.Answer, row.Time)
		r.Operator, r.Record = row.Operator, row.Receipt.String()
		all = append(all, r)
		return nil
	})
	return all, err
}

// Again finds the reading that was made of the same take through the pad: an old
// recording says nothing of the bench as it is now. Nil where there is none.
func Again(readings []Reading, r Reading) *Reading {
	for i := range readings {
		if r.Through != "" && readings[i].Through == r.Through {
			return &readings[i]
		}
	}
	return nil
}
