package report

import (
	"fmt"
	"io"
	"math"
	"strconv"
	"strings"

	"padproof/cmd/padproof/internal/result"
)

// StudyText writes a repeatability study.
func StudyText(w io.Writer, s *result.Study) error {
	p := &page{w: w}
	p.line("%s", clean(fmt.Sprintf("Study %s: %d operators, %d units, %d readings of each unit by each operator", s.Study, len(s.Operators), len(s.Units), s.Repeats)))
	if s.Simulated {
		p.item("  ", "SIMULATED: made from rehearsed takes; it says nothing about a real bench.")
	}
	bullets(p, "What it means", s.Says)
	heading := "Where the spread of the readings comes from, standard deviations"
	if s.Unit != "" {
		heading += " in " + s.Unit
	}
	p.heading(heading)
	rows := [][]string{{"", "SD", "95 % interval", "of variance", "of study", "of tolerance", "95 % interval"}}
	for _, c := range s.Components {
		rows = append(rows, []string{componentNames[c.Component], digits(c.SD.Value), span(c.SD, digits),
			percent(c.OfVariance), percent(c.OfStudy), percent(c.OfTolerance.Value), span(c.OfTolerance, percent)})
	}
	p.table("  ", rows)
	if s.Low.OK() && s.High.OK() {
		p.item("  ", strings.TrimSpace("The tolerance is "+digits(s.Low)+" to "+digits(s.High)+" "+s.Unit)+"; the share is that of six standard deviations in its width.")
	} else {
		p.item("  ", "No limits are set, so there is no share of the tolerance.")
	}
	if s.Categories.OK() {
		p.item("  ", fmt.Sprintf("The bench tells %d kinds of unit apart.", int(s.Categories)))
	}
	p.heading("Analysis of variance")
	table := [][]string{{"", "sum of squares", "dof", "mean square", "F", "p"}}
	for _, r := range s.Table {
		table = append(table, []string{r.Source, digits(r.SumSquares), strconv.Itoa(r.DOF), digits(r.MeanSquare), fixed(r.F, 2), doubt(r.P, 3)})
	}
	p.table("  ", table)
	bullets(p, "Notes", s.Warnings)
	return p.err
}

// componentNames are the components as they are printed.
var componentNames = map[string]string{
	"repeatability": "one operator again", "operator": "between operators", "interaction": "operators by unit",
	"reproducibility": "another operator", "gauge": "the bench in all", "unit": "between units", "total": "total",
}

func span(r result.Ranged, print func(result.Number) string) string {
	if !r.Low.OK() || !r.High.OK() {
		return dash
	}
	return print(r.Low) + " to " + print(r.High)
}

// digits prints three significant digits, a dash where there is no figure.
func digits(n result.Number) string {
	if !n.OK() {
		return dash
	}
	return significant(math.Round(float64(n)*1e12) / 1e12)
}
