package sheet

// Rig is a rig.toml: the bench that makes the recordings. Every figure is there:
// what the sheet leaves out holds its cautious default, and Assumed says so.
type Rig struct {
	File             string // as it was given to [ReadRig]; "" for [DefaultRig]
	Source           []byte // the file as it was read; nil for [DefaultRig]
	Name             string // "" if left out
	TemperatureC     float64
	TemperatureHalfC float64 // half-width; 0 for a written temperature
	MainsHz          float64 // 0 if left out: not known
	Output           Output
	Input            Input
	Calibration      Calibration
	Reference        *Reference   // nil if left out
	Assumed          []Assumption // in the order of the sheet's keys

	lines map[string]int
}

// Output is the side that plays.
type Output struct {
	SourceOhms float64 // leg to leg, or hot to screen; 0 or more
	TolFrac    float64 // half-width of a rectangle
	Drive      string  // "" if left out; see [Rig.Drive]
}

// Input is the side that records.
type Input struct {
	LoadOhms     float64  // leg to leg, or hot to screen; above 0
	TolFrac      float64  // half-width of a rectangle, of load and legs load
	Sense        string   // "" if left out; see [Rig.Sense]
	LegsLoadOhms *float64 // nil if left out; see [Rig.LegsLoadOhms]
	CablePF      float64  // leg to leg; middle of its range
	CableHalfPF  float64  // half-width of a rectangle
}

// Calibration is what is known of levels. Half-widths are of rectangles.
type Calibration struct {
	FullScaleDBu           *float64 // dBu of a sine that reads 0 dBFS; nil: not known
	NoiseFullScaleDBu      *float64 // of the noise takes; FullScaleDBu if left out
	UncertaintyDB          float64  // of both, expanded (k = 2)
	LinearityDB            float64  // half-width
	GainDriftDB            float64  // half-width
	AfterGainDB            float64  // gain of after against before
	AfterGainUncertaintyDB float64  // half-width
	NoiseGainDriftDB       float64  // half-width
	ChannelMatchDB         float64  // half-width
	NoiseCurrentPA         float64  // pA per root hertz; middle of its range
	NoiseCurrentHalfPA     float64  // half-width; 0 for a written figure
	NoisePlugOhms          float64  // 0 is a short
	PadPlugOhms            float64
	LoadedOhms             *float64 // nil: not known
	CalibrationVolts       *float64 // volts RMS; nil: not known
}

// Assumption is a figure that nobody wrote.
type Assumption struct {
	Key  string // path of the key that would state it, "input.load_ohms"
	Text string // in plain words, "load 10 kΩ ± 10 %"
}

// Assumes tells whether the figure of a key is a default that was taken.
func (r *Rig) Assumes(key string) bool {
	for _, a := range r.Assumed {
		if a.Key == key {
			return true
		}
	}
	return false
}

// Drive returns how the output drives: where the sheet leaves it out, balanced,
// or unbalanced for an unbalanced network.
func (r *Rig) Drive(unbalanced bool) string { return orUsual(r.Output.Drive, unbalanced) }

// Sense returns how the input senses, where left out as for Drive.
func (r *Rig) Sense(unbalanced bool) string { return orUsual(r.Input.Sense, unbalanced) }

// LegsLoadOhms returns what loads each leg to screen in the legs takes: where
// the sheet leaves it out, half the load for a balanced sense, else the load.
func (r *Rig) LegsLoadOhms(unbalanced bool) float64 {
	switch {
	case r.Input.LegsLoadOhms != nil:
		return *r.Input.LegsLoadOhms
	case r.Sense(unbalanced) == "balanced":
		return r.Input.LoadOhms / 2
	}
	return r.Input.LoadOhms
}

// Line returns the line of a key by its path, such as "output.source_ohms"; 0
// where the sheet has no such key.
func (r *Rig) Line(path string) int { return r.lines[path] }

// ReadRig reads a rig.toml. Every error is an [*Error].
func ReadRig(path string) (*Rig, error) {
	data, err := read(path)
	if err != nil {
		return nil, err
	}
	sheet, err := ParseRig(path, data)
	if err != nil {
		return nil, err
	}
	sheet.Source = data
	return sheet, nil
}

// ParseRig reads the text of a rig.toml; file is its name for errors and for
// Rig.File. Every error is an [*Error], and the rig is then nil.
func ParseRig(file string, data []byte) (*Rig, error) {
	d, err := parse(file, data, "write the bench's figures, or take the file away: then the impedances count as ±50 %")
	if err != nil {
		return nil, err
	}
	d.foreign = map[string]string{"network": "pad.toml", "parts": "pad.toml", "service": "pad.toml", "limits": "pad.toml"}
	r := &Rig{File: file, lines: d.lines}
	r.fill(d.table("", d.root), 0.10)
	d.unknown()
	if err := d.first(); err != nil {
		return nil, err
	}
	r.Reference.check(d)
	if err := d.first(); err != nil {
		return nil, err
	}
	return r, nil
}

// DefaultRig returns the bench of which nothing is known, where there is no
// rig.toml: the defaults, but both impedances ± 50 %.
func DefaultRig() *Rig {
	r := &Rig{}
	r.fill((&document{}).table("", nil), 0.50)
	return r
}
