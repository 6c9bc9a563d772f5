package lotstat

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"time"

	"gonum.org/v1/gonum/stat/distuv"
)

// A RigReading is one reading of a reference pad of known loss.
type RigReading struct {
	At          time.Time
	DeviationDB float64 // measured less known loss; NaN or infinite where the pad could not be read
	StdUDB      float64 // standard uncertainty of the reading by itself; 0 where not known
}

// A RigRule is what a rig check is held to.
type RigRule struct {
	KnownStdUDB float64       // standard uncertainty of the known loss between the ends of this bench
	WithinDB    float64       // largest deviation allowed besides; 0 for none
	MaxAge      time.Duration // how old the last reading may be; 0 for any age
}

// A RigState is what the last reading of the reference pad says of the bench.
type RigState string

// The states of a rig. Only RigOK lets a bench go on.
const (
	RigOK      RigState = "ok"
	RigOut     RigState = "out"
	RigTooOld  RigState = "too-old"
	RigMissing RigState = "missing"
)

// A RigPoint is one reading on the chart, with the limits it was held to.
type RigPoint struct {
	RigReading
	LowDB, HighDB float64 // the narrower of both limits on either side
	Out           bool
	Text          string // why it is out
}

// A RigCheck is the bench judged, and its chart.
type RigCheck struct {
	State  RigState
	Text   string     // in plain words; where not ok, what to do
	Points []RigPoint // in order of time, none later than asked for
	// Drifting says that the moving average of the last readings has left its limits though no
	// reading has: a warning, not a state.
	Drifting bool
}

// The chart's own numbers: how many readings in order make limits from history,
// the least standard deviation that they may show (both common practice, no
// source), and the coverage of three standard deviations.
const (
	rigHistory      = 8
	rigResolutionDB = 0.001
	rigCoverage     = 0.9973
)

// CheckRig judges the bench at a time from the readings of its reference pad up
// to then; later ones are left out. Readings may come in any order.
//
// Each reading is held to limits from what is known, and, once eight readings
// before it were in order, to limits from those as well:
//
//	0 ± 2 √(known² + reading²)                      (ISO 13528: |En| ≤ 1)
//	mean ± t s √(1 + 1/n)                           (prediction of the next reading)
//
// with n readings in order, s their mean moving range over 1.128 or, where that
// is larger, the reading's own uncertainty, never under 0.001 dB, and t Student's at 99.73 % with the
// degrees of freedom of [CapabilityOf]; the first clause's 2 is k = 2, and
// WithinDB draws it in where it is less. The use of history follows the check
// standard of NIST/SEMATECH e-Handbook 2.2.2, from memory. A reading that is out
// never joins the history. After a mend that moved the bench for good, begin a
// new chart: leave out the readings before.
//
// The state is that of the last reading; one older than MaxAge is [RigTooOld]
// even where it was in order, [RigOut] where it was not. Without a reading it is
// [RigMissing]. An error comes from a rule with a negative or an infinite figure,
// or from one that knows neither an uncertainty nor a largest deviation.
func CheckRig(readings []RigReading, rule RigRule, at time.Time) (RigCheck, error) {
	if err := rule.check(); err != nil {
		return RigCheck{}, err
	}
	var c RigCheck
	var history []float64
	for _, r := range inOrder(readings, at) {
		p := rule.judge(r, history)
		if !p.Out {
			history = append(history, r.DeviationDB)
		}
		c.Points = append(c.Points, p)
	}
	if len(c.Points) == 0 {
		c.State, c.Text = RigMissing, "no rig check yet: measure the reference pad"
		return c, nil
	}
	c.state(rule, at)
	c.drift(history)
	return c, nil
}

func (r RigRule) check() error {
	for _, v := range []float64{r.KnownStdUDB, r.WithinDB} {
		if !finite(v) || v < 0 {
			return fmt.Errorf("a rig rule with %g dB: it must be a number, 0 or more", v)
		}
	}
	if r.MaxAge < 0 {
		return fmt.Errorf("a rig check that may be %v old: the age must not be negative", r.MaxAge)
	}
	if r.KnownStdUDB == 0 && r.WithinDB == 0 {
		return errors.New("a reference pad needs the uncertainty of its loss, or the deviation allowed")
	}
	return nil
}

// inOrder are the readings up to a time, by time.
func inOrder(readings []RigReading, at time.Time) []RigReading {
	var past []RigReading
	for _, r := range readings {
		if !r.At.After(at) {
			past = append(past, r)
		}
	}
	slices.SortStableFunc(past, func(a, b RigReading) int { return a.At.Compare(b.At) })
	return past
}

// judge holds one reading to both limits.
func (r RigRule) judge(reading RigReading, history []float64) RigPoint {
	own := reading.StdUDB
	if !(own > 0) || math.IsInf(own, 0) {
		own = 0
	}
	half := r.halfWidth(own)
	p := RigPoint{RigReading: reading, LowDB: -half, HighDB: half}
	low, high := math.Inf(-1), math.Inf(1)
	if len(history) >= rigHistory {
		low, high = nextLimits(history, own)
		p.LowDB, p.HighDB = math.Max(low, p.LowDB), math.Min(high, p.HighDB)
	}
	d := reading.DeviationDB
	switch {
	case !finite(d):
		p.Text = "the reference pad could not be read: look at its plugs and cables"
	case math.Abs(d) > half:
		p.Text = fmt.Sprintf("the reference pad reads %s off its known loss, %s are allowed: look for a changed cable, setting or load", signedDB(d), sizeDB(half))
	case d < low || d > high:
		p.Text = fmt.Sprintf("the reference pad reads %s, between %s and %s so far: the bench has changed; find what, or begin a new chart", signedDB(d), signedDB(low), signedDB(high))
	}
	p.Out = p.Text != ""
	return p
}

// halfWidth is how far a reading may lie from the known loss.
func (r RigRule) halfWidth(ownStdUDB float64) float64 {
	const k = 2
	if r.KnownStdUDB == 0 {
		return r.WithinDB
	}
	half := k * math.Hypot(r.KnownStdUDB, ownStdUDB)
	if r.WithinDB > 0 {
		half = math.Min(half, r.WithinDB)
	}
	return half
}

// nextLimits predicts the next reading.
func nextLimits(history []float64, ownStdU float64) (low, high float64) {
	n := float64(len(history))
	s := max(meanOf(movingRanges(history))/rangeD2, ownStdU, rigResolutionDB)
	t := distuv.StudentsT{Mu: 0, Sigma: 1, Nu: rangeDof(len(history))}.Quantile((1 + rigCoverage) / 2)
	mean, half := meanOf(history), t*s*math.Sqrt(1+1/n)
	return mean - half, mean + half
}

// state is that of the last reading.
func (c *RigCheck) state(rule RigRule, at time.Time) {
	last := c.Points[len(c.Points)-1]
	age := at.Sub(last.At)
	switch {
	case last.Out:
		c.State, c.Text = RigOut, last.Text
	case rule.MaxAge > 0 && age > rule.MaxAge:
		c.State = RigTooOld
		c.Text = fmt.Sprintf("the last rig check is %s old, %s are allowed: measure the reference pad", ageText(age), ageText(rule.MaxAge))
	default:
		c.State, c.Text = RigOK, fmt.Sprintf("the reference pad reads %s off its known loss", signedDB(last.DeviationDB))
	}
}
