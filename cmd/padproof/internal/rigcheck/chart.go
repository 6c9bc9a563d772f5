package rigcheck

import (
	"fmt"
	"math"
	"slices"
	"time"

	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/sheet"
	"padproof/compare"
	"padproof/compare/lotstat"
)

// ChartOf is the bench at a time, by the readings up to then, in any order. The
// verdict is PASS for a bench in order, FAIL for one that is out, else UNPROVEN.
func ChartOf(rig *sheet.Rig, known *Known, readings []Reading, at time.Time) (*result.RigCheck, error) {
	ref := rig.Reference
	stdU, err := known.stdUDB(math.NaN())
	if err != nil {
		return nil, err
	}
	rule := lotstat.RigRule{KnownStdUDB: stdU, WithinDB: ref.WithinDB, MaxAge: hours(ref.EveryHours)}
	var off []lotstat.RigReading
	readings = upTo(readings, at)
	for _, r := range readings {
		off = append(off, lotstat.RigReading{At: r.At, DeviationDB: r.LossDB - known.lossDB(r.FreqHz), StdUDB: r.StdUDB})
	}
	check, err := lotstat.CheckRig(off, rule, at)
	if err != nil {
		return nil, fmt.Errorf("the reference pad %s: %w", ref.Serial, err)
	}
	c := &result.RigCheck{
		Schema: result.RigCheckSchema, State: string(check.State), Text: check.Text, Drifting: check.Drifting, At: timeText(at),
		Rig: rig.Name, Reference: referenceOf(ref, known.lossDB(math.NaN()), stdU), Readings: []result.RigReading{}, Notes: []string{},
	}
	for i, p := range check.Points {
		c.Readings = append(c.Readings, pointOf(p, readings[i], rule))
	}
	judge(c, rule)
	return c, nil
}

func referenceOf(ref *sheet.Reference, lossDB, stdUDB float64) result.Reference {
	r := result.Reference{
		Serial: ref.Serial, LossDB: result.Number(lossDB), Uncertainty: result.Number(2 * stdUDB),
		WithinDB: orMissing(ref.WithinDB), EveryHours: orMissing(ref.EveryHours), Required: ref.Required,
	}
	if !ref.ChartFrom.IsZero() {
		r.ChartFrom = timeText(ref.ChartFrom)
	}
	return r
}

// orMissing is a figure that is 0 where it was left out.
func orMissing(v float64) result.Number {
	if v == 0 {
		return result.Missing
	}
	return result.Number(v)
}

func pointOf(p lotstat.RigPoint, r Reading, rule lotstat.RigRule) result.RigReading {
	one := result.RigReading{
		Time: timeText(p.At), LossDB: result.Number(r.LossDB), OffDB: result.Number(p.DeviationDB),
		LowDB: result.Number(p.LowDB), HighDB: result.Number(p.HighDB),
		Uncertainty: result.Number(2 * math.Hypot(rule.KnownStdUDB, p.StdUDB)),
		Out:         p.Out, Text: p.Text, Operator: r.Operator, Record: r.Record,
	}
	switch {
	case r.Void != "":
		one.Text = r.Void
	case !p.Out && beyondDoubt(one, rule.WithinDB):
		one.Text = fmt.Sprintf("%s off with a doubt of %.3f dB: that it is within %.3g dB (within_db) is not shown",
			signed(one.OffDB), float64(one.Uncertainty), rule.WithinDB)
	}
	return one
}

// beyondDoubt says that a reading may be further off than is allowed.
func beyondDoubt(r result.RigReading, withinDB float64) bool {
	return withinDB > 0 && math.Abs(float64(r.OffDB))+float64(r.Uncertainty) > withinDB
}

// judge puts in what the last reading proves, and the verdict.
func judge(c *result.RigCheck, rule lotstat.RigRule) {
	if n := len(c.Readings); n > 0 {
		last := c.Readings[n-1]
		switch {
		case !last.OffDB.OK():
			c.State, c.Text = result.RigUnproven, "the last rig check proves nothing, "+last.Text+": record the reference pad again"
		case last.Text != "" && !last.Out:
			c.State, c.Text = result.RigUnproven, last.Text+"; record before-again and after-again as well, state what is known of the bench in rig.toml, or allow more"
		}
	}
	switch c.State {
	case result.RigOK:
		c.Verdict = string(compare.Pass)
		if until := holdsTo(c, rule.MaxAge); !until.IsZero() {
			c.HoldsTo = timeText(until)
		}
	case result.RigOut:
		c.Verdict = string(compare.Fail)
	default:
		c.Verdict = string(compare.Unproven)
	}
	if c.State != result.RigOK {
		c.Cautions = result.Cautions
	}
}

// holdsTo is when a bench that is in order no longer counts as such; zero: never.
func holdsTo(c *result.RigCheck, maxAge time.Duration) time.Time {
	if maxAge == 0 || c.State != result.RigOK {
		return time.Time{}
	}
	at, err := time.Parse(time.RFC3339Nano, c.Readings[len(c.Readings)-1].Time)
	if err != nil {
		return time.Time{}
	}
	return at.Add(maxAge)
}

// upTo are the readings up to a time, by time.
func upTo(readings []Reading, at time.Time) []Reading {
	var past []Reading
	for _, r := range readings {
		if !r.At.After(at) {
			past = append(past, r)
		}
	}
	slices.SortStableFunc(past, func(a, b Reading) int { return a.At.Compare(b.At) })
	return past
}

func hours(h float64) time.Duration { return time.Duration(h * float64(time.Hour)) }

func timeText(t time.Time) string { return t.UTC().Format(time.RFC3339Nano) }

func signed(v result.Number) string { return fmt.Sprintf("%+.3f dB", float64(v)) }
