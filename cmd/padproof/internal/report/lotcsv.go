package report

import (
	"encoding/csv"
	"io"
	"strconv"
	"strings"

	"padproof/cmd/padproof/internal/result"
)

// LotCSV writes a lot as a table (RFC 4180): a line a unit; of each check that any
// unit has, its verdict, the figure and its expanded uncertainty, in the checks'
// own order. Figures are those of the JSON, with all their digits; what there is none
// of is empty; a decimal has a point; a name that a spreadsheet would take for a
// formula has an apostrophe before it.
func LotCSV(w io.Writer, l *result.Lot) error {
	names := checkNames(l)
	head := []string{"unit", "verdict"}
	for _, n := range names {
		head = append(head, n+"_verdict", n, n+"_uncertainty")
	}
	head = append(head, "suspect", "weight", "problems", "reason", "error", "simulated")
	out := csv.NewWriter(w)
	if err := out.Write(head); err != nil {
		return err
	}
	for _, r := range l.Rows {
		if err := out.Write(lotCSVRow(r, names, l.Simulated)); err != nil {
			return err
		}
	}
	out.Flush()
	return out.Error()
}

func lotCSVRow(r result.LotRow, names []string, simulated bool) []string {
	row := []string{noFormula(r.Unit), r.Verdict}
	for _, n := range names {
		cells := []string{"", "", ""}
		for _, c := range r.Checks {
			if c.Name == n {
				cells = []string{c.Verdict, csvNumber(&c.Measured), csvNumber(&c.Uncertainty)}
			}
		}
		row = append(row, cells...)
	}
	failure := ""
	if r.Error != nil {
		failure = r.Error.Error()
	}
	return append(row, noFormula(r.Suspect), csvNumber(r.Weight), strings.Join(r.Problems, "; "), noFormula(r.Reason), noFormula(failure), strconv.FormatBool(simulated))
}

func csvNumber(n *result.Number) string {
	if n == nil || !n.OK() {
		return ""
	}
	return strconv.FormatFloat(float64(*n), 'g', -1, 64)
}

// checkNames are the checks that any unit has, in the order in which they are made.
func checkNames(l *result.Lot) []string {
	var names []string
	for _, n := range exportedChecks {
		for _, r := range l.Rows {
			if hasCheck(r, n) {
				names = append(names, n)
				break
			}
		}
	}
	return names
}

func hasCheck(r result.LotRow, name string) bool {
	for _, c := range r.Checks {
		if c.Name == name {
			return true
		}
	}
	return false
}
