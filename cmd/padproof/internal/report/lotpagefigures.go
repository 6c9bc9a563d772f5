package report

import (
	"strings"

	"padproof/cmd/padproof/internal/result"
)

// lotPlaces are those of a lot's figures, which are finer than one reading.
const lotPlaces = 3

// lotTables are the figures of the units of one drawing.
func lotTables(field string, figures []result.LotFigure) []notedTable {
	var all []notedTable
	for _, t := range []notedTable{readTable(field, figures), spreadTable(field, figures), capabilityTable(field, figures), chartTable(field, figures), breakTable(figures)} {
		if len(t.Rows) > 0 {
			all = append(all, t)
		}
	}
	return all
}

// rangePhrase is an interval.
func rangePhrase(field string, r result.Ranged, places int) phrase {
	if !r.Low.OK() && !r.High.OK() {
		return nil
	}
	return phrase{figure(field+"/low", r.Low, fixed(r.Low, places)), words(" to "), figure(field+"/high", r.High, fixed(r.High, places))}
}

func readTable(field string, figures []result.LotFigure) notedTable {
	t := &table{Class: "wide", Caption: "What was read", Head: []string{"check", "units", "mean", "interval (95 %)", "least", "greatest", "expected", "limits", "unit"}}
	for i, f := range figures {
		field := at(field, i)
		number := func(key string, n result.Number) phrase {
			return phrase{figure(field+"/"+key, n, fixed(n, lotPlaces))}
		}
		t.add("", say(f.Check), phrase{count(field+"/n", f.N)}, number("mean/value", f.Mean.Value), rangePhrase(field+"/mean", f.Mean, lotPlaces),
			number("least", f.Least), number("greatest", f.Greatest), number("expected", f.Expected),
			limitPhrase(field, result.Check{Unit: f.Unit, Low: f.Low, High: f.High}, lotPlaces), say(f.Unit))
	}
	return notedTable{table: t}
}

func spreadTable(field string, figures []result.LotFigure) notedTable {
	t := &table{Class: "wide", Caption: "How it spreads, as standard deviations",
		Head: []string{"check", "of all readings", "interval (95 %)", "of the units", "interval (95 %)", "of the measurement", "its share", "unit"}}
	for i, f := range figures {
		if !f.SD.Value.OK() {
			continue
		}
		field := at(field, i)
		var units, unitsWithin, reading, share phrase
		if s := f.SpreadOfUnits; s != nil {
			units, unitsWithin = phrase{figure(field+"/spread_of_units/value", s.Value, fixed(s.Value, lotPlaces))}, rangePhrase(field+"/spread_of_units", *s, lotPlaces)
		}
		if known(f.SpreadOfReading) {
			reading = phrase{figure(field+"/spread_of_reading", *f.SpreadOfReading, doubt(*f.SpreadOfReading, lotPlaces))}
		}
		if known(f.ReadingShare) {
			share = phrase{figure(field+"/reading_share", *f.ReadingShare, percent(*f.ReadingShare))}
		}
		t.add("", say(f.Check), phrase{figure(field+"/standard_deviation/value", f.SD.Value, fixed(f.SD.Value, lotPlaces))},
			rangePhrase(field+"/standard_deviation", f.SD, lotPlaces), units, unitsWithin, reading, share, say(f.Unit))
	}
	return notedTable{t, []string{
		"Of the units: what is left when the scatter of the measurement is taken out. Of the measurement: what differs from unit to unit; " +
			"what is common to all units shifts the lot and does not widen it. Its share is of the variance.",
	}}
}

// capabilityTable holds both ways in which capability is told, each by the names
// that either school gives it.
func capabilityTable(field string, figures []result.LotFigure) notedTable {
	t := &table{Class: "wide", Caption: "Capability: how the spread fits between the limits",
		Head: []string{"check", "by the spread", "standard deviation", "Cp", "interval (95 %)", "Cpk", "interval (95 %)"}}
	notes := []string{
		"Overall: by the standard deviation of all units, drift and all; what whoever takes the whole lot gets. " +
			"The NIST/SEMATECH e-Handbook calls these indices Cp and Cpk, the AIAG's manual Pp and Ppk.",
		"Within: by the mean moving range from one unit to the next; what the line could do if its level stayed put. " +
			"The AIAG's Cp and Cpk are these.",
		"A Cpk of 1.33 or more is commonly asked for; of a small lot look at its interval too.",
	}
	for i, f := range figures {
		field := at(field, i)
		add := func(key, by string, c *result.Capability) {
			if c == nil {
				return
			}
			field := field + "/" + key
			t.add("", say(f.Check), say(by), phrase{figure(field+"/standard_deviation", c.SD, fixed(c.SD, lotPlaces))},
				phrase{figure(field+"/cp/value", c.Cp.Value, fixed(c.Cp.Value, 2))}, rangePhrase(field+"/cp", c.Cp, 2),
				phrase{figure(field+"/cpk/value", c.Cpk.Value, fixed(c.Cpk.Value, 2))}, rangePhrase(field+"/cpk", c.Cpk, 2))
		}
		add("overall", "overall", f.Overall)
		add("within", "within", f.Within)
		if f.Differ {
			notes = append(notes, capital(f.Check)+": overall is worse than within, beyond chance: the level moves in the course of the lot.")
		}
	}
	return notedTable{t, notes}
}

func chartTable(field string, figures []result.LotFigure) notedTable {
	t := &table{Class: "wide", Caption: "Chart of single readings and moving ranges",
		Head: []string{"check", "mean", "chart limits", "mean moving range", "its limit", "breaks by chance", "rules", "found"}}
	var notes []string
	for i, f := range figures {
		c := f.Chart
		if c == nil {
			continue
		}
		field := at(field, i) + "/chart"
		number := func(key string, n result.Number, places int) phrase {
			return phrase{figure(field+"/"+key, n, fixed(n, places))}
		}
		found := "steady"
		if !c.Steady {
			found = "not steady"
		}
		t.add("", say(f.Check), number("centre", c.Centre, lotPlaces), rangePhrase(field, result.Ranged{Low: c.Low, High: c.High}, lotPlaces),
			number("mean_moving_range", c.MeanRange, lotPlaces), number("moving_range_high", c.RangeHigh, lotPlaces),
			number("breaks_by_chance", c.FalseBreaks, 1), say(c.Rules), say(found))
		if c.Provisional {
			notes = append(notes, capital(f.Check)+": made from few units; the chart's limits are provisional.")
		}
		if len(c.LeftOut) > 0 {
			notes = append(notes, capital(f.Check)+": the chart's limits are made without "+visible(strings.Join(c.LeftOut, ", "))+", far from all others.")
		}
	}
	notes = append(notes, "Breaks by chance: about how many a steady line of as many units shows. No more than that say nothing.")
	return notedTable{t, notes}
}

func breakTable(figures []result.LotFigure) notedTable {
	t := &table{Class: "long", Caption: "Where the chart breaks a rule", Head: []string{"check", "rule", "units", "what"}}
	for _, f := range figures {
		if f.Chart == nil {
			continue
		}
		for _, b := range f.Chart.Breaks {
			t.add("", say(f.Check), say(b.Rule), phrase{name(someUnits(b.Units))}, say(capital(b.Text)))
		}
	}
	return notedTable{table: t}
}

// someUnits names a few units, or the first and the last of more.
func someUnits(units []string) string {
	if len(units) > 3 {
		return units[0] + " to " + units[len(units)-1]
	}
	return strings.Join(units, ", ")
}
