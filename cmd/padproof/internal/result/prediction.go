package result

// PredictSchema names the form of a [Prediction].
const PredictSchema = "padproof.predict.1"

// A Prediction is what a drawing should measure before anything is recorded.
type Prediction struct {
	Schema  string `json:"schema"`
	Pad     string `json:"pad"`
	Network string `json:"network"`
	Rig     string `json:"rig"`
	ToneHz  Number `json:"tone_hz"`

	Bench   Condition `json:"bench"`
	Service Condition `json:"service"`

	Parts    []PartLine   `json:"parts"`
	InputDBu Number       `json:"input_dbu"` // level at the pad's input that the dissipation is for
	Ohms     []OhmReading `json:"ohms"`
	OhmNotes []string     `json:"ohm_notes"` // what to mind when reading this drawing
	Phantom  *Phantom     `json:"phantom,omitempty"`

	Limit      *Limit      `json:"limit,omitempty"` // of the loss in service
	Verdict    string      `json:"verdict"`         // what a sound unit at the drawing's figures would get
	Reason     string      `json:"reason"`
	U          Number      `json:"uncertainty"` // expanded, of the service loss, takes recorded well
	Beta       Number      `json:"carries_over"`
	Budget     []Term      `json:"budget"`
	Unseen     []Unseen    `json:"unseen"`
	Recordings []Recording `json:"recordings"`

	Assumed  []string `json:"assumed"`
	Warnings []string `json:"warnings"`
	Cautions []string `json:"cautions"`

	Drawing *Drawing `json:"drawing,omitempty"`
}

// A Condition is the pad between one source and one load.
type Condition struct {
	Ends       Ends    `json:"ends"`
	LossDB     Number  `json:"loss_db"`
	Spread     Spread  `json:"spread"`
	InputOhms  Number  `json:"input_ohms"`  // magnitude, at the tone, load on
	OutputOhms Number  `json:"output_ohms"` // magnitude, at the tone, source on
	Response   []Point `json:"response"`

	Curve []SpreadPoint `json:"curve,omitempty"` // third-octave points; only where it was asked for
}

// A Point is the loss at one frequency.
type Point struct {
	FreqHz Number `json:"freq_hz"`
	LossDB Number `json:"loss_db"`
}

// A PartLine is one part of the drawing and how much each condition sees of it.
type PartLine struct {
	Ref          string `json:"ref"`
	Kind         string `json:"kind"`  // resistor, capacitor or inductor
	Value        Number `json:"value"` // ohms, farads or henries
	TolFrac      Number `json:"tolerance"`
	BenchDBPer1  Number `json:"bench_db_per_percent"`
	ServDBPer1   Number `json:"service_db_per_percent"`
	DissipationW Number `json:"dissipation_w"`
}

// An OhmReading is what a sound unit reads on an ohmmeter, unplugged: Low to High
// by the tolerances of its parts, and what a usual meter may be off by beside.
// Ohms is null for an open circuit.
type OhmReading struct {
	Pins   []string `json:"pins"`
	Joined []string `json:"joined"` // pins to join meanwhile
	Ohms   Number   `json:"ohms"`
	Low    Number   `json:"low"`
	High   Number   `json:"high"`
	Meter  Number   `json:"meter_plus_minus"`
}

// Phantom is the voltage a leg loses between the pad's output, where P48 is
// fed, and its input, where the given current is drawn.
type Phantom struct {
	CurrentMA   Number `json:"current_ma"`
	HotVolts    Number `json:"hot_volts"`
	ColdVolts   Number `json:"cold_volts"`
	HotBlocked  bool   `json:"hot_blocked"`
	ColdBlocked bool   `json:"cold_blocked"`
}

// A Limit bounds a figure; a missing end is null.
type Limit struct {
	Low  Number `json:"low"`
	High Number `json:"high"`
}

// A Recording is a take to make, and how.
type Recording struct {
	Role   string `json:"role"`
	File   string `json:"file"`
	Needed bool   `json:"needed"`
	How    string `json:"how"`
}
