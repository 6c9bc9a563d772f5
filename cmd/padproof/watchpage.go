package main

import (
	"context"
	"encoding/json"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"time"

	"padproof/cmd/padproof/internal/ledger"
	"padproof/cmd/padproof/internal/result"
)

// pages are those of the units. One that could not be written is owed: it is made
// from the record later.
type pages struct {
	folder  string // "" for no pages
	owed    map[string]owedPage
	trouble trouble
	next    time.Time // when those that are owed are tried
}

// An owedPage is of a record.
type owedPage struct{ ledger.Receipt }

// path is the page of a unit: the page of its newest check.
func (g *pages) path(serial string) string {
	return filepath.Join(g.folder, strings.Map(func(r rune) rune {
		if r == '/' || r == filepath.Separator || r == ':' {
			return '_'
		}
		return r
	}, serial)+".html")
}

// add writes the page of an answer. If it cannot be written, that of a recorded
// answer is owed; of another the error is returned.
func (g *pages) add(ctx context.Context, w *watching, a *result.Answer) error {
	if g.folder == "" {
		return nil
	}
	path := g.path(a.Unit)
	err := writeReport(context.WithoutCancel(ctx), path, a, time.Now())
	if err == nil {
		delete(g.owed, path)
		return nil
	}
	w.say(g.trouble.begins(err, "pages wait until they can be written"))
	if a.Recorded == nil {
		return err
	}
	g.owe(path, ledger.Receipt(*a.Recorded))
	return nil
}

func (g *pages) owe(path string, r ledger.Receipt) {
	if len(g.owed) == 0 {
		g.next = time.Now().Add(tryAgain)
	}
	g.owed[path] = owedPage{r}
}

// mend writes the page of a record where it is not there, or is older.
func (g *pages) mend(ctx context.Context, w *watching, e *ledger.Entry) error {
	if g.folder == "" {
		return nil
	}
	path := g.path(e.Record.Unit)
	if info, err := os.Stat(path); err == nil && !info.ModTime().Before(e.Record.Time) {
		return nil
	}
	if err := g.write(ctx, path, e); err != nil {
		w.say(g.trouble.begins(err, "pages wait until they can be written"))
		g.owe(path, e.Receipt)
	}
	return nil
}

// write makes a page from a record.
func (g *pages) write(ctx context.Context, path string, e *ledger.Entry) error {
	var a result.Answer
	if err := json.Unmarshal(e.Record.Answer, &a); err != nil {
		return &result.Error{File: path, Text: fmt.Sprintf("the record %s cannot be read: %v", e.Receipt, err), Hint: "padproof ledger verify finds what is wrong with the ledger"}
	}
	a.Recorded = recordedOf(e.Receipt)
	return writeReport(context.WithoutCancel(ctx), path, &a, e.Record.Time)
}

// settle writes the pages that are owed, if it is time to, or at once if all are
// to be tried now.
func (g *pages) settle(ctx context.Context, w *watching, now bool) {
	if len(g.owed) == 0 || !now && time.Now().Before(g.next) {
		return
	}
	g.next = time.Now().Add(tryAgain)
	for path, owed := range g.owed {
		e, err := w.book.Show(ctx, owed.Station, owed.Sequence)
		if err == nil {
			err = g.write(ctx, path, e)
		}
		if err != nil {
			w.say(g.trouble.begins(err, "pages wait until they can be written"))
			return
		}
		delete(g.owed, path)
	}
	w.say(g.trouble.ends("all pages are written"))
}

// settlePages writes the pages that are owed.
func (w *watching) settlePages(ctx context.Context) { w.pages.settle(ctx, w, false) }

// unwritten says how many pages are owed, "" if none.
func (g *pages) unwritten() string {
	if len(g.owed) == 0 {
		return ""
	}
	return fmt.Sprintf("padproof: pages that could not be written to %s: %d; the next watch with --reports writes them from the ledger", g.folder, len(g.owed))
}
