package sheet

import (
	"bytes"
	"errors"
	"slices"
	"strings"

	"github.com/pelletier/go-toml/v2"
)

// document is one sheet being read: its values as TOML has them, the line of
// every key, and the faults found so far.
type document struct {
	file   string
	lines  map[string]int // by path: "network", "limits.decision", "parts[2].value"
	root   map[string]any
	tables []*table
	// foreign maps top-level keys of other sheets to the sheet's name.
	foreign map[string]string
	errs    []*Error
}

// parse reads the form of a sheet: UTF-8, TOML, no key twice, not empty.
func parse(file string, data []byte, emptyHint string) (*document, error) {
	data, err := plainText(file, data)
	if err != nil {
		return nil, err
	}
	d := &document{file: file}
	if d.lines, err = indexLines(file, data); err != nil {
		return nil, err
	}
	if err := toml.Unmarshal(data, &d.root); err != nil {
		return nil, formError(file, err)
	}
	if len(d.root) == 0 {
		return nil, &Error{File: file, Text: "the sheet is empty", Hint: emptyHint}
	}
	return d, nil
}

// formError puts the TOML library's error into ours.
func formError(file string, err error) error {
	e := &Error{File: file, Text: strings.TrimPrefix(err.Error(), "toml: ")}
	var at *toml.DecodeError
	if errors.As(err, &at) {
		e.Line, _ = at.Position()
	}
	e.Hint = formHint(e.Text)
	return e
}

// formHint returns the mend for a fault of form, known by the words that the
// TOML library uses for it.
func formHint(text string) string {
	for _, h := range []struct{ sign, hint string }{
		{"already", "keep one of the two"},
		{"at start of value", `text stands in quotes, name = "..."; a number begins with a digit, 0.3`},
		{"expected value", "write the value after the equals sign, or drop the key"},
		{"expected newline", "one key on a line; a decimal has a point, 0.3; a comment begins with #"},
		{"new lines", "close the quotes on the same line"},
		{"unterminated", "close the quotes"},
		{"not terminated", "close the quotes"},
		{"escape", `write a backslash twice, or put the text in single quotes`},
		{"incomplete", "close the bracket; a comma parts the items"},
		{"to close", "close the bracket"},
		{"nested", "a sheet nests two deep: parts = [ { ... } ]"},
		{"expected '='", `each line is: key = value`},
	} {
		if strings.Contains(text, h.sign) {
			return h.hint
		}
	}
	return "each line is key = value, a [section], or a comment that begins with #"
}

// fail notes a fault at the line of a path.
func (d *document) fail(path, text, hint string) {
	d.errs = append(d.errs, &Error{File: d.file, Line: d.lines[path], Text: text, Hint: hint})
}

// first returns the fault that stands first in the file, or nil. Those without
// a line come last.
func (d *document) first() error {
	if len(d.errs) == 0 {
		return nil
	}
	return slices.MinFunc(d.errs, func(a, b *Error) int {
		switch {
		case a.Line == b.Line:
			return 0
		case a.Line == 0 || (b.Line != 0 && a.Line > b.Line):
			return 1
		}
		return -1
	})
}

// lineStarts returns the offset at which each line begins.
func lineStarts(data []byte) []int {
	starts := []int{0}
	for at := 0; ; {
		n := bytes.IndexByte(data[at:], '\n')
		if n < 0 {
			return starts
		}
		at += n + 1
		starts = append(starts, at)
	}
}
