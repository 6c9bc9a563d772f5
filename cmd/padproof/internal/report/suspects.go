package report

import (
	"fmt"
	"strings"
	"unicode"
	"unicode/utf8"

	"padproof/cmd/padproof/internal/result"
)

// suspects lists what may be wrong, with the reading that tells.
func suspects(p *page, a *result.Answer) {
	if a.Unexplained == nil {
		return
	}
	heading, remark := suspectsHeading(a)
	p.heading(heading)
	if remark != "" {
		p.item("  ", remark)
	}
	for i, s := range a.Suspects {
		mark := fmt.Sprintf("  %d. ", i+1)
		p.item(mark, fmt.Sprintf("%s, weight %s%s", suspectName(s), fixed(s.Weight, 2), predicted(s)))
		if s.Confirm.How != "" {
			p.item(strings.Repeat(" ", len(mark)), capital(s.Confirm.How)+".")
		}
	}
	if len(a.Suspects) > 0 {
		p.item("  -  ", fmt.Sprintf("None of these, weight %s.", fixed(*a.Unexplained, 2)))
		p.item("  ", "Weights add up to 1 over all faults looked at; small ones are left out. To take a reading: "+lower(result.OhmCaution)+"; then check again with --ohms.")
	}
}

// suspectsHeading heads the suspects, with a remark where there is one. Where nothing
// comes through, the takes can't tell a broken unit from a cable left out.
func suspectsHeading(a *result.Answer) (heading, remark string) {
	switch {
	case len(a.Suspects) > 0 && silent(a.Suspects[0]):
		return "Most likely wrong", "Next to nothing came through. A cable left out, the wrong channel, or a tone that was not played looks the same: look there first."
	case unexplained(a):
		return "No single fault explains this well", "Two things may be wrong, or the bench may not be what rig.toml says."
	}
	return "Most likely wrong", ""
}

// silent reports whether a suspect lets nothing through.
func silent(s result.Suspect) bool {
	loss, known := s.Predicted["loss_db"]
	return known && !loss.OK()
}

// suspectName is the fault, and how far it is off where that is an estimate of one
// fault alone.
func suspectName(s result.Suspect) string {
	if strings.Contains(s.Fault, " or ") || s.ByPercent == nil || s.ByPercentU == nil || !s.ByPercent.OK() || !s.ByPercentU.OK() {
		return s.Fault
	}
	if strings.Contains(s.Fault, " drifted ") { // the fault's name has the amount
		return fmt.Sprintf("%s (± %s %%)", s.Fault, toDigits(float64(*s.ByPercentU), 2))
	}
	return fmt.Sprintf("%s (%s %% ± %s %%)", s.Fault, withSign(*s.ByPercent), toDigits(float64(*s.ByPercentU), 2))
}

func withSign(n result.Number) string {
	if n > 0 {
		return "+" + toDigits(float64(n), 3)
	}
	return toDigits(float64(n), 3)
}

// predicted is what the fault would give.
func predicted(s result.Suspect) string {
	loss, known := s.Predicted["loss_db"]
	if !known {
		return ""
	}
	it := "it"
	if strings.Contains(s.Fault, " or ") {
		it = "the first"
	}
	text := ": " + it + " would let nothing through"
	if loss.OK() {
		text = ": " + it + " would read " + fixed(loss, 2) + " dB here"
	}
	if service, carried := s.Predicted["service_loss_db"]; carried && service.OK() {
		text += ", " + fixed(service, 2) + " dB in service"
	}
	return text
}

// lower takes a text into a sentence.
func lower(text string) string { return withFirst(text, unicode.ToLower) }

// capital begins a sentence.
func capital(text string) string { return withFirst(text, unicode.ToUpper) }

func withFirst(text string, as func(rune) rune) string {
	first, size := utf8.DecodeRuneInString(text)
	if size == 0 {
		return text
	}
	return string(as(first)) + text[size:]
}
