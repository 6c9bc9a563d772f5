package report

import (
	"slices"

	"padproof/cmd/padproof/internal/result"
)

// foundFacts are what the takes told of the rig itself.
func foundFacts(a *result.Answer) []fact {
	f := a.Found
	if f == nil {
		return nil
	}
	var facts []fact
	add := func(title, key string, n, u result.Number, unit string) {
		if !n.OK() {
			return
		}
		places := decimals(u)
		facts = append(facts, fact{title, phrase{
			figure("/found/"+key, n, fixed(n, places)), words(" ± "), figure("/found/"+key+"_u", u, doubt(u, places)), words(" " + unit),
		}})
	}
	add("Source impedance", "source_ohms", f.SourceOhms, f.SourceOhmsU, "Ω")
	add("Full scale", "full_scale_dbu", f.FullScaleDBu, f.FullScaleDBuU, "dBu")
	return facts
}

// recordedFacts are where an answer stands in the ledger, or why it does not.
func recordedFacts(r *result.Recorded, e *result.Error) []fact {
	var facts []fact
	if e != nil {
		why := phrase{name(e.File)}
		if e.Line > 0 {
			why = append(why, words(", line "), count("/record_error/line", e.Line))
		}
		facts = append(facts, fact{"Not recorded", append(why, words(": "+e.Text+"; "+e.Hint))})
	}
	if r != nil {
		facts = append(facts, fact{"Station", phrase{name(r.Station)}},
			fact{"Record", phrase{count("/recorded/sequence", int(r.Sequence))}},
			fact{"Hash, the head of the station", say(r.Hash)})
	}
	return facts
}

// budgetTables are the uncertainty budgets, one a check.
func budgetTables(a *result.Answer) []*table {
	var all []*table
	by := map[string]*table{}
	for i, term := range a.Budget {
		t := by[term.Check]
		if t == nil {
			t = &table{Class: "budget", Caption: "Budget of " + term.Check, Head: []string{"source", "standard u", "sensitivity", "contributes", "dof"}}
			by[term.Check] = t
			all = append(all, t)
		}
		field := at("/budget", i)
		dof := phrase{words("inf")}
		if term.DOF.OK() {
			dof = phrase{figure(field+"/dof", term.DOF, fixed(term.DOF, 0))}
		}
		t.add("", say(term.Source), phrase{figure(field+"/standard_uncertainty", term.StandardU, plain(term.StandardU))},
			phrase{figure(field+"/sensitivity", term.Sensitivity, plain(term.Sensitivity))},
			phrase{figure(field+"/contributes", term.Contributes, plain(term.Contributes))}, dof)
	}
	return all
}

// takeTables are the captures: what was judged of each, how it lies on the disk,
// and its hash.
func takeTables(a *result.Answer) []*table {
	if len(a.Captures) == 0 {
		return nil
	}
	levels := &table{Caption: "What was read", Head: []string{"take", "channel", "tone", "level dBFS", "noise dBFS", "SNR dB", "scatter dB", "steady s"}}
	form := &table{Caption: "As recorded", Head: []string{"take", "file", "form", "length s", "peak dBFS", "RMS dBFS", "clock ppm"}}
	harmonics := &table{Caption: "Harmonics, dB relative to the tone", Head: []string{"take", "2nd", "3rd", "4th", "5th", "6th", "7th", "8th", "9th", "10th"}}
	hash := &table{Class: "hashes", Caption: "SHA-256 of each file", Head: []string{"take", "file", "SHA-256"}}
	for i, c := range a.Captures {
		field := at("/captures", i)
		number := func(key string, n result.Number, places int) phrase {
			return phrase{figure(field+"/"+key, n, fixed(n, places))}
		}
		levels.add("", say(c.Role), phrase{count(field+"/channel", c.Channel), words(" of "), count(field+"/channels", c.Channels)},
			phrase{figure(field+"/tone_hz", c.ToneHz, hertz(c.ToneHz, 4))}, number("level_dbfs", c.LevelDBFS, 3),
			number("noise_dbfs", c.NoiseDBFS, 1), number("snr_db", c.SNRDB, 1),
			phrase{figure(field+"/scatter_db", c.ScatterDB, plain(c.ScatterDB))},
			steadyPhrase(field, c))
		clock := say(dash)
		if known(c.ClockPPM) {
			clock = number("clock_ppm", *c.ClockPPM, 1)
		}
		form.add("", say(c.Role), phrase{name(c.File)},
			phrase{count(field+"/rate_hz", c.RateHz), words(" Hz, "), count(field+"/bits", c.Bits), words("-bit " + c.Encoding)},
			number("seconds", c.Seconds, 2), number("peak_dbfs", c.PeakDBFS, 1), number("rms_dbfs", c.RMSDBFS, 2), clock)
		if len(c.Harmonics) > 0 {
			harmonics.add("", say(c.Role), harmonicCells(field, c, len(harmonics.Head)-1)...)
		}
		hash.add("", say(c.Role), phrase{name(c.File)}, say(c.SHA256))
	}
	tables := []*table{levels, form, hash}
	if len(harmonics.Rows) > 0 {
		tables = slices.Insert(tables, 2, harmonics)
	}
	return tables
}

// steadyPhrase is the stretch that was judged.
func steadyPhrase(field string, c result.Capture) phrase {
	if !c.FromSec.OK() {
		return say(dash)
	}
	return phrase{figure(field+"/steady_from_s", c.FromSec, fixed(c.FromSec, 2)), words(" to "), figure(field+"/steady_to_s", c.ToSec, fixed(c.ToSec, 2))}
}

func harmonicCells(field string, c result.Capture, most int) []phrase {
	var cells []phrase
	for k, h := range c.Harmonics[:min(most, len(c.Harmonics))] {
		cells = append(cells, phrase{figure(at(field+"/harmonics_db", k), h, fixed(h, 1))})
	}
	return cells
}
