package suspect

import (
	"padproof/compare"
)

// A Ranking is what may be wrong with a unit, by weight. Weights lie between 0 and 1; those of all
// faults, of none of them and of a sound unit add up to 1.
type Ranking struct {
	Suspects   []Suspect // by falling weight, those of 0.01 and more
	NoneWeight float64   // that something else explains it: two things wrong, or one that is not listed
	Sound      float64   // weight of a sound unit
	SoundP     float64   // the chance that a sound unit departs at least as far as this one
}

// A Suspect is a fault, or a group of faults that nothing taken parts.
type Suspect struct {
	Faults   []Fault // the likeliest first; those that no pin can tell apart stand side by side
	Distinct int     // how many there are when those that no pin can tell apart count as one
	Weight   float64 // that one of them is true

	// What the first of Faults gives: +Inf where nothing comes through; NaN where not taken.
	BenchLossDB, ServiceLossDB float64
	LegsOverDB, LegsPhaseDeg   float64

	// Of a drift, and of an end not as stated: the relative change, and its standard uncertainty;
	// NaN for other faults.
	DriftFrac, DriftStdU float64

	Confirm Confirm
}

// A Confirm is the reading of an ohmmeter, unit unplugged, that best parts a suspect from a sound
// unit and from the other suspects.
type Confirm struct {
	Reading  compare.OhmReading // PinA is empty where no reading tells anything
	NextOhms float64            // what it reads with the next suspect; NaN where there is none
}

// Rank scores every single fault of the drawing against what was measured.
func Rank(e Evidence) Ranking { return Ranking{} }
