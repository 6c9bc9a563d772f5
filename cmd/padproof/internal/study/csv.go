package study

import (
	"bufio"
	"bytes"
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"math"
	"slices"
	"strconv"
	"strings"

	"padproof/cmd/padproof/internal/result"
	"padproof/compare"
)

// mostReadings bounds a table; a large study has a few hundred.
const mostReadings = 20000

// columnNames are what the columns may be called.
var columnNames = map[string][]string{
	"operator": {"operator", "appraiser", "inspector"},
	"unit":     {"unit", "serial", "part"},
	"repeat":   {"repeat", "round", "trial"},
	"value":    {"value", "loss_db", "reading"},
}

// ReadCSV reads a table of readings; name is its name for errors, each of which is
// a [*result.Error] with the line.
func ReadCSV(name string, r io.Reader) (*Data, error) {
	t, err := newTable(name, r)
	if err != nil {
		return nil, err
	}
	d := &Data{Name: name, Figure: t.header[t.at["value"]], Limit: compare.NoLimit()}
	seen := map[[3]string]int{}
	for {
		row, err := t.rows.Read()
		if errors.Is(err, io.EOF) {
			break
		}
		if err != nil {
			return nil, t.formError(err)
		}
		reading, err := t.reading(row)
		if err != nil {
			return nil, err
		}
		line, _ := t.rows.FieldPos(0)
		key := [3]string{reading.Operator, reading.Unit, reading.Repeat}
		if reading.Repeat != "" && seen[key] > 0 {
			return nil, t.fail(line, fmt.Sprintf("repeat %s of unit %s by %s is there twice (line %d has it too)", reading.Repeat, reading.Unit, reading.Operator, seen[key]),
				"keep one of the two, or number the repeats anew")
		}
		seen[key] = line
		if d.Readings = append(d.Readings, reading); len(d.Readings) > mostReadings {
			return nil, t.fail(line, fmt.Sprintf("more than %d readings", mostReadings), "is it the right file?")
		}
	}
	return d, nil
}

// A table is a CSV being read.
type table struct {
	name    string
	rows    *csv.Reader
	header  []string
	at      map[string]int // the column of operator, unit, repeat, value; no repeat: left out
	decimal string         // what parts a decimal, besides the point
}

// newTable reads the first line.
func newTable(name string, r io.Reader) (*table, error) {
	text := bufio.NewReader(r)
	if mark, err := text.Peek(3); err == nil && bytes.Equal(mark, []byte("\xef\xbb\xbf")) {
		_, _ = text.Discard(3)
	}
	head, _ := text.Peek(512)
	head, _, _ = bytes.Cut(head, []byte("\n"))
	t := &table{name: name, rows: csv.NewReader(text), at: map[string]int{}}
	if bytes.ContainsRune(head, ';') {
		t.rows.Comma, t.decimal = ';', ","
	}
	t.rows.TrimLeadingSpace, t.rows.ReuseRecord = true, true
	header, err := t.rows.Read()
	if errors.Is(err, io.EOF) {
		return nil, t.fail(0, "the table is empty", "its first line names the columns: operator, unit, repeat, value")
	}
	if err != nil {
		return nil, t.formError(err)
	}
	for i, cell := range header {
		t.header = append(t.header, strings.ToLower(strings.TrimSpace(cell)))
		for column, names := range columnNames {
			if !slices.Contains(names, t.header[i]) {
				continue
			}
			if _, twice := t.at[column]; twice {
				return nil, t.fail(1, fmt.Sprintf("two columns are the %s", column), "keep one of them")
			}
			t.at[column] = i
		}
	}
	for _, column := range []string{"operator", "unit", "value"} {
		if _, there := t.at[column]; !there {
			return nil, t.fail(1, fmt.Sprintf("no column is the %s", column), "the first line names the columns: operator, unit, repeat, value")
		}
	}
	return t, nil
}

func (t *table) reading(row []string) (Reading, error) {
	cell := func(column string) string {
		if i, there := t.at[column]; there {
			return strings.Clone(strings.TrimSpace(row[i]))
		}
		return ""
	}
	r := Reading{Operator: cell("operator"), Unit: cell("unit"), Repeat: cell("repeat")}
	for column, text := range map[string]string{"operator": r.Operator, "unit": r.Unit} {
		if text == "" {
			line, _ := t.rows.FieldPos(t.at[column])
			return r, t.fail(line, "the "+column+" is missing", "name it, or drop the line")
		}
	}
	text := cell("value")
	number := text
	if t.decimal != "" {
		number = strings.Replace(text, t.decimal, ".", 1)
	}
	v, err := strconv.ParseFloat(number, 64)
	if err != nil || math.IsNaN(v) || math.IsInf(v, 0) {
		line, _ := t.rows.FieldPos(t.at["value"])
		return r, t.fail(line, fmt.Sprintf("%q is no reading", text), "write a number with a decimal point; measure what is missing")
	}
	r.Value = v
	return r, nil
}

func (t *table) fail(line int, text, hint string) error {
	return &result.Error{File: t.name, Line: line, Text: text, Hint: hint}
}

// formError puts the CSV reader's error into ours.
func (t *table) formError(err error) error {
	var at *csv.ParseError
	if errors.As(err, &at) {
		return t.fail(at.Line, at.Err.Error(), "every line has as many columns as the first, parted by commas")
	}
	return t.fail(0, "cannot be read: "+err.Error(), "look at the file")
}
