package proof

import (
	"fmt"

	"padproof/cmd/padproof/internal/result"
)

// recordings are the takes to make of a drawing on its rig, in order.
func recordings(d *Drawing) []result.Recording {
	load := d.Sheet.Calibration
	signal := "a steady tone of at least 4 s, or the test signal (padproof signal)"
	l := d.Limits
	if l.RequireTestSignal || l.SamePolarity || l.ResponsePlusMinusDB != nil || l.FlatnessPlusMinusDB != nil {
		signal = "the test signal (padproof signal), whole"
	}
	list := []result.Recording{
		{Role: "before", Needed: true, How: signal + ", straight through, no pad, peaks near -6 dBFS, automatic gain off"},
		{Role: "after", Needed: true, How: "the same through the pad, nothing else touched"},
		{Role: "before-again", How: "straight through once more at the end: a moved knob shows"},
	}
	if l.NoiseOverThermalDB != nil || l.NoiseMaxDBu != nil || l.HumMaxDBu != nil {
		list = append(list,
			result.Recording{Role: "rig-noise", How: fmt.Sprintf("60 s with %s at the interface's input, gain up", plug(load.NoisePlugOhms))},
			result.Recording{Role: "pad-noise", How: fmt.Sprintf("60 s with the pad's output at the input and %s across the pad's input, leg to leg, same gain", plug(load.PadPlugOhms))})
	}
	if l.LegMatchDB != nil {
		list = append(list,
			result.Recording{Role: "legs", How: fmt.Sprintf("two channels at once, hot to screen and cold to screen, each loaded by %.4g Ω, pad in circuit", d.Sheet.LegsLoadOhms(d.Circuit.Unbalanced()))},
			result.Recording{Role: "legs-before", How: "the same two channels straight through"})
	}
	if l.BypassWithinDB != nil {
		list = append(list, result.Recording{Role: "bypass", How: "the tone through the unit with its pad switched out"})
	}
	if l.SteadyWithinDB != nil {
		list = append(list, result.Recording{Role: "flex", How: "the tone through the pad while it is flexed and tapped"})
	}
	if load.LoadedOhms != nil {
		list = append(list, result.Recording{Role: "before-loaded", How: fmt.Sprintf("the tone straight through with %.4g Ω across the input: measures the source impedance", *load.LoadedOhms)})
	}
	if load.CalibrationVolts != nil {
		list = append(list, result.Recording{Role: "calibration", How: "a tone of 100 to 400 Hz while a meter reads its volts: says what full scale is in dBu"})
	}
	for i := range list {
		list[i].File = list[i].Role + ".wav"
	}
	return list
}

// plug names what terminates an input.
func plug(ohms float64) string {
	if ohms == 0 {
		return "a shorting plug"
	}
	return fmt.Sprintf("a plug of %.4g Ω", ohms)
}
