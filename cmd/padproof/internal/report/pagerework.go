package report

import (
	"strings"

	"padproof/cmd/padproof/internal/result"
)

// A reworkView is one way to bring the loss in.
type reworkView struct {
	Text  string
	Facts []fact
}

func reworkViews(a *result.Answer) []reworkView {
	var all []reworkView
	for i, r := range a.Rework {
		field := at("/rework", i)
		one := reworkView{Text: capital(r.Text)}
		add := func(title string, p phrase) { one.Facts = append(one.Facts, fact{title, p}) }
		series := ""
		if r.Series != "" {
			series = " (" + r.Series + ")"
		}
		add("Resistor", phrase{figure(field+"/ohms", r.Ohms, metered(r.Ohms)), words(series)})
		if known(r.Watts) && known(r.Volts) {
			add("It dissipates", phrase{figure(field+"/watts", *r.Watts, plain(*r.Watts)), words(" W at "),
				figure(field+"/input_volts", *r.Volts, plain(*r.Volts)), words(" V at the input in service")})
		}
		add("Loss on the bench", foretoldPhrase(field+"/bench", r.Bench))
		add("Loss in service", foretoldPhrase(field+"/service", r.Service))
		add("A check should say", foretoldPhrase(field+"/checked", r.Checked))
		all = append(all, one)
	}
	return all
}

func foretoldPhrase(field string, f result.ForetoldDB) phrase {
	places := decimals(f.U)
	if !f.U.OK() {
		return phrase{words("about "), figure(field+"/loss", f.Loss, fixed(f.Loss, 2)), words(" dB")}
	}
	return phrase{figure(field+"/loss", f.Loss, fixed(f.Loss, places)), words(" dB ± "), figure(field+"/u", f.U, doubt(f.U, places)), words(" dB")}
}

// likelihoodTable is what might be wrong with a pad that has no drawing.
func likelihoodTable(a *result.Answer) *table {
	if len(a.WithoutDrawing) == 0 {
		return nil
	}
	t := &table{Caption: "Likelihoods, no findings", Head: []string{"what might be wrong", "in pads of kind", "would read here", "from", "to", "likelihood", "to tell"}}
	for i, l := range a.WithoutDrawing {
		field := at("/without_drawing", i)
		reads := func(key string, n result.Number) phrase {
			return phrase{figure(field+"/"+key, n, fixed(n, 1)), words(" dB")}
		}
		read := reads("would_read_db", l.WouldReadDB)
		if !l.WouldReadDB.OK() {
			read = say("nothing")
		}
		t.add("", say(l.Fault), say(strings.Join(l.Networks, ", ")), read, reads("would_read_low_db", l.WouldReadLowDB), reads("would_read_high_db", l.WouldReadHighDB),
			phrase{figure(field+"/likelihood", l.Likelihood, fixed(l.Likelihood, 2))}, say(l.Measure))
	}
	return t
}

// ohmsTable are the ohmmeter readings that were taken.
func ohmsTable(a *result.Answer) *table {
	if len(a.Ohms) == 0 {
		return nil
	}
	t := &table{Caption: "Ohmmeter readings taken", Head: []string{"pins", "joined", "read", "a sound unit from", "to", "meter good for", "a sound unit can"}}
	for i, o := range a.Ohms {
		field := at("/ohms", i)
		reads := func(key string, n result.Number) phrase { return phrase{figure(field+"/"+key, n, metered(n))} }
		agrees := "show it"
		if !o.Agrees {
			agrees = "NOT show it"
		}
		t.add("", phrase{name(strings.Join(o.Pins, " to "))}, phrase{name(joinedPins(o.Joined))}, reads("ohms", o.Ohms), reads("good_low", o.GoodLow), reads("good_high", o.GoodHigh),
			phrase{words("± "), figure(field+"/meter_tolerance", o.MeterTol, toDigits(float64(o.MeterTol), 3)), words(" of it ± "),
				figure(field+"/meter_plus_ohms", o.MeterPlus, ohms(o.MeterPlus))}, say(agrees))
	}
	return t
}
