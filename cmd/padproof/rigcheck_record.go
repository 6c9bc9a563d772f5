package main

import (
	"context"
	"time"

	"padproof/cmd/padproof/internal/ledger"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/rigcheck"
	"padproof/cmd/padproof/internal/sheet"
	"padproof/cmd/padproof/internal/unit"
)

// enter holds a reading against those in the ledger and records it. Where the
// recording alone goes wrong there is a chart beside the error.
func (f *rigCheckFlags) enter(ctx context.Context, u *unit.Unit, rig *sheet.Rig, known *rigcheck.Known, answer *result.Answer) (*result.RigCheck, error) {
	now := time.Now().UTC().Truncate(time.Microsecond)
	reading := rigcheck.ReadingOf(answer, now)
	reading.Operator = f.recording.operator
	place, station, err := f.where()
	if err != nil {
		return nil, err
	}
	open := f.recording.open
	if f.trial {
		open = openToLook
	}
	var before []rigcheck.Reading
	l, opening := open(ctx, place)
	if opening == nil {
		defer func() { _ = l.Close() }()
		if before, err = f.before(ctx, l, station, u, rig, answer.Simulated, reading); err != nil {
			return nil, err
		}
	}
	chart, err := chartWith(rig, known, before, reading)
	if err != nil {
		return nil, err
	}
	chart.Station, chart.Simulated, chart.Answer, chart.Ledger = station, answer.Simulated, answer, shownPlace(l, place)
	rigcheck.Enter(answer, chart)
	switch {
	case f.trial && (opening == nil || ledger.ReasonOf(opening) == ledger.Missing):
		chart.Notes = append(chart.Notes, "a trial: nothing was recorded")
		return chart, nil
	case opening != nil:
		return chart, opening
	}
	receipt, err := f.write(ctx, l, now, answer)
	if err != nil {
		return chart, err
	}
	answer.Recorded = recordedOf(receipt)
	chart.Readings[len(chart.Readings)-1].Record = receipt.String()
	return chart, nil
}

// before are the readings in the ledger; the one just made must not be of them.
func (f *rigCheckFlags) before(ctx context.Context, l *ledger.Ledger, station string, u *unit.Unit, rig *sheet.Rig, simulated bool, reading rigcheck.Reading) ([]rigcheck.Reading, error) {
	before, err := rigcheck.Readings(ctx, l, station, rig, simulated, time.Time{})
	if err != nil {
		return nil, err
	}
	if again := rigcheck.Again(before, reading); again != nil {
		return nil, &result.Error{File: u.Folder, Text: "this recording is in the ledger already, as " + again.Record + " of " + again.At.Format("2006-01-02 15:04") + " UTC",
			Hint: "record the reference pad anew: an old recording says nothing of the bench as it is now"}
	}
	return before, nil
}

// shownPlace is a ledger's place without a password.
func shownPlace(l *ledger.Ledger, place string) string {
	switch {
	case l != nil:
		return l.Where()
	case ledger.IsServer(place):
		return ""
	}
	return place
}

// chartWith is the chart with one more reading, which is the last.
func chartWith(rig *sheet.Rig, known *rigcheck.Known, before []rigcheck.Reading, reading rigcheck.Reading) (*result.RigCheck, error) {
	for _, r := range before {
		if r.At.After(reading.At) {
			return nil, &result.Error{Text: "the ledger holds a rig check of " + r.At.Format("2006-01-02 15:04") + " UTC, which is later than now", Hint: "set this machine's clock"}
		}
	}
	if ref := rig.Reference; ref.ChartFrom.After(reading.At) {
		return nil, &result.Error{File: rig.File, Line: rig.Line("reference.chart_from"), Text: "reference.chart_from lies ahead", Hint: "write the day on which the bench was mended"}
	}
	return rigcheck.ChartOf(rig, known, append(before, reading), reading.At)
}

// where is the ledger that is used, and the station.
func (f *rigCheckFlags) where() (place, station string, err error) {
	if place, err = f.recording.placeOrDefault(); err != nil {
		return "", "", err
	}
	station, err = f.recording.stationName()
	return place, station, err
}

func openToLook(ctx context.Context, place string) (*ledger.Ledger, error) {
	return ledger.OpenWith(ctx, place, ledger.Options{ReadOnly: true})
}

func (f *rigCheckFlags) write(ctx context.Context, l *ledger.Ledger, now time.Time, answer *result.Answer) (ledger.Receipt, error) {
	r, err := f.recording.recordOf(answer, nil)
	if err != nil {
		return ledger.Receipt{}, err
	}
	r.Kind, r.Time = ledger.RigCheck, now
	return l.Append(ctx, r)
}
