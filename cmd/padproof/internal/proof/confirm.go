package proof

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"padproof/cmd/padproof/internal/result"
	"padproof/compare"
	"padproof/compare/network"
	"padproof/compare/suspect"
)

// confirmOf is the reading that tells a suspect, in the form of the result, and what
// shows the faults that no ohmmeter does. Some reading may have been taken already.
func confirmOf(s suspect.Suspect, circuit *network.Circuit, anyTaken bool) result.Confirm {
	c := s.Confirm
	r := c.Reading
	one := result.Confirm{Pins: []string{}, Joined: []string{}, GoodOhms: result.Missing, FaultOhms: result.Missing}
	otherwise := withoutOhmmeter(s.Faults, circuit)
	if !c.Tells() {
		none := "no reading between the pins tells this from a sound unit"
		if anyTaken {
			none = "no further reading between the pins tells more"
		}
		how := append([]string{none}, otherwise...)
		one.How = strings.Join(how, "; ")
		return one
	}
	one.Pins, one.GoodOhms, one.FaultOhms = []string{r.PinA, r.PinB}, result.Number(r.GoodOhms), result.Number(r.WrongOhms)
	if r.Joined != [2]string{} {
		one.Joined = r.Joined[:]
	}
	how := []string{fmt.Sprintf("read %s: a sound unit reads %s", r.How(), compare.OhmsText(r.GoodOhms)),
		"with " + firstOf(s.Faults) + " " + compare.OhmsText(r.WrongOhms)}
	if !math.IsNaN(c.NextOhms) {
		one.NextOhms, one.Next = result.NumberOf(c.NextOhms), c.Next.String()
		how = append(how, fmt.Sprintf("with %q %s", one.Next, compare.OhmsText(c.NextOhms)))
	}
	one.How = strings.Join(append(how, otherwise...), "; ")
	return one
}

// firstOf is the fault that a reading is for, in a sentence.
func firstOf(faults []suspect.Fault) string {
	if len(faults) > 1 {
		return "the first of these"
	}
	return "this fault"
}

// withoutOhmmeter says what shows the faults that an ohmmeter at the pins does not.
func withoutOhmmeter(faults []suspect.Fault, circuit *network.Circuit) []string {
	var all []string
	for _, f := range faults {
		text := ""
		switch f.End {
		case suspect.SourceEnd:
			text = "the source shows in before-loaded.wav, straight through with a known resistor across the input"
		case suspect.LoadEnd:
			text = "for the load, look up the input impedance of the interface and write it into rig.toml"
		default:
			text = reactive(f, circuit)
		}
		if text != "" && !slices.Contains(all, text) {
			all = append(all, text)
		}
	}
	return all
}

// reactive says how to read a capacitor or an inductor that is not the drawn one. A
// shorted capacitor and a broken inductor show on an ohmmeter.
func reactive(f suspect.Fault, circuit *network.Circuit) string {
	for _, p := range circuit.Parts() {
		if !slices.Contains(f.Parts(), p.Ref) {
			continue
		}
		switch {
		case p.Kind == network.Capacitor && f.Form != network.PartShort:
			return "lift one end of " + p.Ref + " and read it with a capacitance meter"
		case p.Kind == network.Inductor && f.Form != network.PartOpen:
			return "lift one end of " + p.Ref + " and read it with an inductance meter"
		}
	}
	return ""
}
