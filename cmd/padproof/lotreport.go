package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"net/url"
	"os"
	"path/filepath"
	"strings"
	"time"
	"unicode"
	"unicode/utf8"

	"github.com/spf13/cobra"
	"golang.org/x/text/unicode/norm"

	"padproof/cmd/padproof/internal/draw"
	"padproof/cmd/padproof/internal/report"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/unit"
	"padproof/cmd/padproof/internal/whole"
)

// unitPages are the pages of a lot's units in a folder.
type unitPages struct {
	folder  string
	names   map[*unit.Unit]string
	written int
	now     func() time.Time
}

// unitPages chooses a name for each unit's page, makes their folder and refuses
// one in which a page would lie over somebody else's file; nil where none are
// wanted.
func (f lotFlags) unitPages(cmd *cobra.Command, units []*unit.Unit) (*unitPages, error) {
	if f.reports == "" {
		if cmd.Flags().Changed("reports") {
			return nil, usageError(cmd, "--reports wants a folder")
		}
		return nil, nil
	}
	if err := os.MkdirAll(f.reports, 0o777); err != nil {
		return nil, &result.Error{File: f.reports, Text: "could not be made: " + reasonOf(err), Hint: "name with --reports a folder that you may write to"}
	}
	pages := &unitPages{folder: f.reports, names: map[*unit.Unit]string{}, now: f.now}
	taken := map[string]bool{}
	if f.report != "" && sameFolder(filepath.Dir(f.report), f.reports) {
		taken[nameKey(strings.TrimSuffix(filepath.Base(f.report), filepath.Ext(f.report)))] = true
	}
	for _, u := range units {
		pages.names[u] = pageName(u.Serial, taken) + ".html"
		if err := checkReportPath(cmd, filepath.Join(f.reports, pages.names[u])); err != nil {
			return nil, err
		}
	}
	return pages, nil
}

func reasonOf(err error) string {
	var inPath *os.PathError
	if errors.As(err, &inPath) {
		return inPath.Err.Error()
	}
	return err.Error()
}

func sameFolder(a, b string) bool {
	one, err := os.Stat(a)
	two, err2 := os.Stat(b)
	return err == nil && err2 == nil && os.SameFile(one, two)
}

// longestName leaves room in what file systems take, 255 bytes.
const longestName = 150

// pageName is a serial as the name of a file anywhere, and unlike those taken, to
// which it is added: letters, digits, hyphen, underline and full stop, no full stop
// at either end, none of the names that Windows keeps for devices.
func pageName(serial string, taken map[string]bool) string {
	stem := strings.Map(func(r rune) rune {
		if unicode.IsLetter(r) || unicode.IsDigit(r) || strings.ContainsRune("-_.", r) {
			return r
		}
		return '_'
	}, norm.NFC.String(strings.ToValidUTF8(serial, "_")))
	for len(stem) > longestName {
		_, size := utf8.DecodeLastRuneInString(stem)
		stem = stem[:len(stem)-size]
	}
	stem = strings.Trim(stem, ".")
	first, _, _ := strings.Cut(strings.ToUpper(stem), ".")
	if stem == "" || deviceNames[first] || deviceNames[strings.TrimRight(first, "0123456789")+"1"] && len(first) == 4 {
		stem = "_" + stem
	}
	name := stem
	for n := 2; taken[nameKey(name)]; n++ {
		name = fmt.Sprintf("%s-%d", stem, n)
	}
	taken[nameKey(name)] = true
	return name
}

// deviceNames are names that Windows keeps to itself, with any extension; the last
// two with any digit.
var deviceNames = map[string]bool{"CON": true, "PRN": true, "AUX": true, "NUL": true, "COM1": true, "LPT1": true}

// nameKey is what two names have in common that some file system takes for one.
func nameKey(name string) string { return strings.ToLower(norm.NFKC.String(name)) }

// write writes a unit's page and returns its path.
func (p *unitPages) write(ctx context.Context, u *unit.Unit, a *result.Answer) (string, error) {
	path := filepath.Join(p.folder, p.names[u])
	if err := writeReport(ctx, path, a, p.now()); err != nil {
		return "", err
	}
	p.written++
	return filepath.ToSlash(path), nil
}

// afterInterrupt says what an interruption has left of the pages; they are whole.
func (p *unitPages) afterInterrupt(err error) error {
	if p == nil || p.written == 0 || !errors.Is(err, context.Canceled) {
		return afterInterrupt(err)
	}
	return &result.Error{Text: fmt.Sprintf("interrupted; %d units' pages are in %s, each whole, and nothing else was left behind", p.written, p.folder)}
}

// writeLotReport writes a lot's page, all of it or nothing.
func writeLotReport(ctx context.Context, path string, l *result.Lot, made time.Time) error {
	info := report.LotPageInfo{Made: made, Version: version(), Link: linkFrom(filepath.Dir(path)), Pictures: func(drawing int) []report.Picture {
		var all []report.Picture
		for _, p := range draw.OfLot(l, drawing) {
			all = append(all, *onPage(p))
		}
		return all
	}}
	return whole.Write(ctx, path, func(w io.Writer) error { return report.LotPage(w, l, info) })
}

// linkFrom gives the relative URL of a page as seen from a folder; none where
// there is no way from one to the other.
func linkFrom(folder string) func(string) string {
	return func(page string) string {
		from, err := filepath.Abs(folder)
		to, err2 := filepath.Abs(filepath.FromSlash(page))
		if err != nil || err2 != nil {
			return ""
		}
		way, err := filepath.Rel(from, to)
		if err != nil {
			return ""
		}
		return (&url.URL{Path: filepath.ToSlash(way)}).String()
	}
}

// lotPictures are the pictures of all of a lot's drawings.
func lotPictures(l *result.Lot) []*draw.Picture {
	var all []*draw.Picture
	for i := range l.Drawings {
		all = append(all, draw.OfLot(l, i)...)
	}
	return all
}
