package compare

import (
	"fmt"
	"math"

	"padproof/analysis"
	"padproof/compare/network"
	"padproof/compare/uncertainty"
)

// A FoundSource is the source impedance as before-loaded measured it.
type FoundSource struct {
	Ohms   float64
	UOhms  float64 // expanded
	DropDB float64 // by which the known resistor lowered the level
	Budget uncertainty.Budget
}

// A SourceCase is what the source impedance is found by.
type SourceCase struct {
	Before        Twice         // straight through
	Loaded        analysis.Tone // the same with a known resistor across the input
	LoadedOhms    float64       // that resistor, leg to leg, or hot to screen
	LoadedTolFrac float64       // half-width
	Rig           Rig           // its load and cable with their doubts; the source is what is sought
	Gains         Gains         // linearity and drift between the two takes
}

const (
	leastSourceOhms = 1e-3
	mostSourceOhms  = 1e6
)

// FindSource finds the source impedance from the drop of level: that for which the model of the
// bench, straight through, drops as much when the resistor comes across the input. The closed form
// for a load and a resistor alone is Rs = (r - 1) / (1/R - (r - 1)/Rl), r the ratio of the two
// levels.
//
// The error says what is wrong with the takes or the figures where no source impedance up to 1 MΩ
// explains the drop; a drop within its own doubt of nil gives a small figure with a large U.
func FindSource(c SourceCase) (FoundSource, error) {
	r := ReadLossTwice(c.Before, Twice{First: c.Loaded}, c.Gains)
	r.LossDB -= c.Gains.AfterDB // the gain is raised for after alone
	f := FoundSource{DropDB: r.LossDB}
	base := benchAcross{c.Rig.Ends, c.LoadedOhms, r.FreqHz}
	if !(c.LoadedOhms > 0) || math.IsInf(c.LoadedOhms, 0) {
		return f, fmt.Errorf("the resistor of before-loaded is not known: state [calibration] loaded_ohms in rig.toml")
	}
	var err error
	if f.Ohms, err = base.source(r.LossDB); err != nil {
		return f, err
	}
	f.Budget.Terms = sourceTerms(c, r, base, f.Ohms)
	f.UOhms, err = f.Budget.ExpandedU(Coverage)
	return f, err
}

// benchAcross is a bench with a resistor across its input.
type benchAcross struct {
	ends   network.Ends
	ohms   float64
	freqHz float64
}

// dropDB is by how much the resistor lowers the level with a source impedance. It is the loss of a
// pad that is this resistor alone.
func (b benchAcross) dropDB(sourceOhms float64) (float64, error) {
	name, values := "U", []float64{0, 0, b.ohms}
	if b.ends.Drive == network.DriveUnbalanced && b.ends.Sense == network.SenseUnbalanced {
		name, values = "L", []float64{0, b.ohms}
	}
	var parts []network.Part
	for i, v := range values {
		parts = append(parts, network.Part{Ref: network.Refs(name)[i], Value: v})
	}
	c, err := network.New(name, parts)
	if err != nil {
		return 0, err
	}
	e := b.ends
	e.SourceOhms = sourceOhms
	return c.LossDB(e, b.freqHz), nil
}

// source is the source impedance that drops so much, by bisection: the drop only grows with it.
func (b benchAcross) source(dropDB float64) (float64, error) {
	low, high := leastSourceOhms, mostSourceOhms
	atMost, err := b.dropDB(high)
	if err != nil {
		return 0, err
	}
	if math.IsNaN(dropDB) || dropDB >= atMost {
		return 0, fmt.Errorf("the level drops by %.2f dB, more than %.4g Ω across the input can make; check the resistor and [calibration] loaded_ohms", dropDB, b.ohms)
	}
	if !(dropDB > 0) {
		return 0, fmt.Errorf("the level does not drop in before-loaded (%.3f dB): the resistor was not across the input, or is far above the source impedance; use one near it", -dropDB)
	}
	for range 200 {
		middle := math.Sqrt(low * high)
		drop, err := b.dropDB(middle)
		if err != nil {
			return 0, err
		}
		if drop < dropDB {
			low = middle
		} else {
			high = middle
		}
		if high/low < 1+1e-12 {
			break
		}
	}
	return math.Sqrt(low * high), nil
}

// sourceTerms are those of the drop, and of the bench through the model: how the source impedance
// found would change, over the whole width of each.
func sourceTerms(c SourceCase, r LossReading, base benchAcross, ohms float64) []uncertainty.Term {
	slope := func(b benchAcross, dropDB float64) float64 {
		x, err := b.source(dropDB)
		if err != nil {
			return ohms
		}
		return x
	}
	const stepDB = 1e-4
	perDB := (slope(base, r.LossDB+stepDB) - slope(base, r.LossDB-stepDB)) / (2 * stepDB)
	var terms []uncertainty.Term
	for _, t := range r.Terms {
		if t.Source == afterRepeats {
			t.Source = loadedRepeats
		}
		t.Sensitivity *= perDB
		terms = append(terms, t)
	}
	add := func(source string, half float64, move func(b *benchAcross, by float64)) {
		if !(half > 0) {
			return
		}
		below, above := base, base
		move(&below, -half)
		move(&above, half)
		terms = append(terms, uncertainty.FromRectangle(source, half, (slope(above, r.LossDB)-slope(below, r.LossDB))/(2*half)))
	}
	add(knownResistor, c.LoadedTolFrac*c.LoadedOhms, func(b *benchAcross, by float64) { b.ohms += by })
	if !math.IsInf(c.Rig.Ends.LoadOhms, 0) {
		add(loadSrc, c.Rig.LoadTolFrac*c.Rig.Ends.LoadOhms, func(b *benchAcross, by float64) { b.ends.LoadOhms += by })
	}
	add(cableSrc, c.Rig.CableTolFarads, func(b *benchAcross, by float64) { b.ends.CableFarads = math.Max(0, b.ends.CableFarads+by) })
	return terms
}

// On returns the rig with the source impedance as found. U becomes the rectangle that has the same
// standard uncertainty.
func (f FoundSource) On(r Rig) Rig {
	r.Ends.SourceOhms = f.Ohms
	r.SourceTolFrac = f.UOhms / 2 * math.Sqrt(3) / f.Ohms
	return r
}

// Lines are those to write into rig.toml.
func (f FoundSource) Lines() []string {
	return []string{
		"[output]",
		fmt.Sprintf("source_ohms = %s", figure(f.Ohms, f.UOhms)),
		fmt.Sprintf("tolerance   = \"%s%%\"", figureUp(100*f.UOhms/f.Ohms)),
	}
}

// A FoundScale is the level of full scale as the calibration take measured it.
type FoundScale struct {
	DBu     float64 // of a sine that reads 0 dBFS
	UDB     float64 // expanded
	Budget  uncertainty.Budget
	Warning string // "" where the tone lies where cheap meters are true
}

// Cheap meters are true from 100 to 400 Hz; a tone this much outside still counts.
const (
	meterLowHz, meterHighHz = 100.0, 400.0
	meterSlackFrac          = 0.05
	dBuVolts                = 0.7745966692414834 // sqrt(0.6)
)

// FindFullScale finds what a sine of 0 dBFS is in dBu from the tone of calibration and the volts
// RMS that a meter read meanwhile. meterUDB is the expanded uncertainty (k = 2) of the meter,
// [calibration] uncertainty_db; linearityDB, a half-width, counts for the way up to full scale.
func FindFullScale(tone analysis.Tone, volts, meterUDB, linearityDB float64) (FoundScale, error) {
	if !(volts > 0) || math.IsInf(volts, 0) {
		return FoundScale{}, fmt.Errorf("the volts of calibration are not known: state what the meter read as [calibration] calibration_volts in rig.toml")
	}
	f := FoundScale{DBu: 20*math.Log10(volts/dBuVolts) - tone.LevelDBFS}
	f.Budget.Terms = []uncertainty.Term{
		uncertainty.FromExpanded(meterSrc, meterUDB, 2, 1),
		repeatability(toneRepeats, tone),
	}
	if linearityDB > 0 {
		f.Budget.Terms = append(f.Budget.Terms, uncertainty.FromRectangle(linearitySrc, linearityDB, 1))
	}
	if tone.FreqHz < meterLowHz*(1-meterSlackFrac) || tone.FreqHz > meterHighHz*(1+meterSlackFrac) {
		f.Warning = fmt.Sprintf("calibration holds %.4g Hz; many meters are true from 100 to 400 Hz only: record it at 200 Hz, say", tone.FreqHz)
	}
	var err error
	f.UDB, err = f.Budget.ExpandedU(Coverage)
	return f, err
}

// Lines are those to write into rig.toml.
func (f FoundScale) Lines() []string {
	return []string{
		"[calibration]",
		fmt.Sprintf("full_scale_dbu = %s", figure(f.DBu, f.UDB)),
		fmt.Sprintf("uncertainty_db = %s", figureUp(f.UDB)),
	}
}

// figureUp prints an uncertainty to its second digit, rounded up (JCGM 100, 7.2.6).
func figureUp(u float64) string {
	if !(u > 0) {
		return "0"
	}
	unit := math.Pow(10, math.Floor(math.Log10(u))-1)
	return figure(math.Ceil(u/unit-1e-9)*unit, u)
}

// figure prints a value to the second digit of its uncertainty.
func figure(v, u float64) string {
	decimals := 2
	if u > 0 {
		decimals = int(math.Min(6, math.Max(0, 1-math.Floor(math.Log10(u)))))
	}
	return plainDB(v, decimals)
}
