package main

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"maps"
	"os"
	"path/filepath"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"padproof/cmd/padproof/internal/draw"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/whole"
)

// addPlots adds the flag that asks for pictures.
func addPlots(cmd *cobra.Command, dir *string) {
	cmd.Flags().StringVar(dir, "plots", "", "write the pictures into this folder, each as SVG, PNG and PDF")
	_ = cmd.MarkFlagDirname("plots")
}

// writePlots writes pictures into a folder, which is made if it is not there, and
// says on stderr which. A picture of an earlier run by the same name is replaced.
// All are drawn before the first is written, and each is written beside its place
// and then moved there, so that nothing is left half-written. With no folder named
// nothing is done.
func writePlots(cmd *cobra.Command, dir string, pictures func() []*draw.Picture) error {
	if dir == "" {
		if cmd.Flags().Changed("plots") {
			return usageError(cmd, "--plots wants a folder")
		}
		return nil
	}
	ctx, stop := untilInterrupted(cmd)
	defer stop()
	var names []string
	files := map[string][]byte{}
	for _, p := range pictures() {
		names = append(names, p.Name)
		for _, form := range draw.Forms {
			if ctx.Err() != nil {
				return afterInterrupt(ctx.Err())
			}
			var drawn bytes.Buffer
			if err := p.Write(&drawn, form); err != nil {
				return err
			}
			files[filepath.Join(dir, p.Name+"."+form)] = drawn.Bytes()
		}
	}
	if len(names) == 0 {
		fmt.Fprintf(cmd.ErrOrStderr(), "padproof: there is nothing to draw\n")
		return nil
	}
	if err := os.MkdirAll(dir, 0o777); err != nil {
		return notWritten(dir, err)
	}
	for _, path := range slices.Sorted(maps.Keys(files)) {
		err := whole.Write(context.WithoutCancel(ctx), path, func(w io.Writer) error { // one set: too late to end it
			_, err := w.Write(files[path])
			return err
		})
		if err != nil {
			return notWritten(path, err)
		}
	}
	fmt.Fprintf(cmd.ErrOrStderr(), "padproof: drew %s into %s, each as %s\n", strings.Join(names, ", "), dir, strings.Join(draw.Forms, ", "))
	return nil
}

func notWritten(path string, err error) error {
	var inPath *fs.PathError
	if errors.As(err, &inPath) {
		err = inPath.Err
	}
	return &result.Error{File: path, Text: "could not be written: " + err.Error(), Hint: "name with --plots a folder that you may write to, on a disk with room"}
}
