package main

import (
	"context"
	"os"

	"github.com/spf13/cobra"

	"padproof/cmd/padproof/internal/ledger"
	"padproof/cmd/padproof/internal/result"
)

// Where the environment says what flags leave out.
const (
	ledgerVariable  = "PADPROOF_LEDGER"
	stationVariable = "PADPROOF_STATION"
)

// recordFlags are those of every command that records.
type recordFlags struct {
	ledger, station, operator, lot string
	simulated                      bool
}

// addTo adds the flags to a command.
func (f *recordFlags) addTo(cmd *cobra.Command) {
	flags := cmd.Flags()
	flags.StringVar(&f.ledger, "ledger", "", "record the check in this ledger, a file or postgres://USER@HOST/DATABASE; "+ledgerVariable+" if left out")
	flags.StringVar(&f.station, "station", "", "the bench's name in the ledger; "+stationVariable+", else this machine's name, if left out")
	flags.StringVar(&f.operator, "operator", "", "who checks, for the ledger")
	flags.StringVar(&f.lot, "lot", "", "the lot that the unit is of, for the ledger")
	flags.BoolVar(&f.simulated, "record-simulated", false, "let simulated results into the ledger, for a trial")
	_ = cmd.MarkFlagFilename("ledger", "db")
}

// place is the ledger that the flag or the environment names; "" for none.
func (f *recordFlags) place() string {
	if f.ledger != "" {
		return f.ledger
	}
	return os.Getenv(ledgerVariable)
}

// placeOrDefault is the ledger to use where one is wanted anyway.
func (f *recordFlags) placeOrDefault() (string, error) {
	if place := f.place(); place != "" {
		return place, nil
	}
	return ledger.DefaultPath()
}

// stationName is the name that records go under.
func (f *recordFlags) stationName() (string, error) {
	for _, name := range []string{f.station, os.Getenv(stationVariable)} {
		if name != "" {
			return name, nil
		}
	}
	name, err := os.Hostname()
	if err != nil || name == "" {
		return "", &result.Error{Text: "this machine has no name", Hint: "name the bench with --station"}
	}
	return name, nil
}

// open opens the ledger at a place for writing. The folder of the default place is
// made where it is not there.
func (f *recordFlags) open(ctx context.Context, place string) (*ledger.Ledger, error) {
	if fallback, err := ledger.DefaultPath(); err == nil && place == fallback {
		if err := ledger.MakeFolder(place); err != nil {
			return nil, err
		}
	}
	return ledger.OpenWith(ctx, place, ledger.Options{AllowSimulated: f.simulated})
}

// recordOf is the record of an answer, with what the flags and the sheets add.
func (f *recordFlags) recordOf(answer *result.Answer, options map[string]string, sheets []usedFile) (ledger.Record, error) {
	r, err := ledger.FromAnswer(answer)
	if err != nil {
		return r, err
	}
	if r.Station, err = f.stationName(); err != nil {
		return r, err
	}
	r.Operator, r.Lot, r.Tool, r.Options = f.operator, f.lot, version(), options
	for _, s := range sheets {
		r.AddFile(s.role, s.path, s.text)
	}
	return r, nil
}

// recordedOf is the receipt as it stands in an answer.
func recordedOf(r ledger.Receipt) *result.Recorded {
	return &result.Recorded{Station: r.Station, Sequence: r.Sequence, Hash: r.Hash}
}
