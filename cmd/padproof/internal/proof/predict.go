package proof

import (
	"fmt"
	"math"
	"math/cmplx"

	"padproof/analysis"
	"padproof/cmd/padproof/internal/result"
	"padproof/compare"
	"padproof/compare/network"
	"padproof/compare/uncertainty"
)

// What a take recorded well scatters by: a standard error of the tone's level
// that any interface reaches in four seconds at 60 dB signal to noise.
const (
	goodStdErrDB  = 0.001
	goodStdErrDof = 15
)

// PredictOptions are the conditions that a prediction is for.
type PredictOptions struct {
	ToneHz    float64 // the tone the loss is for
	InputDBu  float64 // level at the pad's input, for the dissipation
	PhantomMA float64 // current drawn through the pad from a phantom supply
	Curves    bool    // fill Condition.Curve, which the picture is drawn from
}

// DefaultPredict is the tone of the test signal, a loud line level and the
// largest current of a P48 microphone (IEC 61938).
var DefaultPredict = PredictOptions{ToneHz: analysis.ToneHz, InputDBu: 24, PhantomMA: 10}

// Predict says what a drawing should measure on its rig and in service, what
// this bench could not see, and which recordings to make.
func Predict(d *Drawing, o PredictOptions) (*result.Prediction, error) {
	c := d.Circuit
	p := &result.Prediction{
		Schema: result.PredictSchema, Pad: d.Name, Network: c.Name(), Rig: d.Sheet.Name,
		ToneHz: result.Number(o.ToneHz), InputDBu: result.Number(o.InputDBu),
		Bench:   conditionOf(c, d.Rig.Ends, o.ToneHz),
		Service: conditionOf(c, d.Service, o.ToneHz),
		Parts:   partLines(d, o),
		Ohms:    ohmReadings(c), OhmNotes: ohmNotes(c),
		Phantom: phantomOf(c, o.PhantomMA),
		Unseen:  []result.Unseen{}, Budget: []result.Term{},
		Recordings: recordings(d),
		Assumed:    d.assumed(),
		Warnings:   warnings(d, o.ToneHz),
		Cautions:   result.Cautions,
		Drawing:    drawnOf(c),
	}
	if o.Curves {
		p.Bench.Curve, p.Service.Curve = spreadCurve(c, d.Rig.Ends), spreadCurve(c, d.Service)
	}
	return p, d.foretell(p, o.ToneHz)
}

// foretell judges a sound unit that reads exactly what the drawing says.
func (d *Drawing) foretell(p *result.Prediction, toneHz float64) error {
	expected := d.Circuit.LossDB(d.Rig.Ends, toneHz)
	if math.IsInf(expected, 0) {
		p.Reason = "nothing comes through this drawing at the tone"
		return nil
	}
	reading := compare.LossReading{LossDB: expected, FreqHz: toneHz, Terms: append([]uncertainty.Term{
		uncertainty.FromSample("repeatability of before", goodStdErrDB, goodStdErrDof, 1),
		uncertainty.FromSample("repeatability of after", goodStdErrDB, goodStdErrDof, 1),
	}, d.Gains.Terms()...)}
	k := compare.LossCase{Circuit: d.Circuit, Rig: d.Rig, Service: d.Service, Reading: reading}
	loss, err := compare.JudgeLoss(k)
	if err != nil {
		return err
	}
	p.U, p.Beta = result.Number(loss.UDB), result.Number(loss.Beta)
	p.Budget = termsOf("loss", loss.Budget)
	limit, set := d.lossLimit(loss.ServiceExpectedDB)
	if !set {
		p.Reason = "No limit on the loss is set; [limits] loss_plus_minus_db sets one."
		return nil
	}
	p.Limit = &result.Limit{Low: result.Number(limit.Low), High: result.Number(limit.High)}
	verdict, reason, unseen := d.judgeLoss(k, loss, limit)
	p.Verdict, p.Reason = string(verdict), reason
	if verdict == compare.Fail && reason == "" {
		p.Reason = "the limits do not hold what the drawing gives"
	}
	p.Unseen = unseenOf(unseen)
	return nil
}

func conditionOf(c *network.Circuit, e network.Ends, toneHz float64) result.Condition {
	condition := result.Condition{
		Ends:       *endsOf(e),
		LossDB:     result.Number(c.LossDB(e, toneHz)),
		Spread:     spreadOf(compare.SoundSpread(c, e, toneHz)),
		InputOhms:  result.Number(cmplx.Abs(c.InputImpedance(e, toneHz))),
		OutputOhms: result.Number(cmplx.Abs(c.OutputImpedance(e, toneHz))),
	}
	for _, f := range octavesHz {
		condition.Response = append(condition.Response, result.Point{FreqHz: result.Number(f), LossDB: result.Number(c.LossDB(e, f))})
	}
	return condition
}

// octavesHz are the band edges and the octaves of ISO 266 between them.
var octavesHz = []float64{20, 31.5, 63, 125, 250, 500, 1000, 2000, 4000, 8000, 16000, 20000}

func spreadOf(s compare.Spread) result.Spread {
	return result.Spread{
		WorstLow: result.Number(s.WorstLowDB), WorstHigh: result.Number(s.WorstHighDB),
		Low95: result.Number(s.Low95DB), High95: result.Number(s.High95DB),
	}
}

func partLines(d *Drawing, o PredictOptions) []result.PartLine {
	c := d.Circuit
	volts := math.Sqrt(0.6) * math.Pow(10, o.InputDBu/20)
	watts := c.Dissipation(d.Service, o.ToneHz, volts)
	bench, service := c.Sensitivities(d.Rig.Ends, o.ToneHz), c.Sensitivities(d.Service, o.ToneHz)
	var lines []result.PartLine
	for i, p := range c.Parts() {
		lines = append(lines, result.PartLine{
			Ref: p.Ref, Kind: p.Kind.String(), Value: result.Number(p.Value), TolFrac: result.Number(p.TolFrac),
			BenchDBPer1: result.Number(bench[i] / 100), ServDBPer1: result.Number(service[i] / 100),
			DissipationW: result.Number(watts[i]),
		})
	}
	return lines
}

// ohmReadings are what a sound unit reads, with the worst case of the parts'
// tolerances and what a meter may add.
func ohmReadings(c *network.Circuit) []result.OhmReading {
	readings := []result.OhmReading{}
	for _, r := range compare.Readings(c) {
		good := r.On(c)
		low, high := r.Band(c)
		line := result.OhmReading{
			Pins: []string{r.PinA, r.PinB}, Joined: []string{},
			Ohms: result.Number(good), Low: result.Number(low), High: result.Number(high),
			Meter: result.Number(compare.MeterTolFrac*good + compare.MeterPlusOhms),
		}
		if r.Joined != [2]string{} {
			line.Joined = r.Joined[:]
		}
		readings = append(readings, line)
	}
	return readings
}

// ohmNotes are what to mind when the meter is on this drawing.
func ohmNotes(c *network.Circuit) []string {
	notes := []string{}
	has := map[network.Kind]bool{}
	for _, p := range c.Parts() {
		has[p.Kind] = true
	}
	if has[network.Capacitor] {
		notes = append(notes, "There are capacitors: a meter charges them, so wait until the figure stands still. Read so, a capacitor is open, and the meter tells nothing of its value.")
	}
	if has[network.Inductor] {
		notes = append(notes, "There are inductors: the drawing does not say what their wire has, so the reading may lie anywhere from that with none to that with their reactance at 1 kHz.")
	}
	return notes
}

func phantomOf(c *network.Circuit, milliamps float64) *result.Phantom {
	drop, applies := c.PhantomDrop(milliamps / 1000)
	if !applies {
		return nil
	}
	return &result.Phantom{
		CurrentMA: result.Number(milliamps),
		HotVolts:  result.Number(drop.Hot.LostVolts), HotBlocked: drop.Hot.Blocked,
		ColdVolts: result.Number(drop.Cold.LostVolts), ColdBlocked: drop.Cold.Blocked,
	}
}

// warnings are what a drawing on its ends should be told of. A load of at least
// ten times the source for voltage transfer is common practice, no source.
func warnings(d *Drawing, toneHz float64) []string {
	texts := []string{}
	for _, at := range []struct {
		name string
		ends network.Ends
	}{{"on the bench", d.Rig.Ends}, {"in service", d.Service}} {
		source := cmplx.Abs(d.Circuit.OutputImpedance(at.ends, toneHz))
		if at.ends.LoadOhms < 10*source && !matched(at.ends) {
			texts = append(texts, fmt.Sprintf("%s the load of %.4g Ω is less than ten times the pad's output impedance of %.4g Ω: the loss depends on the load", at.name, at.ends.LoadOhms, source))
		}
		if input := cmplx.Abs(d.Circuit.InputImpedance(at.ends, toneHz)); input < 10*at.ends.SourceOhms && !matched(at.ends) {
			texts = append(texts, fmt.Sprintf("%s the pad's input impedance of %.4g Ω is less than ten times the source of %.4g Ω: the loss depends on the source", at.name, input, at.ends.SourceOhms))
		}
		if d.Rig.Ends == d.Service {
			break
		}
	}
	return texts
}

// matched tells a matched pair of ends, for which ten times is not the rule.
func matched(e network.Ends) bool {
	return e.SourceOhms > 0 && e.LoadOhms <= 2*e.SourceOhms
}
