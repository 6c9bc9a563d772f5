package compare

// A Problem is something seen in a take, or between two, that makes it lie or
// might. The words are those of the trade and of nobody's format.
type Problem struct {
	Name  string  // one of the names in the table of [Voids]
	AtSec float64 // where in the take; NaN where it has no place
	Text  string  // what was seen, and what to do
}

// Names of problems.
const (
	Clipped          = "clipped"
	GainRiding       = "gain-riding"
	GainMoved        = "gain-moved"
	ChannelSilent    = "channel-silent"
	Dropout          = "dropout"
	SwappedTakes     = "swapped"
	SameRecording    = "same-recording"
	FrequencyDiffers = "frequency-differs"
	NoTone           = "no-tone"
	TooShort         = "too-short"
	TooWeak          = "too-weak"
	NotClosed        = "not-closed"
	CutShort         = "cut-short"
	BadSamples       = "bad-samples"
	OneChannel       = "one-channel"
	ToneInNoise      = "tone-in-noise"
	BelowThermal     = "below-thermal"
)

// tonal are the checks that stand on a tone, quiet those that stand on its
// absence, and every is all of them.
var (
	tonal = []string{"loss", "response", "flatness", "distortion", "polarity", "bypass", "legs", "steadiness"}
	quiet = []string{"noise", "noise-level", "hum"}
	every = append(append([]string{}, tonal...), quiet...)
)

// voids says which checks a problem of a take takes the ground from, where the
// check stands on that take. A problem that is not in it voids nothing: it is
// shown, and the answer stands.
var voids = map[string][]string{
	Clipped:          every,
	GainRiding:       every,
	GainMoved:        {"loss", "response", "flatness", "steadiness", "bypass", "hum"},
	ChannelSilent:    every,
	Dropout:          every,
	SwappedTakes:     every,
	SameRecording:    every,
	FrequencyDiffers: every,
	NoTone:           every,
	TooShort:         every,
	TooWeak:          {"loss", "bypass"},
	NotClosed:        every, // what is missing cannot be told: a file saved whole settles it
	CutShort:         every,
	BadSamples:       every,
	OneChannel:       {"legs"},
	ToneInNoise:      quiet,
	BelowThermal:     quiet,
}

// Voids reports whether a problem leaves the named check without ground, so
// that it can be no better than UNPROVEN.
func Voids(problem, check string) bool {
	for _, c := range voids[problem] {
		if c == check {
			return true
		}
	}
	return false
}
