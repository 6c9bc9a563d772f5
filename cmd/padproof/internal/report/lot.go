package report

import (
	"fmt"
	"io"
	"strings"
	"unicode/utf8"

	"padproof/cmd/padproof/internal/result"
)

// LotRows returns what writes a lot's units, a line each as it is done: serial,
// verdict, loss, and what is wrong. The first line is the head. serials are those
// of all units, for the width of the first column.
func LotRows(w io.Writer, serials []string) func(*result.LotRow) error {
	p := &page{w: w}
	wide := len("unit")
	for _, s := range serials {
		wide = max(wide, utf8.RuneCountInString(clean(s)))
	}
	wide = min(wide, 40)
	cell := func(text string, wide int) string {
		text = clean(text)
		return text + strings.Repeat(" ", max(0, wide-utf8.RuneCountInString(text))+2)
	}
	p.line("%s", cell("unit", wide)+cell("verdict", 11)+cell("loss dB", 8)+cell("±U", 6)+"what is wrong")
	return func(r *result.LotRow) error {
		verdict, loss, u := r.Verdict, dash, dash
		if verdict == "" {
			verdict = "not checked"
		}
		for _, c := range r.Checks {
			if c.Name == "loss" {
				places := decimals(c.Uncertainty)
				loss, u = fixed(c.Measured, places), doubt(c.Uncertainty, places)
			}
		}
		head := cell(r.Unit, wide) + cell(verdict, 11) + cell(loss, 8) + cell(u, 6)
		shown := cell(r.Unit, wide) + p.hue(verdict) + cell(verdict, 11)[len(verdict):] + cell(loss, 8) + cell(u, 6)
		text := wrong(r)
		if text == "" {
			p.line("%s", strings.TrimRight(shown, " "))
			return p.err
		}
		p.itemAs(head, shown, text)
		return p.err
	}
}

// wrong is what is wrong with a unit, in short.
func wrong(r *result.LotRow) string {
	if r.Error != nil {
		text := r.Error.Error()
		if r.Error.Hint != "" {
			text += "; " + r.Error.Hint
		}
		return text
	}
	var parts []string
	for _, c := range r.Checks {
		if c.Verdict == "FAIL" || c.Verdict == "UNPROVEN" {
			parts = append(parts, c.Name+" "+c.Verdict)
		}
	}
	if len(parts) == 0 && r.Verdict != "PASS" {
		parts = append(parts, r.Reason)
	}
	if r.Suspect != "" && r.Weight != nil {
		parts = append(parts, fmt.Sprintf("suspect %s (%s)", r.Suspect, fixed(*r.Weight, 2)))
	}
	return strings.Join(append(parts, r.Problems...), ", ")
}

// LotText writes what the units of a lot show together.
func LotText(w io.Writer, l *result.Lot) error {
	p := &page{w: w}
	p.heading(clean(fmt.Sprintf("Lot %s: %s", l.Lot, counts(l))))
	if l.Simulated {
		p.item("  ", "SIMULATED: made from rehearsed takes; it says nothing about real units.")
	}
	if l.Units > 0 {
		p.item("  ", fmt.Sprintf("Yield %s; that of the line lies between %s and %s (95 %%).", percent(l.Yield.Value), percent(l.Yield.Low), percent(l.Yield.High)))
	}
	for _, d := range l.Drawings {
		if len(l.Drawings) > 1 {
			p.heading(clean(fmt.Sprintf("%s, %d %s", d.Pad, d.Units, unitWord(d.Units))))
		}
		bullets(p, "What it means", d.Says)
		figures(p, d.Figures)
		for _, f := range d.Figures {
			lotChart(p, f)
		}
	}
	bullets(p, "Notes", l.Warnings)
	if l.Recorded != nil && p.err == nil {
		return RecordedText(w, l.Recorded)
	}
	return p.err
}

func counts(l *result.Lot) string {
	text := fmt.Sprintf("%d %s, %d PASS, %d FAIL, %d UNPROVEN", l.Units, unitWord(l.Units), l.Passed, l.Failed, l.Unproven)
	if l.NotChecked > 0 {
		text += fmt.Sprintf(", %d not checked", l.NotChecked)
	}
	return text
}

func unitWord(n int) string {
	if n == 1 {
		return "unit"
	}
	return "units"
}

func percent(n result.Number) string {
	if !n.OK() {
		return dash
	}
	return fixed(n*100, 1) + " %"
}

func figures(p *page, all []result.LotFigure) {
	if len(all) == 0 {
		return
	}
	p.line("")
	rows := [][]string{{"check", "units", "mean", "from", "to", "spread", "of units", "expected", "limits", "Cp", "Cpk", "unit"}}
	for _, f := range all {
		row := []string{f.Check, fmt.Sprint(f.N), fixed(f.Mean.Value, 3), fixed(f.Least, 3), fixed(f.Greatest, 3), fixed(f.SD.Value, 3),
			dash, fixed(f.Expected, 3), limits(result.Check{Unit: f.Unit, Low: f.Low, High: f.High}, 2), dash, dash, f.Unit}
		if f.SpreadOfUnits != nil {
			row[6] = fixed(f.SpreadOfUnits.Value, 3)
		}
		if f.Overall != nil {
			row[9], row[10] = fixed(f.Overall.Cp.Value, 2), fixed(f.Overall.Cpk.Value, 2)
		}
		rows = append(rows, row)
	}
	p.table("  ", rows)
	for _, f := range all {
		if f.Overall != nil {
			p.item("  ", fmt.Sprintf("%s: Cpk lies between %s and %s (95 %%); %s.", f.Check,
				fixed(f.Overall.Cpk.Low, 2), fixed(f.Overall.Cpk.High, 2), spreadText(f)))
		}
	}
}

// spreadText says whose the spread is.
func spreadText(f result.LotFigure) string {
	if f.ReadingShare == nil || !f.ReadingShare.OK() {
		return "the units read all alike"
	}
	return fmt.Sprintf("the measurement itself makes %s of the spread (in variance)", percent(*f.ReadingShare))
}

func lotChart(p *page, f result.LotFigure) {
	if f.Chart == nil {
		return
	}
	c := f.Chart
	text := fmt.Sprintf("%s chart: centre %s, limits %s to %s %s, %s rules", f.Check, fixed(c.Centre, 3), fixed(c.Low, 3), fixed(c.High, 3), f.Unit, c.Rules)
	if c.Provisional {
		text += " (of fewer than 20 units: provisional)"
	}
	if len(c.LeftOut) > 0 {
		text += ", made without " + strings.Join(c.LeftOut, ", ")
	}
	found := "not steady"
	switch {
	case len(c.Breaks) == 0:
		p.item("  ", text+": steady.")
		return
	case c.Steady:
		found = "as steady as can be told"
	}
	p.item("  ", fmt.Sprintf("%s: %s; broken %d times, where a steady line of as many units shows about %s by chance.", text, found, len(c.Breaks), fixed(c.FalseBreaks, 1)))
	for _, b := range c.Breaks {
		p.item("  - ", fmt.Sprintf("%s at %s: %s", b.Rule, strings.Join(b.Units, ", "), b.Text))
	}
}
