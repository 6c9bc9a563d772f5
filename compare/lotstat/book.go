package lotstat

import (
	"fmt"
	"math"
	"slices"
	"strings"
)

// A Book is a published set of run rules for a chart of single readings.
type Book string

const (
	// Nelson holds the eight tests of L. S. Nelson, J. Quality Technology 16,
	// 1984, 237-239, by his numbers.
	Nelson Book = "Nelson"
	// WesternElectric holds the four zone tests of the Western Electric
	// Statistical Quality Control Handbook, 1956, by its numbers. They find less
	// than Nelson's and raise fewer false alarms: the better book for a long lot.
	WesternElectric Book = "Western Electric"
)

// RunLength is how many points a steady line makes, on average, from one false
// break of any rule of the book to the next, the limits known and the readings
// normal: 91.75 for Western Electric (Champ and Woodall, Technometrics 29, 1987,
// 393-399); for Nelson's eight 73, by simulation, no source. One rule alone, a
// point beyond three standard deviations, makes 370. NaN for a book that is none.
func (b Book) RunLength() float64 {
	switch b {
	case Nelson:
		return 73
	case WesternElectric:
		return 91.75
	}
	return math.NaN()
}

// A Break is one place where a chart breaks a rule.
type Break struct {
	Rule   string // book and published number: "Nelson 2"; "moving range 1"
	Points []int  // those that make it, from 0, in order
	Text   string // in plain words, points counted from 1
}

// A rule is one of a book.
type rule struct {
	book   Book
	number int
	words  string
	find   func(z []float64) []stretch
}

// A stretch is the points that break a rule in one go.
type stretch struct {
	points []int
	side   string // " above the centre", " below the centre" or ""
}

func (r rule) broken(s stretch) Break {
	return Break{
		Rule:   fmt.Sprintf("%s %d", r.book, r.number),
		Points: s.points,
		Text:   fmt.Sprintf("%s: %s%s", pointsText(s.points), r.words, s.side),
	}
}

// rules returns those of a book, in order of number.
func (b Book) rules() ([]rule, error) {
	var rules []rule
	for _, r := range allRules {
		if r.book == b {
			rules = append(rules, r)
		}
	}
	if rules == nil {
		return nil, fmt.Errorf("no rules by the name %q: there are %q and %q", b, Nelson, WesternElectric)
	}
	return rules, nil
}

var allRules = []rule{
	{Nelson, 1, "beyond three standard deviations", beyond(3, 1, 1)},
	{Nelson, 2, "nine or more in a row on one side,", oneSide(9)},
	{Nelson, 3, "six or more in a row, each", steadily(6)},
	{Nelson, 4, "fourteen or more in a row, up and down in turn", alternating(14)},
	{Nelson, 5, "two of three in a row beyond two standard deviations", beyond(2, 2, 3)},
	{Nelson, 6, "four of five in a row beyond one standard deviation", beyond(1, 4, 5)},
	{Nelson, 7, "fifteen or more in a row within one standard deviation: limits too wide, or two kinds mixed", hugging(15)},
	{Nelson, 8, "eight or more in a row, none within one standard deviation, on both sides: two kinds mixed", avoiding(8)},
	{WesternElectric, 1, "beyond three standard deviations", beyond(3, 1, 1)},
	{WesternElectric, 2, "two of three in a row beyond two standard deviations", beyond(2, 2, 3)},
	{WesternElectric, 3, "four of five in a row beyond one standard deviation", beyond(1, 4, 5)},
	{WesternElectric, 4, "eight or more in a row on one side,", oneSide(8)},
}

// pointsText lists points counted from 1: "point 4", "points 4 to 9", "points 4, 6".
func pointsText(points []int) string {
	first, last := points[0], points[len(points)-1]
	switch {
	case len(points) == 1:
		return fmt.Sprintf("point %d", first+1)
	case last-first == len(points)-1:
		return fmt.Sprintf("points %d to %d", first+1, last+1)
	}
	words := make([]string, len(points))
	for i, p := range points {
		words[i] = fmt.Sprint(p + 1)
	}
	return "points " + strings.Join(words, ", ")
}

// both gathers what a finder finds above the centre and, turned over, below.
func both(find func(z []float64) [][]int) func(z []float64) []stretch {
	return func(z []float64) []stretch {
		var all []stretch
		for _, p := range find(z) {
			all = append(all, stretch{p, " above the centre"})
		}
		for _, p := range find(negated(z)) {
			all = append(all, stretch{p, " below the centre"})
		}
		slices.SortStableFunc(all, func(a, b stretch) int { return a.points[0] - b.points[0] })
		return all
	}
}

func negated(z []float64) []float64 {
	turned := make([]float64, len(z))
	for i, v := range z {
		turned[i] = -v
	}
	return turned
}
