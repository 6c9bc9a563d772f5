package main

import (
	"fmt"
	"io"
	"os"
	"runtime"
	"strings"
	"sync"
	"time"

	"github.com/mattn/go-isatty"

	"padproof/cmd/padproof/internal/report"
)

// isTerminal reports whether a person reads a stream on a screen that can do more
// than print line after line.
func isTerminal(stream any) bool {
	f, ok := stream.(*os.File)
	if !ok || !isatty.IsTerminal(f.Fd()) {
		return false
	}
	kind := os.Getenv("TERM")
	return kind != "dumb" && (kind != "" || runtime.GOOS == "windows")
}

// coloured lets a text have colours where it goes to a terminal that shows them
// and nobody has asked for none (NO_COLOR, set to anything).
func coloured(w io.Writer) io.Writer {
	if os.Getenv("NO_COLOR") != "" || !isTerminal(w) || !takesEscapes(w.(*os.File)) {
		return w
	}
	return report.Coloured{Writer: w}
}

// A progress shows on a terminal how far long work is: one line, written over and
// in the end taken away. It may be used from several goroutines; nil shows nothing.
type progress struct {
	w     io.Writer
	what  string
	since time.Time

	mu    sync.Mutex
	shown time.Time
	width int
}

const (
	progressAfter = 500 * time.Millisecond // work that is over sooner needs none
	progressEvery = 100 * time.Millisecond
)

// progressOn is for work in words, "reading takes"; nil where w is no terminal.
func progressOn(w io.Writer, what string) *progress {
	if !isTerminal(w) {
		return nil
	}
	return &progress{w: w, what: what, since: time.Now()}
}

// tell shows how much of the work is done.
func (p *progress) tell(done, total int64) {
	if p == nil || total <= 0 {
		return
	}
	p.mu.Lock()
	defer p.mu.Unlock()
	now := time.Now()
	if now.Sub(p.since) < progressAfter || now.Sub(p.shown) < progressEvery {
		return
	}
	p.shown = now
	line := fmt.Sprintf("padproof: %s, %d %%", p.what, 100*done/total)
	fmt.Fprintf(p.w, "\r%-*s", p.width, line)
	p.width = max(p.width, len(line))
}

// clear takes the line away.
func (p *progress) clear() {
	if p == nil {
		return
	}
	p.mu.Lock()
	defer p.mu.Unlock()
	if p.width > 0 {
		fmt.Fprintf(p.w, "\r%s\r", strings.Repeat(" ", p.width))
		p.width = 0
	}
}
