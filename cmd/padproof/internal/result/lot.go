package result

// LotSchema names the form of a [Lot].
const LotSchema = "padproof.lot.1"

// A Lot is what the units of one folder show together. Units stand in the order
// of their serials, which counts as the order of making.
type Lot struct {
	Schema    string `json:"schema"`
	Lot       string `json:"lot"`     // its name: by lot.toml, else the folder's
	Verdict   string `json:"verdict"` // FAIL, UNPROVEN or PASS: that of the worst unit; "" where one could not be checked
	Simulated bool   `json:"simulated"`

	Units      int   `json:"units"`
	Passed     int   `json:"passed"`
	Failed     int   `json:"failed"`
	Unproven   int   `json:"unproven"`
	NotChecked int   `json:"not_checked"`
	Yield      Share `json:"yield"` // passed of all units

	Drawings []LotDrawing `json:"drawings"` // units of one drawing and one set of limits each
	Rows     []LotRow     `json:"rows"`
	Warnings []string     `json:"warnings"`
	Recorded *Recorded    `json:"recorded,omitempty"` // the last record of the lot, where it was recorded
}

// Worst is the verdict of the worst unit, by the counts; "" where one could not be
// checked or there is none.
func (l *Lot) Worst() string {
	switch {
	case l.NotChecked > 0 || l.Units == 0:
		return ""
	case l.Failed > 0:
		return "FAIL"
	case l.Unproven > 0:
		return "UNPROVEN"
	}
	return "PASS"
}

// A Share is a part of a whole, with its 95 % interval: 0 to 1.
type Share struct {
	Value Number `json:"value"`
	Low   Number `json:"low"`
	High  Number `json:"high"`
}

// A LotRow is one unit of a lot.
type LotRow struct {
	Unit     string     `json:"unit"`
	Verdict  string     `json:"verdict"` // "" where the unit could not be checked
	Reason   string     `json:"reason,omitempty"`
	Drawing  int        `json:"drawing"` // which of the lot's drawings, from 0; -1 where not checked
	Checks   []LotCheck `json:"checks"`
	Suspect  string     `json:"suspect,omitempty"` // the likeliest
	Weight   *Number    `json:"weight,omitempty"`  // of the suspect
	Problems []string   `json:"problems,omitempty"`
	Error    *Error     `json:"error,omitempty"`
	Report   string     `json:"report,omitempty"` // the unit's page, where one was written
}

// A LotCheck is one check of a unit, in short.
type LotCheck struct {
	Name        string `json:"name"`
	Verdict     string `json:"verdict"`
	Measured    Number `json:"measured"`
	Uncertainty Number `json:"uncertainty"`
}

// A LotDrawing is what the units of one drawing and one set of limits show.
type LotDrawing struct {
	Pad     string      `json:"pad"`
	Rig     string      `json:"rig"`
	Units   int         `json:"units"`
	Figures []LotFigure `json:"figures"`
	Says    []string    `json:"says"` // what it means, in sentences; the weightiest first
}

// A LotFigure is one measured figure over the units that have it.
type LotFigure struct {
	Check    string `json:"check"`
	Unit     string `json:"unit"`
	N        int    `json:"n"`
	Expected Number `json:"expected"`
	Low      Number `json:"low"`
	High     Number `json:"high"`

	Mean     Ranged `json:"mean"`
	SD       Ranged `json:"standard_deviation"`
	Least    Number `json:"least"`
	Greatest Number `json:"greatest"`

	SpreadOfUnits   *Ranged `json:"spread_of_units,omitempty"`   // the measurement's own taken out
	SpreadOfReading *Number `json:"spread_of_reading,omitempty"` // the measurement's own, from unit to unit
	ReadingShare    *Number `json:"reading_share,omitempty"`     // of the variance

	Overall *Capability `json:"overall,omitempty"` // by the spread of all units
	Within  *Capability `json:"within,omitempty"`  // by the mean moving range
	Differ  bool        `json:"differ,omitempty"`  // overall is worse than within: the level moves, beyond chance
	Chart   *Chart      `json:"chart,omitempty"`
}

// A Ranged is a figure with its 95 % interval.
type Ranged struct {
	Value Number `json:"value"`
	Low   Number `json:"low"`
	High  Number `json:"high"`
}

// A Capability is how a figure fits between its limits.
type Capability struct {
	SD  Number `json:"standard_deviation"`
	Cp  Ranged `json:"cp"`
	Cpk Ranged `json:"cpk"`
}

// A Chart is an individuals and moving-range chart.
type Chart struct {
	Centre      Number   `json:"centre"`
	Low         Number   `json:"low"`
	High        Number   `json:"high"`
	MeanRange   Number   `json:"mean_moving_range"`
	RangeHigh   Number   `json:"moving_range_high"`
	Provisional bool     `json:"provisional"` // fewer than 20 units made it
	LeftOut     []string `json:"left_out"`    // units that lie far from all others: the limits are made without them
	Steady      bool     `json:"steady"`      // no more breaks than chance may bring
	Rules       string   `json:"rules"`       // the book they are from
	Breaks      []Break  `json:"breaks"`
	FalseBreaks Number   `json:"breaks_by_chance"` // about how many a steady line shows
}

// A Break is one place where a chart breaks a rule.
type Break struct {
	Rule  string   `json:"rule"`
	Units []string `json:"units"`
	Text  string   `json:"text"`
}
