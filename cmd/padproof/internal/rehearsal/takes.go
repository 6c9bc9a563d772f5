package rehearsal

import (
	"fmt"
	"math"
	"slices"
	"strings"
)

const (
	rigNoise = "rig-noise"
	padNoise = "pad-noise"
)

// Takes returns the roles that can be rehearsed, in the order in which a person records them.
func Takes() []string {
	return []string{"calibration", "before-loaded", "before", "after", "after-again", "before-again",
		"bypass", "flex", "legs-before", "legs", rigNoise, padNoise, "both"}
}

// AllTakes returns the roles that this bench can be rehearsed for, all but both, which stands in
// place of before and after; and why the others are left out.
func (p Plan) AllTakes() (takes, leftOut []string) {
	for _, role := range Takes() {
		switch why := p.wants(role); {
		case role == "both":
		case why != "":
			leftOut = append(leftOut, why)
		default:
			takes = append(takes, role)
		}
	}
	return takes, leftOut
}

// wants says what a role wants that the plan does not have; "" for nothing.
func (p Plan) wants(role string) string {
	b := p.Bench
	switch {
	case role == "before-loaded" && !(b.LoadedOhms > 0):
		return "before-loaded wants loaded_ohms under [calibration] in rig.toml"
	case role == "calibration" && !(b.CalibrationVolts > 0 && !math.IsNaN(b.FullScaleDBu)):
		return "calibration wants calibration_volts and full_scale_dbu under [calibration] in rig.toml"
	case (role == rigNoise || role == padNoise) && math.IsNaN(b.Noise.FullScaleDBu):
		return role + " wants noise_full_scale_dbu or full_scale_dbu under [calibration] in rig.toml"
	case (role == "legs" || role == "legs-before") && p.Pad.Unbalanced():
		return role + " wants a balanced network: in this one the cold leg is the screen"
	}
	return ""
}

// checkTakes returns what is wrong with the takes, with what is to happen in them, or nil.
func (p Plan) checkTakes() error {
	if len(p.Takes) == 0 {
		return fmt.Errorf("there is no take to make; known are %s", strings.Join(Takes(), ", "))
	}
	if err := allKnown("take", p.Takes, Takes()); err != nil {
		return err
	}
	for i, role := range p.Takes {
		if slices.Contains(p.Takes[:i], role) {
			return fmt.Errorf("%s is named twice", role)
		}
		if why := p.wants(role); why != "" {
			return fmt.Errorf("%s", why)
		}
	}
	has := func(role string) bool { return slices.Contains(p.Takes, role) }
	noise := has(rigNoise) || has(padNoise)
	n := p.Bench.Noise
	switch {
	case has("both") && (has("before") || has("after")):
		return fmt.Errorf("both stands in place of before and after: make the one or the others")
	case noise && !(p.NoiseSec > 0 && p.NoiseSec <= mostSec):
		return fmt.Errorf("a noise take lasts up to %g s, not %v", mostSec, p.NoiseSec)
	case noise && !(n.InputDBu <= 40):
		return fmt.Errorf("the input's noise is at most 40 dBu (-inf for none), not %v", n.InputDBu)
	case noise && !(n.OverThermalDB >= 0 && n.OverThermalDB <= 200):
		return fmt.Errorf("a unit is 0 to 200 dB above its thermal noise, not %v", n.OverThermalDB)
	case !(p.Bench.BypassOhms >= 0 && !math.IsInf(p.Bench.BypassOhms, 1)):
		return fmt.Errorf("the contacts of a bypass have 0 ohms or more, not %v", p.Bench.BypassOhms)
	case len(p.Flex) > 0 && !has("flex"):
		return fmt.Errorf("something is to happen in flex, which is not among the takes")
	}
	if err := allKnown("event of flex", p.Flex, FlexEvents()); err != nil {
		return err
	}
	return p.checkLies(has)
}

func (p Plan) checkLies(has func(role string) bool) error {
	words, _ := Lies()
	if err := allKnown("lie", p.Lies, words); err != nil {
		return err
	}
	for _, word := range p.Lies {
		l, _ := lieOf(word)
		if !has(l.needs) || len(l.swap) > 0 && !has("before") {
			return fmt.Errorf("the lie %s shows in %s, which is not among the takes", word, l.needs)
		}
		switch {
		case word == "bad-samples" && !p.Float:
			return fmt.Errorf("only float samples can be no numbers: the lie bad-samples wants them")
		case word == "too-weak" && p.Signal.Test:
			return fmt.Errorf("the lie too-weak wants a steady tone: the two of the test signal would make up for it")
		}
	}
	return nil
}

// allKnown returns an error that lists what is known if a word is not.
func allKnown(what string, words, known []string) error {
	for _, w := range words {
		if !slices.Contains(known, w) {
			return fmt.Errorf("%q is no %s; known are %s", w, what, strings.Join(known, ", "))
		}
	}
	return nil
}
