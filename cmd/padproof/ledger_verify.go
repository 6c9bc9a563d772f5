package main

import (
	"encoding/hex"
	"strings"

	"github.com/spf13/cobra"

	"padproof/cmd/padproof/internal/ledger"
	"padproof/cmd/padproof/internal/report"
)

func newLedgerVerify() *cobra.Command {
	var read readFlags
	var heads []string
	cmd := &cobra.Command{
		Use:   "verify",
		Short: "Find records that were altered, taken out, moved or doubled",
		Long: `Read every record and hold it against its hash and against the record before it. With
--head, a hash that was kept elsewhere (every export prints it), also find whether the end
of a chain was cut off. Exit status 0: all is sound; 1: something is wrong, and named.`,
		Example: "  padproof ledger verify --head 'bench 1/2041:9f86d0…'",
		Args:    noWords,
		RunE: func(cmd *cobra.Command, args []string) error {
			kept, err := readHeads(cmd, heads)
			if err != nil {
				return err
			}
			return runLedgerVerify(cmd, read, kept)
		},
	}
	read.addTo(cmd)
	cmd.Flags().StringArrayVar(&heads, "head", nil, "a head kept elsewhere: HASH, or STATION/SEQUENCE:HASH; may be given several times")
	return cmd
}

// readHeads reads hashes, with or without the record they are of.
func readHeads(cmd *cobra.Command, texts []string) ([]ledger.Receipt, error) {
	var heads []ledger.Receipt
	for _, text := range texts {
		var head ledger.Receipt
		hash := text
		if colon := strings.LastIndexByte(text, ':'); colon >= 0 {
			hash = text[colon+1:]
			var ok bool
			if head.Station, head.Sequence, ok = readRecord(text[:colon]); !ok {
				return nil, usageError(cmd, "--head wants HASH or STATION/SEQUENCE:HASH, not %q", text)
			}
		}
		head.Hash = strings.ToLower(hash)
		if raw, err := hex.DecodeString(head.Hash); err != nil || len(raw) != 32 {
			return nil, usageError(cmd, "--head wants a hash of 64 hexadecimal digits, not %q", hash)
		}
		heads = append(heads, head)
	}
	return heads, nil
}

func runLedgerVerify(cmd *cobra.Command, read readFlags, heads []ledger.Receipt) error {
	ctx, stop := untilInterrupted(cmd)
	defer stop()
	l, err := read.open(ctx)
	if err != nil {
		return err
	}
	defer func() { _ = l.Close() }()
	found, err := l.Verify(ctx, heads...)
	if err != nil {
		return err
	}
	if wantsJSON(cmd) {
		err = writeJSON(cmd.OutOrStdout(), verified{ledgerSchema, l.Where(), len(found.Faults) == 0, found})
	} else {
		err = report.VerificationText(cmd.OutOrStdout(), found, len(heads) > 0)
	}
	if err != nil {
		return err
	}
	if len(found.Faults) > 0 {
		return exitStatus(exitFail)
	}
	return nil
}

// verified is what verify found, as JSON.
type verified struct {
	Schema string `json:"schema"`
	Ledger string `json:"ledger"`
	Sound  bool   `json:"sound"`
	*ledger.Verification
}
