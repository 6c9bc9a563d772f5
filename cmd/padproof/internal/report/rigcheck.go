package report

import (
	"fmt"
	"io"
	"strings"
	"time"

	"padproof/cmd/padproof/internal/result"
)

// chartRows is how many readings a chart shows as text where not all are asked for.
const chartRows = 10

// stateWords are the states of a bench as they are printed.
var stateWords = map[string]string{
	result.RigOK: "the bench is in order", result.RigOut: "the bench is OUT", result.RigTooOld: "the rig check is too old",
	result.RigMissing: "no rig check", result.RigUnproven: "the rig check proves nothing",
}

// RigCheckText writes the state of a bench and the last readings of its reference
// pad; all of them with verbose, which also adds the takes and the budget of a
// reading just made.
func RigCheckText(w io.Writer, c *result.RigCheck, verbose bool) error {
	p := &page{w: w}
	p.line("%s", clean(strings.Join(filled(c.Verdict, stateWords[c.State], c.Station, c.Rig), "   ")))
	if c.Simulated {
		p.item("  ", "SIMULATED: made from rehearsed takes; it says nothing about a real bench.")
	}
	p.item("  ", c.Text)
	if c.HoldsTo != "" {
		p.item("  ", "This holds until "+momentText(c.HoldsTo)+" UTC.")
	}
	p.line("")
	p.item("  ", referenceText(c.Reference))
	rigChartTable(p, c.Readings, verbose)
	if c.Answer != nil {
		problems(p, c.Answer)
		bullets(p, "Taken for granted, since rig.toml leaves it out", c.Answer.Assumed)
	}
	bullets(p, "Notes", c.Notes)
	bullets(p, "Before you connect the reference pad", c.Cautions)
	if verbose && c.Answer != nil {
		takes(p, c.Answer)
		budget(p, c.Answer.Budget)
	}
	return p.err
}

// filled are the texts that are not empty.
func filled(texts ...string) []string {
	var some []string
	for _, t := range texts {
		if t != "" {
			some = append(some, t)
		}
	}
	return some
}

func referenceText(r result.Reference) string {
	text := fmt.Sprintf("reference pad %s, known to lose %s dB", r.Serial, fixed(r.LossDB, 3))
	if r.Uncertainty > 0 {
		text += fmt.Sprintf(" ± %s dB (k = 2)", doubt(r.Uncertainty, 3))
	}
	if r.WithinDB.OK() {
		text += fmt.Sprintf(", allowed within %s dB", significant(float64(r.WithinDB)))
	}
	if r.EveryHours.OK() {
		text += ", measured every " + hoursText(float64(r.EveryHours))
	}
	if r.ChartFrom != "" {
		text += ", chart begun " + momentText(r.ChartFrom) + " UTC"
	}
	if r.Required {
		text += "; units pass only on a bench in order"
	}
	return text
}

func hoursText(h float64) string {
	if h == 1 {
		return "hour"
	}
	return significant(h) + " hours"
}

func rigChartTable(p *page, readings []result.RigReading, all bool) {
	if len(readings) == 0 {
		return
	}
	shown := readings
	if !all && len(readings) > chartRows {
		shown = readings[len(readings)-chartRows:]
	}
	p.line("")
	rows := [][]string{{"time (UTC)", "loss dB", "off by", "±U", "limits", "", "operator", "record"}}
	for _, r := range shown {
		word := "ok"
		switch {
		case !r.OffDB.OK() || r.Text != "" && !r.Out:
			word = "proves nothing"
		case r.Out:
			word = "OUT"
		}
		record := r.Record
		if record == "" {
			record = "not recorded"
		}
		rows = append(rows, []string{momentText(r.Time), fixed(r.LossDB, 3), plus(r.OffDB), doubt(r.Uncertainty, 3),
			plus(r.LowDB) + " to " + plus(r.HighDB), word, r.Operator, record})
	}
	p.table("  ", rows)
	if len(shown) < len(readings) {
		p.line("  and %d before; --verbose shows them all", len(readings)-len(shown))
	}
}

// plus prints a deviation with its sign.
func plus(n result.Number) string {
	text := fixed(n, 3)
	if n.OK() && !strings.HasPrefix(text, "-") {
		text = "+" + text
	}
	return text
}

// momentText prints a time of the result to the minute.
func momentText(text string) string {
	at, err := time.Parse(time.RFC3339Nano, text)
	if err != nil {
		return text
	}
	return at.UTC().Format("2006-01-02 15:04")
}
