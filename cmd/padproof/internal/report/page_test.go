package report

import (
	"bytes"
	"encoding/json"
	"fmt"
	"io"
	"math"
	"reflect"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"testing"
	"time"

	"golang.org/x/net/html"

	"padproof/cmd/padproof/internal/result"
)

// madeAt is when the pages of these tests are made, some hours east of UTC.
var madeAt = time.Date(2026, 3, 1, 1, 30, 5, 0, time.FixedZone("", 5*3600+1800))

func pageOf(t *testing.T, a *result.Answer) string {
	t.Helper()
	picture := Picture{Title: "Response", Says: "Within its limits.", SVG: func(w io.Writer) error {
		_, err := io.WriteString(w, `<svg xmlns="http://www.w3.org/2000/svg" role="img" viewBox="0 0 1 1"><title>Response</title></svg>`)
		return err
	}}
	var b bytes.Buffer
	err := Page(&b, a, PageInfo{Made: madeAt, Version: "v0.0.0", Pictures: []Picture{picture}, Marked: func([]string) *Picture { return &picture }})
	if err != nil {
		t.Fatal(err)
	}
	return b.String()
}

// everything is an answer in which every field is there, each figure another.
func everything() *result.Answer {
	a := &result.Answer{}
	n := 0
	fill(reflect.ValueOf(a).Elem(), &n)
	a.Schema, a.Verdict, a.Drawing, a.Curves = result.CheckSchema, "FAIL", nil, nil
	for i, name := range []string{"loss", "response", "noise"} {
		c := &a.Checks[i]
		c.Name, c.Unit, c.Verdict, c.Reason = name, "dB", []string{"FAIL", "PASS", ""}[i], ""
		c.Low, c.High = c.High, c.Low // as they were filled the first is the smaller
		c.Points[0].FreqHz, c.Points[1].FreqHz, c.Points[2].FreqHz = 31.62, 1000, 16000
	}
	a.Checks[2].Measured, a.Checks[2].Uncertainty = result.Missing, result.Missing // then the bound speaks
	return a
}

// fill gives every field a value: figures with all their digits, lists of three.
func fill(v reflect.Value, n *int) {
	*n++
	switch v.Kind() {
	case reflect.Float64:
		v.SetFloat(float64(*n) * math.Pi / 7 * math.Pow(10, float64(*n%5-2)))
	case reflect.Int:
		v.SetInt(int64(*n))
	case reflect.Bool:
		v.SetBool(true)
	case reflect.String:
		v.SetString("word" + strings.Repeat("x", *n%7))
	case reflect.Pointer:
		v.Set(reflect.New(v.Type().Elem()))
		fill(v.Elem(), n)
	case reflect.Slice:
		v.Set(reflect.MakeSlice(v.Type(), 3, 3))
		for i := range v.Len() {
			fill(v.Index(i), n)
		}
	case reflect.Map:
		v.Set(reflect.ValueOf(map[string]result.Number{"loss_db": result.Number(*n) / 3, "legs_db": result.Missing}))
	case reflect.Struct:
		for i := range v.NumField() {
			fill(v.Field(i), n)
		}
	}
}

// sound is an answer with little in it.
func sound() *result.Answer {
	none := result.Missing
	return &result.Answer{
		Schema: result.CheckSchema, Verdict: "UNPROVEN", Reason: "no limit is set",
		Checks: []result.Check{{Name: "polarity", Measured: -1, Expected: 1, Low: 1, High: 1, Uncertainty: none, Ratio: none}},
	}
}

// numbers are all figures of a JSON value by their pointers; null is nil.
func numbers(v any, at string, into map[string]any) {
	switch v := v.(type) {
	case map[string]any:
		for key, one := range v {
			numbers(one, at+"/"+key, into)
		}
	case []any:
		for i, one := range v {
			numbers(one, at+"/"+strconv.Itoa(i), into)
		}
	case json.Number, nil:
		into[at] = v
	}
}

func jsonOf(t *testing.T, a any) (any, map[string]any) {
	t.Helper()
	text, err := json.Marshal(a)
	if err != nil {
		t.Fatal(err)
	}
	d := json.NewDecoder(bytes.NewReader(text))
	d.UseNumber()
	var v any
	if err := d.Decode(&v); err != nil {
		t.Fatal(err)
	}
	all := map[string]any{}
	numbers(v, "", all)
	return v, all
}

func attr(n *html.Node, name string) (string, bool) {
	for _, a := range n.Attr {
		if a.Key == name {
			return a.Val, true
		}
	}
	return "", false
}

func textOf(n *html.Node) string {
	var b strings.Builder
	for d := range n.Descendants() {
		if d.Type == html.TextNode {
			b.WriteString(d.Data)
		}
	}
	return b.String()
}

func parsed(t *testing.T, page string) *html.Node {
	t.Helper()
	root, err := html.Parse(strings.NewReader(page))
	if err != nil {
		t.Fatal(err)
	}
	return root
}

// Every figure of the page is the JSON's: its whole value is that of the field it
// names, its text is that value rounded; and no figure of the JSON is missing.
func TestPageFiguresAreTheJSONs(t *testing.T) {
	for name, a := range map[string]*result.Answer{"everything": everything(), "little": sound()} {
		t.Run(name, func(t *testing.T) {
			_, want := jsonOf(t, a)
			shown := map[string]bool{}
			for n := range parsed(t, pageOf(t, a)).Descendants() {
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
					if text := textOf(n); value != "" || text != "-" && text != "open" {
						t.Errorf("%s is null and shown as %q (%q)", field, text, value)
					}
				default:
					sameFigure(t, field, string(number.(json.Number)), value, textOf(n))
				}
			}
			for field, number := range want {
				if stem, isHigh := strings.CutSuffix(field, "/high"); isHigh && number == want[stem+"/low"] {
					continue // shown once
				}
				if !shown[field] && number != nil && !strings.Contains(field, "/points/") {
					t.Errorf("%s of the JSON, %v, is not in the page", field, number)
				}
			}
		})
	}
}

// figureText is a rounded figure: under, a number, a prefix of its unit.
var figureText = regexp.MustCompile(`^(<|over )?(-?[0-9.]+(?:e[-+][0-9]+)?) ?([kM%]?)(?:Ω|Hz)?$`)

// sameFigure holds what the page says of a field against what the JSON says.
func sameFigure(t *testing.T, field, want, value, text string) {
	t.Helper()
	w, err := strconv.ParseFloat(want, 64)
	v, err2 := strconv.ParseFloat(value, 64)
	if err != nil || err2 != nil || w != v {
		t.Errorf("%s = %q in the page, want %s", field, value, want)
		return
	}
	m := figureText.FindStringSubmatch(text)
	if m == nil {
		t.Errorf("%s is shown as %q, which is no figure", field, text)
		return
	}
	scale := map[string]float64{"": 1, "k": 1e3, "M": 1e6, "%": 0.01}[m[3]]
	shown, _ := strconv.ParseFloat(m[2], 64)
	shown *= scale
	switch m[1] {
	case "<":
		if v >= shown {
			t.Errorf("%s = %v is shown as %q", field, v, text)
		}
	case "over ":
		if v <= shown {
			t.Errorf("%s = %v is shown as %q", field, v, text)
		}
	default:
		if step := lastStep(m[2]) * scale; math.Abs(shown-v) > 0.5001*step {
			t.Errorf("%s = %v is shown as %q", field, v, text)
		}
	}
}

// lastStep is what one in the last digit of a number stands for. Zeros before the
// point may be rounded ones.
func lastStep(number string) float64 {
	mantissa, exponent, _ := strings.Cut(number, "e")
	power, _ := strconv.Atoi(exponent)
	if _, decimals, found := strings.Cut(mantissa, "."); found {
		return math.Pow(10, float64(power-len(decimals)))
	}
	return math.Pow(10, float64(power))
}

// Whatever else has a digit comes word for word from the JSON, or is one of the
// page's own words.
func TestPageWorksNothingOut(t *testing.T) {
	own := []string{"95\u00a0%", "95 %", "3 dB", "SHA-256", "2nd", "3rd", "4th", "5th", "6th", "7th", "8th", "9th", "10th", "v0.0.0", "2026-03-01 01:30:05 +05:30 here", "add up to 1"}
	for name, a := range map[string]*result.Answer{"everything": everything(), "little": sound()} {
		v, _ := jsonOf(t, a)
		texts := append(stringsOf(v), own...)
		slices.SortFunc(texts, func(a, b string) int { return len(b) - len(a) })
		root := parsed(t, pageOf(t, a))
		for n := range root.Descendants() {
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

func stringsOf(v any) []string {
	var all []string
	switch v := v.(type) {
	case map[string]any:
		for _, one := range v {
			all = append(all, stringsOf(one)...)
		}
	case []any:
		for _, one := range v {
			all = append(all, stringsOf(one)...)
		}
	case string:
		all = append(all, v)
	}
	return all
}

// The page's table of checks says what the text report's does.
func TestPageRoundsAsTheTextDoes(t *testing.T) {
	a := everything()
	rows := map[string][]string{}
	for n := range parsed(t, pageOf(t, a)).Descendants() {
		if class, _ := attr(n, "class"); n.Data == "table" && class == "checks" {
			for r := range n.Descendants() {
				if r.Data != "tr" {
					continue
				}
				var cells []string
				for c := range r.ChildNodes() {
					cells = append(cells, textOf(c))
				}
				rows[cells[0]] = cells
			}
		}
	}
	for _, c := range a.Checks {
		if want := checkRow(c); !slices.Equal(rows[c.Name], want) {
			t.Errorf("row of %s = %q, want the text's %q", c.Name, rows[c.Name], want)
		}
	}
}

func TestPageIsSelfContained(t *testing.T) {
	page := pageOf(t, everything())
	if !strings.Contains(page[:512], PageMark) {
		t.Error("PageMark is not in the first 512 bytes, where a page of ours is told by it")
	}
	var levels []string
	for n := range parsed(t, page).Descendants() {
		if n.Type != html.ElementNode {
			continue
		}
		if slices.Contains([]string{"script", "link", "img", "iframe", "object", "form"}, n.Data) {
			t.Errorf("the page has a %s element", n.Data)
		}
		for _, a := range n.Attr {
			if a.Key == "src" || a.Key == "href" || strings.HasPrefix(a.Key, "on") {
				t.Errorf("the page has %s=%q", a.Key, a.Val)
			}
		}
		if len(n.Data) == 2 && n.Data[0] == 'h' && n.Data[1] >= '1' && n.Data[1] <= '6' {
			levels = append(levels, n.Data)
		}
	}
	if strings.Contains(page, "url(") || strings.Contains(page, "@import") {
		t.Error("the style asks for another file")
	}
	for i, h := range levels {
		if i == 0 && h != "h1" || i > 0 && h[1] > levels[i-1][1]+1 {
			t.Errorf("headings %v: %s is out of order", levels[:i+1], h)
		}
	}
}

// nasty are names that a sheet or a folder may hold.
var nasty = []string{
	`<script>alert(1)</script>`, `"'><b>&amp;`, "rtl \u202egnp.exe\u2066 \u05d0\u05d1\u05d2 \u200f!", strings.Repeat("0417-", 60),
	"🎛️👩‍🔧 pad", "{{.}} ]]> --> </style>", "nul\x00bell\x07\u2028\xff", "`${x}`\\", " ", "../../0417",
}

// Names stand in the page as they are, each kept to itself, and open nothing.
func TestPageHoldsAnyName(t *testing.T) {
	named := func(name string) *result.Answer {
		a := everything()
		a.Unit, a.Pad, a.Rig, a.Suspects[0].Fault, a.Suspects[0].Parts[0] = name, name, name, name, name
		a.Captures[0].File, a.Sheets[0].File, a.Sheets[0].Text, a.Notes[0], a.Unseen[0].Part = name, name, name, name, name
		a.Checks[0].Reason, a.Captures[1].Problems[0].Text = name, name
		return a
	}
	// The heading; unit, pad and rig; the fault and its part; three problems of one
	// file, twice more among the takes; a sheet; what the bench cannot see.
	holdsAnyName(t, 13, func(name string) string { return pageOf(t, named(name)) })
}

// holdsAnyName demands that no nasty name changes the elements of a page, and that
// each stands in so many elements that isolate it.
func holdsAnyName(t *testing.T, wantIsolated int, pageWith func(name string) string) {
	t.Helper()
	want := shapeOf(parsed(t, pageWith("plain")))
	for _, name := range nasty {
		page := pageWith(name)
		if shapeOf(parsed(t, page)) != want {
			t.Errorf("%q changes the page's elements", name)
		}
		if strings.ContainsAny(page, "\x00\x07\u202e\u2066\u2028") {
			t.Errorf("%q puts a mark into the page that turns or ends what follows", name)
		}
		isolated := 0
		for n := range parsed(t, page).Descendants() {
			if n.Data == "bdi" && strings.TrimSpace(textOf(n)) == strings.TrimSpace(visible(name)) {
				isolated++
			}
		}
		if isolated != wantIsolated {
			t.Errorf("%q stands in %d elements that isolate it, want %d", name, isolated, wantIsolated)
		}
	}
}

// shapeOf are the names of a page's elements in order.
func shapeOf(root *html.Node) string {
	var b strings.Builder
	for n := range root.Descendants() {
		if n.Type == html.ElementNode {
			fmt.Fprintf(&b, "%s ", n.Data)
		}
	}
	return b.String()
}

func TestVisible(t *testing.T) {
	for text, want := range map[string]string{
		"plain": "plain", "a\nb\tc": "a\nb\tc", "a\u202eb": "a[U+202E]b", "\x1b[31m": "[U+001B][31m",
		"\xff": "\ufffd", "👩‍🔧": "👩‍🔧", "\u200f": "\u200f", "\u2069": "[U+2069]",
	} {
		if got := visible(text); got != want {
			t.Errorf("visible(%q) = %q, want %q", text, got, want)
		}
	}
}

// Who reads the page or a print of it cannot miss that it is a rehearsal's.
func TestPageSaysSimulated(t *testing.T) {
	a := sound()
	if strings.Contains(pageOf(t, a), "SIMULATED") {
		t.Error("a real unit's page says SIMULATED")
	}
	a.Simulated = true
	page := pageOf(t, a)
	for _, place := range []string{"<title>SIMULATED", `@top-center { content: "SIMULATED`, "<main>\n<p class=\"simulated\"><strong>SIMULATED", "<footer>\n<p class=\"simulated\"><strong>SIMULATED"} {
		if !strings.Contains(page, place) {
			t.Errorf("the page of a rehearsed unit lacks %q", place)
		}
	}
}

func TestPageGivesTimeAndVersion(t *testing.T) {
	page := html.UnescapeString(pageOf(t, sound()))
	for _, want := range []string{`<time datetime="2026-02-28T20:00:05Z">2026-02-28 20:00:05 UTC</time>`, "2026-03-01 01:30:05 +05:30 here", `content="padproof v0.0.0"`, "Made by padproof v0.0.0."} {
		if !strings.Contains(page, want) {
			t.Errorf("the page lacks %q", want)
		}
	}
	if first, second := pageOf(t, sound()), pageOf(t, sound()); first != second {
		t.Error("the same answer gives another page")
	}
}

// Whoever is told to connect something is told how to do it safely.
func TestPageCautions(t *testing.T) {
	passes := sound()
	passes.Verdict, passes.Checks[0].Verdict = "PASS", "PASS"
	reworked := sound()
	reworked.Verdict, reworked.Rework = "FAIL", everything().Rework
	for name, tt := range map[string]struct {
		a                 *result.Answer
		any, ohms, solder bool
	}{
		"pass": {passes, false, false, false}, "unproven": {sound(), true, false, false},
		"rework": {reworked, true, false, true}, "suspects": {everything(), true, true, true},
	} {
		page := html.UnescapeString(pageOf(t, tt.a))
		for _, c := range result.Cautions {
			if strings.Contains(page, c) != tt.any {
				t.Errorf("%s: caution %q there: %v, want %v", name, c, !tt.any, tt.any)
			}
		}
		if strings.Contains(page, result.SolderCaution) != tt.solder {
			t.Errorf("%s: the soldering iron's caution there: %v, want %v", name, !tt.solder, tt.solder)
		}
		if strings.Contains(page, result.OhmCaution) != tt.ohms {
			t.Errorf("%s: the ohmmeter's caution there: %v, want %v", name, !tt.ohms, tt.ohms)
		}
	}
}
