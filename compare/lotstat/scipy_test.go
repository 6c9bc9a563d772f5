package lotstat

import (
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"os/exec"
	"strings"
	"testing"
)

// A question is a line for testdata/scipy_intervals.py, and our answer to it.
type question struct {
	line string
	ours []float64
	tol  float64 // relative
}

// noScipy is how the script ends without scipy.
const noScipy = 4

// Yields, means, standard deviations, Cp, slopes, t tests, a test of a spread
// and the prediction of a next reading against scipy.stats
// on the same figures.
func TestAgainstScipy(t *testing.T) {
	python := "/usr/bin/python3"
	questions := append(yieldQuestions(t), readingQuestions(t)...)
	var lines strings.Builder
	for _, q := range questions {
		fmt.Fprintln(&lines, q.line)
	}
	cmd := exec.Command(python, "testdata/scipy_intervals.py")
	cmd.Stdin = strings.NewReader(lines.String())
	out, err := cmd.Output()
	if exit := new(exec.ExitError); errors.As(err, &exit) && exit.ExitCode() != noScipy {
		t.Fatalf("%v\n%s", err, exit.Stderr)
	} else if err != nil {
		t.Skipf("%s with scipy (package python3-scipy) is not there: intervals are not held against it", python)
	}
	answers := strings.Split(strings.TrimSpace(string(out)), "\n")
	if len(answers) != len(questions) {
		t.Fatalf("%d answers to %d questions", len(answers), len(questions))
	}
	for i, q := range questions {
		words := strings.Fields(answers[i])
		if len(words) != len(q.ours) {
			t.Fatalf("%.40s: %q", q.line, answers[i])
		}
		for j, word := range words {
			want := number(t, word)
			near(t, fmt.Sprintf("%.40s [%d]", q.line, j), q.ours[j], want, q.tol*math.Max(math.Abs(want), 1e-12))
		}
	}
}

func yieldQuestions(t *testing.T) []question {
	var all []question
	for _, c := range []struct {
		passed, units int
		coverage      float64
	}{
		{0, 1, 0.95}, {1, 1, 0.95}, {1, 2, 0.95}, {7, 12, 0.9}, {99, 100, 0.99}, {1, 100, 0.95},
		{990, 1000, 0.95}, {0, 1000, 0.95}, {1000, 1000, 0.95}, {123456, 200000, 0.95}, {199999, 200000, 0.95},
	} {
		y := must[Yield](t)(YieldOf(c.passed, c.units, c.coverage))
		line := fmt.Sprintf("yield %d %d %g", c.passed, c.units, c.coverage)
		all = append(all, question{line, []float64{y.Interval.Low, y.Interval.High}, 1e-8})
	}
	return all
}

func readingQuestions(t *testing.T) []question {
	rng := rand.New(rand.NewPCG(1, 2))
	var all []question
	for _, n := range []int{2, 3, 10, 57, 1000} {
		values := make([]float64, n)
		for i := range values {
			values[i] = 0.03 + 0.1*rng.NormFloat64() + 0.001*float64(i)
		}
		text := strings.Trim(fmt.Sprint(values), "[]")
		s := must[Summary](t)(Summarise(values, 0.95))
		shift := must[Diagnosis](t)(Diagnose(Lot{DeviationsDB: values})).Shift
		all = append(all,
			question{"mean 0.95 " + text, []float64{s.MeanInterval.Low, s.MeanInterval.High}, 1e-9},
			question{"sd 0.95 " + text, []float64{s.StdDevInterval.Low, s.StdDevInterval.High}, 1e-9},
			question{fmt.Sprintf("cp 1.3 %d 0.95", n-1), ends(cpInterval(1.3, float64(n-1), 0.95)), 1e-9},
			question{"ttest " + text, []float64{shift.P}, 1e-7},
		)
		low, high := nextLimits(values, 0.001)
		all = append(all, question{"next " + text, []float64{low, high}, 1e-7})
		if n < leastForOrder {
			lot := Lot{DeviationsDB: values, StdUDB: constant(0.07, n)}
			all = append(all, question{"width 0.07 " + text, []float64{must[Diagnosis](t)(Diagnose(lot)).Width.P}, 1e-9})
		} else {
			trend := orderOf(view{countFrom(0, n), values}).trend
			all = append(all, question{"slope " + text, append(ends(trend.Interval), trend.P), 1e-6})
		}
	}
	return all
}
