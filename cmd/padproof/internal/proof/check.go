package proof

import (
	"cmp"
	"strings"

	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/sheet"
	"padproof/cmd/padproof/internal/unit"
	"padproof/compare"
	"padproof/compare/suspect"
)

// Options are what the caller settles beside the unit's files.
type Options struct {
	Channel int             // the channel that holds the tone, from 1; 0: find it
	Mark    *Mark           // no drawing: what is marked on the pad
	Played  string          // a WAV that was played instead of the test signal; "" where none
	Ohms    []sheet.Reading // ohmmeter readings beside those of the unit's own sheet
	Meter   Meter           // that took them
	Curves  bool            // fill Answer.Curves, which pictures are drawn from

	Shared  *Shared // keeps what takes that serve several units have shown; nil: nothing is kept
	Workers int     // takes read at once; 0: two

	// Progress is told how many bytes of the takes are read, of all: seldom, and
	// one call at a time. Err is asked meanwhile; its error ends the check. Both
	// may be nil.
	Progress func(done, total int64)
	Err      func() error
}

// Check judges one unit. A take that shows nothing is a problem in the answer;
// an error is a file that cannot be read, a sheet that is wrong, or a channel
// that cannot be told.
func Check(u *unit.Unit, o Options) (*result.Answer, error) {
	d, err := drawingOf(u, o.Mark)
	if err != nil {
		return nil, err
	}
	ts, err := openTakes(u, o.Shared)
	if err != nil {
		return nil, err
	}
	defer ts.close()
	ts.watch(o)
	c := &check{Drawing: d, takes: ts, mark: o.Mark, played: o.Played, answer: newAnswer(u, d, o.Mark), voids: map[string]bool{}}
	if err := c.readOhms(u, o); err != nil {
		return nil, err
	}
	if o.Played != "" && d.Circuit == nil {
		return nil, &result.Error{File: o.Played, Text: "what was played gives a response, and there is no drawing to hold it against", Hint: "give a pad.toml, or leave --signal out"}
	}
	if err := ts.measure(cmp.Or(o.Channel, u.Channel), d.reads(o.Workers), o.Played != ""); err != nil {
		return nil, err
	}
	if err := c.judge(); err != nil {
		return nil, err
	}
	answer := c.finish(u)
	if o.Curves {
		answer.Curves = c.curves()
	}
	return answer, nil
}

// reads is what of the rig tells on how takes are read.
func (d *Drawing) reads(workers int) rigReads {
	const usual = 2
	return rigReads{d.Sheet.Calibration.ChannelMatchDB, d.Sheet.MainsHz, d.Gains.LinearityDB, cmp.Or(workers, usual)}
}

// A check is one unit being judged.
type check struct {
	*Drawing
	takes    *takes
	mark     *Mark
	played   string
	ohms     []compare.OhmSeen // readings of an ohmmeter
	found    scale             // what dBFS stand for
	findings findings          // kept for the search of what is wrong
	voids    map[string]bool   // checks that a problem of their takes voids
	ranking  *suspect.Ranking  // nil where nothing was sought
	judged   *judgedLoss       // nil where the loss was not held against the drawing
	answer   *result.Answer
}

func newAnswer(u *unit.Unit, d *Drawing, mark *Mark) *result.Answer {
	a := &result.Answer{
		Schema: result.CheckSchema, Unit: u.Serial, Pad: d.Name, Rig: d.Sheet.Name,
		Checks: []result.Check{}, Suspects: []result.Suspect{}, Unseen: []result.Unseen{},
		Rework: []result.Rework{}, WithoutDrawing: []result.Likelihood{},
		Budget: []result.Term{}, Captures: []result.Capture{},
		Sheets: sheetsOf(u.Folder, d), Assumed: d.assumed(), Notes: []string{}, Warnings: append([]string{}, u.Warnings...),
		BenchEnds: endsOf(d.Rig.Ends),
	}
	if mark == nil {
		a.Drawing = drawnOf(d.Circuit)
	}
	if d.Service != d.Rig.Ends {
		a.ServiceEnds = endsOf(d.Service)
	}
	if d.Sheet.File == "" {
		a.Warnings = append(a.Warnings, "there is no rig.toml: source and load count as ±50 %")
	}
	return a
}

// judge makes the checks in the order in which they are shown. What the takes
// tell of the rig comes first, since the loss stands on it.
func (c *check) judge() error {
	c.takes.noteCopies()
	c.pairUp()
	if err := c.findRig(); err != nil {
		return err
	}
	for _, one := range []func() error{
		c.loss, c.response, c.noise, c.polarity, c.distortion, c.hum, c.legs, c.steadiness, c.bypass,
	} {
		if err := one(); err != nil {
			return err
		}
	}
	return nil
}

// add enters a check with its budget; a problem of one of the takes that it
// stands on takes its ground away.
func (c *check) add(one result.Check, terms []result.Term, on ...*take) {
	for _, t := range on {
		if t != nil {
			on = append(on, c.takes.by[second(t.role)])
		}
	}
	if void(&one, on...) {
		c.voids[one.Name] = true
	}
	c.answer.Checks = append(c.answer.Checks, one)
	c.answer.Budget = append(c.answer.Budget, terms...)
}

// void takes the ground from a check that a problem of a take touches, and
// reports whether there is one.
func void(one *result.Check, takes ...*take) bool {
	var names []string
	for _, t := range takes {
		if t == nil {
			continue
		}
		for _, p := range t.problems {
			if compare.Voids(p.Name, one.Name) {
				names = append(names, t.role+" is "+p.Name)
			}
		}
	}
	if len(names) == 0 || one.Verdict == string(compare.None) {
		return len(names) > 0
	}
	one.Verdict = string(compare.Unproven)
	one.Reason = strings.Join(unrepeated(names), ", ") + ": see Problems for what to do"
	return true
}

// unrepeated leaves each text once.
func unrepeated(texts []string) []string {
	var once []string
	seen := map[string]bool{}
	for _, t := range texts {
		if !seen[t] {
			once = append(once, t)
		}
		seen[t] = true
	}
	return once
}

func namesOf(problems []compare.Problem) []string {
	var names []string
	for _, p := range problems {
		names = append(names, p.Name)
	}
	return names
}

// finish adds the takes, the notes and the unit's verdict.
func (c *check) finish(u *unit.Unit) *result.Answer {
	a := c.answer
	for _, t := range c.takes.order {
		if other := c.takes.by[second(t.role)]; other != nil {
			t.problems = append(t.problems, without(other.problems, namesOf(t.problems)...)...)
		}
		a.Captures = append(a.Captures, t.capture(u.Folder))
		for _, comment := range t.facts.Comments {
			a.Simulated = a.Simulated || strings.HasPrefix(comment, "SIMULATED")
		}
	}
	straight, through := c.takes.pair()
	if !straight.stepped || !through.stepped {
		a.Notes = append(a.Notes, "automatic gain not excluded: a plain tone cannot show it; switch it off in the recorder")
	}
	var verdicts []compare.Verdict
	for _, one := range a.Checks {
		verdicts = append(verdicts, compare.Verdict(one.Verdict))
	}
	verdict, reason := compare.Combine(verdicts...)
	a.Verdict = string(verdict)
	c.seek(verdict)
	c.whatToDo()
	switch {
	case reason == "":
	case c.mark == nil && c.Circuit == nil:
		a.Reason = reason + ": there is no drawing; give a pad.toml, or say what is marked on the pad"
	case c.mark != nil:
		a.Reason = reason + ": say with --within-db how far off the mark is still good"
	default:
		a.Reason = reason + ": set one in pad.toml, [limits] loss_plus_minus_db; the spread of sound units below is a guide"
	}
	return a
}
