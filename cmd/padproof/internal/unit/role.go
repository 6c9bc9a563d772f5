package unit

import (
	"slices"
	"strings"
)

// The roles of a take: what it recorded.
const (
	Before       = "before"        // straight through, no pad
	After        = "after"         // the pad in circuit
	BeforeAgain  = "before-again"  // straight through once more, afterwards
	AfterAgain   = "after-again"   // the pad unplugged, plugged again
	BeforeLoaded = "before-loaded" // straight through, a known resistor across the input
	Calibration  = "calibration"   // a tone whose volts a meter read
	Bypass       = "bypass"        // the unit with its pad switched out
	RigNoise     = "rig-noise"     // the input terminated by the noise plug
	PadNoise     = "pad-noise"     // the pad at the input, itself terminated by the pad plug
	Flex         = "flex"          // the pad flexed and tapped
	Legs         = "legs"          // two channels: hot to screen and cold to screen
	LegsBefore   = "legs-before"   // the same two channels straight through
	Both         = "both"          // instead of before and after: channel 1 straight, 2 through the pad
)

// Roles returns every role, the needed ones first.
func Roles() []string {
	return []string{Before, After, BeforeAgain, AfterAgain, BeforeLoaded, Calibration, Bypass,
		RigNoise, PadNoise, Flex, Legs, LegsBefore, Both}
}

// Shared tells whether a take of the role may lie one folder up and serve every
// unit there: the takes that are of the rig alone. Those with the pad in circuit
// are not shared, nor is both, which holds the pad in its second channel.
func Shared(role string) bool {
	switch role {
	case Before, BeforeAgain, BeforeLoaded, Calibration, RigNoise, LegsBefore:
		return true
	}
	return false
}

// RoleOf returns the role that a text names, case not counting; false if none.
func RoleOf(text string) (string, bool) {
	role := strings.ToLower(text)
	return role, slices.Contains(Roles(), role)
}
