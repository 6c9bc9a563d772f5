package report

import (
	"bytes"
	_ "embed"
	"fmt"
	"html/template"
	"io"
	"strconv"
	"strings"
	"time"

	"padproof/cmd/padproof/internal/result"
)

// LotPageInfo is what a lot's page says beside the result.
type LotPageInfo struct {
	Made     time.Time // when the lot was checked; shown in UTC and in its own zone
	Version  string    // of padproof
	Pictures func(drawing int) []Picture
	// Link is where on the page a unit leads to by the report that its row names, as
	// a relative URL; "" for nowhere. It may be nil.
	Link func(report string) string
}

//go:embed page/lot.css
var lotCSS string

// LotPage writes a lot as one HTML page that needs nothing else, as [Page] does for
// a unit: what the lot means first, then the units to look at, pictures, figures,
// and a table of all units. Every figure stands in a data element that names its
// field of the JSON.
func LotPage(w io.Writer, l *result.Lot, info LotPageInfo) error {
	v, err := lotViewOf(l, info)
	if err != nil {
		return err
	}
	var b bytes.Buffer
	if err = pageTemplates.ExecuteTemplate(&b, "lot.html", v); err != nil {
		return fmt.Errorf("page: %w", err)
	}
	_, err = w.Write(b.Bytes())
	return err
}

// A lotView is what the template of a lot is filled with.
type lotView struct {
	*result.Lot
	stamp
	CSS          template.CSS
	Title        string
	Class        string // of the verdict
	Mark, Word   string
	Why          []phrase
	Facts        []fact
	Groups       []lotGroup
	Several      bool // more than one drawing
	HasSays      bool
	LookAt       *table
	MoreToLookAt bool
	All          *table
	InLedger     []fact // the last record of the lot
}

// A lotGroup is the units of one drawing.
type lotGroup struct {
	ID, Pad  string
	Says     []string
	Pictures []pictureView
	Tables   []notedTable
}

// A notedTable is a table with what explains it.
type notedTable struct {
	*table
	Notes []string
}

func lotViewOf(l *result.Lot, info LotPageInfo) (*lotView, error) {
	css, err := pageFiles.ReadFile("page/page.css")
	if err != nil {
		return nil, err
	}
	v := &lotView{Lot: l, stamp: stampOf(info.Made, info.Version), CSS: template.CSS(string(css) + lotCSS), Several: len(l.Drawings) > 1}
	v.Class, v.Mark, v.Word = strings.ToLower(l.Verdict), marks[l.Verdict], l.Verdict
	if l.Verdict == "" {
		v.Class, v.Mark, v.Word = "unproven", "?", "NOT ALL CHECKED"
	}
	v.Title = v.Word + " - lot " + visible(l.Lot)
	if l.Simulated {
		v.Title = "SIMULATED - " + v.Title
	}
	v.Why, v.Facts, v.InLedger = lotCounts(l), lotFacts(l), recordedFacts(l.Recorded, nil)
	for i, d := range l.Drawings {
		g := lotGroup{ID: strconv.Itoa(i), Pad: d.Pad, Tables: lotTables(at("/drawings", i)+"/figures", d.Figures)}
		for _, s := range d.Says {
			g.Says = append(g.Says, capital(s)+".")
			v.HasSays = true
		}
		if info.Pictures != nil {
			for _, p := range info.Pictures(i) {
				one, err := p.view()
				if err != nil {
					return nil, err
				}
				g.Pictures = append(g.Pictures, one)
			}
		}
		v.Groups = append(v.Groups, g)
	}
	link := info.Link
	if link == nil {
		link = func(string) string { return "" }
	}
	v.LookAt, v.MoreToLookAt = lookAtTable(l, link)
	v.All = unitsTable(l, link)
	return v, nil
}

// lotCounts say how many units there are of each verdict, and the yield.
func lotCounts(l *result.Lot) []phrase {
	counts := phrase{count("/units", l.Units), words(" " + unitWord(l.Units) + ": "), count("/passed", l.Passed), words(" PASS, "),
		count("/failed", l.Failed), words(" FAIL, "), count("/unproven", l.Unproven), words(" UNPROVEN, "), count("/not_checked", l.NotChecked), words(" not checked")}
	if l.Units == 0 {
		return []phrase{counts}
	}
	share := func(key string, n result.Number) piece { return figure("/yield/"+key, n, percent(n)) }
	return []phrase{counts, {words("Yield "), share("value", l.Yield.Value), words("; that of the line lies between "),
		share("low", l.Yield.Low), words(" and "), share("high", l.Yield.High), words(" (95 %)")}}
}

// lotFacts are what was checked, and on which bench.
func lotFacts(l *result.Lot) []fact {
	var facts []fact
	for i, d := range l.Drawings {
		pad := phrase{name(d.Pad)}
		if d.Pad == "" {
			pad = say("no drawing")
		}
		pad = append(pad, words(", "), count(at("/drawings", i)+"/units", d.Units), words(" "+unitWord(d.Units)))
		facts = append(facts, fact{"Pad", pad})
		if d.Rig != "" && (i == 0 || l.Drawings[i-1].Rig != d.Rig) {
			facts = append(facts, fact{"Rig", phrase{name(d.Rig)}})
		}
	}
	return facts
}
