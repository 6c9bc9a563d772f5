package result

// CheckSchema names the form of an [Answer].
const CheckSchema = "padproof.check.1"

// An Answer is what padproof says of one unit.
type Answer struct {
	Schema  string `json:"schema"`
	Unit    string `json:"unit"`
	Pad     string `json:"pad"`
	Rig     string `json:"rig"`
	Verdict string `json:"verdict"` // PASS, FAIL or UNPROVEN
	Reason  string `json:"reason"`

	Checks         []Check      `json:"checks"`
	Suspects       []Suspect    `json:"suspects"`
	Unexplained    *Number      `json:"unexplained,omitempty"` // where suspects were sought: the weight of "none of these explains it"
	Unseen         []Unseen     `json:"unseen"`
	Rework         []Rework     `json:"rework"`
	WithoutDrawing []Likelihood `json:"without_drawing"`

	Tones     []Tone    `json:"tones,omitempty"` // where several tones were played, the loss at each
	Ohms      []OhmSeen `json:"ohms,omitempty"`  // ohmmeter readings taken
	Simulated bool      `json:"simulated"`
	Found     *Found    `json:"found,omitempty"`
	Budget    []Term    `json:"budget"`
	Captures  []Capture `json:"captures"`
	Sheets    []Sheet   `json:"sheets"` // as used

	Assumed  []string `json:"assumed"`  // cautious figures taken because the rig sheet leaves them out
	Notes    []string `json:"notes"`    // what the answer does not cover
	Warnings []string `json:"warnings"` // odd files and the like: nothing that changed a figure

	BenchEnds   *Ends `json:"bench_ends,omitempty"`
	ServiceEnds *Ends `json:"service_ends,omitempty"`

	Drawing     *Drawing  `json:"drawing,omitempty"`      // nil where there is none
	Curves      *Curves   `json:"curves,omitempty"`       // only where they were asked for
	RigCheck    *RigHeld  `json:"rig_check,omitempty"`    // the rig check that held, where the bench asks for one
	Recorded    *Recorded `json:"recorded,omitempty"`     // where it stands in the ledger
	RecordError *Error    `json:"record_error,omitempty"` // why it could not be recorded
}

// Ends are the impedances and the wiring a pad stands between.
type Ends struct {
	SourceOhms Number `json:"source_ohms"`
	Drive      string `json:"drive"`
	LoadOhms   Number `json:"load_ohms"`
	Sense      string `json:"sense"`
	CablePF    Number `json:"cable_pf"`
}

// A Check is one figure held against its limits. Verdict is "" where no limit
// is set. A check with one limit leaves the other null.
type Check struct {
	Name        string  `json:"name"`
	Verdict     string  `json:"verdict"`
	Unit        string  `json:"unit"`
	Measured    Number  `json:"measured"`
	Expected    Number  `json:"expected"`
	Low         Number  `json:"low"`
	High        Number  `json:"high"`
	Uncertainty Number  `json:"uncertainty"`
	Reason      string  `json:"reason"`
	AtHz        *Number `json:"at_hz,omitempty"` // the frequency judged at
	Ratio       Number  `json:"tolerance_ratio"` // half-width of the limits over the uncertainty
	Bench       *Figure `json:"bench,omitempty"`
	Spread      *Spread `json:"spread,omitempty"`

	// Of single checks.
	MeasuredDBu *Number         `json:"measured_dbu,omitempty"` // noise
	ExpectedDBu *Number         `json:"expected_dbu,omitempty"` // noise: thermal, by the drawing
	RigDBu      *Number         `json:"rig_dbu,omitempty"`      // noise, hum: the rig's own
	Bound       *Number         `json:"bound,omitempty"`        // noise, distortion, hum: the highest value the takes allow
	RigDB       *Number         `json:"rig_db,omitempty"`       // distortion: the same from before
	AWeighted   *Number         `json:"a_weighted_dbu,omitempty"`
	QuasiPeak   *Number         `json:"quasi_peak_468_dbu,omitempty"`
	From        string          `json:"from,omitempty"` // hum, steadiness: the take that shows it
	MainsHz     *Number         `json:"mains_hz,omitempty"`
	PhaseDeg    *Number         `json:"phase_deg,omitempty"` // legs
	AtSec       *Number         `json:"at_s,omitempty"`      // steadiness: of the largest departure
	Events      []Event         `json:"events,omitempty"`    // steadiness
	Points      []ResponsePoint `json:"points,omitempty"`    // response, flatness
	LowCornerHz *Number         `json:"low_corner_hz,omitempty"`
	HighCorner  *Number         `json:"high_corner_hz,omitempty"`
}

// An Event is a step, a dropout or a crackle in a tone.
type Event struct {
	AtSec Number `json:"at_s"`
	DB    Number `json:"db"`
	What  string `json:"what"`
}

// A ResponsePoint is one point of a response; losses are relative to the tone.
type ResponsePoint struct {
	FreqHz      Number `json:"freq_hz"`
	Measured    Number `json:"measured"`
	Expected    Number `json:"expected"`
	Uncertainty Number `json:"uncertainty"`
}

// A Figure is a reading beside what the drawing gives.
type Figure struct {
	Measured    Number `json:"measured"`
	Expected    Number `json:"expected"`
	Uncertainty Number `json:"uncertainty"`
}

// A Spread is what sound units may show, by the tolerances of their parts.
type Spread struct {
	WorstLow  Number `json:"worst_low"`
	WorstHigh Number `json:"worst_high"`
	Low95     Number `json:"low_95"`
	High95    Number `json:"high_95"`
}

// A Tone is the loss at one of several tones, as recorded on the bench.
type Tone struct {
	FreqHz      Number `json:"tone_hz"`
	Measured    Number `json:"measured"`
	Expected    Number `json:"expected"`
	Uncertainty Number `json:"uncertainty"`
}

// A Suspect is a fault that would explain what was measured.
type Suspect struct {
	Fault      string            `json:"fault"`
	Parts      []string          `json:"parts"`
	Weight     Number            `json:"weight"`
	Predicted  map[string]Number `json:"predicted"`              // loss_db on the bench, service_loss_db, legs_db; null where nothing comes through
	ByPercent  *Number           `json:"by_percent,omitempty"`   // of a drift, or of an end of the bench not as stated: by how much
	ByPercentU *Number           `json:"by_percent_u,omitempty"` // expanded
	Confirm    Confirm           `json:"confirm"`
}

// Confirm is the ohmmeter reading that tells a suspect from a sound unit.
type Confirm struct {
	Pins      []string `json:"pins"`
	Joined    []string `json:"joined"`    // pins to join meanwhile
	GoodOhms  Number   `json:"good_ohms"` // null for an open circuit
	FaultOhms Number   `json:"fault_ohms"`
	NextOhms  *Number  `json:"next_ohms,omitempty"` // with Next
	Next      string   `json:"next,omitempty"`      // the next of the group, or else the next suspect
	How       string   `json:"how"`
}

// Unseen is a part that this bench could not prove sound, and what would.
type Unseen struct {
	Part string `json:"part"`
	Text string `json:"text"`
}

// An OhmSeen is an ohmmeter reading that was taken, beside what the same meter may
// show on a sound unit. Ohms and GoodHigh are null for an open circuit.
type OhmSeen struct {
	Pins      []string `json:"pins"`
	Joined    []string `json:"joined"` // pins that were joined meanwhile
	Ohms      Number   `json:"ohms"`
	GoodLow   Number   `json:"good_low"`
	GoodHigh  Number   `json:"good_high"`
	MeterTol  Number   `json:"meter_tolerance"` // fraction of the reading
	MeterPlus Number   `json:"meter_plus_ohms"`
	Agrees    bool     `json:"agrees"` // a sound unit can show it
	Text      string   `json:"text"`
}

// Found is what the takes told of the rig itself, with expanded uncertainty.
type Found struct {
	SourceOhms    Number `json:"source_ohms"`
	SourceOhmsU   Number `json:"source_ohms_u"`
	FullScaleDBu  Number `json:"full_scale_dbu"`
	FullScaleDBuU Number `json:"full_scale_dbu_u"`
}

// A Sheet is a sheet as it was read.
type Sheet struct {
	Role   string `json:"role"` // "pad" or "rig"
	File   string `json:"file"`
	SHA256 string `json:"sha256"`
	Text   string `json:"text"`
}

// A Term is one line of an uncertainty budget. It contributes its standard
// uncertainty times its sensitivity. DOF is null where infinite.
type Term struct {
	Check       string `json:"check"`
	Source      string `json:"source"`
	StandardU   Number `json:"standard_uncertainty"`
	Sensitivity Number `json:"sensitivity"`
	Contributes Number `json:"contributes"`
	DOF         Number `json:"dof"`
}

// A Capture is one take as it was read.
type Capture struct {
	Role      string    `json:"role"`
	File      string    `json:"file"`
	SHA256    string    `json:"sha256"`
	RateHz    int       `json:"rate_hz"`
	Channels  int       `json:"channels"`
	Channel   int       `json:"channel"`
	Bits      int       `json:"bits"`
	Encoding  string    `json:"encoding"`
	Seconds   Number    `json:"seconds"`
	ToneHz    Number    `json:"tone_hz"`
	LevelDBFS Number    `json:"level_dbfs"`
	ScatterDB Number    `json:"scatter_db"`
	NoiseDBFS Number    `json:"noise_dbfs"` // 20 Hz to 20 kHz beside the tone and its harmonics
	SNRDB     Number    `json:"snr_db"`
	RMSDBFS   Number    `json:"rms_dbfs"` // everything in the steady part
	PeakDBFS  Number    `json:"peak_dbfs"`
	FromSec   Number    `json:"steady_from_s"`
	ToSec     Number    `json:"steady_to_s"`
	ClockPPM  *Number   `json:"clock_ppm,omitempty"` // of the recorder against the test signal's player
	Harmonics []Number  `json:"harmonics_db"`        // 2nd to 10th, relative to the tone
	Problems  []Problem `json:"problems"`
}

// A Problem is something seen in a take that makes it lie, or might.
type Problem struct {
	Problem string `json:"problem"`
	AtSec   Number `json:"at_s"`
	Text    string `json:"text"`
}
