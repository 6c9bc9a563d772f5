package result

import "strconv"

// A Failure is what is printed as JSON where nothing could be checked (exit 3).
type Failure struct {
	Schema  string `json:"schema"`
	Unit    string `json:"unit,omitempty"`
	Verdict string `json:"verdict"` // always ""
	Error   Error  `json:"error"`
}

// An Error names the file, the line where there is one, what was wrong and
// what to do.
type Error struct {
	File string `json:"file,omitempty"`
	Line int    `json:"line,omitempty"`
	Text string `json:"text"`
	Hint string `json:"hint,omitempty"`
}

// Error is the text with its place in front, as printed after "padproof: error: ".
func (e *Error) Error() string {
	switch {
	case e.File == "":
		return e.Text
	case e.Line > 0:
		return e.File + ":" + strconv.Itoa(e.Line) + ": " + e.Text
	}
	return e.File + ": " + e.Text
}
