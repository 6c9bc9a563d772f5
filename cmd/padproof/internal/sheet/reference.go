package sheet

import (
	"path/filepath"
	"strings"
	"time"

	"github.com/pelletier/go-toml/v2"
)

// Reference is the [reference] section of a rig.toml: the pad of known loss by
// which the bench itself is checked. Its loss stands there as a figure, or a
// drawing gives it; one of the two is always there.
type Reference struct {
	Serial        string
	LossDB        *float64  // between this bench's ends; nil where PadFile gives it
	UncertaintyDB float64   // of LossDB, expanded (k = 2); 0 if left out
	PadFile       string    // the drawing, as found from the sheet's folder; "" where LossDB is written
	WithinDB      float64   // how far off it may read; 0 if left out
	EveryHours    float64   // how long a rig check holds; 0 if left out: for good
	ChartFrom     time.Time // earlier rig checks are left out; zero if left out
	Required      bool      // without a rig check in order no unit passes
}

// The ranges of a reference pad's figures.
var (
	refLossSpan  = span{from: 0.01, to: 200, mend: "write the loss that this bench reads of it in order, in decibels: 13.57"}
	refDoubtSpan = span{from: 0, to: 20, open: true, mend: "write it in decibels, above 0: it widens what counts as in order"}
	withinSpan   = span{from: 0, to: 20, open: true, mend: "write how many decibels off are still good: 0.1"}
	hoursSpan    = span{from: 0, to: 8784, open: true, mend: "write how many hours a rig check holds: 8 for a shift"}
)

// reference reads the section on the reference pad; nil if there is none.
func (r *Rig) reference(top *table) {
	t, there := top.section("reference")
	ref := &Reference{
		Serial: strings.TrimSpace(t.text("serial")), LossDB: t.number("loss_db", refLossSpan),
		UncertaintyDB: t.positive("uncertainty_db", refDoubtSpan), PadFile: t.text("pad"),
		WithinDB: t.positive("within_db", withinSpan), EveryHours: t.positive("every_hours", hoursSpan),
		ChartFrom: t.moment("chart_from"), Required: t.truth("required"),
	}
	if !there {
		return
	}
	r.Reference = ref
	if ref.PadFile != "" && !filepath.IsAbs(ref.PadFile) {
		ref.PadFile = filepath.Join(filepath.Dir(r.File), ref.PadFile)
	}
}

// check looks whether the keys hold together.
func (ref *Reference) check(d *document) {
	if ref == nil {
		return
	}
	doubted := d.lines["reference.uncertainty_db"] > 0
	switch {
	case ref.Serial == "":
		d.fail("reference", "reference names no pad", `write serial = "REF-14" below it: the pad's own name, and that of the folder of its takes`)
	case strings.ContainsAny(ref.Serial, `/\`):
		d.fail("reference.serial", "reference.serial is a path", "write the pad's name alone")
	case ref.LossDB == nil && ref.PadFile == "":
		d.fail("reference", "reference does not say what the pad loses", "write loss_db, as this bench reads it in order, with uncertainty_db; or pad, the path of its drawing")
	case ref.LossDB != nil && ref.PadFile != "":
		d.fail("reference.pad", "reference.pad and reference.loss_db are two figures for one loss", "keep one of the two")
	case ref.PadFile != "" && doubted:
		d.fail("reference.uncertainty_db", "reference.uncertainty_db goes with loss_db", "drop it: with a drawing the tolerances of its parts and of this bench say it")
	case ref.LossDB != nil && !doubted && ref.WithinDB == 0:
		d.fail("reference.loss_db", "reference.loss_db has no uncertainty", "write uncertainty_db, expanded (k = 2), or within_db, how far off is still good, or both")
	}
}

// positive returns a number above 0, 0 if it is left out or no good.
func (t *table) positive(key string, s span) float64 {
	if x := t.number(key, s); x != nil {
		return *x
	}
	return 0
}

// moment returns a date or a time, in UTC unless it says otherwise; the zero time
// if it is left out or no good.
func (t *table) moment(key string) time.Time {
	v, there := t.ask(key)
	if !there {
		return time.Time{}
	}
	switch v := v.(type) {
	case time.Time:
		return v.UTC()
	case toml.LocalDate:
		return v.AsTime(time.UTC)
	case toml.LocalDateTime:
		return v.AsTime(time.UTC)
	case string:
		for _, form := range []string{time.DateOnly, "2006-01-02T15:04", "2006-01-02T15:04:05", time.RFC3339} {
			if at, err := time.Parse(form, v); err == nil {
				return at.UTC()
			}
		}
	}
	t.fail(key, "is no date", key+" = 2026-11-30, or a time as 2026-11-30T14:05:00, UTC")
	return time.Time{}
}
