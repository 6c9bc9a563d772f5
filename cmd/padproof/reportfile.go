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

	"padproof/cmd/padproof/internal/draw"
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
	return whole.Write(ctx, path, func(w io.Writer) error { return report.Page(w, a, pageInfo(a, made)) })
}

// pageInfo is what a page shows beside the answer: its pictures above all.
func pageInfo(a *result.Answer, made time.Time) report.PageInfo {
	info := report.PageInfo{Made: made, Version: version()}
	schematic := func(marked []string) *report.Picture {
		return onPage(draw.Schematic(a.Drawing, draw.SchematicOptions{Title: "Drawing", Marked: marked, Bench: a.BenchEnds, Simulated: a.Simulated}))
	}
	info.Drawing, info.Marked = schematic(nil), schematic
	for _, p := range draw.OfAnswer(a) {
		if p.Name != "schematic" {
			info.Pictures = append(info.Pictures, *onPage(p))
		}
	}
	return info
}

// onPage is a picture as it stands in a page; nil where there is nothing to show.
func onPage(p *draw.Picture) *report.Picture {
	if p.Nothing() {
		return nil
	}
	title, _, _ := strings.Cut(p.Title, ": ") // the page itself names unit and pad
	return &report.Picture{Title: title, Says: p.Says, SVG: p.WriteInline}
}
