package sheet

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"unicode/utf8"
)

// maxBytes is the largest sheet that is read. A sheet is a few kilobytes.
const maxBytes = 64 << 10

// read returns a sheet's bytes. A folder, a device or an outsized file is
// refused unread.
func read(path string) ([]byte, error) {
	info, err := os.Stat(path)
	if err != nil {
		return nil, unreadable(path, err)
	}
	switch {
	case info.IsDir():
		return nil, &Error{File: path, Text: "is a folder, not a sheet", Hint: "name the .toml file itself"}
	case !info.Mode().IsRegular():
		return nil, &Error{File: path, Text: "is not a plain file", Hint: "save the sheet as a file and name that"}
	}
	f, err := os.Open(path)
	if err != nil {
		return nil, unreadable(path, err)
	}
	defer f.Close()
	data, err := io.ReadAll(io.LimitReader(f, maxBytes+1))
	if err != nil {
		return nil, unreadable(path, err)
	}
	return data, nil
}

func unreadable(path string, err error) error {
	var cause *fs.PathError
	if errors.As(err, &cause) {
		err = cause.Err
	}
	text := fmt.Sprintf("cannot be read: %v", err)
	if errors.Is(err, fs.ErrNotExist) {
		text = "no such file"
	}
	return &Error{File: path, Text: text, Hint: "check the name, and that the file may be read"}
}

// plainText checks that data is UTF-8 of a fit size and returns it without its
// byte-order mark.
func plainText(file string, data []byte) ([]byte, error) {
	if len(data) > maxBytes {
		return nil, &Error{File: file,
			Text: fmt.Sprintf("is larger than a sheet can be (%d KiB)", maxBytes>>10),
			Hint: "is it the right file? a sheet is a page of text"}
	}
	if bytes.HasPrefix(data, []byte("\xff\xfe")) || bytes.HasPrefix(data, []byte("\xfe\xff")) {
		return nil, &Error{File: file, Line: 1, Text: "is UTF-16 text", Hint: "save it again as UTF-8"}
	}
	data = bytes.TrimPrefix(data, []byte("\xef\xbb\xbf"))
	if at := firstInvalid(data); at >= 0 {
		return nil, &Error{File: file, Line: 1 + bytes.Count(data[:at], []byte("\n")),
			Text: fmt.Sprintf("byte 0x%02X is not UTF-8 text", data[at]),
			Hint: "save the sheet as UTF-8 text; is it a sheet at all?"}
	}
	return data, nil
}

// firstInvalid returns where data stops being UTF-8, or -1.
func firstInvalid(data []byte) int {
	for at := 0; at < len(data); {
		r, size := utf8.DecodeRune(data[at:])
		if r == utf8.RuneError && size == 1 {
			return at
		}
		at += size
	}
	return -1
}
