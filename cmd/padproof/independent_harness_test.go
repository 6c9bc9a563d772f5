package main_test

import (
	"bufio"
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"runtime"
	"sync"
	"testing"

	"gonum.org/v1/gonum/stat/distuv"
)

// scripts is where the simulated units come from. They share no code with padproof.
const scripts = "../../testdata/independent"

// A simTruth is a line of truth.jsonl; its README says what each key is.
type simTruth struct {
	Unit         string   `json:"unit"`
	Label        string   `json:"label"`
	Fault        string   `json:"fault"`
	Expect       string   `json:"expect"`
	Problem      string   `json:"problem"`
	Network      string   `json:"network"`
	Drive        string   `json:"drive"`
	Sense        string   `json:"sense"`
	BenchDB      simValue `json:"bench_loss_db"`
	BenchStated  simValue `json:"bench_stated_db"`
	ServiceDB    simValue `json:"service_loss_db"`
	ServiceStat  simValue `json:"service_stated_db"`
	RecordedDB   simValue `json:"recorded_loss_db"`
	SNRDB        simValue `json:"snr_db"`
	BoundDB      simValue `json:"bound_db"`
	Hum          bool     `json:"hum"`
	BeforeDBFS   simValue `json:"before_dbfs"`
	AfterDBFS    simValue `json:"after_dbfs"`
	BeforeToneHz simValue `json:"before_tone_hz"`
	TolDB        simValue `json:"tol_db"`
}

// A simValue is a number, or NaN where the JSON has null.
type simValue float64

func (v *simValue) UnmarshalJSON(text []byte) error {
	f := math.NaN()
	if string(text) != "null" {
		if err := json.Unmarshal(text, &f); err != nil {
			return err
		}
	}
	*v = simValue(f)
	return nil
}

func (v simValue) f() float64 { return float64(v) }

// A simAnswer is what the tests read of a checked unit, by the published keys.
type simAnswer struct {
	Schema  string     `json:"schema"`
	Verdict string     `json:"verdict"`
	Reason  string     `json:"reason"`
	Checks  []simCheck `json:"checks"`
	Unseen  []struct {
		Part string `json:"part"`
	} `json:"unseen"`
	Captures []struct {
		Role      string   `json:"role"`
		SHA256    string   `json:"sha256"`
		ToneHz    simValue `json:"tone_hz"`
		LevelDBFS simValue `json:"level_dbfs"`
		Problems  []struct {
			Problem string `json:"problem"`
		} `json:"problems"`
	} `json:"captures"`
	Error *struct {
		File string `json:"file"`
		Text string `json:"text"`
	} `json:"error"`
}

type simCheck struct {
	Name     string   `json:"name"`
	Verdict  string   `json:"verdict"`
	Measured simValue `json:"measured"`
	Expected simValue `json:"expected"`
	Low      simValue `json:"low"`
	High     simValue `json:"high"`
	U        simValue `json:"uncertainty"`
	Reason   string   `json:"reason"`
	Bench    struct {
		Measured simValue `json:"measured"`
		Expected simValue `json:"expected"`
	} `json:"bench"`
}

// A simOutcome is a unit, what is true of it and what padproof says of it.
type simOutcome struct {
	simTruth
	folder string
	answer simAnswer
	loss   simCheck // all NaN without a loss check
	exit   int
}

// String names an outcome in a message.
func (o simOutcome) String() string {
	return fmt.Sprintf("%s (%s %s %s to %s %s)", o.Unit, o.Label, o.Network, o.Drive, o.Sense, o.Fault)
}

// says tells what padproof said, for a message.
func (o simOutcome) says() string {
	text := fmt.Sprintf("%s exit %d, %s %s; loss %s, measured %.4f U %.4f in %.3f to %.3f, bench %.4f",
		o.answer.Verdict, o.exit, o.answer.Reason, o.loss.Reason, o.loss.Verdict, o.loss.Measured, o.loss.U,
		o.loss.Low, o.loss.High, o.loss.Bench.Measured)
	if o.answer.Error != nil {
		text += "; error " + o.answer.Error.File + " " + o.answer.Error.Text
	}
	return text
}

// benchErrorDB is the measured bench loss against the one that the takes hold.
func (o simOutcome) benchErrorDB() float64 {
	return math.Abs((o.loss.Bench.Measured - o.RecordedDB).f())
}

// serviceErrorDB is the measured service loss against the true one.
func (o simOutcome) serviceErrorDB() float64 { return math.Abs((o.loss.Measured - o.ServiceDB).f()) }

// names tells whether any take was said to have the problem.
func (o simOutcome) names(problem string) bool {
	for _, c := range o.answer.Captures {
		for _, p := range c.Problems {
			if p.Problem == problem {
				return true
			}
		}
	}
	return false
}

// A simBench builds padproof once and runs it on simulated units.
type simBench struct {
	program string
	python  string
}

// newSimBench builds padproof. The test is skipped where no Python with numpy is found.
func newSimBench(t testing.TB) *simBench {
	t.Helper()
	b := &simBench{program: filepath.Join(t.TempDir(), "padproof"), python: findPython(t)}
	if runtime.GOOS == "windows" {
		b.program += ".exe"
	}
	if out, err := exec.Command("go", "build", "-o", b.program, ".").CombinedOutput(); err != nil {
		t.Fatalf("go build: %v\n%s", err, out)
	}
	return b
}

func findPython(t testing.TB) string {
	t.Helper()
	names := []string{"python3", "/usr/bin/python3"}
	if named := os.Getenv("PYTHON"); named != "" {
		names = []string{named}
	}
	for _, name := range names {
		if exec.Command(name, "-c", "import numpy").Run() == nil {
			return name
		}
	}
	t.Skipf("no Python with numpy among %q: install python3-numpy, or name an interpreter in PYTHON", names)
	return ""
}

// needTools skips a test where a program is not installed.
func needTools(t testing.TB, names ...string) {
	t.Helper()
	for _, name := range names {
		if _, err := exec.LookPath(name); err != nil {
			t.Skipf("%s is not installed", name)
		}
	}
}

// long tells whether the long runs were asked for.
func long() bool { return os.Getenv("PADPROOF_LONG") == "1" }

// script runs one of the scripts.
func (b *simBench) script(t testing.TB, args ...string) {
	t.Helper()
	if out, err := exec.Command(b.python, args...).CombinedOutput(); err != nil {
		t.Fatalf("%s %q: %v\n%s", b.python, args, err, out)
	}
}

// make writes the units of a plan and reads what is true of them.
func (b *simBench) make(t testing.TB, plan string, args ...string) []simOutcome {
	t.Helper()
	needTools(t, "ngspice")
	out := t.TempDir()
	b.script(t, append([]string{filepath.Join(scripts, "make_units.py"), out, "--plan", plan}, args...)...)
	f, err := os.Open(filepath.Join(out, "truth.jsonl"))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	var units []simOutcome
	lines := bufio.NewScanner(f)
	for lines.Scan() {
		var o simOutcome
		if err := json.Unmarshal(lines.Bytes(), &o.simTruth); err != nil {
			t.Fatal(err)
		}
		o.folder = filepath.Join(out, o.Unit)
		units = append(units, o)
	}
	if err := lines.Err(); err != nil || len(units) == 0 {
		t.Fatalf("%s: no units: %v", plan, err)
	}
	return units
}

// checkAll checks every unit, as many at once as there are processors.
func (b *simBench) checkAll(t testing.TB, units []simOutcome) {
	t.Helper()
	errs := make([]error, len(units))
	var wg sync.WaitGroup
	next := make(chan int)
	for range runtime.NumCPU() {
		wg.Go(func() {
			for i := range next {
				errs[i] = b.check(&units[i])
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

// makeAndCheck is make, then checkAll.
func (b *simBench) makeAndCheck(t testing.TB, plan string, args ...string) []simOutcome {
	t.Helper()
	units := b.make(t, plan, args...)
	b.checkAll(t, units)
	return units
}

// check runs padproof on one unit. An error is an answer that breaks its own
// rules: no JSON, or a verdict and an exit status that disagree.
func (b *simBench) check(o *simOutcome) error {
	cmd := exec.Command(b.program, "check", o.folder, "--json")
	var out, said bytes.Buffer
	cmd.Stdout, cmd.Stderr = &out, &said
	err := cmd.Run()
	var ended *exec.ExitError
	if err != nil && !errors.As(err, &ended) {
		return err
	}
	o.exit = cmd.ProcessState.ExitCode()
	nan := simValue(math.NaN())
	o.loss = simCheck{Measured: nan, Expected: nan, Low: nan, High: nan, U: nan}
	o.loss.Bench.Measured, o.loss.Bench.Expected = nan, nan
	if err := json.Unmarshal(out.Bytes(), &o.answer); err != nil {
		return fmt.Errorf("exit %d, stdout is not JSON: %w\n%s%s", o.exit, err, out.Bytes(), said.Bytes())
	}
	for _, c := range o.answer.Checks {
		if c.Name == "loss" {
			o.loss = c
		}
	}
	want, known := map[string]int{"PASS": 0, "FAIL": 1, "UNPROVEN": 2, "": 3}[o.answer.Verdict]
	switch {
	case o.answer.Schema != "padproof.check.1":
		return fmt.Errorf("schema %q", o.answer.Schema)
	case !known || o.exit != want:
		return fmt.Errorf("verdict %q with exit %d\n%s", o.answer.Verdict, o.exit, said.Bytes())
	case (o.exit == 3) != (o.answer.Error != nil):
		return fmt.Errorf("exit %d with error %v", o.exit, o.answer.Error)
	}
	return nil
}

// atMost is the count that an event of chance p in n trials passes once in a
// thousand times: a program that keeps p fails a test against it no oftener.
func atMost(n int, p float64) int {
	d := distuv.Binomial{N: float64(n), P: p}
	k := 0
	for k < n && d.CDF(float64(k)) < 0.999 {
		k++
	}
	return k
}

// atLeast is the count that an event of chance p in n trials falls short of
// once in a thousand times.
func atLeast(n int, p float64) int { return n - atMost(n, 1-p) }
