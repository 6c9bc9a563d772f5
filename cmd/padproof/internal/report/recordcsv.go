package report

import (
	"encoding/csv"
	"encoding/json"
	"fmt"
	"io"
	"strconv"
	"strings"
	"time"

	"padproof/cmd/padproof/internal/ledger"
	"padproof/cmd/padproof/internal/result"
)

// exportedChecks are the checks that have columns in a CSV.
var exportedChecks = []string{"loss", "response", "flatness", "noise", "noise-level", "polarity", "distortion", "hum",
	"legs", "steadiness", "bypass"}

// RecordLines returns what writes one record as a line of JSON. The body stands in
// it byte for byte, so that its hash can be made again from the line.
func RecordLines(w io.Writer) func(ledger.Row, []byte) error {
	return func(r ledger.Row, body []byte) error {
		hash, err := json.Marshal(r.Hash)
		if err != nil {
			return err
		}
		_, err = fmt.Fprintf(w, "{\"hash\":%s,\"record\":%s}\n", hash, body)
		return err
	}
}

// RecordCSV returns what writes one record as a row of CSV, with the names of the
// columns first.
func RecordCSV(w io.Writer) func(ledger.Row, []byte) error {
	rows := csv.NewWriter(w)
	begun := false
	return func(r ledger.Row, body []byte) error {
		if !begun {
			begun = true
			if err := rows.Write(csvHeader()); err != nil {
				return err
			}
		}
		if err := rows.Write(csvRow(r, body)); err != nil {
			return err
		}
		rows.Flush()
		return rows.Error()
	}
}

func csvHeader() []string {
	names := []string{"station", "sequence", "hash", "time_utc", "kind", "verdict", "unit", "lot", "drawing", "drawing_sha256",
		"operator", "simulated", "reason", "first_suspect", "problems"}
	for _, check := range exportedChecks {
		name := strings.ReplaceAll(check, "-", "_")
		for _, figure := range []string{"verdict", "measured", "expected", "low", "high", "uncertainty"} {
			names = append(names, name+"_"+figure)
		}
	}
	return names
}

func csvRow(r ledger.Row, body []byte) []string {
	var stored struct{ Answer result.Answer }
	_ = json.Unmarshal(body, &stored) // one that was altered has its columns still
	a := stored.Answer
	suspect := ""
	if len(a.Suspects) > 0 {
		suspect = a.Suspects[0].Fault
	}
	row := []string{r.Station, strconv.FormatInt(r.Sequence, 10), r.Hash, r.Time.Format(time.RFC3339Nano), r.Kind, r.Verdict, r.Unit,
		r.Lot, r.Drawing.Name, r.Drawing.SHA256, r.Operator, strconv.FormatBool(r.Simulated), a.Reason, suspect, problemList(a)}
	for i, text := range row {
		row[i] = noFormula(text)
	}
	for _, name := range exportedChecks {
		row = append(row, csvFigures(a, name)...)
	}
	return row
}

// noFormula keeps a spreadsheet from taking a name for a formula.
func noFormula(text string) string {
	if text != "" && strings.ContainsRune("=+-@\t\r", rune(text[0])) {
		return "'" + text
	}
	return text
}

func problemList(a result.Answer) string {
	var all []string
	for _, c := range a.Captures {
		for _, p := range c.Problems {
			all = append(all, c.Role+" "+p.Problem)
		}
	}
	return strings.Join(all, "; ")
}

func csvFigures(a result.Answer, name string) []string {
	for _, c := range a.Checks {
		if c.Name == name {
			return []string{c.Verdict, plainNumber(c.Measured), plainNumber(c.Expected), plainNumber(c.Low), plainNumber(c.High), plainNumber(c.Uncertainty)}
		}
	}
	return make([]string, 6)
}

// plainNumber is a figure in full, "" where there is none.
func plainNumber(n result.Number) string {
	if !n.OK() {
		return ""
	}
	return strconv.FormatFloat(float64(n), 'g', -1, 64)
}
