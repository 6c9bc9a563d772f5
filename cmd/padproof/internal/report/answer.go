package report

import (
	"fmt"
	"io"
	"strings"

	"padproof/cmd/padproof/internal/result"
)

// AnswerText writes one unit's answer as one screen: the verdict, a line a
// check, then what is wrong and what to do. With verbose the takes and the
// uncertainty budget follow.
func AnswerText(w io.Writer, a *result.Answer, verbose bool) error {
	p := &page{w: w}
	verdict(p, a)
	checks(p, a)
	tones(p, a)
	ohmsSeen(p, a)
	problems(p, a)
	suspects(p, a)
	rework(p, a)
	withoutDrawing(p, a)
	bullets(p, "What this bench cannot see", unseenTexts(a.Unseen))
	bullets(p, "Taken for granted, since rig.toml leaves it out", a.Assumed)
	bullets(p, "Notes", append(append([]string(nil), a.Notes...), a.Warnings...))
	if verbose {
		takes(p, a)
		budget(p, a.Budget)
	}
	return p.err
}

func verdict(p *page, a *result.Answer) {
	var names []string
	for _, n := range []string{a.Unit, a.Pad} {
		if n != "" {
			names = append(names, clean(n))
		}
	}
	p.line("%s", strings.Join(append([]string{p.hue(a.Verdict)}, names...), "   "))
	if a.Simulated {
		p.item("  ", "SIMULATED: made from rehearsed takes; it says nothing about a real unit.")
	}
	if a.Reason != "" {
		p.item("  ", a.Reason)
	}
}

func checks(p *page, a *result.Answer) {
	if len(a.Checks) == 0 {
		return
	}
	p.line("")
	rows := [][]string{{"check", "verdict", "measured", "expected", "limits", "±U", "unit", "limit/U"}}
	for _, c := range a.Checks {
		rows = append(rows, checkRow(c))
		if c.Bench != nil {
			places := decimals(c.Bench.Uncertainty)
			rows = append(rows, []string{"  on the bench", "", fixed(c.Bench.Measured, places),
				fixed(c.Bench.Expected, places), "", doubt(c.Bench.Uncertainty, places), c.Unit})
		}
	}
	p.table("", rows)
	for _, c := range a.Checks {
		details(p, c)
	}
	p.line("")
	if a.BenchEnds != nil {
		p.item("  bench:     ", ends(*a.BenchEnds))
	}
	if a.ServiceEnds != nil {
		p.item("  service:   ", ends(*a.ServiceEnds))
	}
	for _, c := range a.Checks {
		if c.Name == "loss" && c.AtHz != nil {
			p.item("  judged at: ", hertz(*c.AtHz, 1))
		}
		if c.Spread != nil && c.Spread.Low95.OK() {
			p.item("  ", fmt.Sprintf("Sound units of this drawing read %s to %s %s (95 %%), %s to %s at worst.",
				fixed(c.Spread.Low95, 2), fixed(c.Spread.High95, 2), c.Unit, fixed(c.Spread.WorstLow, 2), fixed(c.Spread.WorstHigh, 2)))
		}
	}
}

// details are the sentences that belong to a check.
func details(p *page, c result.Check) {
	if c.Reason != "" {
		p.item("  "+c.Name+": ", c.Reason)
	}
	if c.AtHz != nil && c.Name != "loss" && c.Verdict != "PASS" && c.Verdict != "" {
		p.item("  "+c.Name+": ", "largest at "+hertz(*c.AtHz, 0))
	}
	if c.LowCornerHz != nil {
		p.item("  "+c.Name+": ", "down by 3 dB at "+hertz(*c.LowCornerHz, 0))
	}
	if c.HighCorner != nil {
		p.item("  "+c.Name+": ", "down by 3 dB at "+hertz(*c.HighCorner, 0))
	}
	if c.Name == "noise" && c.ExpectedDBu != nil {
		p.item("  noise: ", noiseText(c))
	}
	for _, e := range c.Events {
		p.item("  "+c.Name+": ", fmt.Sprintf("%s of %s dB in %s at %s s", e.What, fixed(e.DB, 2), c.From, fixed(e.AtSec, 2)))
	}
}

// noiseText gives the levels behind a noise figure, as far as they are known.
func noiseText(c result.Check) string {
	var parts []string
	for _, level := range []struct {
		name string
		dBu  *result.Number
	}{{"unit", c.MeasuredDBu}, {"thermal by the drawing", c.ExpectedDBu}, {"rig", c.RigDBu}, {"as recorded, A-weighted", c.AWeighted}, {"quasi-peak weighted", c.QuasiPeak}} {
		if level.dBu != nil && level.dBu.OK() {
			parts = append(parts, level.name+" "+fixed(*level.dBu, 1)+" dBu")
		}
	}
	return strings.Join(parts, ", ")
}

// ratio is how many times the limits are wider than U, "over 99" where that is
// no matter.
func ratio(n result.Number) string {
	switch {
	case !n.OK():
		return dash
	case n > 99:
		return "over 99"
	}
	return toDigits(float64(n), 2)
}

func checkRow(c result.Check) []string {
	places := decimals(c.Uncertainty)
	if c.Unit == "" {
		places = 0
	}
	verdict := c.Verdict
	if verdict == "" {
		verdict = "no limit"
	}
	measured, u := fixed(c.Measured, places), doubt(c.Uncertainty, places)
	switch {
	case c.Unit == "":
		measured, u = fixed(c.Measured, 0), dash
	case !c.Measured.OK() && c.Bound != nil && c.Bound.OK():
		measured, u = "below "+fixed(*c.Bound, 1), dash
	}
	return []string{c.Name, verdict, measured, fixed(c.Expected, places), limits(c, places), u, c.Unit, ratio(c.Ratio)}
}

func tones(p *page, a *result.Answer) {
	if len(a.Tones) == 0 {
		return
	}
	p.heading("Loss on the bench at each tone")
	rows := [][]string{{"tone", "measured", "expected", "±U", "unit"}}
	for _, t := range a.Tones {
		places := decimals(t.Uncertainty)
		rows = append(rows, []string{hertz(t.FreqHz, 1), fixed(t.Measured, places), fixed(t.Expected, places), doubt(t.Uncertainty, places), "dB"})
	}
	p.table("  ", rows)
}

func problems(p *page, a *result.Answer) {
	first := true
	for _, c := range a.Captures {
		for _, q := range c.Problems {
			if first {
				p.heading("Problems")
				first = false
			}
			place := c.File
			if q.AtSec.OK() {
				place += " at " + fixed(q.AtSec, 2) + " s"
			}
			p.item("  - ", fmt.Sprintf("%s: %s: %s", place, q.Problem, q.Text))
		}
	}
}

func unseenTexts(all []result.Unseen) []string {
	var texts []string
	for _, u := range all {
		texts = append(texts, u.Part+": "+u.Text)
	}
	return texts
}

func bullets(p *page, heading string, texts []string) {
	if len(texts) == 0 {
		return
	}
	p.heading(heading)
	for _, t := range texts {
		p.item("  - ", t)
	}
}

func takes(p *page, a *result.Answer) {
	if len(a.Captures) == 0 {
		return
	}
	p.heading("Takes")
	rows := [][]string{{"role", "file", "form", "channel", "tone", "level dBFS", "noise dBFS", "SNR dB", "steady s"}}
	for _, c := range a.Captures {
		rows = append(rows, []string{
			c.Role, c.File, fmt.Sprintf("%d Hz, %d-bit %s", c.RateHz, c.Bits, c.Encoding),
			fmt.Sprintf("%d of %d", c.Channel, c.Channels), hertz(c.ToneHz, 4), fixed(c.LevelDBFS, 3),
			fixed(c.NoiseDBFS, 1), fixed(c.SNRDB, 1), fixed(c.FromSec, 2) + " to " + fixed(c.ToSec, 2),
		})
	}
	p.table("  ", rows)
	for _, c := range a.Captures {
		p.line("  %s  SHA-256 %s", clean(c.Role), c.SHA256)
	}
}

func budget(p *page, terms []result.Term) {
	if len(terms) == 0 {
		return
	}
	p.heading("Uncertainty budget")
	rows := [][]string{{"check", "source", "standard u", "sensitivity", "contributes", "dof"}}
	for _, t := range terms {
		dof := "inf"
		if t.DOF.OK() {
			dof = fixed(t.DOF, 0)
		}
		rows = append(rows, []string{t.Check, t.Source, plain(t.StandardU), plain(t.Sensitivity), plain(t.StandardU * t.Sensitivity), dof})
	}
	p.table("  ", rows)
}

// plain prints a figure of any size with three significant digits.
func plain(n result.Number) string {
	if !n.OK() {
		return dash
	}
	return fmt.Sprintf("%.3g", float64(n)+0) // + 0: no "-0"
}
