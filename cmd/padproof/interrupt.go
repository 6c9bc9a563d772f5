package main

import (
	"context"
	"errors"
	"os"
	"os/signal"
	"syscall"

	"github.com/spf13/cobra"

	"padproof/cmd/padproof/internal/result"
)

// untilInterrupted is a context that Ctrl-C ends, so that what is half written can
// be taken away first.
func untilInterrupted(cmd *cobra.Command) (context.Context, context.CancelFunc) {
	return signal.NotifyContext(cmd.Context(), os.Interrupt, syscall.SIGTERM)
}

// afterInterrupt puts an interruption into words and leaves other errors alone.
func afterInterrupt(err error) error {
	if errors.Is(err, context.Canceled) {
		return &result.Error{Text: "interrupted; nothing was left behind"}
	}
	return err
}
