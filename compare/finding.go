package compare

import (
	"fmt"
	"math"

	"padproof/compare/uncertainty"
)

// A Finding is one check as judged: the figure, its expanded uncertainty and the budget behind it,
// and what that proves. Figures that there are none of are NaN.
type Finding struct {
	Measured float64
	Expected float64 // what the drawing gives
	UDB      float64 // expanded, of Measured
	Limit    Limit
	Verdict  Verdict
	Reason   string // for UNPROVEN what would settle it; for a FAIL in words, the words
	Budget   uncertainty.Budget
}

// nothingFound is a finding before there is a figure.
func nothingFound(limit Limit, expected float64) Finding {
	return Finding{Measured: math.NaN(), Expected: expected, UDB: math.NaN(), Limit: limit}
}

// leaveOpen makes the finding UNPROVEN, where a limit is set, and says why.
func (f *Finding) leaveOpen(format string, args ...any) {
	if f.Limit.IsSet() {
		f.Verdict = Unproven
	}
	f.Reason = fmt.Sprintf(format, args...)
}

// decide works out U from the budget and holds the figure against the limit. An UNPROVEN names
// what would shrink the largest doubt.
func (f *Finding) decide(rule Rule) (err error) {
	if f.UDB, err = f.Budget.ExpandedU(Coverage); err != nil {
		return err
	}
	f.Verdict, f.Reason = Decide(rule, f.Measured, f.UDB, f.Limit, f.Expected)
	if f.Verdict == Unproven {
		f.Reason += Settles(f.Budget)
	}
	return nil
}

// Settles names the largest doubt of a budget and the take, the setting or the key of rig.toml
// that would make it smaller; "" for a budget without doubt.
func Settles(b uncertainty.Budget) string {
	largest, share := b.Dominant()
	if !(share > 0) {
		return ""
	}
	mend, ok := mends[largest.Source]
	if !ok {
		mend = "record again, longer or with more level, nothing moving"
	}
	return fmt.Sprintf("; the largest doubt is %s: %s", largest.Source, mend)
}

// Sources of doubt.
const (
	beforeRepeats  = "repeatability of before"
	afterRepeats   = "repeatability of after"
	bypassRepeats  = "repeatability of bypass"
	hotRepeats     = "repeatability of the hot leg"
	coldRepeats    = "repeatability of the cold leg"
	beforeTwice    = "before against before-again"
	afterTwice     = "after against after-again"
	linearitySrc   = "linearity"
	driftSrc       = "gain drift"
	channelsOutSrc = "channel match of the outputs"
	channelsInSrc  = "channel match of the inputs"
	channelsSrc    = "channel match"
	legLoadsSrc    = "loads of the legs"
	sourceSrc      = "source impedance"
	cableSrc       = "cable capacitance"
	blockNoiseSrc  = "noise in the block that departs most"
	afterHarmonics = "noise at the harmonics of after"
	rigHarmonics   = "noise at the harmonics of before"
	loadedRepeats  = "repeatability of before-loaded"
	knownResistor  = "the known resistor"
	loadSrc        = "load impedance"
	togetherSrc    = "source, load and cable together"
	afterGainSrc   = "gain raised for after"
	carrySrc       = "carry-over"
	otherPartsSrc  = "other parts"
	meterSrc       = "the meter"
	toneRepeats    = "repeatability of calibration"
)

var mends = map[string]string{
	beforeTwice:    "the level moved between before and before-again; touch no knob, let the rig warm up, and record all takes again",
	afterTwice:     "the unit read differently after it was plugged again; clean the connectors and record after and after-again once more",
	linearitySrc:   "state [calibration] linearity_db in rig.toml as the interface's maker gives it",
	driftSrc:       "record before-again, or touch no knob and state [calibration] gain_drift_db in rig.toml",
	channelsOutSrc: "record before and after through one channel, or measure both channels on one signal and state [calibration] channel_match_db in rig.toml",
	channelsInSrc:  "record before and after through one channel, or measure both channels on one signal and state [calibration] channel_match_db in rig.toml",
	channelsSrc:    "record legs-before, the same two channels straight through, or state [calibration] channel_match_db in rig.toml",
	legLoadsSrc:    "measure what loads each leg and state [input] legs_load_ohms and tolerance in rig.toml",
	sourceSrc:      "measure the source impedance (before-loaded) and state [output] source_ohms and tolerance in rig.toml",
	cableSrc:       "state [input] cable_pF in rig.toml",
	blockNoiseSrc:  "record after again with more level or gain",
	afterHarmonics: "record after again, longer or with more level",
	rigHarmonics:   "record before again, longer",
	beforeRepeats:  "record before again, longer or with more level, nothing moving",
	afterRepeats:   "record after again, longer or with more level, nothing moving",
	togetherSrc:    "measure source (before-loaded) and load and state them with their tolerances in rig.toml",
	afterGainSrc:   "measure the gain step and state [calibration] after_gain_uncertainty_db in rig.toml, or keep the gain",
	carrySrc:       "use parts of a closer tolerance, or a bench with the source and load of the service",
	otherPartsSrc:  "use a bench with the source and load of the service",
	loadSrc:        "measure the load and state it with its tolerance in rig.toml, [input] load_ohms and tolerance",
	knownResistor:  "use a resistor of a closer tolerance, near the source impedance in value",
	meterSrc:       "use a better meter, and state its accuracy as [calibration] uncertainty_db in rig.toml",
}
