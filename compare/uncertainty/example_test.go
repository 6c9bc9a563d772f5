package uncertainty_test

import (
	"fmt"

	"padproof/compare/uncertainty"
)

// The loss of a pad between two takes: eight blocks of tone, a knob that may have
// moved by 0.05 dB, and a source impedance of 100 Ω ± 10 % to which this pad's
// loss answers by 0.0004 dB an ohm.
func Example() {
	budget := uncertainty.Budget{Terms: []uncertainty.Term{
		uncertainty.FromSample("repeatability", 0.004, 7, 1),
		uncertainty.FromRectangle("gain drift", 0.05, 1),
		uncertainty.FromRectangle("source impedance", 10, -0.0004),
	}}
	u, err := budget.ExpandedU(0.95)
	if err != nil {
		fmt.Println(err)
		return
	}
	term, share := budget.Dominant()
	fmt.Printf("U %.3f dB, mostly %s (%.0f %%)\n", u, term.Source, 100*share)
	// Output: U 0.049 dB, mostly gain drift (99 %)
}
