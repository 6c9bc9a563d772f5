package main

import (
	"slices"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"

	"padproof/capture"
	"padproof/cmd/padproof/internal/ledger"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/unit"
)

// recordable are the flags of check that change what is judged and stand in no
// sheet.
var recordable = []string{"channel", "signal", "marked-loss-db", "within-db", "marked-ohms", "on-this-bench"}

// record writes a check into the ledger that is named, if one is. What went wrong
// is noted in the answer, which is printed all the same.
func (f *checkFlags) record(cmd *cobra.Command, u *unit.Unit, sheets []usedFile, answer *result.Answer) {
	place := f.recording.place()
	if place == "" {
		return
	}
	recorded, err := f.write(cmd, place, u, sheets, answer)
	if err != nil {
		answer.RecordError = describe(err)
		return
	}
	answer.Recorded = recorded
}

func (f *checkFlags) write(cmd *cobra.Command, place string, u *unit.Unit, sheets []usedFile, answer *result.Answer) (*result.Recorded, error) {
	if err := unchanged(sheets, u); err != nil {
		return nil, err
	}
	options := map[string]string{}
	cmd.Flags().Visit(func(flag *pflag.Flag) {
		if slices.Contains(recordable, flag.Name) {
			options[flag.Name] = flag.Value.String()
		}
	})
	r, err := f.recording.recordOf(answer, options, sheets)
	if err != nil {
		return nil, err
	}
	if f.played != "" {
		sum, err := hashOfTake(f.played)
		if err != nil {
			return nil, err
		}
		r.Files = append(r.Files, ledger.File{Role: "signal", File: f.played, SHA256: sum})
	}
	ctx, stop := untilInterrupted(cmd)
	defer stop()
	l, err := f.recording.open(ctx, place)
	if err != nil {
		return nil, err
	}
	defer func() { _ = l.Close() }()
	receipt, err := l.Append(ctx, r)
	if err != nil {
		return nil, err
	}
	return recordedOf(receipt), nil
}

// notRecorded says on stderr that an answer that was printed is not in the ledger.
func notRecorded(cmd *cobra.Command, e *result.Error) error {
	printError(cmd.ErrOrStderr(), &result.Error{File: e.File, Text: "not recorded: " + e.Text, Hint: e.Hint})
	return exitStatus(exitNoCheck)
}

func hashOfTake(path string) (string, error) {
	take, err := capture.Open(path)
	if err != nil {
		return "", err
	}
	defer func() { _ = take.Close() }()
	return take.SHA256()
}
