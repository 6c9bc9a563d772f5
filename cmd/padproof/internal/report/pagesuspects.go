package report

import (
	"cmp"
	"slices"
	"strings"

	"padproof/cmd/padproof/internal/result"
)

// A suspectView is a fault that would explain the figures, and how to make sure.
type suspectView struct {
	Fault     string
	Weight    phrase
	By        phrase // how far the part is off, where that is an estimate
	Parts     []string
	Predicted []fact
	Confirm   []fact
	How       string
	Picture   *pictureView // the schematic with the part marked
}

// mostMarked is how many suspects are shown in a schematic; those after are hardly
// ever right.
const mostMarked = 3

func suspectViews(a *result.Answer, marked func(parts []string) *Picture) ([]suspectView, error) {
	var all []suspectView
	for i, s := range a.Suspects {
		field := at("/suspects", i)
		one := suspectView{
			Fault: s.Fault, Weight: phrase{figure(field+"/weight", s.Weight, fixed(s.Weight, 2))}, Parts: s.Parts,
			Predicted: predictedFacts(field+"/predicted", s.Predicted),
			Confirm:   confirmFacts(field+"/confirm", s.Confirm), How: capital(s.Confirm.How),
		}
		if known(s.ByPercent) && known(s.ByPercentU) && !strings.Contains(s.Fault, " or ") {
			one.By = phrase{words("off by "), figure(field+"/by_percent", *s.ByPercent, toDigits(float64(*s.ByPercent), 3)),
				words(" % ± "), figure(field+"/by_percent_u", *s.ByPercentU, toDigits(float64(*s.ByPercentU), 2)), words(" %")}
		}
		if marked != nil && len(s.Parts) > 0 && i < mostMarked {
			if p := marked(s.Parts); p != nil {
				picture, err := p.view()
				if err != nil {
					return nil, err
				}
				one.Picture = &picture
			}
		}
		all = append(all, one)
	}
	return all, nil
}

// predictedFacts are what the fault would make of the figures, in the order of
// their names.
func predictedFacts(field string, predicted map[string]result.Number) []fact {
	var facts []fact
	for key, n := range predicted {
		title, unit := titleOfKey(key)
		facts = append(facts, fact{title, phrase{figure(field+"/"+key, n, fixed(n, 2)), words(unit)}})
	}
	slices.SortFunc(facts, func(a, b fact) int { return cmp.Compare(a.Name, b.Name) })
	return facts
}

// titleOfKey parts the name of a JSON field into words and a unit.
func titleOfKey(key string) (title, unit string) {
	for suffix, text := range map[string]string{"_db": " dB", "_dbu": " dBu", "_hz": " Hz", "_ohms": " Ω", "_deg": "°", "_s": " s"} {
		if stem, found := strings.CutSuffix(key, suffix); found {
			key, unit = stem, text
			break
		}
	}
	return strings.ReplaceAll(key, "_", " "), unit
}

func confirmFacts(field string, c result.Confirm) []fact {
	if len(c.Pins) == 0 {
		return nil
	}
	reads := func(key string, n result.Number) phrase { return phrase{figure(field+"/"+key, n, metered(n))} }
	facts := []fact{{"Ohmmeter between", phrase{name(strings.Join(c.Pins, " and "))}}}
	if len(c.Joined) > 0 {
		facts = append(facts, fact{"with joined", phrase{name(strings.Join(c.Joined, " and "))}})
	}
	facts = append(facts, fact{"A sound unit reads", reads("good_ohms", c.GoodOhms)}, fact{"With this fault", reads("fault_ohms", c.FaultOhms)})
	if c.NextOhms != nil {
		facts = append(facts, fact{"With “" + c.Next + "”", reads("next_ohms", *c.NextOhms)})
	}
	return facts
}

// unexplained reports whether nothing looked for explains the figures better than
// none of it would.
func unexplained(a *result.Answer) bool {
	return a.Unexplained != nil && (len(a.Suspects) == 0 || *a.Unexplained > a.Suspects[0].Weight)
}

// noneWeight is the weight of "none of these".
func noneWeight(a *result.Answer) phrase {
	if a.Unexplained == nil || len(a.Suspects) == 0 {
		return nil
	}
	return phrase{words("None of these, weight "), figure("/unexplained", *a.Unexplained, fixed(*a.Unexplained, 2)),
		words(". Weights add up to 1 over all faults looked at; small ones are left out.")}
}

// A problemView is what is wrong with a take, where, and what to do.
type problemView struct {
	File, Problem, Text string
	Where               phrase
}

func problemViews(a *result.Answer) []problemView {
	var all []problemView
	for i, c := range a.Captures {
		for k, q := range c.Problems {
			one := problemView{File: c.File, Problem: q.Problem, Text: q.Text}
			if q.AtSec.OK() {
				field := at(at("/captures", i)+"/problems", k) + "/at_s"
				one.Where = phrase{words(" at "), figure(field, q.AtSec, fixed(q.AtSec, 2)), words(" s")}
			}
			all = append(all, one)
		}
	}
	return all
}
