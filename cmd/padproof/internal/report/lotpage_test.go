package report

import (
	"bytes"
	"encoding/json"
	"io"
	"reflect"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"testing"

	"golang.org/x/net/html"

	"padproof/cmd/padproof/internal/result"
)

func lotPageOf(t *testing.T, l *result.Lot) string {
	t.Helper()
	info := LotPageInfo{Made: madeAt, Version: "v0.0.0", Link: func(path string) string { return "units/" + path + ".html" }}
	info.Pictures = func(int) []Picture {
		return []Picture{{Title: "Spread of loss", Says: "All between the limits.", SVG: func(w io.Writer) error {
			_, err := io.WriteString(w, `<svg xmlns="http://www.w3.org/2000/svg" role="img" viewBox="0 0 1 1"><title>Spread</title></svg>`)
			return err
		}}}
	}
	var b bytes.Buffer
	if err := LotPage(&b, l, info); err != nil {
		t.Fatal(err)
	}
	return b.String()
}

// wholeLot is a lot in which every field is there, each figure another.
func wholeLot() *result.Lot {
	l := &result.Lot{}
	n := 0
	fill(reflect.ValueOf(l).Elem(), &n)
	l.Schema, l.Verdict = result.LotSchema, "FAIL"
	l.Yield = result.Share{Value: 0.9731, Low: 0.90123, High: 0.99517}
	for i := range l.Rows {
		r := &l.Rows[i]
		r.Verdict, r.Error, r.Drawing, r.Report = []string{"FAIL", "PASS", "UNPROVEN"}[i], nil, i, "page"
		for k := range r.Checks {
			r.Checks[k].Name = []string{"loss", "noise", "hum"}[k]
		}
	}
	for i := range l.Drawings {
		for k := range l.Drawings[i].Figures {
			f := &l.Drawings[i].Figures[k]
			f.Check = []string{"loss", "noise", "hum"}[k]
			f.Low, f.High = f.High, f.Low
		}
	}
	return l
}

// smallLot is a lot with little in it.
func smallLot() *result.Lot {
	none := result.Missing
	return &result.Lot{
		Schema: result.LotSchema, Lot: "12", Units: 2, NotChecked: 1, Unproven: 1, Yield: result.Share{Value: 0, Low: 0, High: 0.84},
		Drawings: []result.LotDrawing{{Units: 1, Figures: []result.LotFigure{{
			Check: "loss", Unit: "dB", N: 1, Expected: none, Low: none, High: none, Mean: result.Ranged{Value: 14.02, Low: none, High: none},
			SD: result.Ranged{Value: none, Low: none, High: none}, Least: 14.02, Greatest: 14.02,
		}}}},
		Rows: []result.LotRow{
			{Unit: "0417", Drawing: -1, Error: &result.Error{File: "0417", Text: "after.wav is missing", Hint: "record it"}},
			{Unit: "0418", Verdict: "UNPROVEN", Reason: "no limit is set"},
		},
	}
}

// aside are figures of the JSON that a reader of the page has no use for, or has
// by their place in it.
var aside = regexp.MustCompile(`^/rows/[0-9]+/(drawing|error/line|checks/[12]/.*)$`)

// Every figure of the page is the JSON's, and none of the JSON's is missing.
func TestLotPageFiguresAreTheJSONs(t *testing.T) {
	for name, l := range map[string]*result.Lot{"whole": wholeLot(), "small": smallLot()} {
		t.Run(name, func(t *testing.T) {
			_, want := jsonOf(t, l)
			shown := map[string]bool{}
			for n := range parsed(t, lotPageOf(t, l)).Descendants() {
				field, isFigure := attr(n, "data-field")
				if !isFigure {
					continue
				}
				shown[field] = true
				value, _ := attr(n, "value")
				number, there := want[field]
				switch {
				case !there:
					t.Errorf("the page shows %s, which the JSON does not have", field)
				case number == nil:
					if text := textOf(n); value != "" || text != "-" {
						t.Errorf("%s is null and shown as %q (%q)", field, text, value)
					}
				default:
					sameFigure(t, field, string(number.(json.Number)), value, textOf(n))
				}
			}
			for field, number := range want {
				if !shown[field] && number != nil && !aside.MatchString(field) {
					t.Errorf("%s of the JSON, %v, is not in the page", field, number)
				}
			}
		})
	}
}

// Whatever else has a digit comes word for word from the JSON, or is one of the
// page's own words.
func TestLotPageWorksNothingOut(t *testing.T) {
	own := []string{"95\u00a0%", "95 %", "1.33", "v0.0.0", "2026-03-01 01:30:05 +05:30 here", "order"}
	for name, l := range map[string]*result.Lot{"whole": wholeLot(), "small": smallLot()} {
		v, _ := jsonOf(t, l)
		texts := append(stringsOf(v), own...)
		slices.SortFunc(texts, func(a, b string) int { return len(b) - len(a) })
		for n := range parsed(t, lotPageOf(t, l)).Descendants() {
			if n.Type != html.TextNode || slices.Contains([]string{"style", "data", "time", "title"}, n.Parent.Data) {
				continue
			}
			rest := n.Data
			for _, text := range texts {
				if text != "" {
					rest = strings.ReplaceAll(rest, text, "")
				}
			}
			if strings.ContainsAny(rest, "0123456789") {
				t.Errorf("%s: %q has figures that the JSON does not have: %q", name, n.Data, rest)
			}
		}
	}
}

// The page needs nothing else, leads nowhere but to the units' pages, and its
// headings are in order.
func TestLotPageIsSelfContained(t *testing.T) {
	page := lotPageOf(t, wholeLot())
	if !strings.Contains(page[:512], PageMark) {
		t.Error("PageMark is not in the first 512 bytes, where a page of ours is told by it")
	}
	ids, last, links := map[string]bool{}, byte('0'), 0
	for n := range parsed(t, page).Descendants() {
		if n.Type != html.ElementNode {
			continue
		}
		if slices.Contains([]string{"script", "link", "img", "iframe", "object", "form"}, n.Data) {
			t.Errorf("the page has a %s element", n.Data)
		}
		for _, a := range n.Attr {
			switch {
			case a.Key == "href" && n.Data == "a" && a.Val == "units/page.html":
				links++
			case a.Key == "src" || a.Key == "href" || strings.HasPrefix(a.Key, "on"):
				t.Errorf("the page has %s=%q", a.Key, a.Val)
			case a.Key == "id" && ids[a.Val]:
				t.Errorf("the page has two elements %q", a.Val)
			case a.Key == "id":
				ids[a.Val] = true
			}
		}
		if len(n.Data) == 2 && n.Data[0] == 'h' && n.Data[1] >= '1' && n.Data[1] <= '6' {
			if n.Data[1] > last+1 && !(last == '0' && n.Data == "h1") {
				t.Errorf("%s follows h%c", n.Data, last)
			}
			last = n.Data[1]
		}
	}
	if links != 5 { // each of three in the table of all, the two that do not pass once more
		t.Errorf("%d links to units, want 5", links)
	}
	if strings.Contains(page, "url(") || strings.Contains(page, "@import") {
		t.Error("the style asks for another file")
	}
}

// Names stand in the page as they are, each kept to itself, and open nothing.
func TestLotPageHoldsAnyName(t *testing.T) {
	named := func(name string) *result.Lot {
		l := wholeLot()
		l.Lot, l.Drawings[0].Pad, l.Drawings[0].Rig = name, name, name
		l.Rows[0].Unit, l.Rows[0].Suspect, l.Rows[0].Problems[0], l.Rows[0].Reason = name, name, name, name
		l.Drawings[0].Says[0], l.Warnings[0] = name, name
		l.Drawings[0].Figures[0].Chart.LeftOut, l.Drawings[0].Figures[0].Chart.Breaks[0].Units = []string{name}, []string{name}
		return l
	}
	// The lot; pad and rig; the pad over sentences, pictures and figures; the unit twice, with its
	// suspect; the units of a break.
	holdsAnyName(t, 11, func(name string) string { return lotPageOf(t, named(name)) })
}

// Units that fail come before those that could not be checked, and these before
// those that are unproven; the rest is in the table of all.
func TestLotPageUnitsToLookAt(t *testing.T) {
	l := smallLot()
	l.Rows = nil
	for i := range 300 {
		verdict := []string{"PASS", "UNPROVEN", "PASS", "", "FAIL"}[i%5]
		r := result.LotRow{Unit: strconv.Itoa(i), Verdict: verdict, Reason: "why " + verdict}
		if verdict == "" {
			r.Error = &result.Error{Text: "gone"}
		}
		if i < 200 || i%5 != 4 {
			l.Rows = append(l.Rows, r)
		}
	}
	t1, more := lookAtTable(l, func(string) string { return "" })
	var order []string
	for _, r := range t1.Rows {
		order = append(order, r.Cells[0].Words[0].Text)
	}
	if !more || len(order) != 40 || order[0] != "FAIL" || order[39] != "FAIL" {
		t.Errorf("%d units to look at, more: %v, %v", len(order), more, order)
	}
	l.Rows = l.Rows[:13]
	t2, more := lookAtTable(l, func(string) string { return "" })
	order = nil
	for _, r := range t2.Rows {
		order = append(order, r.Cells[0].Words[0].Text)
	}
	if want := "FAIL FAIL not checked not checked UNPROVEN UNPROVEN UNPROVEN"; strings.Join(order, " ") != want || more {
		t.Errorf("units to look at %v (more: %v), want %s", order, more, want)
	}
	page := lotPageOf(t, &result.Lot{Verdict: "PASS", Units: 1, Passed: 1, Rows: []result.LotRow{{Unit: "0417", Verdict: "PASS"}}})
	if strings.Contains(page, "Units to look at") {
		t.Error("a lot that passes has units to look at")
	}
}

// What the lot means comes first, then the pictures, the figures and all units; and
// both schools of capability find their names.
func TestLotPageOrder(t *testing.T) {
	page := html.UnescapeString(lotPageOf(t, wholeLot()))
	at := 0
	for _, words := range []string{"units: ", "Yield", "What it means", "Units to look at", "How the units lie", "Figures", "Cpk", "NIST/SEMATECH", "Pp and Ppk", "moving range", "The AIAG's Cp and Cpk", "Where the chart breaks", "All units", "Made by padproof v0.0.0."} {
		i := strings.Index(page[at:], words)
		if i < 0 {
			t.Fatalf("%q does not come after byte %d of the page", words, at)
		}
		at += i
	}
}

func TestLotPageSaysSimulated(t *testing.T) {
	l := smallLot()
	if strings.Contains(lotPageOf(t, l), "SIMULATED") {
		t.Error("a real lot's page says SIMULATED")
	}
	l.Simulated = true
	page := lotPageOf(t, l)
	for _, place := range []string{"<title>SIMULATED", `@top-center { content: "SIMULATED`, "<main>\n<p class=\"simulated\"><strong>SIMULATED", "<footer>\n<p class=\"simulated\"><strong>SIMULATED"} {
		if !strings.Contains(page, place) {
			t.Errorf("the page of a rehearsed lot lacks %q", place)
		}
	}
}

// A thousand units make a page that can still be sent and opened.
func TestLotPageOfAThousand(t *testing.T) {
	l := smallLot()
	for i := range 1000 {
		l.Rows = append(l.Rows, result.LotRow{Unit: "2026-" + strconv.Itoa(i), Verdict: "FAIL", Suspect: "R3 is 360", Weight: result.NumberOf(0.87123456789), Report: "x",
			Checks: []result.LotCheck{{Name: "loss", Verdict: "FAIL", Measured: 13.330436493562013, Uncertainty: 0.13564757836285494}}})
	}
	if page := lotPageOf(t, l); len(page) > 1<<20 {
		t.Errorf("a page of %d bytes, want under a megabyte", len(page))
	}
}
