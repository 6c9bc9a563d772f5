package report

import (
	"bytes"
	"html/template"
	"slices"
	"strings"
	"time"

	"padproof/cmd/padproof/internal/result"
)

// A pageView is what the templates are filled with: the answer in the order in
// which it is read.
type pageView struct {
	*result.Answer
	stamp
	CSS      template.CSS
	Title    string
	Class    string // of the verdict
	Mark     string // a sign that stands before the verdict's word
	Why      []phrase
	Facts    []fact
	Checks   *table
	Details  []phrase
	Tones    *table
	Octaves  *table
	Problems []problemView
	Suspects []suspectView

	SuspectsHeading, SuspectsRemark string

	NoSingle bool     // none of the suspects explains the figures well
	None     phrase   // the weight of that
	Handling []string // cautions before an ohmmeter or a soldering iron goes on
	Reworks  []reworkView
	Likely   *table // what might be wrong, without a drawing
	Readings *table // of an ohmmeter
	Cautions []string
	Pictures []pictureView
	Found    []fact
	Recorded []fact
	Budgets  []*table
	Takes    []*table
}

// A fact is a name and what is known under it.
type fact struct {
	Name  string
	Value phrase
}

// A table has a head for each column and, in its rows, one for each row.
type table struct {
	Class   string
	Caption string
	Head    []string
	Rows    []row
}

// A row is a line of a table.
type row struct {
	Head  phrase
	Cells []cell
	Class string
}

// A cell knows what its column is called: on a narrow screen each row is a card.
type cell struct {
	Label string
	Words phrase // none where the row has nothing to say under this head
}

// add puts a row in, its cells in the order of the columns.
func (t *table) add(class string, head phrase, cells ...phrase) {
	r := row{Head: head, Class: class}
	for i, c := range cells {
		r.Cells = append(r.Cells, cell{t.Head[i+1], c})
	}
	t.Rows = append(t.Rows, r)
}

// A pictureView is a picture as it stands in the page.
type pictureView struct {
	Title, Says string
	SVG         template.HTML
}

func viewOf(a *result.Answer, info PageInfo) (*pageView, error) {
	css, err := pageFiles.ReadFile("page/page.css")
	if err != nil {
		return nil, err
	}
	v := &pageView{Answer: a, CSS: template.CSS(css), stamp: stampOf(info.Made, info.Version), Title: titleOf(a)}
	v.Class, v.Mark = strings.ToLower(a.Verdict), marks[a.Verdict]
	v.Why, v.Facts = whyOf(a), factsOf(a)
	v.Checks, v.Details = checksTable(a), checkDetails(a)
	v.Tones, v.Octaves = tonesTable(a), octaveTable(a)
	v.Problems, v.Found, v.Recorded = problemViews(a), foundFacts(a), recordedFacts(a.Recorded, a.RecordError)
	v.Budgets, v.Takes = budgetTables(a), takeTables(a)
	if v.Suspects, err = suspectViews(a, info.Marked); err != nil {
		return nil, err
	}
	pictures := info.Pictures
	if info.Drawing != nil && !slices.ContainsFunc(v.Suspects, func(s suspectView) bool { return s.Picture != nil }) {
		pictures = append([]Picture{*info.Drawing}, pictures...)
	}
	for _, p := range pictures {
		one, err := p.view()
		if err != nil {
			return nil, err
		}
		v.Pictures = append(v.Pictures, one)
	}
	if len(a.Suspects)+len(a.Unseen)+len(v.Problems) > 0 || a.Verdict != "PASS" { // something is to be done
		v.Cautions = result.Cautions
	}
	v.SuspectsHeading, v.SuspectsRemark = suspectsHeading(a)
	v.NoSingle, v.None = unexplained(a), noneWeight(a)
	v.Reworks, v.Likely, v.Readings = reworkViews(a), likelihoodTable(a), ohmsTable(a)
	if len(v.Suspects)+len(a.Unseen)+len(a.WithoutDrawing) > 0 {
		v.Handling = append(v.Handling, result.OhmCaution)
	}
	if len(a.Rework)+len(a.WithoutDrawing) > 0 {
		v.Handling = append(v.Handling, result.SolderCaution)
	}
	return v, nil
}

// marks are the signs of the verdicts.
var marks = map[string]string{"PASS": "✓", "FAIL": "✕", "UNPROVEN": "?"}

// A stamp says when and by what a page was made.
type stamp struct {
	UTC, Local, ISO string
	Version         string
}

func stampOf(made time.Time, version string) stamp {
	s := stamp{UTC: made.UTC().Format("2006-01-02 15:04:05") + " UTC", ISO: made.UTC().Format(time.RFC3339), Version: version}
	if _, offset := made.Zone(); offset != 0 {
		s.Local = made.Format("2006-01-02 15:04:05 -07:00")
	}
	return s
}

// titleOf names the page in a list of windows and files.
func titleOf(a *result.Answer) string {
	parts := []string{a.Verdict}
	for _, n := range []string{a.Unit, a.Pad} {
		if n != "" {
			parts = append(parts, visible(n))
		}
	}
	title := strings.Join(parts, " - ")
	if a.Simulated {
		title = "SIMULATED - " + title
	}
	return title
}

func (p Picture) view() (pictureView, error) {
	var b bytes.Buffer
	if err := p.SVG(&b); err != nil {
		return pictureView{}, err
	}
	return pictureView{p.Title, p.Says, template.HTML(b.String())}, nil
}
