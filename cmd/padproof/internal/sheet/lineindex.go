package sheet

import (
	"fmt"
	"regexp"
	"slices"
	"strconv"

	"github.com/pelletier/go-toml/v2/unstable"
)

// longestKey bounds a key's letters, so that a hostile sheet's paths stay short.
const longestKey = 64

// mostPaths bounds the keys and items of a sheet; the largest sound one has a
// quarter of it. The TOML library's time grows with the square of their number.
const mostPaths = 2000

// deepest is how many keys or items deep the index goes. Nothing in a sheet
// lies deeper, and it keeps a hostile sheet's index small.
const deepest = 4

// lineIndex collects the line of every key, table and item of a TOML text.
type lineIndex struct {
	file   string
	parser unstable.Parser
	starts []int
	lines  map[string]int
	items  map[string]int  // how many tables an array of tables holds so far
	valued map[string]bool // paths that were given a value
	fault  *Error          // the first key that is there twice, outsized, or one too many
}

// indexLines returns the line of each key by its path. A fault of TOML form ends
// it; so does a key written twice, which the library reports at the wrong line
// inside an inline table.
func indexLines(file string, data []byte) (map[string]int, error) {
	x := &lineIndex{file: file, starts: lineStarts(data), lines: map[string]int{},
		items: map[string]int{}, valued: map[string]bool{}}
	x.parser.Reset(slices.Clip(data)) // clipped: the parser tells places by what a slice can hold
	table, depth := "", 0
	for x.fault == nil && x.parser.NextExpression() {
		n := x.parser.Expression()
		switch n.Kind {
		case unstable.Table, unstable.ArrayTable:
			table, depth = x.header(n)
		case unstable.KeyValue:
			x.keyValue(table, depth, n)
		}
	}
	if x.fault != nil {
		return nil, x.fault
	}
	if err := x.parser.Error(); err != nil {
		return nil, x.formError(err)
	}
	return x.lines, nil
}

// header notes a [table] or an item of a [[table]] and returns its path and
// depth.
func (x *lineIndex) header(n *unstable.Node) (string, int) {
	path, depth := "", 0
	keys := n.Key()
	for keys.Next() && depth < deepest {
		path = x.enter(path, keys.Node())
		depth++
		last := keys.IsLast()
		if last && n.Kind == unstable.ArrayTable {
			x.items[path]++
		}
		if count := x.items[path]; count > 0 {
			path = item(path, count-1)
			if last {
				x.note(path, x.line(keys.Node().Raw))
			}
		}
	}
	return path, depth
}

// keyValue notes a key and what its value holds.
func (x *lineIndex) keyValue(path string, depth int, n *unstable.Node) {
	keys := n.Key()
	for keys.Next() {
		if depth >= deepest {
			return
		}
		path = x.enter(path, keys.Node())
		depth++
		if keys.IsLast() {
			x.once(path, x.line(keys.Node().Raw))
		}
	}
	x.value(path, depth, n.Value())
}

// once notes that a path was given a value, and the fault if it had one.
func (x *lineIndex) once(path string, line int) {
	if x.valued[path] && x.fault == nil {
		x.fault = &Error{File: x.file, Line: line,
			Text: fmt.Sprintf("%s is written twice (line %d has it too)", path, x.lines[path]),
			Hint: "keep one of the two"}
	}
	x.valued[path] = true
}

// value notes the items of a list and the keys of an inline table.
func (x *lineIndex) value(path string, depth int, n *unstable.Node) {
	if depth >= deepest {
		return
	}
	switch n.Kind {
	case unstable.Array:
		x.list(path, depth, n)
	case unstable.InlineTable:
		pairs := n.Children()
		for pairs.Next() {
			x.keyValue(path, depth, pairs.Node())
		}
	}
}

func (x *lineIndex) list(path string, depth int, n *unstable.Node) {
	items := n.Children()
	for i := 0; items.Next(); i++ {
		of := items.Node()
		inner := item(path, i)
		line := x.lines[path]
		if of.Raw.Length > 0 { // lists inside lists carry no place of their own
			line = x.line(of.Raw)
		}
		x.note(inner, line)
		x.value(inner, depth+1, of)
	}
}

// enter notes a key below path and returns its own path.
func (x *lineIndex) enter(path string, key *unstable.Node) string {
	if len(key.Data) > longestKey && x.fault == nil {
		x.fault = &Error{File: x.file, Line: x.line(key.Raw), Text: "a key of over 64 letters",
			Hint: "a sheet has no such key; is it text that lacks its quotes?"}
	}
	path = join(path, string(key.Data[:min(len(key.Data), longestKey)]))
	x.note(path, x.line(key.Raw))
	return path
}

// note keeps the first line at which a path stands.
func (x *lineIndex) note(path string, line int) {
	if _, known := x.lines[path]; known {
		return
	}
	x.lines[path] = line
	if len(x.lines) > mostPaths && x.fault == nil {
		x.fault = &Error{File: x.file, Line: line, Text: fmt.Sprintf("more than %d keys", mostPaths),
			Hint: "is it the right file? a sheet is a page of text"}
	}
}

// line returns the line, from 1, on which a range begins.
func (x *lineIndex) line(r unstable.Range) int {
	at, found := slices.BinarySearch(x.starts, int(r.Offset))
	if found {
		return at + 1
	}
	return at
}

// formError puts the parser's error into ours.
func (x *lineIndex) formError(err error) error {
	e := &Error{File: x.file, Text: err.Error(), Hint: formHint(err.Error())}
	if at, ok := err.(*unstable.ParserError); ok {
		e.Line = x.line(x.parser.Range(at.Highlight))
	}
	return e
}

var bareKey = regexp.MustCompile(`^[A-Za-z0-9_-]+$`)

// join returns the path of a key in a table; odd keys stand in quotes.
func join(path, key string) string {
	if !bareKey.MatchString(key) {
		key = strconv.Quote(key)
	}
	if path == "" {
		return key
	}
	return path + "." + key
}

// item returns the path of a list's item, counted from 0.
func item(path string, i int) string {
	return path + "[" + strconv.Itoa(i) + "]"
}
