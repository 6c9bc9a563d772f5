package report

import (
	"fmt"
	"io"
	"strings"

	"padproof/cmd/padproof/internal/result"
)

// PredictionText writes what a drawing should measure and how to record it.
func PredictionText(w io.Writer, r *result.Prediction, verbose bool) error {
	p := &page{w: w}
	p.line("%s", clean(strings.Join([]string{r.Pad, "network " + r.Network}, "   ")))
	if r.Rig != "" {
		p.line("  rig: %s", clean(r.Rig))
	}
	conditions(p, r)
	proof(p, r)
	parts(p, r)
	ohmReadings(p, r)
	phantom(p, r)
	response(p, r)
	bullets(p, "What this bench could not see", unseenTexts(r.Unseen))
	recordings(p, r)
	bullets(p, "Warnings", r.Warnings)
	bullets(p, "Taken for granted, since rig.toml leaves it out", r.Assumed)
	bullets(p, "Before anything is connected or played", r.Cautions)
	if verbose {
		budget(p, r.Budget)
	}
	return p.err
}

func conditions(p *page, r *result.Prediction) {
	p.line("")
	row := func(name string, c result.Condition) []string {
		return []string{
			name, fixed(c.LossDB, 2), fixed(c.Spread.Low95, 2) + " to " + fixed(c.Spread.High95, 2),
			fixed(c.Spread.WorstLow, 2) + " to " + fixed(c.Spread.WorstHigh, 2), ohms(c.InputOhms), ohms(c.OutputOhms),
		}
	}
	p.table("", [][]string{
		{"at " + hertz(r.ToneHz, 0), "loss dB", "95 % of sound units", "worst case", "input", "output"},
		row("on the bench", r.Bench), row("in service", r.Service),
	})
	p.item("  bench:    ", ends(r.Bench.Ends))
	p.item("  service:  ", ends(r.Service.Ends))
}

func proof(p *page, r *result.Prediction) {
	p.line("")
	text := "With takes recorded well, U of the loss in service would be " + doubt(r.U, decimals(r.U)) + " dB"
	if r.Limit != nil {
		c := result.Check{Unit: "dB", Low: r.Limit.Low, High: r.Limit.High}
		text += "; the limits are " + limits(c, 2) + " dB"
	}
	p.item("", text+".")
	switch {
	case r.Verdict == "PASS":
		p.item("", "A sound unit that reads what the drawing says would PASS.")
	case r.Verdict != "":
		p.item("", "A sound unit that reads what the drawing says would be "+r.Verdict+": "+r.Reason+".")
	case r.Reason != "":
		p.item("", r.Reason)
	}
}

func parts(p *page, r *result.Prediction) {
	p.heading("Parts: how much 1 % more of each moves the loss, and what each dissipates at " + fixed(r.InputDBu, 0) + " dBu into the pad")
	rows := [][]string{{"part", "value", "tolerance", "bench dB", "service dB", "power"}}
	for _, l := range r.Parts {
		rows = append(rows, []string{
			l.Ref, value(l), "±" + significant(float64(l.TolFrac)*100) + " %",
			signed(l.BenchDBPer1), signed(l.ServDBPer1), scaled(l.DissipationW, "W"),
		})
	}
	p.table("  ", rows)
}

func signed(n result.Number) string {
	text := fixed(n, 4)
	if n.OK() && n > 0 && strings.Trim(text, "0.") != "" {
		return "+" + text
	}
	return text
}

func phantom(p *page, r *result.Prediction) {
	if r.Phantom == nil {
		return
	}
	leg := func(volts result.Number, blocked bool) string {
		if blocked {
			return "blocked"
		}
		return fixed(volts, 2) + " V lost"
	}
	p.line("")
	p.item("", fmt.Sprintf("Phantom (48 V fed at the output, %s mA drawn at the input): hot %s, cold %s.",
		fixed(r.Phantom.CurrentMA, 1), leg(r.Phantom.HotVolts, r.Phantom.HotBlocked), leg(r.Phantom.ColdVolts, r.Phantom.ColdBlocked)))
}

func response(p *page, r *result.Prediction) {
	if len(r.Bench.Response) == 0 {
		return
	}
	p.heading("Loss over frequency, dB")
	head, bench, service := []string{"Hz"}, []string{"bench"}, []string{"service"}
	for i, point := range r.Bench.Response {
		head = append(head, significant(float64(point.FreqHz)))
		bench = append(bench, fixed(point.LossDB, 2))
		service = append(service, fixed(r.Service.Response[i].LossDB, 2))
	}
	p.table("  ", [][]string{head, bench, service})
}

func recordings(p *page, r *result.Prediction) {
	if len(r.Recordings) == 0 {
		return
	}
	p.heading("Recordings to make")
	for _, take := range r.Recordings {
		need := "if you can: "
		if take.Needed {
			need = ""
		}
		p.item("  - ", take.File+": "+need+take.How)
	}
}
