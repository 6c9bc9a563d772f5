package report

import (
	"padproof/cmd/padproof/internal/result"
)

// How many units are shown apart from the table of all: of those that fail or could
// not be checked, and with those that are unproven.
const (
	mostToLookAt         = 40
	mostWithThoseUnclear = 10
)

// lookAtTable are the units that do not pass, and why: first those that fail, then
// those that could not be checked, then those that are unproven; nil where all
// pass. more says that not all of them are there.
func lookAtTable(l *result.Lot, link func(string) string) (t *table, more bool) {
	t = &table{Class: "checks units wide long", Caption: "Units that do not pass", Head: []string{"unit", "verdict", "loss dB", "±U", "why"}}
	for _, verdict := range []string{"FAIL", "", "UNPROVEN"} {
		most := mostToLookAt
		if verdict == "UNPROVEN" {
			most = mostWithThoseUnclear
		}
		for i, r := range l.Rows {
			switch {
			case r.Verdict != verdict:
			case len(t.Rows) >= most:
				return t, true
			default:
				t.addUnit(at("/rows", i), r, link, whyPhrase(at("/rows", i), r))
			}
		}
	}
	if len(t.Rows) == 0 {
		return nil, false
	}
	return t, false
}

// unitsTable has a row for each unit.
func unitsTable(l *result.Lot, link func(string) string) *table {
	if len(l.Rows) == 0 {
		return nil
	}
	t := &table{Class: "checks units wide long", Caption: "In the order of their serials", Head: []string{"unit", "verdict", "loss dB", "±U", "what is wrong"}}
	for i, r := range l.Rows {
		t.addUnit(at("/rows", i), r, link, wrongPhrase(at("/rows", i), r))
	}
	return t
}

func (t *table) addUnit(field string, r result.LotRow, link func(string) string, text phrase) {
	head := phrase{name(r.Unit)}
	if r.Report != "" {
		head[0].Link = link(r.Report)
	}
	verdict := r.Verdict
	if verdict == "" {
		verdict = "not checked"
	}
	var loss, u phrase
	for k, c := range r.Checks {
		if c.Name == "loss" {
			field, places := at(field+"/checks", k), decimals(c.Uncertainty)
			loss, u = phrase{figure(field+"/measured", c.Measured, fixed(c.Measured, places))}, phrase{figure(field+"/uncertainty", c.Uncertainty, doubt(c.Uncertainty, places))}
		}
	}
	t.add(verdictClass(r.Verdict), head, say(verdict), loss, u, text)
}

// wrongPhrase is what is wrong with a unit, in short, as the text says it.
func wrongPhrase(field string, r result.LotRow) phrase {
	if r.Error != nil {
		return say(wrong(&r))
	}
	var parts []phrase
	for _, c := range r.Checks {
		if c.Verdict == "FAIL" || c.Verdict == "UNPROVEN" {
			parts = append(parts, say(c.Name+" "+c.Verdict))
		}
	}
	if len(parts) == 0 && r.Verdict != "PASS" && r.Reason != "" {
		parts = append(parts, say(r.Reason))
	}
	return joined(append(parts, besides(field, r)...))
}

// whyPhrase is why a unit does not pass, at length.
func whyPhrase(field string, r result.LotRow) phrase {
	if r.Error != nil || r.Reason == "" {
		return wrongPhrase(field, r)
	}
	return joined(append([]phrase{say(r.Reason)}, besides(field, r)...))
}

// besides are the suspect of a unit and the problems of its takes.
func besides(field string, r result.LotRow) []phrase {
	var parts []phrase
	if r.Suspect != "" {
		p := phrase{words("suspect "), name(r.Suspect)}
		if known(r.Weight) {
			p = append(p, words(" ("), figure(field+"/weight", *r.Weight, fixed(*r.Weight, 2)), words(")"))
		}
		parts = append(parts, p)
	}
	for _, p := range r.Problems {
		parts = append(parts, say(p))
	}
	return parts
}

// joined are phrases with commas between them.
func joined(parts []phrase) phrase {
	var all phrase
	for i, p := range parts {
		if i > 0 {
			all = append(all, words(", "))
		}
		all = append(all, p...)
	}
	return all
}
