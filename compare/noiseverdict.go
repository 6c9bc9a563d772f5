package compare

import (
	"fmt"
	"math"
	"strings"
)

// JudgeOver holds the unit's noise over thermal against a limit above, in dB.
func (n UnitNoise) JudgeOver(rule Rule, limit Limit) (Verdict, string) {
	return n.judge(n.Over, rule, limit, 0, "dB over thermal")
}

// JudgeLevel holds the unit's own noise against a limit above, in dBu.
func (n UnitNoise) JudgeLevel(rule Rule, limit Limit) (Verdict, string) {
	return n.judge(n.Level, rule, limit, n.ExpectedDBu, "dBu")
}

// judge decides in power: PASS where the bound keeps the limit, FAIL where the lower end of the
// interval breaks it. Where more than half of the expected noise is in doubt the guard is twice as
// wide.
func (n UnitNoise) judge(f NoiseFigure, rule Rule, limit Limit, expected float64, unit string) (Verdict, string) {
	switch {
	case !limit.IsSet():
		return None, ""
	case n.reason != "":
		return Unproven, n.reason
	case n.Problem.Name != "":
		return Unproven, n.Problem.Text
	}
	if f.Measured > limit.High {
		return n.withRemedy(f, limit)(Decide(rule, f.Measured, f.Measured-f.Low, limit, expected))
	}
	if n.noRig {
		if f.Bound <= limit.High {
			return Pass, ""
		}
		return Unproven, fmt.Sprintf("pad-noise alone shows no more than %.1f %s at most; record rig-noise.wav, the input closed by the plug, to take the rig's noise off", f.Bound, unit)
	}
	if f.value.doubtful() {
		if f.base+decibels(f.value.bound()+f.value.ranging+f.value.u) <= limit.High && rule != Shared {
			return Pass, ""
		}
		return Unproven, fmt.Sprintf("%s; shown is at most %.1f %s. %s", n.doubt(f), f.Bound, unit, n.Settle(f, limit).text(n))
	}
	return n.withRemedy(f, limit)(Decide(rule, f.Measured, math.Max(f.Bound, f.High)-f.Measured, limit, expected))
}

// doubt says in words why a figure is doubtful.
func (n UnitNoise) doubt(f NoiseFigure) string {
	if f.drowned() {
		return fmt.Sprintf("the rig drowns the unit: its noise, %.1f dBu, stands %.1f dB over the expected thermal noise", n.RigDBu, decibels(n.rigRatio))
	}
	t, _ := f.Budget.Dominant()
	return "more than half of the expected thermal noise is in doubt, for the most part by the " + t.Source
}

// withRemedy adds to an UNPROVEN what would settle it.
func (n UnitNoise) withRemedy(f NoiseFigure, limit Limit) func(v Verdict, reason string) (Verdict, string) {
	return func(v Verdict, reason string) (Verdict, string) {
		if v == Unproven {
			reason += ". " + n.Settle(f, limit).text(n)
		}
		return v, reason
	}
}

// A Settling is what would let a sound unit, one of thermal noise, pass. Each figure by itself is
// enough; NaN where it alone, within reason, is not.
type Settling struct {
	RigLowerDB float64 // by how much the rig's noise must fall: more gain in front of the converter
	RigDBu     float64 // where it would then be
	Seconds    float64 // length of each of the two takes
	Foremost   string  // the term of the budget that stands in the way, where neither helps
}

const (
	mostLowerDB = 60.0
	mostSeconds = 3600.0
	// The reading itself scatters, so that a unit on the brink would pass in half of all cases: U
	// counts this many times.
	settlingMargin = 1.5
)

// Settle works out what would settle a figure against its upper limit.
func (n UnitNoise) Settle(f NoiseFigure, limit Limit) Settling {
	s := Settling{RigLowerDB: math.NaN(), RigDBu: math.NaN(), Seconds: math.NaN()}
	if f.again == nil || n.noRig {
		return s
	}
	most := math.Pow(10, (limit.High-f.base)/10)
	settles := func(c noiseChange) bool {
		c.used = true
		v := f.again(c)
		doubt := 2*v.ranging + settlingMargin*v.u
		return 1+doubt <= most && doubt <= drownedPart
	}
	if settles(noiseChange{rigLowerDB: mostLowerDB}) {
		s.RigLowerDB = least(0, mostLowerDB, func(x float64) bool { return settles(noiseChange{rigLowerDB: x}) })
		s.RigDBu = n.RigDBu - s.RigLowerDB
	}
	if longest := mostSeconds / n.seconds; longest > 1 && settles(noiseChange{longer: longest}) {
		s.Seconds = n.seconds * least(1, longest, func(x float64) bool { return settles(noiseChange{longer: x}) })
	}
	if math.IsNaN(s.RigLowerDB) && math.IsNaN(s.Seconds) {
		t, _ := f.Budget.Dominant()
		s.Foremost = t.Source
	}
	return s
}

// least is the least x between two for which something that stays true is true.
func least(low, high float64, holds func(x float64) bool) float64 {
	if holds(low) {
		return low
	}
	for range 40 {
		if mid := (low + high) / 2; holds(mid) {
			high = mid
		} else {
			low = mid
		}
	}
	return high
}

// remedies are what helps where one term of the budget stands in the way.
var remedies = map[string]string{
	calibrationTerm: "the calibration: a smaller uncertainty_db in rig.toml, or calibration.wav with a better meter, would settle it",
	driftTerm:       "the gain between the takes: a smaller noise_gain_drift_db, if it can be stated, would settle it",
	loadTerm:        "the load: whether it is a real resistor is not known; an input of higher load_ohms would settle it",
	currentTerm:     "the input's noise current: write noise_current_pA into rig.toml",
	"noise plug":    "the noise plug: close the input with a short instead (noise_plug_ohms = 0)",
	"pad plug":      "the pad plug: measure it and write pad_plug_ohms",
	"temperature":   "the temperature: write temperature_c into rig.toml",
}

func (s Settling) text(n UnitNoise) string {
	var ways []string
	if s.RigLowerDB > 0 {
		ways = append(ways, fmt.Sprintf("a rig noise of %.1f dBu, %.1f dB lower (more gain, or a quieter input)", s.RigDBu, s.RigLowerDB))
	}
	if s.Seconds > n.seconds {
		ways = append(ways, fmt.Sprintf("both noise takes %.0f s long instead of %.0f s", math.Ceil(s.Seconds), n.seconds))
	}
	switch {
	case len(ways) > 0:
		return "A unit of thermal noise would pass with " + strings.Join(ways, ", or with ")
	case s.Foremost == "":
		return "As these takes are, a unit of thermal noise would pass"
	}
	if text := remedies[s.Foremost]; text != "" {
		return "Neither gain nor longer takes would settle it; in the way stands " + text
	}
	return "Neither gain nor longer takes would settle it; in the way stands " + s.Foremost
}
