package sheet

import "fmt"

// The cautious defaults of a rig. A range from nil to a
// largest value is held as its middle and half-width.
const (
	usualSourceOhms  = 150.0
	usualLoadOhms    = 10000.0
	usualCablePF     = 250.0 // 0 to 500
	usualTempC       = 23.0
	usualTempHalfC   = 5.0
	usualCurrentPA   = 1.0 // 0 to 2
	usualCalDB       = 0.5
	usualLinearityDB = 0.02
	usualDriftDB     = 0.05
	usualNoiseDB     = 0.02
	usualChannelDB   = 0.1
)

// The ranges of a rig's figures.
var (
	tempSpan    = span{from: -60, to: 120, mend: "write degrees Celsius: 21"}
	mainsSpan   = span{from: 10, to: 500, mend: "write hertz: 50 or 60"}
	scaleSpan   = span{from: -200, to: 100, mend: "write the dBu of a sine that reads 0 dBFS: 18.0"}
	doubtSpan   = span{from: 0, to: 20, mend: "write decibels, 0 or more"}
	gainSpan    = span{from: -120, to: 120, mend: "write by how many decibels the gain was raised"}
	currentSpan = span{from: 0, to: 1e6, mend: "write picoamperes per root hertz, 0 or more"}
	voltsSpan   = span{from: 0, to: 1000, open: true, mend: "write what the meter read, in volts RMS: 0.775"}
)

// fill reads every figure of a rig. tolFrac is the tolerance of an impedance for
// which none is written.
func (r *Rig) fill(top *table, tolFrac float64) {
	r.Name = top.text("name")
	r.temperature(top)
	if hz := top.number("mains_hz", mainsSpan); hz != nil {
		r.MainsHz = *hz
	}
	output, _ := top.section("output")
	r.output(output, tolFrac)
	input, _ := top.section("input")
	r.input(input, tolFrac)
	cal, _ := top.section("calibration")
	r.levels(cal)
	r.drifts(cal)
	r.plugs(cal)
	r.reference(top)
}

// assume notes a figure that was not written.
func (r *Rig) assume(t *table, key, format string, args ...any) {
	r.Assumed = append(r.Assumed, Assumption{Key: join(t.path, key), Text: fmt.Sprintf(format, args...)})
}

// figure reads a number, or takes a default for it and notes the words.
func (r *Rig) figure(t *table, key string, s span, usual float64, words string) float64 {
	x := t.number(key, s)
	if x == nil {
		r.assume(t, key, words, usual)
		return usual
	}
	return *x
}

func (r *Rig) temperature(t *table) {
	if x := t.number("temperature_c", tempSpan); x != nil {
		r.TemperatureC = *x
		return
	}
	r.TemperatureC, r.TemperatureHalfC = usualTempC, usualTempHalfC
	r.assume(t, "temperature_c", "temperature %v ± %v °C", usualTempC, usualTempHalfC)
}

func (r *Rig) output(t *table, tolFrac float64) {
	source := t.number("source_ohms", sourceSpan)
	tol := t.tolerance("tolerance")
	r.Output.SourceOhms, r.Output.TolFrac = r.impedance(t, "source_ohms", source, usualSourceOhms, tol, tolFrac)
	if source != nil && tol == nil {
		r.assume(t, "tolerance", "source within ± %.3g %% of what is written", 100*tolFrac)
	}
	if r.Output.Drive = t.word("drive", drives...); r.Output.Drive == "" {
		r.assume(t, "drive", "balanced drive (unbalanced for an unbalanced network)")
	}
}

// impedance settles an impedance and its tolerance. A written tolerance belongs
// to a written impedance: it never makes a default more certain.
func (r *Rig) impedance(t *table, key string, x *float64, usual float64, tol *float64, usualTol float64) (ohms, frac float64) {
	frac = usualTol
	if tol != nil && (x != nil || *tol > usualTol) {
		frac = *tol
	}
	if x != nil {
		return *x, frac
	}
	name := map[string]string{"source_ohms": "source 150 Ω", "load_ohms": "load 10 kΩ"}[key]
	r.assume(t, key, "%s ± %.3g %%", name, 100*frac)
	return usual, frac
}

func (r *Rig) input(t *table, tolFrac float64) {
	load := t.number("load_ohms", loadSpan)
	tol := t.tolerance("tolerance")
	r.Input.LoadOhms, r.Input.TolFrac = r.impedance(t, "load_ohms", load, usualLoadOhms, tol, tolFrac)
	cable := t.number("cable_pF", cableSpan)
	if tol == nil && (load != nil || cable != nil) {
		r.assume(t, "tolerance", "load and cable within ± %.3g %% of what is written", 100*tolFrac)
	}
	if r.Input.Sense = t.word("sense", senses...); r.Input.Sense == "" {
		r.assume(t, "sense", "balanced sense (unbalanced for an unbalanced network)")
	}
	if r.Input.LegsLoadOhms = t.number("legs_load_ohms", loadSpan); r.Input.LegsLoadOhms == nil {
		r.assume(t, "legs_load_ohms", "each leg of the legs takes loaded by half the load for a balanced sense, else by the load")
	}
	r.cable(t, cable, tol, tolFrac)
}

// cable settles the cable's capacitance. The tolerance of the input is the
// cable's too, where the cable is written.
func (r *Rig) cable(t *table, pF, tol *float64, usualTol float64) {
	if pF == nil {
		r.Input.CablePF, r.Input.CableHalfPF = usualCablePF, usualCablePF
		r.assume(t, "cable_pF", "cable 0 to %v pF", 2*usualCablePF)
		return
	}
	frac := usualTol
	if tol != nil {
		frac = *tol
	}
	r.Input.CablePF, r.Input.CableHalfPF = *pF, *pF*frac
}

// levels reads what ties dBFS to volts.
func (r *Rig) levels(t *table) {
	c := &r.Calibration
	c.FullScaleDBu = t.number("full_scale_dbu", scaleSpan)
	c.NoiseFullScaleDBu = t.number("noise_full_scale_dbu", scaleSpan)
	if c.NoiseFullScaleDBu == nil && c.FullScaleDBu != nil {
		same := *c.FullScaleDBu
		c.NoiseFullScaleDBu = &same
		r.assume(t, "noise_full_scale_dbu", "noise takes at the same gain as before and after")
	}
	c.UncertaintyDB = r.figure(t, "uncertainty_db", doubtSpan, usualCalDB, "calibration within %v dB (k = 2)")
	c.CalibrationVolts = t.number("calibration_volts", voltsSpan)
}

// drifts reads how far levels of one rig may differ.
func (r *Rig) drifts(t *table) {
	c := &r.Calibration
	c.LinearityDB = r.figure(t, "linearity_db", doubtSpan, usualLinearityDB, "level differences true within %v dB")
	c.GainDriftDB = r.figure(t, "gain_drift_db", doubtSpan, usualDriftDB, "gain moved by at most %v dB between takes")
	if gain := t.number("after_gain_db", gainSpan); gain != nil {
		c.AfterGainDB = *gain
	}
	if doubt := t.number("after_gain_uncertainty_db", doubtSpan); doubt != nil {
		c.AfterGainUncertaintyDB = *doubt
	} else if c.AfterGainDB != 0 {
		r.assume(t, "after_gain_uncertainty_db", "the %v dB of gain added for after are exact", c.AfterGainDB)
	}
	c.NoiseGainDriftDB = r.figure(t, "noise_gain_drift_db", doubtSpan, usualNoiseDB, "gain moved by at most %v dB between the noise takes")
	c.ChannelMatchDB = r.figure(t, "channel_match_db", doubtSpan, usualChannelDB, "two channels alike within %v dB")
}

// plugs reads what terminates the noise takes, and the known load.
func (r *Rig) plugs(t *table) {
	c := &r.Calibration
	if x := t.number("noise_current_pA", currentSpan); x != nil {
		c.NoiseCurrentPA = *x
	} else {
		c.NoiseCurrentPA, c.NoiseCurrentHalfPA = usualCurrentPA, usualCurrentPA
		r.assume(t, "noise_current_pA", "input noise current 0 to %v pA per root hertz", 2*usualCurrentPA)
	}
	if x := t.number("noise_plug_ohms", sourceSpan); x != nil {
		c.NoisePlugOhms = *x
	} else {
		r.assume(t, "noise_plug_ohms", "rig-noise recorded with the input shorted")
	}
	if x := t.number("pad_plug_ohms", sourceSpan); x != nil {
		c.PadPlugOhms = *x
	} else {
		c.PadPlugOhms = r.Output.SourceOhms
		r.assume(t, "pad_plug_ohms", "pad's input plugged by the source's %v Ω in pad-noise", c.PadPlugOhms)
	}
	c.LoadedOhms = t.number("loaded_ohms", loadSpan)
}
