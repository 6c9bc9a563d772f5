package report

import (
	"bytes"
	"embed"
	"fmt"
	"html/template"
	"io"
	"time"

	"padproof/cmd/padproof/internal/result"
)

// PageInfo is what a page says beside the answer.
type PageInfo struct {
	Made     time.Time // when the unit was checked; shown in UTC and in its own zone
	Version  string    // of padproof
	Drawing  *Picture  // the schematic; nil where there is none
	Pictures []Picture // all others, in the order in which they are shown
	// Marked is the schematic with some parts marked. It may be nil, and return nil.
	Marked func(parts []string) *Picture
}

// A Picture is a drawing that stands in the page.
type Picture struct {
	Title string                  // a few words
	Says  string                  // what is shown and what was found
	SVG   func(w io.Writer) error // writes one svg element, safe to stand in a page
}

// PageMark stands near the start of every page, so that a page can be told from
// somebody else's file.
const PageMark = `<meta name="generator" content="padproof `

//go:embed page/*.html page/page.css
var pageFiles embed.FS

var pageTemplates = template.Must(template.New("").Funcs(template.FuncMap{"visible": visible}).ParseFS(pageFiles, "page/*.html"))

// Page writes one unit's answer as one HTML page that needs nothing else: no
// script, no other file, no network. Every figure stands in a data element that
// holds the JSON's value and names its field as a JSON pointer; no figure is
// worked out here.
func Page(w io.Writer, a *result.Answer, info PageInfo) error {
	v, err := viewOf(a, info)
	if err != nil {
		return err
	}
	var b bytes.Buffer
	if err = pageTemplates.ExecuteTemplate(&b, "page.html", v); err != nil {
		return fmt.Errorf("page: %w", err)
	}
	_, err = w.Write(b.Bytes())
	return err
}
