package main

import (
	"bufio"
	"context"
	"fmt"
	"io"

	"github.com/spf13/cobra"

	"padproof/cmd/padproof/internal/ledger"
	"padproof/cmd/padproof/internal/report"
	"padproof/cmd/padproof/internal/whole"
)

func newLedgerExport() *cobra.Command {
	var read readFlags
	var filter filterFlags
	var output string
	cmd := &cobra.Command{
		Use:   "export",
		Short: "Write records as CSV, or with --json as JSON lines, oldest first",
		Long: `Write records as CSV, one a row with its figures, or with --json as JSON lines
{"hash": …, "record": …}: the hash is the SHA-256 of the record's bytes exactly as they stand
in the line. The heads of all chains go to stderr: keep them elsewhere, for verify --head.`,
		Example: "  padproof ledger export --lot 2026-48 --output lot.csv",
		Args:    noWords,
		RunE: func(cmd *cobra.Command, args []string) error {
			f, err := filter.read(cmd)
			if err != nil {
				return err
			}
			return runLedgerExport(cmd, read, f, output)
		},
	}
	read.addTo(cmd)
	filter.addTo(cmd)
	cmd.Flags().StringVarP(&output, "output", "o", "", "the file to write; stdout if left out")
	_ = cmd.MarkFlagFilename("output")
	return cmd
}

func runLedgerExport(cmd *cobra.Command, read readFlags, f ledger.Filter, output string) error {
	if output != "" {
		if err := checkTablePath(output); err != nil {
			return err
		}
	}
	ctx, stop := untilInterrupted(cmd)
	defer stop()
	l, err := read.open(ctx)
	if err != nil {
		return err
	}
	defer func() { _ = l.Close() }()
	heads, err := l.Heads(ctx) // before the records, so that each of them was there
	if err != nil {
		return err
	}
	write := func(w io.Writer) error { return exportRecords(ctx, w, l, f, wantsJSON(cmd)) }
	if output == "" {
		err = write(cmd.OutOrStdout())
	} else {
		err = whole.Write(ctx, output, write)
	}
	if err != nil {
		return afterInterrupt(err)
	}
	for _, h := range heads {
		fmt.Fprintf(cmd.ErrOrStderr(), "head %s:%s\n", h, h.Hash)
	}
	return nil
}

func exportRecords(ctx context.Context, w io.Writer, l *ledger.Ledger, f ledger.Filter, asJSON bool) error {
	buffered := bufio.NewWriterSize(w, 1<<16)
	visit := report.RecordLines(buffered)
	if !asJSON {
		visit = report.RecordCSV(buffered)
	}
	if err := l.Each(ctx, f, visit); err != nil {
		return err
	}
	return buffered.Flush()
}
