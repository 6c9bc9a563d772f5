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

// tonal are the checks that stand on the tone of before and after.
var tonal = []string{"loss", "response", "flatness", "distortion", "polarity", "bypass", "legs", "steadiness"}

// voids says which checks a problem of a take takes the ground from. A problem
// that is not in it voids nothing: it is shown, and the answer stands.
var voids = map[string][]string{
	Clipped:          tonal,
	GainRiding:       {"loss", "response", "flatness", "steadiness", "noise", "noise-level", "hum"},
	GainMoved:        {"loss", "bypass", "noise", "noise-level", "hum"},
	ChannelSilent:    tonal,
	Dropout:          tonal,
	SwappedTakes:     tonal,
	SameRecording:    tonal,
	FrequencyDiffers: tonal,
	NoTone:           tonal,
	TooShort:         tonal,
	TooWeak:          {"loss", "bypass"},
	NotClosed:        tonal, // what is missing cannot be told: a file saved whole settles it
	CutShort:         tonal,
	BadSamples:       tonal,
	OneChannel:       {"legs"},
	ToneInNoise:      {"noise", "noise-level", "hum"},
	BelowThermal:     {"noise", "noise-level", "hum"},
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
