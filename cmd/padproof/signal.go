package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"math"
	"os"
	"path/filepath"
	"strings"

	"github.com/spf13/cobra"

	"padproof/analysis"
	"padproof/capture"
	"padproof/cmd/padproof/internal/result"
)

func newSignal() *cobra.Command {
	var rateHz, bits int
	cmd := &cobra.Command{
		Use:   "signal FILE.wav",
		Short: "Write the test signal to play",
		Long: `Write the test signal: markers, a tone at two levels, a sweep and silence, 23.5 s in all.
Play it into the bench and record it straight through (before.wav) and through the pad
(after.wav). A plain steady tone from any generator serves too.

Before you connect or play anything:
  ` + strings.Join(result.Cautions, "\n  "),
		Example: "  padproof signal signal.wav --rate 48000 --bits 24",
		Args: func(cmd *cobra.Command, args []string) error {
			if len(args) != 1 {
				return usageError(cmd, "name the one file to write")
			}
			return nil
		},
		RunE: func(cmd *cobra.Command, args []string) error { return runSignal(cmd, args[0], rateHz, bits) },
	}
	cmd.Flags().IntVar(&rateHz, "rate", 48000, "sample rate in hertz, 8000 to 384000")
	cmd.Flags().IntVar(&bits, "bits", 24, "bits a sample: 16, 24 or 32")
	return cmd
}

func runSignal(cmd *cobra.Command, path string, rateHz, bits int) error {
	switch {
	case !strings.EqualFold(filepath.Ext(path), ".wav"):
		return usageError(cmd, "the file to write ends in .wav, not like %q", path)
	case rateHz < 8000 || rateHz > 384000:
		return usageError(cmd, "--rate wants 8000 to 384000, not %d", rateHz)
	case bits != 16 && bits != 24 && bits != 32:
		return usageError(cmd, "--bits wants 16, 24 or 32, not %d", bits)
	}
	ctx, stop := untilInterrupted(cmd)
	defer stop()
	if err := writeSignal(ctx, path, rateHz, bits); err != nil {
		return afterInterrupt(err)
	}
	s := result.Signal{
		Schema: result.SignalSchema, File: path, RateHz: rateHz, Bits: bits,
		Seconds: result.Number(analysis.SignalSec()), PeakDBFS: analysis.SignalPeakDBFS, Cautions: result.Cautions,
	}
	if wantsJSON(cmd) {
		return writeJSON(cmd.OutOrStdout(), s)
	}
	return signalText(cmd.OutOrStdout(), s)
}

// writeSignal writes a new file, all of it or nothing.
func writeSignal(ctx context.Context, path string, rateHz, bits int) error {
	if _, err := os.Lstat(path); err == nil {
		return &fs.PathError{Op: "create", Path: path, Err: fs.ErrExist}
	}
	w, err := capture.Create(path, capture.Format{
		RateHz: rateHz, Channels: 1, Bits: bits, Comment: "padproof test signal",
		Frames: int64(math.Round(analysis.SignalSec() * float64(rateHz))),
	})
	if err != nil {
		return err
	}
	defer w.Abort()
	err = analysis.Generate(float64(rateHz), func(block []float64) error {
		return errors.Join(ctx.Err(), w.Write(block))
	})
	if err != nil {
		return err
	}
	return w.Close()
}

func signalText(w io.Writer, s result.Signal) error {
	_, err := fmt.Fprintf(w, `Wrote %s: the test signal, %.1f s, %d Hz, %d bits, peak %.1f dBFS.

Play it into the bench. Record it straight through, no pad, as before.wav; then through
the pad, nothing else touched, as after.wav. Automatic gain off, the whole signal in each
take. Put both into a folder with pad.toml and rig.toml, then: padproof check FOLDER

Before you connect or play anything:
  %s
`, s.File, s.Seconds, s.RateHz, s.Bits, s.PeakDBFS, strings.Join(s.Cautions, "\n  "))
	return err
}
