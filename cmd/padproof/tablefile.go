package main

import (
	"bytes"
	"errors"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strings"

	"padproof/cmd/padproof/internal/result"
)

// checkTablePath refuses to write a table over what is not to be had again: a
// ledger, a recording, a sheet, or what is no file. A table of before is replaced.
func checkTablePath(path string) error {
	info, err := os.Stat(path)
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return nil
	case err != nil:
		return err
	case info.IsDir():
		return &result.Error{File: path, Text: "is a folder", Hint: "name a file in it"}
	case !info.Mode().IsRegular():
		return nil // a pipe, or a terminal
	}
	what, err := keepsake(path)
	if err != nil || what == "" {
		return err
	}
	return &result.Error{File: path, Text: "is there already and is " + what + ": nothing was written over it", Hint: "choose another name"}
}

// keepsake says what a file is that no table may replace; "" if it may.
func keepsake(path string) (string, error) {
	if strings.EqualFold(filepath.Ext(path), ".toml") {
		return "a sheet", nil
	}
	f, err := os.Open(path)
	if err != nil {
		return "", err
	}
	defer func() { _ = f.Close() }()
	head := make([]byte, 16)
	n, err := io.ReadFull(f, head)
	if err != nil && !errors.Is(err, io.EOF) && !errors.Is(err, io.ErrUnexpectedEOF) {
		return "", err
	}
	begins := func(s string) bool { return bytes.HasPrefix(head[:n], []byte(s)) }
	switch {
	case begins("SQLite format 3\x00"):
		return "a ledger, or another database", nil
	case slices.ContainsFunc([]string{"RIFF", "RF64", "BW64"}, begins):
		return "a recording", nil
	}
	return "", nil
}
