package result

// Curves are the series that pictures are drawn from. They are there only where
// they were asked for; each one is nil where the takes do not give it. The points
// of a response lie in its [Check]. No series has more than some two thousand
// points, however long the takes are: where more would fall together the highest
// (for a level, the highest and the lowest) is kept.
type Curves struct {
	Noise    *NoiseCurves    `json:"noise,omitempty"`
	Level    []LevelCurve    `json:"level,omitempty"`    // after, and flex
	Spectrum []SpectrumCurve `json:"spectrum,omitempty"` // after first, then before
	Legs     *LegLevels      `json:"legs,omitempty"`
}

// NoiseCurves are noise against frequency: levels in a band of one hertz,
// averaged over bands of a 24th of an octave, mains and other lines taken out.
// A line is given by itself; its level is that of the whole line, which is what
// it puts into any band of one hertz.
type NoiseCurves struct {
	Unit    string     `json:"unit"`    // dBu, at the rig's input, or dBFS where no calibration is known
	FreqHz  []Number   `json:"freq_hz"` // of all series below
	Rig     []Number   `json:"rig,omitempty"`
	Pad     []Number   `json:"pad"`               // as recorded
	Net     []Number   `json:"net,omitempty"`     // the rig's taken off; null where nothing sure is left
	Thermal []Number   `json:"thermal,omitempty"` // what the drawing gives there
	Lines   []LinePair `json:"lines"`
}

// A LinePair is a line in the noise, as the two takes hold it.
type LinePair struct {
	FreqHz  Number `json:"freq_hz"`
	Pad     Number `json:"pad"`
	Rig     Number `json:"rig"`
	OfMains bool   `json:"of_mains"`
}

// A LevelCurve is the level of a tone against time, relative to the running
// median of the two seconds before.
type LevelCurve struct {
	Role    string   `json:"role"`
	AtSec   []Number `json:"at_s"`
	DB      []Number `json:"db"`
	Events  []Event  `json:"events"`
	NoiseDB Number   `json:"noise_db"` // the largest departure that noise alone makes
}

// A SpectrumCurve is what a take holds while its tone stands, relative to the
// tone. A line reads its level; noise reads what it puts into BandHz.
type SpectrumCurve struct {
	Role      string     `json:"role"`
	ToneHz    Number     `json:"tone_hz"`
	BandHz    Number     `json:"band_hz"`
	FreqHz    []Number   `json:"freq_hz"`
	DB        []Number   `json:"db"`
	Harmonics []Harmonic `json:"harmonics"`
}

// A Harmonic of a tone, relative to it. One that does not stand out of the noise
// is given as that noise.
type Harmonic struct {
	Number int    `json:"number"`
	FreqHz Number `json:"freq_hz"`
	DB     Number `json:"db"`
	Stands bool   `json:"stands"`
}

// LegLevels are the levels of the two legs of the output, each to screen, beside
// what the drawing gives. From says what they are relative to: "straight" (each
// leg straight through, from legs-before) or "mean" (the mean of the two).
type LegLevels struct {
	From      string `json:"from"`
	FreqHz    Number `json:"freq_hz"`
	HotDB     Number `json:"hot_db"`
	ColdDB    Number `json:"cold_db"`
	DrawnHot  Number `json:"drawn_hot_db"`
	DrawnCold Number `json:"drawn_cold_db"`
}

// A SpreadPoint is the loss at one frequency and what sound units may show there.
type SpreadPoint struct {
	FreqHz Number `json:"freq_hz"`
	LossDB Number `json:"loss_db"`
	Spread Spread `json:"spread"`
}
