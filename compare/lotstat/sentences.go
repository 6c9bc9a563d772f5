package lotstat

import (
	"fmt"
	"math"
	"strings"
)

// sentences say what a diagnosis means, the shift first.
func sentences(l Lot, v view, d Diagnosis) []string {
	if d.Units == 0 {
		return []string{"no unit could be read"}
	}
	all := []string{shiftSentence(v, d)}
	if d.Step.Shown {
		all = append(all, fmt.Sprintf("from unit %s on loss lies %s %s: a new reel, or the bench was touched",
			l.name(d.Step.At), sizeDB(d.Step.ChangeDB), higher(d.Step.ChangeDB)))
	}
	if d.Trend.Shown {
		all = append(all, fmt.Sprintf("loss %s by %s over the lot, %s a unit: the bench drifts, or its temperature",
			rises(d.Trend.SlopeDB), sizeDB(d.Trend.TotalDB), sizeDB(d.Trend.SlopeDB)))
	}
	if c := d.Clusters; c.Shown {
		all = append(all, fmt.Sprintf("the units are of two kinds, %.0f %% of them %s above the others: two reels mixed",
			100*c.HighFrac, sizeDB(c.HighDB-c.LowDB)))
	}
	if d.Width.Shown {
		all = append(all, fmt.Sprintf("loss spreads by %s (standard deviation), where parts within tolerance would give %s: parts of a wider tolerance, or takes that do not repeat",
			sizeDB(d.Width.StdDevDB), sizeDB(d.Width.SoundDB)))
	}
	if len(d.Outliers) > 0 {
		all = append(all, outlierSentence(l, d.Outliers))
	}
	return all
}

func shiftSentence(v view, d Diagnosis) string {
	s := d.Shift
	where := fmt.Sprintf("loss sits %s %s %s", sizeDB(s.MeanDB), highLow(s.MeanDB), onHowMany(v, d))
	switch {
	case d.Units == 1 || len(v.db) < 2:
		return fmt.Sprintf("one unit, %s %s: a lot needs more to speak of", sizeDB(s.MeanDB), highLow(s.MeanDB))
	case !s.Shown:
		return fmt.Sprintf("loss sits where it is drawn, to within %s", sizeDB(math.Max(math.Abs(s.Interval.Low), math.Abs(s.Interval.High))))
	case !s.BeyondBench:
		return fmt.Sprintf("%s, no more than the bench itself may add (%s%s)", where, sizeDB(s.BenchUDB), mostlyOf(s.Foremost))
	case len(d.Explanations) == 0:
		return where + ": no reel and no end of the bench explains it alone; look at the values fitted, and at the gain between takes"
	}
	return where + ": " + suspicion(d.Explanations)
}

// suspicion names the likeliest explanations: those within three times of the
// first in parts of their tolerance, three at most.
func suspicion(all []Explanation) string {
	const within, most = 3, 3
	var words []string
	lead := "suspect "
	if all[0].Within {
		lead = "this would explain it: "
	}
	for i, e := range all {
		if i >= most || (i > 0 && !(e.rank() <= within*all[0].rank())) {
			break
		}
		words = append(words, e.String())
	}
	return lead + strings.Join(words, ", or ")
}

// onHowMany is "on all units" where all lie on one side, else "on average".
func onHowMany(v view, d Diagnosis) string {
	for _, db := range v.db {
		if (db > 0) != (d.Shift.MeanDB > 0) {
			return "on average"
		}
	}
	if len(d.Outliers) > 0 {
		return "on all units but those named below"
	}
	return "on all units"
}

func outlierSentence(l Lot, outliers []int) string {
	var names []string
	for _, i := range outliers {
		names = append(names, fmt.Sprintf("%s (%s)", l.name(i), signedDB(l.DeviationsDB[i])))
	}
	if len(names) == 1 {
		return "unit " + names[0] + " does not belong with the rest"
	}
	return "units " + listed(names) + " do not belong with the rest"
}

func mostlyOf(foremost string) string {
	if foremost == "" {
		return ""
	}
	return ", foremost its " + foremost
}

func highLow(db float64) string {
	if db < 0 {
		return "low"
	}
	return "high"
}

func higher(db float64) string {
	if db < 0 {
		return "lower"
	}
	return "higher"
}

func rises(db float64) string {
	if db < 0 {
		return "falls"
	}
	return "rises"
}
