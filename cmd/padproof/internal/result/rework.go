package result

// SolderCaution is for everyone who is about to measure ohms or to solder.
const SolderCaution = "Unplug the unit before you measure ohms or solder: power, phantom and signal off."

// A Rework is something to solder, and the loss that should then be measured.
type Rework struct {
	Where    string     `json:"where"`   // "R3", "R1 and R2", "out.hot to out.cold"
	How      string     `json:"how"`     // parallel, series or replace
	Part     string     `json:"part"`    // the part that it is about; "" for a resistor across two pins
	Between  []string   `json:"between"` // the nodes of that part, or the pins
	Ohms     Number     `json:"ohms"`
	Series   string     `json:"series"`    // of preferred values; "" for a part of the drawing
	BothLegs bool       `json:"both_legs"` // one such resistor in each leg
	Bench    ForetoldDB `json:"bench"`
	Service  ForetoldDB `json:"service"`
	Checked  ForetoldDB `json:"checked"`         // what a check by the drawing should make of service
	Watts    *Number    `json:"watts,omitempty"` // in it, at input_volts in service
	Volts    *Number    `json:"input_volts,omitempty"`
	Text     string     `json:"text"`
}

// ForetoldDB is a loss that should be measured once something is done.
type ForetoldDB struct {
	Loss Number `json:"loss"`
	U    Number `json:"u"`
}

// A Likelihood is something that might be wrong with a pad of which there is no drawing. It is no
// finding: it says what textbook pads of that mark would read.
type Likelihood struct {
	Fault           string   `json:"fault"`
	Networks        []string `json:"networks"`      // the kinds of pad that would read so
	WouldReadDB     Number   `json:"would_read_db"` // of the likeliest; null where nothing would come through
	WouldReadLowDB  Number   `json:"would_read_low_db"`
	WouldReadHighDB Number   `json:"would_read_high_db"`
	Likelihood      Number   `json:"likelihood"` // 0 to 1
	Measure         string   `json:"measure"`
}
