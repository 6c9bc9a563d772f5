package report

import (
	"fmt"
	"slices"
	"strings"

	"padproof/cmd/padproof/internal/result"
)

// ohmReadings are what a sound unit reads.
func ohmReadings(p *page, r *result.Prediction) {
	if len(r.Ohms) == 0 {
		return
	}
	p.heading("What an ohmmeter reads on a sound unit")
	p.item("  ", result.OhmCaution+"; all pins open but those joined.")
	rows := [][]string{{"pins", "joined", "reads", "by the tolerances", "meter"}}
	for _, o := range r.Ohms {
		band, meter := dash, dash
		switch {
		case o.Ohms.OK() && metered(o.Low) == metered(o.High):
			band = "just so"
		case o.Low.OK():
			band = metered(o.Low) + " to " + metered(o.High)
		}
		if o.Meter.OK() {
			meter = "±" + o.Meter.Ohms(2)
		}
		rows = append(rows, []string{strings.Join(o.Pins, " to "), joinedPins(o.Joined), metered(o.Ohms), band, meter})
	}
	p.table("  ", rows)
	for _, note := range r.OhmNotes {
		p.item("  ", note)
	}
}

func joinedPins(pins []string) string {
	if len(pins) == 0 {
		return dash
	}
	return strings.Join(pins, " and ")
}

// ohmsSeen are the readings that were taken, beside those of a sound unit.
func ohmsSeen(p *page, a *result.Answer) {
	if len(a.Ohms) == 0 {
		return
	}
	var meters []string
	rows := [][]string{{"pins", "joined", "read", "a sound unit", ""}}
	for _, o := range a.Ohms {
		agrees := "agrees"
		if !o.Agrees {
			agrees = "WRONG"
		}
		rows = append(rows, []string{strings.Join(o.Pins, " to "), joinedPins(o.Joined), metered(o.Ohms), goodBand(o), agrees})
		meter := fmt.Sprintf("±(%s %% + %s)", significant(float64(o.MeterTol)*100), ohms(o.MeterPlus))
		if !slices.Contains(meters, meter) {
			meters = append(meters, meter)
		}
	}
	p.heading("Ohmmeter, good for " + strings.Join(meters, " or "))
	p.table("  ", rows)
}

// goodBand is what the meter may show on a sound unit.
func goodBand(o result.OhmSeen) string {
	const nearlyOpen = 0.9e6 // open begins at 1 MΩ less the meter's doubt
	low, high := metered(o.GoodLow), metered(o.GoodHigh)
	switch {
	case !o.GoodHigh.OK() && o.GoodLow >= nearlyOpen:
		return "open"
	case !o.GoodHigh.OK():
		return low + " or more"
	case low == high:
		return low
	}
	return low + " to " + high
}
