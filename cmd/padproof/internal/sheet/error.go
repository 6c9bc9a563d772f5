package sheet

import (
	"fmt"
	"strings"
)

// Error is what is wrong with a sheet, or with one value as a user wrote it.
type Error struct {
	File string // as it was given; "" for a value that stands in no file
	Line int    // from 1; 0 where the fault has no line
	Text string // what is wrong: lower case, no full stop
	Hint string // what to write instead
}

// Error gives file, line and text, "pad.toml:7: ...", without the hint.
func (e *Error) Error() string {
	switch {
	case e.File == "":
		return e.Text
	case e.Line == 0:
		return e.File + ": " + e.Text
	}
	return fmt.Sprintf("%s:%d: %s", e.File, e.Line, e.Text)
}

// quoted is a user's text in quotes, fit for one line of a message.
func quoted(text string) string {
	const longest = 40
	if r := []rune(text); len(r) > longest {
		text = string(r[:longest]) + "…"
	}
	return fmt.Sprintf("%q", text)
}

// list joins words for a sentence: "a, b or c".
func list(words []string) string {
	if len(words) < 2 {
		return strings.Join(words, "")
	}
	last := len(words) - 1
	return strings.Join(words[:last], ", ") + " or " + words[last]
}
