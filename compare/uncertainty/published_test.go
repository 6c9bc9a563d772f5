package uncertainty

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"testing"
)

// table reads a CSV of testdata/ as rows by column name.
func table(t *testing.T, path string) []map[string]string {
	t.Helper()
	f, err := os.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	records, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var rows []map[string]string
	for _, record := range records[1:] {
		row := make(map[string]string)
		for i, name := range records[0] {
			row[name] = record[i]
		}
		rows = append(rows, row)
	}
	return rows
}

func number(t *testing.T, text string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(text, 64)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

// A published value of testdata/uncertainty_examples.csv, with the tolerance its
// printed digits allow.
type published struct{ value, tol float64 }

func lookUp(t *testing.T, example, quantity string) published {
	t.Helper()
	for _, row := range table(t, "testdata/uncertainty_examples.csv") {
		if row["example"] == example && row["quantity"] == quantity {
			return published{number(t, row["published"]), number(t, row["test_tolerance"])}
		}
	}
	t.Fatalf("no row %s, %s", example, quantity)
	return published{}
}

// near reports a figure that is not want ± tol.
func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s = %.10g, want %.10g ± %.2g", what, got, want, tol)
	}
}

// expand is ExpandedU of a budget that must be sound.
func expand(t *testing.T, coverage float64, terms ...Term) float64 {
	t.Helper()
	u, err := Budget{terms}.ExpandedU(coverage)
	if err != nil {
		t.Fatal(err)
	}
	return u
}
