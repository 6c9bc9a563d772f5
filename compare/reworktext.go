package compare

import (
	"fmt"
	"math"
	"strings"

	"padproof/compare/network"
)

// Words name the resistor and its place: "4.7 kΩ in parallel with R3".
func (t Trim) Words() string {
	text := partValue(network.Resistor, t.Ohms)
	switch {
	case len(t.Refs) == 0:
		return text + " across " + t.Across[0] + " and " + t.Across[1]
	case t.Parallel:
		text += " in parallel with "
	default:
		text += " in series with "
	}
	if t.BothLegs {
		return text + "each of " + strings.Join(t.Refs, " and ")
	}
	return text + t.Refs[0]
}

// Text says what to solder and what should then be measured.
func (t Trim) Text() string {
	text := fmt.Sprintf("%s (%s, ±1 %%): the bench should then read %.2f ± %.2f dB, which is %.2f ± %.2f dB in service",
		t.Words(), t.Series, t.BenchLossDB, t.BenchUDB, t.ServiceLossDB, t.ServiceUDB)
	if math.Abs(t.CheckLossDB-t.ServiceLossDB) > t.CheckUDB+t.ServiceUDB {
		text += fmt.Sprintf("; a check by this drawing would make that %.2f ± %.2f dB, since it does not know of the part that is still off", t.CheckLossDB, t.CheckUDB)
	}
	if !math.IsNaN(t.Watts) {
		text += fmt.Sprintf("; it takes %s with %.2g V at the input", wattText(t.Watts), t.InputVoltsRMS)
	}
	return text
}

// wattText prints a heat with two digits.
func wattText(w float64) string {
	switch {
	case w >= 1:
		return fmt.Sprintf("%.2g W", w)
	case w >= 1e-3:
		return fmt.Sprintf("%.2g mW", w*1e3)
	}
	return "less than 1 mW"
}

// Text says what to replace.
func (m Mend) Text() string {
	if len(m.Refs) == 2 && math.IsNaN(m.Ohms) {
		return fmt.Sprintf("put the parts that the drawing gives in the places of %s: the bench should then read about %.2f dB", strings.Join(m.Refs, " and "), m.BenchLossDB)
	}
	if math.IsNaN(m.Ohms) {
		return fmt.Sprintf("replace %s by what the drawing gives: the bench should then read about %.2f dB", strings.Join(m.Refs, ", "), m.BenchLossDB)
	}
	return fmt.Sprintf("replace %s by %s: the bench should then read about %.2f dB", m.Refs[0], partValue(network.Resistor, m.Ohms), m.BenchLossDB)
}
