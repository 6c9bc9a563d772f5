package report

import (
	"encoding/json"
	"fmt"
	"io"
	"maps"
	"slices"
	"strings"

	"padproof/cmd/padproof/internal/ledger"
	"padproof/cmd/padproof/internal/result"
)

// EntryText writes one record: where it stands, what was used, and its answer.
func EntryText(w io.Writer, e *ledger.Entry, verbose bool) error {
	p := &page{w: w}
	r := e.Record
	p.line("Record %s, %s UTC", clean(e.Receipt.String()), shortTime(r.Time))
	for _, one := range []struct{ name, text string }{
		{"hash", e.Hash}, {"previous", e.Previous}, {"kind", kindOf(r)}, {"unit", r.Unit}, {"lot", r.Lot},
		{"drawing", r.Drawing.Name}, {"operator", r.Operator}, {"tool", r.Tool}, {"options", optionsText(r.Options)},
	} {
		if one.text != "" {
			p.line("  %-10s%s", one.name, clean(one.text))
		}
	}
	for _, f := range r.Files {
		p.line("  %-10s%s  %s", f.Role, f.SHA256, clean(f.File))
	}
	p.line("")
	var a result.Answer
	if err := json.Unmarshal(r.Answer, &a); err != nil || a.Verdict == "" {
		p.line("%s   %s", r.Verdict, clean(r.Unit))
		return p.err
	}
	if p.err != nil {
		return p.err
	}
	return AnswerText(w, &a, verbose)
}

func kindOf(r ledger.Record) string {
	if r.Kind == ledger.RigCheck {
		return "check of the rig"
	}
	return ""
}

func optionsText(options map[string]string) string {
	var all []string
	for _, name := range slices.Sorted(maps.Keys(options)) {
		all = append(all, "--"+name+" "+options[name])
	}
	return strings.Join(all, " ")
}

// HistoryText writes the records of one unit, newest first, with their figures.
func HistoryText(w io.Writer, unit string, entries []*ledger.Entry, list *ledger.Page) error {
	p := &page{w: w}
	p.line("Unit %s: %s", clean(unit), times(len(entries), list))
	p.line("")
	rows := [][]string{{"time (UTC)", "verdict", "loss", "±U", "what else is not proven", "record"}}
	for i, e := range entries {
		loss, u, rest := figuresOf(e.Record.Answer)
		rows = append(rows, []string{shortTime(e.Record.Time), verdictOf(list.Rows[i]), loss, u, rest, e.Receipt.String()})
	}
	p.table("", rows)
	p.line("")
	return p.err
}

func times(n int, list *ledger.Page) string {
	switch {
	case list.More > 0:
		return fmt.Sprintf("its newest %d records, and %s", n, MoreText(list))
	case n == 1:
		return "checked once"
	}
	return fmt.Sprintf("checked %d times", n)
}

// figuresOf are an answer's loss, its uncertainty, and the other checks that were
// not passed.
func figuresOf(answer json.RawMessage) (loss, u, rest string) {
	var a result.Answer
	if json.Unmarshal(answer, &a) != nil {
		return "", "", ""
	}
	var others []string
	for _, c := range a.Checks {
		if c.Name == "loss" {
			places := decimals(c.Uncertainty)
			loss, u = fixed(c.Measured, places)+" "+c.Unit, doubt(c.Uncertainty, places)
		} else if c.Verdict == "FAIL" || c.Verdict == "UNPROVEN" {
			others = append(others, c.Name+" "+c.Verdict)
		}
	}
	return loss, u, strings.Join(others, ", ")
}
