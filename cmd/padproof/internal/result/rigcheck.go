package result

// RigCheckSchema names the form of a [RigCheck].
const RigCheckSchema = "padproof.rigcheck.1"

// The states of a bench. Only RigOK lets units pass.
const (
	RigOK       = "ok"
	RigOut      = "out"      // the reference pad does not read what it should
	RigTooOld   = "too-old"  // the last reading no longer holds
	RigMissing  = "missing"  // there is no reading
	RigUnproven = "unproven" // the last reading proves nothing
)

// A RigCheck is what the reference pad says of a bench, with the chart of its
// readings.
type RigCheck struct {
	Schema   string `json:"schema"`
	Verdict  string `json:"verdict"` // of the bench now: PASS where State is ok, FAIL where it is out, else UNPROVEN
	State    string `json:"state"`
	Text     string `json:"text"`     // what it means; where State is not ok, what to do
	Drifting bool   `json:"drifting"` // the average of the readings has moved: a warning
	At       string `json:"at"`       // when this was so, UTC
	HoldsTo  string `json:"holds_to"` // until when the last reading holds, UTC; "" where it does not, or for good

	Rig       string    `json:"rig"`
	Station   string    `json:"station"`
	Reference Reference `json:"reference"`
	Simulated bool      `json:"simulated"`

	Ledger   string       `json:"ledger"` // where the readings are from; "" for none
	Readings []RigReading `json:"readings"`
	Answer   *Answer      `json:"answer,omitempty"` // of the reading just made
	Notes    []string     `json:"notes"`
	Cautions []string     `json:"cautions,omitempty"` // where someone is to connect the pad
}

// A Reference is a reference pad, as the bench's sheet has it.
type Reference struct {
	Serial      string `json:"serial"`
	LossDB      Number `json:"loss_db"`        // known, on this bench
	Uncertainty Number `json:"uncertainty_db"` // of it, expanded (k = 2)
	WithinDB    Number `json:"within_db"`      // null where not asked for
	EveryHours  Number `json:"every_hours"`    // null: a reading holds for good
	ChartFrom   string `json:"chart_from,omitempty"`
	Required    bool   `json:"required"`
}

// A RigReading is one point of the chart. Limits are the narrower of what is known
// and of what the readings before foretell.
type RigReading struct {
	Time        string `json:"time"`
	LossDB      Number `json:"loss_db"` // null where the pad could not be read
	OffDB       Number `json:"off_db"`  // of the known loss
	LowDB       Number `json:"low_db"`  // limits of off_db
	HighDB      Number `json:"high_db"`
	Uncertainty Number `json:"uncertainty_db"` // of off_db, expanded (k = 2)
	Out         bool   `json:"out"`
	Text        string `json:"text,omitempty"` // why it is out, or proves nothing
	Operator    string `json:"operator,omitempty"`
	Record      string `json:"record,omitempty"` // STATION/SEQUENCE; "" where it is in no ledger
}

// A RigHeld is the state of the bench that a unit was judged by.
type RigHeld struct {
	State    string `json:"state"`
	Text     string `json:"text"`
	Time     string `json:"time,omitempty"`   // of the rig check, UTC
	Record   string `json:"record,omitempty"` // of the rig check
	Drifting bool   `json:"drifting,omitempty"`
}
