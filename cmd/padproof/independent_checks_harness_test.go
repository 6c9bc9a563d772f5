package main_test

import (
	"bufio"
	"encoding/json"
	"errors"
	"fmt"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"runtime"
	"slices"
	"strconv"
	"strings"
	"sync"
	"testing"
)

// simBatch is how many units lie on disk at once: they are made, checked and
// taken away in batches.
const simBatch = 20

// A takesTruth is a line of truth.jsonl of make_checks.py.
type takesTruth struct {
	simTruth
	On       string `json:"on"`     // roles that a problem may stand on, joined by |
	Played   bool   `json:"played"` // something else than tones was played: --signal
	figures  map[string]any
	PointsHz []float64 `json:"points_hz"`
	PointsDB []float64 `json:"points_db"`
	Events   []struct {
		What  string   `json:"what"`
		AtSec float64  `json:"at_s"`
		DB    simValue `json:"db"`
	} `json:"events"`
}

// f is a figure of the truth by its key, NaN where it has none.
func (t takesTruth) f(key string) float64 { return figure(t.figures, key) }

// is tells whether a figure of the truth is true.
func (t takesTruth) is(key string) bool { return t.figures[key] == true }

func figure(of map[string]any, key string) float64 {
	if v, ok := of[key].(float64); ok {
		return v
	}
	return math.NaN()
}

// A takesCheck is a check of an answer, by its published keys.
type takesCheck map[string]any

func (c takesCheck) f(key string) float64 { return figure(c, key) }

func (c takesCheck) text(key string) string {
	s, _ := c[key].(string)
	return s
}

// A takesOutcome is a unit of make_checks.py and what padproof says of it.
type takesOutcome struct {
	takesTruth
	exit   int
	answer struct {
		Verdict  string         `json:"verdict"`
		Reason   string         `json:"reason"`
		Checks   []takesCheck   `json:"checks"`
		Found    map[string]any `json:"found"`
		Captures []struct {
			Role     string `json:"role"`
			Problems []struct {
				Problem string `json:"problem"`
				Text    string `json:"text"`
			} `json:"problems"`
		} `json:"captures"`
		Error *struct {
			File string `json:"file"`
			Text string `json:"text"`
		} `json:"error"`
	}
}

func (o takesOutcome) String() string {
	return fmt.Sprintf("%s (%s, %s)", o.Unit, o.Label, o.Network)
}

// check is the named check; without one every figure of it is NaN.
func (o takesOutcome) check(name string) takesCheck {
	for _, c := range o.answer.Checks {
		if c.text("name") == name {
			return c
		}
	}
	return takesCheck{}
}

// says tells what padproof said, for a message: the verdict, what is not a
// PASS, the problems.
func (o takesOutcome) says() string {
	text := fmt.Sprintf("%s exit %d %s", o.answer.Verdict, o.exit, o.answer.Reason)
	for _, c := range o.answer.Checks {
		if v := c.text("verdict"); v != "" {
			text += fmt.Sprintf("; %s %s %.4g (%.4g to %.4g) U %.3g %s", c.text("name"), v, c.f("measured"), c.f("low"), c.f("high"),
				c.f("uncertainty"), c.text("reason"))
		}
	}
	if p := o.problems(); len(p) > 0 {
		text += "; problems " + strings.Join(p, ", ")
	}
	if o.answer.Error != nil {
		text += "; error " + o.answer.Error.File + " " + o.answer.Error.Text
	}
	return text
}

// problems are all that are named, each "role: problem".
func (o takesOutcome) problems() []string {
	var all []string
	for _, c := range o.answer.Captures {
		for _, p := range c.Problems {
			all = append(all, c.Role+": "+p.Problem)
		}
	}
	return all
}

// namedRight tells whether what is wrong was named, on the take where it is;
// where nothing could be measured the error must name it.
func (o takesOutcome) namedRight() bool {
	problems := strings.Split(o.Problem, "|")
	for _, c := range o.answer.Captures {
		if o.On != "" && !slices.Contains(strings.Split(o.On, "|"), c.Role) {
			continue
		}
		for _, p := range c.Problems {
			if slices.Contains(problems, p.Problem) {
				return true
			}
		}
	}
	if o.answer.Error == nil {
		return false
	}
	for _, p := range problems {
		if strings.Contains(o.answer.Error.Text, p) || strings.Contains(o.answer.Error.Text, strings.ReplaceAll(p, "-", " ")) {
			return true
		}
	}
	return false
}

// eachUnit makes and checks n units of a plan of make_checks.py, batch by
// batch, and returns them; their files are gone by then.
func (b *simBench) eachUnit(t *testing.T, plan string, n int) []takesOutcome {
	t.Helper()
	needTools(t, "ngspice")
	if from, err := strconv.Atoi(os.Getenv("PADPROOF_UNIT")); err == nil { // one unit alone, for a look at it
		return b.batch(t, plan, from-1, 1)
	}
	var all []takesOutcome
	for first := 0; first < n; first += simBatch {
		all = append(all, b.batch(t, plan, first, min(simBatch, n-first))...)
	}
	return all
}

func (b *simBench) batch(t *testing.T, plan string, first, count int) []takesOutcome {
	t.Helper()
	out, err := os.MkdirTemp(t.TempDir(), plan)
	if err != nil {
		t.Fatal(err)
	}
	defer os.RemoveAll(out)
	b.script(t, filepath.Join(scripts, "make_checks.py"), out, "--plan", plan, "--first", strconv.Itoa(first), "--count", strconv.Itoa(count))
	f, err := os.Open(filepath.Join(out, "truth.jsonl"))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	var units []takesOutcome
	lines := bufio.NewScanner(f)
	lines.Buffer(nil, 1<<20)
	for lines.Scan() {
		var o takesOutcome
		if err := errors.Join(json.Unmarshal(lines.Bytes(), &o.takesTruth), json.Unmarshal(lines.Bytes(), &o.figures)); err != nil {
			t.Fatal(err)
		}
		units = append(units, o)
	}
	if err := lines.Err(); err != nil || len(units) != count {
		t.Fatalf("%s: %d units, want %d: %v", plan, len(units), count, err)
	}
	b.checkTakes(t, out, units)
	return units
}

// checkTakes checks every unit, as many at once as there are processors.
func (b *simBench) checkTakes(t *testing.T, out string, units []takesOutcome) {
	t.Helper()
	errs := make([]error, len(units))
	var wg sync.WaitGroup
	next := make(chan int)
	for range runtime.NumCPU() {
		wg.Go(func() {
			for i := range next {
				errs[i] = b.checkUnit(out, &units[i])
			}
		})
	}
	for i := range units {
		next <- i
	}
	close(next)
	wg.Wait()
	for i, err := range errs {
		if err != nil {
			t.Errorf("check of %v: %v", units[i], err)
		}
	}
}

// checkUnit runs padproof on one unit; an error is an answer that breaks its
// own rules.
func (b *simBench) checkUnit(out string, o *takesOutcome) error {
	args := []string{"check", filepath.Join(out, o.Unit), "--json"}
	if o.Played {
		args = append(args, "--signal", filepath.Join(out, o.Unit+".played.wav"))
	}
	cmd := exec.Command(b.program, args...)
	said, err := cmd.Output()
	var ended *exec.ExitError
	if err != nil && !errors.As(err, &ended) {
		return err
	}
	o.exit = cmd.ProcessState.ExitCode()
	if err := json.Unmarshal(said, &o.answer); err != nil {
		return fmt.Errorf("exit %d, stdout is not JSON: %w\n%s", o.exit, err, said)
	}
	want, known := map[string]int{"PASS": 0, "FAIL": 1, "UNPROVEN": 2, "": 3}[o.answer.Verdict]
	if !known || o.exit != want || (o.exit == 3) != (o.answer.Error != nil) {
		return fmt.Errorf("verdict %q with exit %d, error %v", o.answer.Verdict, o.exit, o.answer.Error)
	}
	return nil
}
