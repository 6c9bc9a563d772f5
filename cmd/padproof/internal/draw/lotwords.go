package draw

import (
	"strconv"
	"strings"

	"padproof/cmd/padproof/internal/result"
)

// spreadSays is the sentence of a picture of a spread.
func (s lotSeries) spreadSays() string {
	says := s.howMany() + " from " + s.number(s.Least) + " to " + s.number(s.Greatest) + " " + s.Unit
	if len(s.values) == 1 {
		says = s.units[0] + ", the only unit, reads " + s.number(s.Mean.Value) + " " + s.Unit
	} else {
		says += ", " + s.number(s.Mean.Value) + " in the mean"
	}
	if s.Expected.OK() {
		says += ", where the drawing gives " + s.number(s.Expected)
	}
	says += "; "
	switch {
	case s.Low.OK() && s.High.OK():
		says += "limits " + trimmed(s.Low) + " to " + trimmed(s.High) + ": " + s.verdictCounts()
	case s.High.OK():
		says += "limit up to " + trimmed(s.High) + ": " + s.verdictCounts()
	case s.Low.OK():
		says += "limit from " + trimmed(s.Low) + ": " + s.verdictCounts()
	default:
		return says + "no limit is set."
	}
	return says + "." + s.roomSays()
}

func (s lotSeries) howMany() string {
	if n := len(s.values); n != 1 {
		return strconv.Itoa(n) + " units read"
	}
	return "One unit reads"
}

// verdictCounts are the verdicts of the figure, the worst first.
func (s lotSeries) verdictCounts() string {
	var parts []string
	for _, v := range []string{"FAIL", "UNPROVEN", "PASS"} {
		if n := s.count(v); n > 0 {
			parts = append(parts, strconv.Itoa(n)+" "+v)
		}
	}
	return join(parts)
}

// roomSays is how far the nearer limit is, by the spread of all units.
func (s lotSeries) roomSays() string {
	if s.Overall == nil || !s.Overall.Cpk.Value.OK() {
		return ""
	}
	room := 3 * float64(s.Overall.Cpk.Value)
	if room < 0 {
		return " The mean lies outside the limits."
	}
	if room > 99 {
		return " The nearer limit lies more than 99 standard deviations from the mean."
	}
	return " The nearer limit lies " + strconv.FormatFloat(room, 'f', 1, 64) + " standard deviations from the mean."
}

// chartSays is the sentence of a chart.
func (s lotSeries) chartSays() string {
	c := s.Chart
	says := "The units one after another, in the order of their serials: "
	found := breaks(len(c.Breaks)) + " of the " + c.Rules + " rules, where a steady line of as many units shows about " + fixed(c.FalseBreaks, 1) + " by chance"
	switch {
	case len(c.Breaks) == 0:
		says += "steady, no " + c.Rules + " rule is broken"
	case c.Steady:
		says += "as steady as can be told; " + found + ": " + s.brokenAt()
	default:
		says += "not steady; " + found + ": " + s.brokenAt()
	}
	says += ". Chart limits " + s.number(c.Low) + " to " + s.number(c.High) + " " + s.Unit + " about " + s.number(c.Centre) + ", made from these units"
	if len(c.LeftOut) > 0 {
		says += " without " + few(c.LeftOut)
	}
	if c.Provisional {
		says += "; they are provisional, being of fewer than 20"
	}
	return says + "."
}

func breaks(n int) string {
	if n == 1 {
		return "1 break"
	}
	return strconv.Itoa(n) + " breaks"
}

// few names some units, and counts the others.
func few(units []string) string {
	const most = 3
	if len(units) <= most {
		return join(units)
	}
	return join(units[:most]) + " and " + strconv.Itoa(len(units)-most) + " more"
}

// brokenAt names the units of the first breaks.
func (s lotSeries) brokenAt() string {
	const most = 3
	var parts []string
	for _, b := range s.Chart.Breaks {
		if len(parts) == most {
			parts = append(parts, "and "+strconv.Itoa(len(s.Chart.Breaks)-most)+" more")
			break
		}
		parts = append(parts, unitsOf(b))
	}
	return join(parts)
}

// unitsOf are the units of a break: all of a few, else the first and the last.
func unitsOf(b result.Break) string {
	if len(b.Units) > 2 {
		return b.Units[0] + " to " + b.Units[len(b.Units)-1]
	}
	return strings.Join(b.Units, " to ")
}
