package report

import (
	"math"
	"strconv"

	"padproof/cmd/padproof/internal/result"
)

// at is the pointer to an element of a list.
func at(list string, i int) string { return list + "/" + strconv.Itoa(i) }

// checksTable has a row a check, and one more where it was read on the bench and
// carried over.
func checksTable(a *result.Answer) *table {
	if len(a.Checks) == 0 {
		return nil
	}
	t := &table{
		Class: "checks", Caption: "What was checked",
		Head: []string{"check", "verdict", "measured", "expected", "limits", "±U", "unit", "limit/U"},
	}
	for i, c := range a.Checks {
		field, places := at("/checks", i), checkPlaces(c)
		t.add(verdictClass(c.Verdict), say(c.Name), say(orNoLimit(c.Verdict)), measuredPhrase(field, c),
			phrase{figure(field+"/expected", c.Expected, fixed(c.Expected, places))},
			limitPhrase(field, c, places), doubtPhrase(field, c), say(c.Unit),
			phrase{figure(field+"/tolerance_ratio", c.Ratio, ratio(c.Ratio))})
		if c.Bench != nil {
			field, places := field+"/bench", decimals(c.Bench.Uncertainty)
			t.add("bench", say("on the bench"), nil,
				phrase{figure(field+"/measured", c.Bench.Measured, fixed(c.Bench.Measured, places))},
				phrase{figure(field+"/expected", c.Bench.Expected, fixed(c.Bench.Expected, places))}, nil,
				phrase{figure(field+"/uncertainty", c.Bench.Uncertainty, doubt(c.Bench.Uncertainty, places))}, say(c.Unit), nil)
		}
	}
	return t
}

// checkPlaces is how many places the figures of a check deserve.
func checkPlaces(c result.Check) int {
	if c.Unit == "" {
		return 0
	}
	return decimals(c.Uncertainty)
}

func orNoLimit(verdict string) string {
	if verdict == "" {
		return "no limit"
	}
	return verdict
}

func verdictClass(verdict string) string {
	return map[string]string{"PASS": "pass", "FAIL": "fail", "UNPROVEN": "unproven"}[verdict]
}

// measuredPhrase is what was measured, or the bound where nothing but that was.
func measuredPhrase(field string, c result.Check) phrase {
	if c.Unit != "" && bounded(c) {
		return phrase{words("below "), figure(field+"/bound", *c.Bound, fixed(*c.Bound, 1))}
	}
	return phrase{figure(field+"/measured", c.Measured, fixed(c.Measured, checkPlaces(c)))}
}

func bounded(c result.Check) bool { return !c.Measured.OK() && known(c.Bound) }

func doubtPhrase(field string, c result.Check) phrase {
	if c.Unit == "" || bounded(c) {
		return say(dash)
	}
	return phrase{figure(field+"/uncertainty", c.Uncertainty, doubt(c.Uncertainty, checkPlaces(c)))}
}

// checkDetails are the sentences that belong to checks, but for why one does not
// pass: that stands at the top.
func checkDetails(a *result.Answer) []phrase {
	var all []phrase
	for i, c := range a.Checks {
		field := at("/checks", i)
		if c.Reason != "" && (c.Verdict == "PASS" || c.Verdict == "") {
			all = append(all, say(c.Name+": "+c.Reason))
		}
		if p := singleFigures(field, c); len(p) > 0 {
			p[0].Text = c.Name + ": " + p[0].Text
			all = append(all, p)
		}
		for k, e := range c.Events {
			one := at(field+"/events", k)
			all = append(all, phrase{words(c.Name + ": " + e.What + " of "), figure(one+"/db", e.DB, fixed(e.DB, 2)),
				words(" dB in " + c.From + " at "), figure(one+"/at_s", e.AtSec, fixed(e.AtSec, 2)), words(" s")})
		}
		if s := c.Spread; s != nil && s.Low95.OK() {
			all = append(all, spreadPhrase(field+"/spread", *s, c.Unit))
		}
	}
	return all
}

// singleFigures are what some check has and others do not, each with its words.
func singleFigures(field string, c result.Check) phrase {
	var all phrase
	add := func(before, key string, n *result.Number, places int, after string) {
		if known(n) {
			if all != nil {
				before = "; " + before
			}
			all = append(all, words(before), figure(field+"/"+key, *n, fixed(*n, places)), words(after))
		}
	}
	if c.Name != "loss" {
		add("largest at ", "at_hz", c.AtHz, 0, " Hz")
	}
	add("down by 3 dB at ", "low_corner_hz", c.LowCornerHz, 0, " Hz")
	add("down by 3 dB at ", "high_corner_hz", c.HighCorner, 0, " Hz")
	add("the unit's own ", "measured_dbu", c.MeasuredDBu, 1, " dBu")
	add("thermal by the drawing ", "expected_dbu", c.ExpectedDBu, 1, " dBu")
	add("the rig's own ", "rig_dbu", c.RigDBu, 1, " dBu")
	if !bounded(c) {
		add("at most ", "bound", c.Bound, 1, " "+c.Unit)
	}
	add("as recorded, A-weighted ", "a_weighted_dbu", c.AWeighted, 1, " dBu")
	add("as recorded, quasi-peak weighted ", "quasi_peak_468_dbu", c.QuasiPeak, 1, " dBu")
	add("the same in before ", "rig_db", c.RigDB, 1, " dB")
	add("mains at ", "mains_hz", c.MainsHz, 0, " Hz, from "+c.From)
	add("phase beyond the drawing's ", "phase_deg", c.PhaseDeg, 1, "°")
	add("largest in "+c.From+" at ", "at_s", c.AtSec, 2, " s")
	return all
}

func spreadPhrase(field string, s result.Spread, unit string) phrase {
	number := func(key string, n result.Number) piece { return figure(field+"/"+key, n, fixed(n, 2)) }
	return phrase{
		words("Sound units of this drawing read "), number("low_95", s.Low95), words(" to "), number("high_95", s.High95),
		words(" " + unit + " (95 %), "), number("worst_low", s.WorstLow), words(" to "), number("worst_high", s.WorstHigh), words(" at worst."),
	}
}

func tonesTable(a *result.Answer) *table {
	if len(a.Tones) == 0 {
		return nil
	}
	t := &table{Caption: "Loss on the bench at each tone", Head: []string{"tone", "measured", "expected", "±U", "unit"}}
	for i, tone := range a.Tones {
		field, places := at("/tones", i), decimals(tone.Uncertainty)
		t.add("", phrase{figure(field+"/tone_hz", tone.FreqHz, hertz(tone.FreqHz, 1))},
			phrase{figure(field+"/measured", tone.Measured, fixed(tone.Measured, places))},
			phrase{figure(field+"/expected", tone.Expected, fixed(tone.Expected, places))},
			phrase{figure(field+"/uncertainty", tone.Uncertainty, doubt(tone.Uncertainty, places))}, say("dB"))
	}
	return t
}

// octaves are the preferred frequencies an octave apart (ISO 266).
var octaves = []float64{31.5, 63, 125, 250, 500, 1000, 2000, 4000, 8000, 16000}

// octaveTable says in figures what the picture of the response shows: the point
// nearest to each octave.
func octaveTable(a *result.Answer) *table {
	for i, c := range a.Checks {
		if c.Name != "response" || len(c.Points) == 0 {
			continue
		}
		t := &table{Caption: "Response at octaves: loss relative to that at the tone", Head: []string{"frequency", "measured", "expected", "±U", "unit"}}
		last := -1
		for _, freqHz := range octaves {
			k := nearestPoint(c.Points, freqHz)
			if k == last || k < 0 {
				continue
			}
			last = k
			p, field, places := c.Points[k], at(at("/checks", i)+"/points", k), decimals(c.Points[k].Uncertainty)
			t.add("", phrase{figure(field+"/freq_hz", p.FreqHz, hertz(p.FreqHz, 0))},
				phrase{figure(field+"/measured", p.Measured, fixed(p.Measured, places))},
				phrase{figure(field+"/expected", p.Expected, fixed(p.Expected, places))},
				phrase{figure(field+"/uncertainty", p.Uncertainty, doubt(p.Uncertainty, places))}, say("dB"))
		}
		return t
	}
	return nil
}

// nearestPoint is the point within a sixth of an octave of a frequency that lies
// nearest to it; -1 if there is none.
func nearestPoint(points []result.ResponsePoint, freqHz float64) int {
	best, least := -1, 1.0/6
	for k, p := range points {
		if d := math.Abs(math.Log2(float64(p.FreqHz) / freqHz)); d < least {
			best, least = k, d
		}
	}
	return best
}
