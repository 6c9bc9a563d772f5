package main

import (
	"bytes"
	"context"
	"errors"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"time"

	"github.com/spf13/cobra"

	"padproof/cmd/padproof/internal/report"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/whole"
)

// checkReportPath refuses a report that could not be written, or that would lie
// over a file that is no report of ours, before any work is done.
func checkReportPath(cmd *cobra.Command, path string) error {
	if !slices.Contains([]string{".html", ".htm"}, strings.ToLower(filepath.Ext(path))) {
		return usageError(cmd, "the report's name ends in .html, not like %q", path)
	}
	if folder := filepath.Dir(path); !isFolder(folder) {
		return &result.Error{File: path, Text: "there is no folder " + folder, Hint: "make it first, or name another"}
	}
	info, err := os.Lstat(path)
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return nil
	case err != nil:
		return err
	case info.Mode().IsRegular() && isReport(path):
		return nil
	}
	return &result.Error{File: path, Text: "is there already and is no report of padproof", Hint: "choose another name, or remove what is there"}
}

func isFolder(path string) bool {
	info, err := os.Stat(path)
	return err == nil && info.IsDir()
}

// isReport tells a page of ours by its beginning.
func isReport(path string) bool {
	f, err := os.Open(path)
	if err != nil {
		return false
	}
	defer f.Close()
	head := make([]byte, 512)
	n, err := io.ReadFull(f, head)
	if err != nil && !errors.Is(err, io.ErrUnexpectedEOF) {
		return false
	}
	return bytes.Contains(head[:n], []byte(report.PageMark))
}

// writeReport writes the page of an answer, all of it or nothing.
func writeReport(ctx context.Context, path string, a *result.Answer, made time.Time) error {
	info := report.PageInfo{Made: made, Version: version()}
	return whole.Write(ctx, path, func(w io.Writer) error { return report.Page(w, a, info) })
}
