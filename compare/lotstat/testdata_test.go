package lotstat

import (
	"encoding/csv"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"padproof/compare/uncertainty"
)

// table reads a CSV of testdata/ as rows by column name.
func table(t *testing.T, name string) []map[string]string {
	t.Helper()
	f, err := os.Open(filepath.Join("testdata", name))
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

func column(t *testing.T, name, column string) []float64 {
	t.Helper()
	var values []float64
	for _, row := range table(t, name) {
		values = append(values, number(t, row[column]))
	}
	return values
}

// near reports a figure that is not want ± tol.
func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s = %.10g, want %.10g ± %.2g", what, got, want, tol)
	}
}

// published holds figures against one row of testdata/spc_published_answers.csv:
// against what was printed, and against the exact answer worked out from the same
// data by others, with the tolerance that the printed digits allow.
func published(t *testing.T, example, quantity string, got ...float64) {
	t.Helper()
	for _, row := range table(t, "spc_published_answers.csv") {
		if row["example"] != example || row["quantity"] != quantity {
			continue
		}
		tol := number(t, row["test_tolerance"])
		for _, column := range []string{"published", "exact_computed"} {
			for i, text := range strings.Fields(row[column]) {
				near(t, example+", "+quantity+", "+column, got[i], number(t, text), tol)
			}
		}
		return
	}
	t.Fatalf("no row %s, %s", example, quantity)
}

// must is a value without its error.
func must[T any](t *testing.T) func(v T, err error) T {
	return func(v T, err error) T {
		t.Helper()
		if err != nil {
			t.Fatal(err)
		}
		return v
	}
}

// refused reports an error that is missing or lacks the words.
func refused(t *testing.T, what string, err error, words ...string) {
	t.Helper()
	if err == nil {
		t.Errorf("%s: no error", what)
		return
	}
	for _, w := range words {
		if !strings.Contains(err.Error(), w) {
			t.Errorf("%s: error %q does not say %q", what, err, w)
		}
	}
}

func ends(i uncertainty.Interval) []float64 { return []float64{i.Low, i.High} }
