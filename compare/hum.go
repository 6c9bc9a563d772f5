package compare

import (
	"fmt"
	"math"

	"padproof/analysis"
	"padproof/compare/uncertainty"
)

// Where hum was read, as an answer says it.
const (
	FromPadNoise = "pad-noise"
	FromSilence  = "the silence in after"
	FromTone     = "what lies beside after's tone"
)

// A HumReading is the hum in one take, with what turns it into dBu at the rig's input.
type HumReading struct {
	Hum          *analysis.Hum // nil: there is none to read
	FullScaleDBu float64       // gain as in that take; NaN where not known
}

// HumSources are the readings there may be of one path, the best first: the noise take, the silence
// in the take of the test signal, what lies beside its tone.
type HumSources struct{ Noise, Silence, Tone HumReading }

// first is the best reading that there is, and from where.
func (s HumSources) first() (HumReading, string) {
	switch {
	case s.Noise.Hum != nil:
		return s.Noise, FromPadNoise
	case s.Silence.Hum != nil:
		return s.Silence, FromSilence
	}
	return s.Tone, FromTone
}

// A HumCase is all that hum is judged by: the takes with the pad in circuit, and those of the rig
// alone (rig-noise, before).
type HumCase struct {
	Unit, Rig      HumSources
	CalibrationUDB float64 // expanded, k = 2
}

// A HumFigure is the mains line and its harmonics to the tenth, added by power, at the rig's input
// in dBu.
type HumFigure struct {
	From      string  // one of the From words; "" where nothing can be read
	Measured  float64 // NaN where the interval reaches down to nothing
	Low, High float64 // 95 %; Low is NaN where it reaches down to nothing
	UDB       float64 // the larger side; NaN as Measured
	Bound     float64 // the same as High: the highest value that the take allows
	MainsHz   float64 // as found
	Hidden    int     // lines that a tone lies on: they are not in the sum
	RigDBu    float64 // the rig's own; NaN where not known or none
	RigHigh   float64 // the highest that its take allows; NaN where not known
	Budget    uncertainty.Budget

	reason string
}

// JudgeHum reads the hum from the best take there is. The budget, and the interval, are in parts of
// the hum's own power, then turned to dB. The error is that of the budget.
func JudgeHum(k HumCase) (HumFigure, error) {
	nan := math.NaN()
	f := HumFigure{Measured: nan, Low: nan, High: nan, UDB: nan, Bound: nan, MainsHz: nan, RigDBu: nan, RigHigh: nan}
	unit, from := k.Unit.first()
	if unit.Hum == nil {
		f.reason = "no take shows hum: record pad-noise.wav, or after.wav with the test signal"
		return f, nil
	}
	f.From, f.MainsHz = from, unit.Hum.MainsHz
	for _, l := range unit.Hum.Lines {
		if l.Hidden {
			f.Hidden++
		}
	}
	if math.IsNaN(unit.FullScaleDBu) || math.IsInf(unit.FullScaleDBu, 0) {
		f.reason = "what level a reading stands for is not known: write full_scale_dbu, or record calibration.wav"
		return f, nil
	}
	if err := f.read(unit, k.CalibrationUDB); err != nil {
		return f, err
	}
	if rig, _ := k.Rig.first(); rig.Hum != nil && !math.IsNaN(rig.FullScaleDBu) {
		var r HumFigure
		if err := r.read(rig, k.CalibrationUDB); err != nil {
			return f, err
		}
		f.RigDBu, f.RigHigh = r.Measured, r.High
	}
	return f, nil
}

// read fills in the figures of one reading.
func (f *HumFigure) read(r HumReading, calibrationUDB float64) error {
	power := math.Max(0, r.Hum.MeanSquare)
	size := math.Max(power, r.Hum.StdU) // what the terms are parts of
	f.Measured, f.Low, f.UDB = math.NaN(), math.NaN(), math.NaN()
	if !(size > 0) {
		f.Bound = r.FullScaleDBu + analysis.FloorDBFS
		f.High = f.Bound
		return nil
	}
	f.Budget = uncertainty.Budget{Terms: []uncertainty.Term{
		uncertainty.FromNormal("noise under the lines", r.Hum.StdU/size, 1),
		uncertainty.FromNormal(calibrationTerm, calibrationUDB/2, 1/DBPerPower),
	}}
	u, err := f.Budget.ExpandedU(Coverage)
	if err != nil {
		return err
	}
	dBu := func(meanSquare float64) float64 { return r.FullScaleDBu + decibels(2*meanSquare) }
	f.High = dBu(power + u*size)
	f.Bound = f.High
	if low := power - u*size; low > 0 {
		f.Measured, f.Low = dBu(power), dBu(low)
		f.UDB = math.Max(f.High-f.Measured, f.Measured-f.Low)
	}
	return nil
}

// Judge holds the hum against a limit above, in dBu: PASS where the highest value allowed keeps it.
// A hum over the limit is UNPROVEN where the rig's own, as far as its take allows, breaks it too.
func (f HumFigure) Judge(rule Rule, limit Limit) (Verdict, string) {
	switch {
	case !limit.IsSet():
		return None, ""
	case f.reason != "":
		return Unproven, f.reason
	case math.IsNaN(f.Measured) && f.Bound <= limit.High:
		if f.Hidden > 0 {
			return Unproven, f.hiddenText()
		}
		return Pass, ""
	case math.IsNaN(f.Measured):
		return Unproven, fmt.Sprintf("no hum stands out, but up to %.1f dBu of it may lie under the noise; record longer, with more gain, or with less noise", f.Bound)
	}
	uDB := f.High - f.Measured
	if f.Measured > limit.High {
		uDB = f.Measured - f.Low
	}
	verdict, reason := Decide(rule, f.Measured, uDB, limit, math.NaN())
	switch {
	case verdict == Fail && f.RigHigh > limit.High:
		return Unproven, f.rigText()
	case verdict == Pass && f.Hidden > 0:
		return Unproven, f.hiddenText()
	case verdict == Unproven && f.From != FromPadNoise:
		reason += "; pad-noise.wav, longer and without a signal, would show it better"
	case verdict == Unproven && f.RigHigh > limit.High:
		reason += "; " + f.rigText()
	}
	return verdict, reason
}

func (f HumFigure) rigText() string {
	rig := f.RigDBu
	if math.IsNaN(rig) {
		rig = f.RigHigh
	}
	return fmt.Sprintf("the rig's own hum, %.1f dBu, may break the limit by itself; cure that first (cable runs, grounds, other supplies), never by lifting a protective earth", rig)
}

func (f HumFigure) hiddenText() string {
	return fmt.Sprintf("the tone lies on %d of the ten lines; record pad-noise.wav", f.Hidden)
}
