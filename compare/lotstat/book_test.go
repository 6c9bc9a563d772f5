package lotstat

import (
	"fmt"
	"math/rand/v2"
	"slices"
	"sort"
	"testing"
)

// Each rule as its source words it: readings in standard deviations off the
// centre, the points that break it, and the same one point short.
func TestRules(t *testing.T) {
	for _, c := range []struct {
		rule   string
		z      []float64
		points []int // nil: the rule holds
	}{
		{"Nelson 1", []float64{0, 3.1, 0, -3.1}, []int{1, 3}},
		{"Nelson 1", []float64{0, 3, 0, -3}, nil},
		{"Nelson 2", []float64{-1, .1, .2, .1, .2, .1, .2, .1, .2, .1, -1}, countFrom(1, 9)},
		{"Nelson 2", []float64{-1, .1, .2, .1, .2, .1, .2, .1, .2, -.1, .2}, nil},
		{"Nelson 2", []float64{.1, .2, .1, .2, 0, .1, .2, .1, .2, .3}, nil},
		{"Nelson 3", []float64{.5, -1, -.5, 0, .5, .6, .7, .1}, countFrom(1, 6)},
		{"Nelson 3", []float64{1, .5, .3, 0, -.1, -.2, .1}, countFrom(0, 6)},
		{"Nelson 3", []float64{.5, -1, -.5, 0, .5, .6, .6, .7}, nil},
		{"Nelson 4", []float64{0, 1, 0, 1, 0, 1, 0, 1, 0, 1, 0, 1, 0, 1, 2}, countFrom(0, 14)},
		{"Nelson 4", []float64{0, 1, 0, 1, 0, 1, 0, 1, 0, 1, 0, 1, 0, 0, 1}, nil},
		{"Nelson 5", []float64{0, 2.1, 0, 2.1, 0}, []int{1, 3}},
		{"Nelson 5", []float64{0, -2.1, -2.1, 0, -2.1}, []int{1, 2, 4}},
		{"Nelson 5", []float64{0, 2.1, 0, 0, 2.1}, nil},
		{"Nelson 5", []float64{0, 2.1, -2.1, 2, 0}, nil},
		{"Nelson 6", []float64{0, 1.1, 1.1, 0, 1.1, 1.1, 0}, []int{1, 2, 4, 5}},
		{"Nelson 6", []float64{0, 1.1, 1.1, 0, 0, 1.1, 1.1}, nil},
		{"Nelson 6", []float64{0, -1.1, -1.1, 1.1, -1.1, -1.1}, []int{1, 2, 4, 5}},
		{"Nelson 7", append(slices.Repeat([]float64{.9, -.9, 0}, 5), 1.1), countFrom(0, 15)},
		{"Nelson 7", append(slices.Repeat([]float64{.9, -.9}, 7), 1), nil},
		{"Nelson 8", []float64{.5, 1.1, -1.1, 1.1, 1.1, -1.1, 1.1, 1.1, 1.1, 0}, countFrom(1, 8)},
		{"Nelson 8", []float64{.5, 1.1, -1.1, 1.1, 1, -1.1, 1.1, 1.1, 1.1, 0}, nil},
		{"Nelson 8", slices.Repeat([]float64{1.1}, 8), nil},
		{"Western Electric 1", []float64{0, 3.1, 0}, []int{1}},
		{"Western Electric 2", []float64{0, 2.1, 0, 2.1, 0}, []int{1, 3}},
		{"Western Electric 3", []float64{0, 1.1, 1.1, 0, 1.1, 1.1, 0}, []int{1, 2, 4, 5}},
		{"Western Electric 4", []float64{-1, .1, .2, .1, .2, .1, .2, .1, .2, -1}, countFrom(1, 8)},
		{"Western Electric 4", []float64{-1, .1, .2, .1, .2, .1, .2, .1, -1}, nil},
	} {
		var got []int
		for _, b := range readZ(t, c.z) {
			if b.Rule == c.rule {
				got = append(got, b.Points...)
			}
		}
		if !slices.Equal(got, c.points) {
			t.Errorf("%s on %v = %v, want %v", c.rule, c.z, got, c.points)
		}
	}
}

// readZ reads standardised readings by both books.
func readZ(t *testing.T, z []float64) []Break {
	t.Helper()
	l := must[ChartLimits](t)(KnownChartLimits(0, 1))
	var all []Break
	for _, book := range []Book{Nelson, WesternElectric} {
		all = append(all, must[Chart](t)(ReadChart(z, l, book)).Breaks...)
	}
	return all
}

// One long run is one break, two apart are two; words count from 1.
func TestBreaksAreMerged(t *testing.T) {
	z := slices.Concat(slices.Repeat([]float64{.5}, 20), []float64{-.5}, slices.Repeat([]float64{.5}, 9))
	var texts []string
	for _, b := range readZ(t, z) {
		if b.Rule == "Nelson 2" {
			texts = append(texts, b.Text)
		}
	}
	want := []string{
		"points 1 to 20: nine or more in a row on one side, above the centre",
		"points 22 to 30: nine or more in a row on one side, above the centre",
	}
	if !slices.Equal(texts, want) {
		t.Errorf("breaks = %q, want %q", texts, want)
	}
}

// A jump between two readings within the limits.
func TestMovingRangeBreaks(t *testing.T) {
	breaks := readZ(t, []float64{0, 2.9, -0.9, 0}) // the limit is 3.267 × 1.128 = 3.685
	found := slices.ContainsFunc(breaks, func(b Break) bool {
		return b.Rule == "moving range 1" && slices.Equal(b.Points, []int{1, 2})
	})
	if !found {
		t.Errorf("breaks = %+v", breaks)
	}
	for _, b := range readZ(t, []float64{0, 2.7, -0.9, 0}) {
		if b.Rule == "moving range 1" {
			t.Errorf("a jump of 3.6: %+v", b)
		}
	}
}

// How long a steady line runs until a rule is broken: Champ and Woodall,
// Technometrics 29, 1987, table 1: 370.40 for rule 1 alone, 91.75 for all four of
// Western Electric. For Nelson's eight what the documentation says is held to the
// same simulation.
func TestRunLengths(t *testing.T) {
	rng := rand.New(rand.NewPCG(13, 14))
	const lines, points = 3000, 800
	sums := make(map[Book]float64)
	for range lines {
		z := make([]float64, points)
		for i := range z {
			z[i] = rng.NormFloat64()
		}
		for _, book := range []Book{Nelson, WesternElectric} {
			sums[book] += float64(firstBreak(t, z, book))
		}
	}
	for book, sum := range sums {
		want := book.RunLength()
		near(t, fmt.Sprintf("%s run length", book), sum/lines, want, 0.055*want)
	}
}

// firstBreak is how many points it takes until a rule is broken.
func firstBreak(t *testing.T, z []float64, book Book) int {
	rules := must[[]rule](t)(book.rules())
	for length := 64; ; length = min(2*length, len(z)) {
		broken := func(n int) bool {
			return slices.ContainsFunc(rules, func(r rule) bool { return len(r.find(z[:n])) > 0 })
		}
		if broken(length) || length == len(z) {
			return sort.Search(length, broken)
		}
	}
}
