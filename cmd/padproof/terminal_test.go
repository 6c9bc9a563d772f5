//go:build unix

package main

import (
	"bytes"
	"encoding/binary"
	"errors"
	"io"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"slices"
	"strings"
	"syscall"
	"testing"
	"time"

	"github.com/creack/pty"
)

// A session is a padproof that a person runs at a terminal.
type session struct {
	cmd  *exec.Cmd
	seen chan string // what comes to the screen
}

// atTerminal starts the command with both its outputs on a terminal.
func atTerminal(t *testing.T, env []string, args ...string) *session {
	t.Helper()
	program, err := exec.LookPath("padproof") // as the scripts know it
	if err != nil {
		t.Fatal(err)
	}
	s := &session{cmd: exec.Command(program, args...), seen: make(chan string, 1000)}
	s.cmd.Env = append(slices.DeleteFunc(os.Environ(), func(v string) bool {
		return strings.HasPrefix(v, "NO_COLOR=") || strings.HasPrefix(v, "TERM=")
	}), env...)
	screen, err := pty.Start(s.cmd)
	if err != nil {
		t.Fatal(err)
	}
	go func() {
		defer close(s.seen)
		defer screen.Close()
		b := make([]byte, 4096)
		for {
			n, err := screen.Read(b)
			s.seen <- string(b[:n])
			if err != nil {
				return
			}
		}
	}()
	return s
}

// rest waits for the end and returns what came to the screen, and the status.
func (s *session) rest() (string, int) {
	var b strings.Builder
	for text := range s.seen {
		b.WriteString(text)
	}
	s.cmd.Wait()
	return b.String(), s.cmd.ProcessState.ExitCode()
}

var escape = regexp.MustCompile("\x1b\\[[0-9;]*m")

// Colour is for terminals alone, off when asked, and says nothing by itself: the
// words are the same without.
func TestColourOnlyOnATerminal(t *testing.T) {
	const folder = "../../testdata/saltmarsh/0418"
	var piped, stderr bytes.Buffer
	if status := run([]string{"check", folder}, &piped, &stderr); status != exitFail {
		t.Fatalf("status %d: %s", status, &stderr)
	}
	if strings.Contains(piped.String(), "\x1b") || stderr.Len() > 0 {
		t.Errorf("to a pipe: %q and on stderr %q", &piped, &stderr)
	}
	for _, tt := range []struct {
		name   string
		env    []string
		colour bool
	}{
		{"a terminal", []string{"TERM=xterm"}, true},
		{"NO_COLOR", []string{"TERM=xterm", "NO_COLOR=1"}, false},
		{"NO_COLOR empty", []string{"TERM=xterm", "NO_COLOR="}, true},
		{"a dumb terminal", []string{"TERM=dumb"}, false},
		{"no TERM", nil, false},
	} {
		seen, status := atTerminal(t, tt.env, "check", folder).rest()
		if status != exitFail {
			t.Errorf("%s: status %d, want %d", tt.name, status, exitFail)
		}
		if coloured := strings.Contains(seen, "\x1b[1;31mFAIL\x1b[0m"); coloured != tt.colour || !tt.colour && strings.Contains(seen, "\x1b") {
			t.Errorf("%s: coloured %v, want %v: %q", tt.name, coloured, tt.colour, seen)
		}
		plain := strings.ReplaceAll(escape.ReplaceAllString(afterProgress(seen), ""), "\r\n", "\n")
		if plain != piped.String() {
			t.Errorf("%s: without its colours it says\n%q, want\n%q", tt.name, plain, &piped)
		}
	}
}

// afterProgress is a screen's text without what was written over.
func afterProgress(seen string) string {
	return regexp.MustCompile("\rpadproof: [^\r\n]*|\r *\r").ReplaceAllString(seen, "")
}

func TestJSONHasNoColour(t *testing.T) {
	seen, _ := atTerminal(t, []string{"TERM=xterm"}, "check", "../../testdata/saltmarsh/0418", "--json").rest()
	if strings.Contains(seen, "\x1b") {
		t.Errorf("JSON at a terminal has escapes: %.200q", seen)
	}
}

// Work that takes long shows how far it is, and takes that away again.
func TestProgressShowsOnATerminal(t *testing.T) {
	t.Setenv("TERM", "xterm")
	screen, tty, err := pty.Open()
	if err != nil {
		t.Fatal(err)
	}
	defer screen.Close()
	p := progressOn(tty, "reading takes")
	p.tell(1, 4) // too early: most work is over before anyone looks
	p.since = time.Now().Add(-time.Minute)
	p.tell(2, 4)
	p.tell(3, 4) // too soon after the last
	p.shown = time.Time{}
	p.tell(4, 4)
	p.clear()
	p.clear()
	tty.Close()
	seen, _ := io.ReadAll(screen)
	want := "\rpadproof: reading takes, 50 %\rpadproof: reading takes, 100 %\r" + strings.Repeat(" ", len("padproof: reading takes, 100 %")) + "\r"
	if string(seen) != want {
		t.Errorf("the screen got %q, want %q", seen, want)
	}
	if p := progressOn(&bytes.Buffer{}, "x"); p != nil {
		t.Error("a pipe shows progress")
	}
	none := (*progress)(nil)
	none.tell(1, 2)
	none.clear()
}

// Ctrl-C while takes are written leaves nothing of them, and a clean screen.
func TestInterruptedRehearsal(t *testing.T) {
	folder := filepath.Join(t.TempDir(), "0417")
	const sheets = "../../testdata/saltmarsh/"
	s := atTerminal(t, []string{"TERM=xterm"}, "rehearse", "--pad", sheets+"pad.toml", "--rig", sheets+"rig.toml", "--out", folder, "--seconds", "3600")
	s.interruptAt(t, "writing takes")
	if _, err := os.Stat(folder); err == nil {
		t.Error("the folder is still there")
	}
}

// Ctrl-C while takes are read leaves the report that was there, and no other file.
func TestInterruptedCheck(t *testing.T) {
	folder := t.TempDir()
	for _, role := range []string{"before", "after"} {
		longSilence(t, filepath.Join(folder, role+".wav"))
	}
	old := []byte("<!DOCTYPE html>\n<meta name=\"generator\" content=\"padproof v0\">")
	page := filepath.Join(folder, "page.html")
	if err := os.WriteFile(page, old, 0o666); err != nil {
		t.Fatal(err)
	}
	atTerminal(t, []string{"TERM=xterm"}, "check", folder, "--report", page).interruptAt(t, "reading takes")
	if now, _ := os.ReadFile(page); !bytes.Equal(now, old) {
		t.Errorf("the report is now %.100q", now)
	}
	if left, _ := os.ReadDir(folder); len(left) != 3 {
		t.Errorf("left behind: %v", left)
	}
}

// longSilence makes a take of some hours, of 16 bits and one channel at 48 kHz,
// that takes no room on the disk.
func longSilence(t *testing.T, path string) {
	t.Helper()
	const dataBytes, rateHz = 1 << 29, 48000
	var b bytes.Buffer
	for _, v := range []any{
		[]byte("RIFF"), uint32(dataBytes + 36), []byte("WAVEfmt "), uint32(16), uint16(1), uint16(1),
		uint32(rateHz), uint32(2 * rateHz), uint16(2), uint16(16), []byte("data"), uint32(dataBytes),
	} {
		binary.Write(&b, binary.LittleEndian, v)
	}
	if err := errors.Join(os.WriteFile(path, b.Bytes(), 0o666), os.Truncate(path, int64(b.Len()+dataBytes))); err != nil {
		t.Fatal(err)
	}
}

// interruptAt sends what Ctrl-C sends once the words are on the screen, and holds
// what follows against what is owed.
func (s *session) interruptAt(t *testing.T, words string) {
	t.Helper()
	seen := ""
	for text := range s.seen {
		seen += text
		if strings.Contains(seen, words) {
			break
		}
	}
	if err := s.cmd.Process.Signal(syscall.SIGINT); err != nil {
		t.Fatalf("%v, after %q", err, seen)
	}
	rest, status := s.rest()
	if status != exitNoCheck || !strings.Contains(rest, "padproof: error: interrupted; nothing was left behind") {
		t.Errorf("status %d, %q; want %d and a word about the interruption", status, rest, exitNoCheck)
	}
	if line := strings.LastIndex(seen+rest, "\r "); line < 0 {
		t.Errorf("the line of progress was not taken away: %q", seen+rest)
	}
}
