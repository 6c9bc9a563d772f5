package main

import (
	"bufio"
	"encoding/json"
	"math"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"runtime"
	"strings"
	"sync"
	"syscall"
	"testing"
	"time"

	"padproof/cmd/padproof/internal/result"
)

// small is a steady tone of 1.5 s at 8 kHz, as a WAV of 16 bits: quickly checked.
func small(t *testing.T, dbfs float64) []byte {
	t.Helper()
	rng := rand.New(rand.NewPCG(uint64(-dbfs), 0))
	const rate, frames = 8000, 12000
	b := append([]byte("RIFF"), 36+2*frames&255, (36+2*frames)>>8&255, 0, 0)
	b = append(b, "WAVEfmt \x10\x00\x00\x00\x01\x00\x01\x00"...)
	b = append(b, rate&255, rate>>8, 0, 0, 2*rate&255, 2*rate>>8, 0, 0, 2, 0, 16, 0)
	b = append(b, "data"...)
	b = append(b, 2*frames&255, 2*frames>>8, 0, 0)
	for i := range frames {
		v := int16(math.Round(32767*math.Pow(10, dbfs/20)*math.Sin(2*math.Pi*997*float64(i)/rate) + rng.NormFloat64()))
		b = append(b, byte(v), byte(v>>8))
	}
	return b
}

const smallPad = `name = "Twenty decibels"
network = "L"
parts = [ { ref = "R1", value = "900", tolerance = "0.1%" }, { ref = "R2", value = "100", tolerance = "0.1%" } ]
[limits]
loss_plus_minus_db = 0.5
`

const smallRig = `[output]
source_ohms = 0
tolerance = "0%"
[input]
load_ohms = 1e9
tolerance = "0%"
cable_pF = 0
`

func write(t *testing.T, path string, data []byte) {
	t.Helper()
	if err := os.MkdirAll(filepath.Dir(path), 0o755); err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(path, data, 0o644); err != nil {
		t.Fatal(err)
	}
}

// layLot makes a lot with sheets and a shared before, and no unit yet.
func layLot(t *testing.T, lot string) {
	t.Helper()
	write(t, filepath.Join(lot, "pad.toml"), []byte(smallPad))
	write(t, filepath.Join(lot, "rig.toml"), []byte(smallRig))
	write(t, filepath.Join(lot, "before.wav"), small(t, -6))
}

// A process is padproof at work.
type process struct {
	*exec.Cmd
	t     *testing.T
	mu    sync.Mutex
	units []result.Answer // as printed with --json
	says  []string        // on stderr
	news  chan struct{}
	ended sync.WaitGroup
}

// begin starts padproof in a process of its own.
func begin(t *testing.T, args ...string) *process {
	t.Helper()
	self, err := os.Executable()
	if err != nil {
		t.Fatal(err)
	}
	p := &process{Cmd: exec.Command(self), t: t, news: make(chan struct{}, 1)}
	p.Args = append([]string{"padproof"}, args...) // the test's own program is padproof by that name
	out, err := p.StdoutPipe()
	if err != nil {
		t.Fatal(err)
	}
	says, err := p.StderrPipe()
	if err != nil {
		t.Fatal(err)
	}
	if err := p.Start(); err != nil {
		t.Fatal(err)
	}
	p.ended.Go(func() {
		lines := bufio.NewScanner(out)
		lines.Buffer(nil, 1<<20)
		for lines.Scan() {
			var a result.Answer
			if json.Unmarshal(lines.Bytes(), &a) == nil && (a.Unit != "" || a.Verdict != "") {
				p.note(func() { p.units = append(p.units, a) })
			}
		}
	})
	p.ended.Go(func() {
		for lines := bufio.NewScanner(says); lines.Scan(); {
			p.note(func() { p.says = append(p.says, lines.Text()) })
		}
	})
	return p
}

func (p *process) note(take func()) {
	p.mu.Lock()
	take()
	p.mu.Unlock()
	select {
	case p.news <- struct{}{}:
	default:
	}
}

// await waits until something is so.
func (p *process) await(what string, so func() bool) {
	p.t.Helper()
	late := time.After(30 * time.Second)
	for {
		p.mu.Lock()
		done := so()
		p.mu.Unlock()
		if done {
			return
		}
		select {
		case <-p.news:
		case <-late:
			p.t.Fatalf("waited in vain for %s; printed %d units, said:\n%s", what, len(p.units), strings.Join(p.says, "\n"))
		}
	}
}

// unit waits for the next unit and returns serial and verdict.
func (p *process) unit(n int) string {
	p.t.Helper()
	p.await("a unit", func() bool { return len(p.units) >= n })
	return p.units[n-1].Unit + " " + p.units[n-1].Verdict
}

// said waits until something was said on stderr.
func (p *process) said(text string) {
	p.t.Helper()
	p.await(text, func() bool { return strings.Contains(strings.Join(p.says, "\n"), text) })
}

// finish waits for the end and returns the exit status.
func (p *process) finish() int {
	p.ended.Wait()
	_ = p.Wait()
	return p.ProcessState.ExitCode()
}

// A watch over real files: one that grows slowly, one that appears by rename, one
// deleted half-way, a retest, the folder away for a while, and Ctrl-C.
func TestWatchLive(t *testing.T) {
	if runtime.GOOS == "windows" {
		t.Skip("needs an interrupt that another process can send")
	}
	dir := t.TempDir()
	lot := filepath.Join(dir, "lot")
	layLot(t, lot)
	p := begin(t, "watch", lot, "--json", "--settle", "150ms", "--ledger", filepath.Join(dir, "line.db"), "--station", "bench 1")
	defer func() { _ = p.Process.Kill() }()
	step := func(n int, want string) {
		t.Helper()
		if got := p.unit(n); got != want {
			t.Errorf("unit %d is %q, want %q", n, got, want)
		}
	}

	good, bad := small(t, -26), small(t, -16)
	deleted := filepath.Join(lot, "0416.after.wav")
	write(t, deleted, good[:9000])
	slow := filepath.Join(lot, "0417", "after.wav")
	for n := 4000; n < len(good); n += 4000 {
		write(t, slow, good[:n])
		time.Sleep(40 * time.Millisecond)
	}
	write(t, slow, good)
	if err := os.Remove(deleted); err != nil {
		t.Fatal(err)
	}
	step(1, "0417 PASS")

	part := filepath.Join(lot, "0418.after.wav.part")
	write(t, part, bad)
	if err := os.Rename(part, strings.TrimSuffix(part, ".part")); err != nil {
		t.Fatal(err)
	}
	step(2, "0418 FAIL")

	if err := os.Rename(lot, lot+" away"); err != nil {
		t.Fatal(err)
	}
	p.said("waiting for it to come back")
	if err := os.Rename(lot+" away", lot); err != nil {
		t.Fatal(err)
	}
	p.said("can be read again")

	write(t, part, good)
	if err := os.Rename(part, strings.TrimSuffix(part, ".part")); err != nil {
		t.Fatal(err)
	}
	step(3, "0418 PASS")
	if err := p.Process.Signal(syscall.SIGINT); err != nil {
		t.Fatal(err)
	}
	if status := p.finish(); status != exitPass {
		t.Errorf("exit status %d after Ctrl-C, want %d", status, exitPass)
	}
	p.said("3 units checked: 2 PASS, 1 FAIL, 0 UNPROVEN")
	if len(p.units) != 3 {
		t.Errorf("%d units printed, want 3", len(p.units))
	}
}
