package compare

import (
	"fmt"
	"math"
	"strconv"
	"strings"
)

// A Verdict says what a check, or a whole unit, is shown to be.
type Verdict string

const (
	None     Verdict = ""         // reported, not judged: no limit is set
	Pass     Verdict = "PASS"     // shown to keep its limit
	Fail     Verdict = "FAIL"     // shown to break it
	Unproven Verdict = "UNPROVEN" // neither is shown
)

// A Rule says what is done with the uncertainty when a figure is held against
// its limit (JCGM 106:2012; ILAC-G8:09/2019, 4.2). The zero Rule is Guarded.
type Rule string

const (
	// Guarded draws the limits in by U for a PASS and widens them by U for a
	// FAIL. A figure whose true value lies on the limit then passes in at most
	// 2.5 % of cases.
	Guarded Rule = "guarded"
	// Shared decides at the limit itself, the risk shared by both sides, while U
	// is small beside the limit.
	Shared Rule = "shared"
)

// ParseRule reads "guarded" or "shared", as a drawing writes them; nothing at
// all is Guarded.
func ParseRule(text string) (Rule, error) {
	switch r := Rule(text); r {
	case "":
		return Guarded, nil
	case Guarded, Shared:
		return r, nil
	}
	return "", fmt.Errorf("decision rule %q is neither %q nor %q", text, Guarded, Shared)
}

// A Limit is the interval that a figure must keep to, ends included. An end that
// is not limited is -Inf or +Inf; with both so, no limit is set. The zero Limit
// is the point 0, not a limit left out: that is [NoLimit].
type Limit struct{ Low, High float64 }

// PlusMinus is the limit centre ± halfWidth.
func PlusMinus(centre, halfWidth float64) Limit {
	return Limit{centre - halfWidth, centre + halfWidth}
}

// AtMost is a limit above alone.
func AtMost(high float64) Limit { return Limit{math.Inf(-1), high} }

// AtLeast is a limit below alone.
func AtLeast(low float64) Limit { return Limit{low, math.Inf(1)} }

// NoLimit is no limit at all; [Decide] then gives [None].
func NoLimit() Limit { return Limit{math.Inf(-1), math.Inf(1)} }

// IsSet reports whether either end limits anything.
func (l Limit) IsSet() bool { return !math.IsInf(l.Low, -1) || !math.IsInf(l.High, 1) }

// sound reports whether some finite figure may lie within.
func (l Limit) sound() bool {
	return l.Low <= l.High && !math.IsInf(l.Low, 1) && !math.IsInf(l.High, -1)
}

func (l Limit) twoSided() bool { return !math.IsInf(l.Low, 0) && !math.IsInf(l.High, 0) }

// room is the half-width of the limit, or for a one-sided one its distance from
// expected: what U is small or large beside. NaN where there is no such figure.
func (l Limit) room(expected float64) float64 {
	switch {
	case l.twoSided():
		return (l.High - l.Low) / 2
	case math.IsInf(expected, 0) || !l.IsSet():
		return math.NaN()
	case math.IsInf(l.Low, -1):
		return math.Abs(l.High - expected)
	}
	return math.Abs(expected - l.Low)
}

// inside is how far measured lies within the nearer end, negative outside, and
// the name of that end.
func (l Limit) inside(measured float64) (marginDB float64, end string) {
	above, below := measured-l.Low, l.High-measured
	if above < below {
		return above, "lower limit"
	}
	return below, "upper limit"
}

// ToleranceRatio returns the half-width of the limit over U, for a one-sided
// limit its distance from expected over U: how much better the measurement is
// than what it judges. ok is false where there is no such finite ratio: no limit
// set, a one-sided one with nothing expected (NaN), a U of 0 or unknown.
func ToleranceRatio(limit Limit, expected, uDB float64) (ratio float64, ok bool) {
	ratio = limit.room(expected) / uDB
	if !limit.sound() || !(uDB > 0) || math.IsNaN(ratio) || math.IsInf(ratio, 0) {
		return 0, false
	}
	return ratio, true
}

// Decide holds measured, with its expanded uncertainty uDB, against the limit. A
// verdict of Unproven comes with the reason; the others with "". Figures are in
// decibels, or in dBu with differences in decibels; expected, what the drawing
// gives, matters only for a one-sided limit under Shared, and may be NaN.
//
// Guarded gives Pass for measured ± uDB wholly within the limit, Fail for
// measured ± uDB wholly outside it, else Unproven. Shared gives Pass within the
// limit and Fail outside it while uDB is at most a third of its half-width
// (one-sided: of its distance from expected), else Unproven, however far the
// figure lies outside.
//
// With no limit set the verdict is None. A measured, uDB or limit that is NaN, a
// negative uDB, a limit with its ends crossed: Unproven. So is a measured of
// ±Inf. For a loss where nothing comes through, a caller who knows the smallest
// loss that the takes allow passes that bound as measured, with its own uDB,
// where it lies above the upper limit: the loss is then shown to be larger still.
func Decide(rule Rule, measured, uDB float64, limit Limit, expected float64) (Verdict, string) {
	switch {
	case !limit.IsSet():
		return None, ""
	case !limit.sound():
		return Unproven, fmt.Sprintf("the limit, %g to %g, is no range", limit.Low, limit.High)
	case math.IsNaN(measured) || math.IsInf(measured, 0):
		return Unproven, "there is no finite reading to judge"
	case !(uDB >= 0) || math.IsInf(uDB, 1):
		return Unproven, "the uncertainty of the reading is not known"
	}
	switch rule {
	case Guarded, "":
		return decideGuarded(measured, uDB, limit)
	case Shared:
		return decideShared(measured, uDB, limit, expected)
	}
	_, err := ParseRule(string(rule))
	return Unproven, err.Error()
}

func decideGuarded(measured, uDB float64, limit Limit) (Verdict, string) {
	marginDB, end := limit.inside(measured)
	if marginDB >= uDB {
		return Pass, ""
	}
	if -marginDB > uDB {
		return Fail, ""
	}
	if halfDB := limit.room(math.NaN()); halfDB < uDB {
		u, half := figuresDB(uDB, halfDB, halfDB)
		return Unproven, fmt.Sprintf("U %s dB is wider than the ±%s dB limit; no reading can pass until U is below %s dB", u, half, half)
	}
	u, margin := figuresDB(uDB, math.Abs(marginDB), uDB)
	switch {
	case margin == "0":
		return Unproven, fmt.Sprintf("the reading lies on the %s, with U %s dB", end, u)
	case marginDB > 0:
		return Unproven, fmt.Sprintf("%s dB inside the %s, less than U %s dB; a PASS needs a smaller U", margin, end, u)
	}
	return Unproven, fmt.Sprintf("%s dB outside the %s, not more than U %s dB; a FAIL needs a smaller U", margin, end, u)
}

func decideShared(measured, uDB float64, limit Limit, expected float64) (Verdict, string) {
	roomDB := limit.room(expected)
	if math.IsNaN(roomDB) {
		return Unproven, "a shared decision at a one-sided limit needs an expected figure to hold U against"
	}
	if uDB > roomDB/3 {
		beside := "the ±%s dB limit"
		if !limit.twoSided() {
			beside = "the %s dB between expected figure and limit"
		}
		u, room := figuresDB(uDB, roomDB, math.Min(uDB, roomDB))
		_, third := figuresDB(uDB, roomDB/3, math.Min(uDB, roomDB/3))
		return Unproven, fmt.Sprintf("U %s dB is more than a third of "+beside+"; a shared decision needs U %s dB or less", u, room, third)
	}
	if marginDB, _ := limit.inside(measured); marginDB < 0 {
		return Fail, ""
	}
	return Pass, ""
}

// figuresDB prints two sizes to the second digit of a third (of a, which is above
// 0, where that is 0), and further where they would look alike.
func figuresDB(a, b, to float64) (string, string) {
	const most = 9
	if !(to > 0) {
		to = a
	}
	decimals := int(math.Min(most, math.Max(0, 1-math.Floor(math.Log10(to)))))
	for {
		s, t := plainDB(a, decimals), plainDB(b, decimals)
		if s != t || decimals >= most {
			return s, t
		}
		decimals++
	}
}

// plainDB prints without exponent and without zeros at the end.
func plainDB(v float64, decimals int) string {
	s := strconv.FormatFloat(v, 'f', decimals, 64)
	if strings.Contains(s, ".") {
		s = strings.TrimRight(strings.TrimRight(s, "0"), ".")
	}
	return s
}

// Combine gives the verdict of a unit from those of its checks: Fail if any is
// Fail, else Unproven if any is (or is no known verdict), else Pass. None does
// not count; where nothing else is left the unit is Unproven, and the reason
// says that no limit is set.
func Combine(checks ...Verdict) (verdict Verdict, reason string) {
	verdict = None
	for _, v := range checks {
		switch {
		case v == None:
		case v == Fail || verdict == Fail:
			verdict = Fail
		case v != Pass || verdict == Unproven:
			verdict = Unproven
		default:
			verdict = Pass
		}
	}
	if verdict == None {
		return Unproven, "no limit set"
	}
	return verdict, ""
}
