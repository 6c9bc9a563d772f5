package result

// Schemas of what writes recordings.
const (
	RehearseSchema = "padproof.rehearse.1"
	SignalSchema   = "padproof.signal.1"
)

// A Rehearsal is what was made of a drawing on a rig, and what is true of it.
type Rehearsal struct {
	Schema    string `json:"schema"`
	Pad       string `json:"pad"`
	Rig       string `json:"rig"`
	Simulated bool   `json:"simulated"` // always true

	Folder string          `json:"folder"`
	Takes  []RehearsedTake `json:"takes"`
	Sheets []string        `json:"sheets"` // names in the folder

	Signal    string   `json:"signal"`     // tone or test
	ToneHz    Number   `json:"tone_hz"`    // that the losses are for
	LevelDBFS Number   `json:"level_dbfs"` // of the tone in before
	NoiseDBFS Number   `json:"noise_dbfs"` // 20 Hz to 20 kHz, in every take; null for none
	HumDBFS   Number   `json:"hum_dbfs"`   // of the mains line, in every take; null for none
	DriftPPM  Number   `json:"drift_ppm"`  // how much faster the recorder's clock runs than the player's
	Faults    []string `json:"faults"`
	Lies      []string `json:"lies"`   // what is wrong with the recordings
	Varied    bool     `json:"varied"` // unit and bench drawn from their tolerances
	Seed      uint64   `json:"seed"`

	Flex     []RehearsedEvent `json:"flex"`    // what happens in it
	Drawing  Losses           `json:"drawing"` // as stated
	Proven   []Proven         `json:"proven"`  // what check makes of the takes, limit by limit
	Truth    Truth            `json:"truth"`   // as rehearsed
	Warnings []string         `json:"warnings"`
}

// Proven is what a rehearsed unit's takes prove of one limit.
type Proven struct {
	Check   string `json:"check"`
	Verdict string `json:"verdict"`
	Reason  string `json:"reason"`
}

// Losses are those of a pad at the tone; null where nothing comes through.
type Losses struct {
	BenchDB   Number `json:"bench_loss_db"`
	ServiceDB Number `json:"service_loss_db"`
}

// A Truth is what the takes were made from.
type Truth struct {
	Losses
	RecordedDB   Number          `json:"recorded_loss_db"` // what the takes hold, the stated gain of after taken off
	SourceOhms   Number          `json:"source_ohms"`
	LoadOhms     Number          `json:"load_ohms"`
	CablePF      Number          `json:"cable_pf"`
	GainOffsetDB Number          `json:"gain_offset_db"` // of after, beyond the stated gain
	UnitNoiseDBu Number          `json:"unit_noise_dbu"` // at the rig's input, 20 Hz to 20 kHz; null without pad-noise
	ThermalDBu   Number          `json:"thermal_dbu"`    // how much of it is thermal
	Parts        []RehearsedPart `json:"parts"`
}

// A RehearsedEvent is something that happens while the pad is flexed.
type RehearsedEvent struct {
	AtSec Number `json:"at_s"`
	What  string `json:"what"` // step, dropout or crackle
}

// A RehearsedPart is a part as built. Value is null for an open resistor or coil
// and for a short capacitor.
type RehearsedPart struct {
	Ref   string `json:"ref"`
	Kind  string `json:"kind"`  // resistor, capacitor or inductor
	Value Number `json:"value"` // ohms, farads or henries
}

// A RehearsedTake is a recording that was made.
type RehearsedTake struct {
	Role     string `json:"role"`
	File     string `json:"file"` // name in the folder
	RateHz   int    `json:"rate_hz"`
	Channels int    `json:"channels"`
	Bits     int    `json:"bits"`
	Encoding string `json:"encoding"` // integer or float
	Seconds  Number `json:"seconds"`
}

// A Signal is a test signal that was written.
type Signal struct {
	Schema   string   `json:"schema"`
	File     string   `json:"file"`
	RateHz   int      `json:"rate_hz"`
	Bits     int      `json:"bits"`
	Seconds  Number   `json:"seconds"`
	PeakDBFS Number   `json:"peak_dbfs"` // a sine of that peak reads this level
	Cautions []string `json:"cautions"`
}
