package compare

import (
	"fmt"

	"padproof/analysis"
	"padproof/compare/uncertainty"
)

// A SteadyCase is what steadiness is judged by. A take that is not there, or whose tone is too
// short, is nil or has no blocks.
type SteadyCase struct {
	Before, After, Flex *analysis.Steadiness
	Limit               Limit // AtMost(steady_within_db)
	Rule                Rule
}

// A SteadyFinding is the steadiness judged.
type SteadyFinding struct {
	Finding
	From   string           // the take that departs most: "after" or "flex"
	AtSec  float64          // where in it
	Events []analysis.Event // of that take
}

// JudgeSteadiness judges the larger departure of after and flex, in dB without sign.
//
// A source that is itself unsteady fails no unit: where before departs so far that what is left of
// the departure would keep the limit, it is UNPROVEN. Nor is it a PASS where the noise crackles in
// after or flex and not in before, though the tone's level keeps to the limit.
func JudgeSteadiness(c SteadyCase) (SteadyFinding, error) {
	f := SteadyFinding{Finding: nothingFound(c.Limit, 0)}
	worst := (*analysis.Steadiness)(nil)
	for _, take := range []struct {
		name string
		s    *analysis.Steadiness
	}{{"after", c.After}, {"flex", c.Flex}} {
		if wasJudged(take.s) && (worst == nil || take.s.DepartureDB > worst.DepartureDB) {
			worst, f.From = take.s, take.name
		}
	}
	if worst == nil {
		f.leaveOpen("no tone stood long enough in after or flex to judge; record at least 4 s of it")
		return f, nil
	}
	f.Measured, f.AtSec, f.Events = worst.DepartureDB, worst.AtSec, worst.Events
	f.Budget.Terms = steadyTerms(*worst)
	if err := f.Finding.decide(c.Rule); err != nil {
		return f, err
	}
	f.doubtSource(c)
	f.doubtCrackle(c)
	return f, nil
}

func wasJudged(s *analysis.Steadiness) bool { return s != nil && s.Blocks > 0 }

// steadyTerms are the doubt of the largest departure: the noise taken off may not have been in that
// block at all, and may have lowered it. At 95 % the rectangle reaches two of a block's standard
// deviations beyond the noise taken off.
func steadyTerms(s analysis.Steadiness) []uncertainty.Term {
	half := (s.NoiseDB + 2*s.BlockDB) / Coverage
	return []uncertainty.Term{uncertainty.FromRectangle(blockNoiseSrc, half, 1)}
}

func (f *SteadyFinding) doubtSource(c SteadyCase) {
	if f.Verdict != Fail || !wasJudged(c.Before) {
		return
	}
	left := f.Measured - c.Before.DepartureDB
	if verdict, _ := Decide(Guarded, left, f.UDB, c.Limit, 0); verdict != Fail {
		f.leaveOpen("the source itself departs by %.2g dB in before, at %.1f s; record before and after with a steadier generator", c.Before.DepartureDB, c.Before.AtSec)
	}
}

func (f *SteadyFinding) doubtCrackle(c SteadyCase) {
	if f.Verdict != Pass || wasJudged(c.Before) && crackle(c.Before) != nil {
		return
	}
	for _, take := range []struct {
		name string
		s    *analysis.Steadiness
	}{{"after", c.After}, {"flex", c.Flex}} {
		if e := crackle(take.s); e != nil {
			f.leaveOpen("the tone keeps its level, but %s crackles at %.1f s (%s dB over the tone); record %s again: if it comes back, look at contacts and solder joints",
				take.name, e.AtSec, fmt.Sprintf("%.0f", e.DB), take.name)
			return
		}
	}
}

func crackle(s *analysis.Steadiness) *analysis.Event {
	if !wasJudged(s) {
		return nil
	}
	for i, e := range s.Events {
		if e.What == analysis.Crackle {
			return &s.Events[i]
		}
	}
	return nil
}
