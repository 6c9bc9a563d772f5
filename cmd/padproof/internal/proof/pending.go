package proof

import (
	"math"

	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/sheet"
	"padproof/compare"
)

// pendingChecks are the limits that are set but that no check of this version
// proves yet: each makes the unit UNPROVEN, and says so.
func pendingChecks(l sheet.Limits) []result.Check {
	var checks []result.Check
	add := func(name, unit, key string, low, high float64) {
		checks = append(checks, result.Check{
			Name: name, Verdict: string(compare.Unproven), Unit: unit,
			Measured: result.Missing, Expected: result.Missing, Uncertainty: result.Missing, Ratio: result.Missing,
			Low: result.Number(low), High: result.Number(high),
			Reason: "this version does not prove it yet; take " + key + " out of [limits] to have the rest judged alone",
		})
	}
	none := math.Inf(1)
	plusMinus := func(name, key string, half *float64) {
		if half != nil {
			add(name, "dB", key, -*half, *half)
		}
	}
	atMost := func(name, unit, key string, most *float64) {
		if most != nil {
			add(name, unit, key, -none, *most)
		}
	}
	plusMinus("response", "response_plus_minus_db", l.ResponsePlusMinusDB)
	plusMinus("flatness", "flatness_plus_minus_db", l.FlatnessPlusMinusDB)
	atMost("noise", "dB", "noise_over_thermal_db", l.NoiseOverThermalDB)
	atMost("noise-level", "dBu", "noise_max_dbu", l.NoiseMaxDBu)
	atMost("distortion", "dB", "distortion_max_db", l.DistortionMaxDB)
	atMost("hum", "dBu", "hum_max_dbu", l.HumMaxDBu)
	plusMinus("legs", "dB", l.LegMatchDB)
	plusMinus("steadiness", "dB", l.SteadyWithinDB)
	plusMinus("bypass", "dB", l.BypassWithinDB)
	if l.SamePolarity {
		add("polarity", "", "same_polarity", 1, 1)
	}
	return checks
}
