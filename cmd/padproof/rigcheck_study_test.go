package main

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"padproof/cmd/padproof/internal/result"
)

// AIAG, Measurement Systems Analysis, 4th ed. 2010: ten parts, three appraisers,
// three trials, and the answers of its analysis of variance. What the command
// prints as JSON is what was published.
func TestStudyPublished(t *testing.T) {
	const folder = "internal/study/testdata"
	var stdout, stderr bytes.Buffer
	status := run([]string{"rigcheck", "study", filepath.Join(folder, "gauge_rr_aiag_data.csv"), "--low", "-4", "--high", "4", "--json"}, &stdout, &stderr)
	var s result.Study
	if err := json.Unmarshal(stdout.Bytes(), &s); err != nil || status != 0 || stderr.Len() > 0 {
		t.Fatalf("status %d, %v, %s", status, err, &stderr)
	}
	if len(s.Operators) != 3 || len(s.Units) != 10 || s.Units[9] != "10" || s.Repeats != 3 || !s.Pooled || s.Grade != "usable" {
		t.Errorf("%v, %v, %d repeats, pooled %v, %q", s.Operators, s.Units, s.Repeats, s.Pooled, s.Grade)
	}
	c := map[string]result.StudyComponent{}
	for _, one := range s.Components {
		c[one.Component] = one
	}
	rows := map[string]result.VarianceRow{}
	var squares []float64
	for _, r := range s.Table {
		rows[r.Source] = r
		squares = append(squares, float64(r.SumSquares))
	}
	var ofVariance, ofStudy []float64
	for _, name := range []string{"repeatability", "reproducibility", "gauge", "unit"} {
		ofVariance = append(ofVariance, 100*float64(c[name].OfVariance))
		ofStudy = append(ofStudy, 100*float64(c[name].OfStudy))
	}
	sd := func(name string) []float64 { return []float64{float64(c[name].SD.Value)} }
	const pooled, anova = "AIAG MSA 4 ANOVA pooled", "AIAG MSA 4 ANOVA"
	for quantity, got := range map[[2]string][]float64{
		{pooled, "sigma repeatability EV"}:                       sd("repeatability"),
		{pooled, "sigma appraiser AV"}:                           sd("reproducibility"),
		{pooled, "sigma gauge GRR"}:                              sd("gauge"),
		{pooled, "sigma part PV"}:                                sd("unit"),
		{pooled, "sigma total TV"}:                               sd("total"),
		{pooled, "percent contribution EV AV GRR PV"}:            ofVariance,
		{pooled, "percent study variation EV AV GRR PV"}:         ofStudy,
		{pooled, "ndc before truncation (1.41 factor)"}:          {float64(s.Categories)},
		{anova, "interaction F"}:                                 {float64(rows["interaction"].F)},
		{anova, "interaction p"}:                                 {float64(rows["interaction"].P)},
		{anova, "SS part appraiser interaction equipment total"}: squares,
	} {
		want, tol := publishedAnswer(t, filepath.Join(folder, "gauge_rr_aiag_answers.csv"), quantity)
		if len(want) != len(got) {
			t.Fatalf("%v: %d figures, want %d", quantity, len(got), len(want))
		}
		for i := range want {
			if !(math.Abs(got[i]-want[i]) <= tol) {
				t.Errorf("%v [%d] = %.7g, want %.7g ± %.2g", quantity, i, got[i], want[i], tol)
			}
		}
	}
	// Six standard deviations in a width of 8.
	if got, want := float64(c["gauge"].OfTolerance.Value), 6*0.302373/8; math.Abs(got-want) > 1e-5 {
		t.Errorf("share of the tolerance = %.6f, want %.6f", got, want)
	}
	if !strings.Contains(s.Says[0], "23 % of the tolerance") {
		t.Errorf("it says %q", s.Says)
	}
}

// publishedAnswer reads the published figures of a quantity, and how near they are.
func publishedAnswer(t *testing.T, path string, quantity [2]string) (figures []float64, tol float64) {
	t.Helper()
	f, err := os.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	for _, row := range rows {
		if row[0] != quantity[0] || row[1] != quantity[1] {
			continue
		}
		for _, text := range strings.Fields(row[2]) {
			v, err := strconv.ParseFloat(text, 64)
			if err != nil {
				t.Fatal(err)
			}
			figures = append(figures, v)
		}
		if tol, err = strconv.ParseFloat(row[4], 64); err != nil {
			t.Fatal(err)
		}
		return figures, tol
	}
	t.Fatalf("no published %v", quantity)
	return nil, 0
}
