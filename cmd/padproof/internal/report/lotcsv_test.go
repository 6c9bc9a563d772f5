package report

import (
	"bytes"
	"encoding/csv"
	"testing"

	"padproof/cmd/padproof/internal/result"
)

// A name is never a formula to a spreadsheet, and a figure that is there stays a
// number.
func TestLotCSVHoldsNoFormula(t *testing.T) {
	l := &result.Lot{Rows: []result.LotRow{
		{Unit: "=1+1", Verdict: "FAIL", Reason: "loss", Checks: []result.LotCheck{{Name: "loss", Verdict: "FAIL", Measured: -0.5, Uncertainty: result.Missing}}},
		{Unit: "0418", Error: &result.Error{File: "@home/before.wav", Text: "is no WAV"}},
	}}
	var b bytes.Buffer
	if err := LotCSV(&b, l); err != nil {
		t.Fatal(err)
	}
	rows, err := csv.NewReader(&b).ReadAll()
	if err != nil || len(rows) != 3 {
		t.Fatalf("%d rows, %v; want 3", len(rows), err)
	}
	for _, tt := range []struct {
		row          int
		column, want string
	}{
		{1, "unit", "'=1+1"}, {1, "loss", "-0.5"}, {1, "loss_uncertainty", ""}, {1, "reason", "loss"},
		{2, "unit", "0418"}, {2, "loss", ""}, {2, "error", "'@home/before.wav: is no WAV"},
	} {
		for i, name := range rows[0] {
			if got := rows[tt.row][i]; name == tt.column && got != tt.want {
				t.Errorf("row %d, %s = %q, want %q", tt.row, name, got, tt.want)
			}
		}
	}
}
