package network

import (
	"fmt"
	"math"
)

// Drive is how the source feeds the pad's input.
type Drive int

// The drives. Each names the whole source impedance Rs and 1 V of EMF.
const (
	DriveBalanced          Drive = iota // half the EMF and half of Rs in each leg, against screen
	DriveFloating                       // EMF and Rs leg to leg, no tie to screen
	DriveImpedanceBalanced              // EMF behind Rs/2 in hot; cold returns through Rs/2 to screen
	DriveUnbalanced                     // EMF behind Rs in hot; cold is screen
)

// Sense is how the load takes the pad's output.
type Sense int

// The senses. Each names the whole load impedance Rl.
const (
	SenseBalanced   Sense = iota // Rl/2 from each leg to screen; the difference is read
	SenseFloating                // Rl leg to leg, no tie to screen
	SenseUnbalanced              // Rl from hot to screen; cold is screen
)

var driveNames = []string{"balanced", "floating", "impedance-balanced", "unbalanced"}
var senseNames = []string{"balanced", "floating", "unbalanced"}

// String returns the word used in sheets: "balanced", "floating",
// "impedance-balanced" or "unbalanced".
func (d Drive) String() string { return wordOf(driveNames, int(d)) }

// String returns the word used in sheets: "balanced", "floating" or "unbalanced".
func (s Sense) String() string { return wordOf(senseNames, int(s)) }

// ParseDrive reads the words of [Drive.String].
func ParseDrive(text string) (Drive, error) {
	i, err := parseWord("drive", driveNames, text)
	return Drive(i), err
}

// ParseSense reads the words of [Sense.String].
func ParseSense(text string) (Sense, error) {
	i, err := parseWord("sense", senseNames, text)
	return Sense(i), err
}

// MarshalText returns the word used in sheets.
func (d Drive) MarshalText() ([]byte, error) { return []byte(d.String()), nil }

// MarshalText returns the word used in sheets.
func (s Sense) MarshalText() ([]byte, error) { return []byte(s.String()), nil }

// UnmarshalText reads the word used in sheets.
func (d *Drive) UnmarshalText(text []byte) (err error) {
	*d, err = ParseDrive(string(text))
	return err
}

// UnmarshalText reads the word used in sheets.
func (s *Sense) UnmarshalText(text []byte) (err error) {
	*s, err = ParseSense(string(text))
	return err
}

func wordOf(words []string, i int) string {
	if i < 0 || i >= len(words) {
		return "unknown"
	}
	return words[i]
}

func parseWord(what string, words []string, text string) (int, error) {
	for i, w := range words {
		if w == text {
			return i, nil
		}
	}
	return 0, fmt.Errorf("%s %q is none of %q", what, text, words)
}

// Ends is what stands on both sides of the pad. SourceOhms and LoadOhms are always
// the whole leg-to-leg (or hot-to-screen) figure. The cable lies leg to leg at the
// output, with the pad in circuit and straight through.
type Ends struct {
	SourceOhms  float64 // at least 1 mΩ; less counts as 1 mΩ, more than 1 TΩ as 1 TΩ
	Drive       Drive
	LoadOhms    float64 // may be +Inf; less than 1 mΩ counts as 1 mΩ
	Sense       Sense
	CableFarads float64 // 0 to 1 F
}

// Check returns an error for a figure that no bench has: a source that is negative or
// infinite, a load that is not above 0, a cable that is negative or over 1 F, NaN, or
// a drive or sense that is none. The methods of [Circuit] take such figures as the
// nearest that makes sense, so that none returns NaN.
func (e Ends) Check() error {
	switch {
	case !(e.SourceOhms >= 0) || math.IsInf(e.SourceOhms, 1):
		return fmt.Errorf("source of %g Ω: it must be 0 or more, and finite", e.SourceOhms)
	case !(e.LoadOhms > 0):
		return fmt.Errorf("load of %g Ω: it must be more than 0", e.LoadOhms)
	case !(e.CableFarads >= 0 && e.CableFarads <= 1):
		return fmt.Errorf("cable of %g F: it must be 0 to 1 F", e.CableFarads)
	case e.Drive < DriveBalanced || e.Drive > DriveUnbalanced:
		return fmt.Errorf("drive %d is none of %q", e.Drive, driveNames)
	case e.Sense < SenseBalanced || e.Sense > SenseUnbalanced:
		return fmt.Errorf("sense %d is none of %q", e.Sense, senseNames)
	}
	return nil
}

// Least and most that the solver takes for a source, and the least load.
const (
	minEndOhms    = 1e-3
	maxSourceOhms = 1e12
)

// bounded returns the ends with each figure in the range that the solver takes.
func (e Ends) bounded() Ends {
	e.SourceOhms = min(atLeast(e.SourceOhms, minEndOhms), maxSourceOhms)
	e.LoadOhms = atLeast(e.LoadOhms, minEndOhms)
	e.CableFarads = min(atLeast(e.CableFarads, 0), 1)
	return e
}

// atLeast returns x, or low where x is lower or NaN.
func atLeast(x, low float64) float64 {
	if x > low {
		return x
	}
	return low
}
