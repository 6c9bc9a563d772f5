package report

import (
	"strings"

	"padproof/cmd/padproof/internal/result"
)

// whyOf says what the verdict rests on: each check that keeps the unit from
// passing, or those that it passes by.
func whyOf(a *result.Answer) []phrase {
	var why []phrase
	if a.Reason != "" {
		why = append(why, say(a.Reason))
	}
	var kept []string
	for i, c := range a.Checks {
		switch c.Verdict {
		case "PASS":
			kept = append(kept, c.Name)
		case "FAIL", "UNPROVEN":
			why = append(why, whyCheck(at("/checks", i), c))
		}
	}
	if a.Verdict == "PASS" {
		why = append(why, say("Every limit that is set is shown to be kept: "+strings.Join(kept, ", ")+"."))
	}
	return why
}

func whyCheck(field string, c result.Check) phrase {
	p := phrase{words(c.Name + " " + c.Verdict + ": ")}
	if c.Reason != "" {
		return append(p, words(c.Reason))
	}
	p = append(p, measuredPhrase(field, c)...)
	p = append(p, words(" "+c.Unit))
	if c.Low.OK() || c.High.OK() {
		p = append(p, words("; allowed: "))
		p = append(p, limitPhrase(field, c, decimals(c.Uncertainty))...)
		p = append(p, words(" "+c.Unit))
	}
	return p
}

// factsOf are what was checked, and between what.
func factsOf(a *result.Answer) []fact {
	var facts []fact
	named := func(title, text string) {
		if text != "" {
			facts = append(facts, fact{title, phrase{name(text)}})
		}
	}
	named("Unit", a.Unit)
	named("Pad", a.Pad)
	named("Rig", a.Rig)
	if a.BenchEnds != nil {
		facts = append(facts, fact{"Bench", endsPhrase("/bench_ends", *a.BenchEnds)})
	}
	if a.ServiceEnds != nil {
		facts = append(facts, fact{"Service", endsPhrase("/service_ends", *a.ServiceEnds)})
	}
	for i, c := range a.Checks {
		if c.Name == "loss" && known(c.AtHz) {
			facts = append(facts, fact{"Loss judged at", phrase{figure(at("/checks", i)+"/at_hz", *c.AtHz, hertz(*c.AtHz, 1))}})
		}
	}
	return facts
}

func endsPhrase(field string, e result.Ends) phrase {
	p := phrase{
		figure(field+"/source_ohms", e.SourceOhms, ohms(e.SourceOhms)), words(" source, " + e.Drive + "; "),
		figure(field+"/load_ohms", e.LoadOhms, ohms(e.LoadOhms)), words(" load, " + e.Sense),
	}
	if e.CablePF.OK() && e.CablePF > 0 {
		p = append(p, words(", "), figure(field+"/cable_pf", e.CablePF, fixed(e.CablePF, 0)), words(" pF"))
	}
	return p
}
