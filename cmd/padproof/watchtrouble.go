package main

import (
	"fmt"
	"io"
	"strings"
)

// A trouble is something that may pass. It is told once when it begins, and once
// when it has passed.
type trouble struct{ text string }

// begins returns what to say of an error, "" if it was said.
func (t *trouble) begins(err error, then string) string {
	e := describe(err)
	if t.text == e.Error() {
		return ""
	}
	t.text = e.Error()
	text := "padproof: error: " + t.text
	if e.Hint != "" {
		text += "\npadproof: hint: " + e.Hint
	}
	return text + "\npadproof: " + then
}

// ends returns what to say when all is well, "" if it was well before.
func (t *trouble) ends(text string) string {
	if t.text == "" {
		return ""
	}
	t.text = ""
	return "padproof: " + text
}

// A statusLine shows on a terminal what is going on, in one line that is written
// over. On anything else it shows nothing.
type statusLine struct {
	w     io.Writer
	width int
}

func newStatusLine(w io.Writer) *statusLine {
	if !isTerminal(w) {
		return &statusLine{}
	}
	return &statusLine{w: w}
}

func (s *statusLine) show(text string) {
	if s.w != nil {
		text = "padproof: " + text
		fmt.Fprintf(s.w, "\r%-*s", s.width, text)
		s.width = len(text)
	}
}

func (s *statusLine) clear() {
	if s.w != nil && s.width > 0 {
		fmt.Fprintf(s.w, "\r%s\r", strings.Repeat(" ", s.width))
		s.width = 0
	}
}
