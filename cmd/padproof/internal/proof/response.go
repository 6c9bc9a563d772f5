package proof

import (
	"errors"
	"fmt"
	"math"

	"padproof/analysis"
	"padproof/capture"
	"padproof/cmd/padproof/internal/result"
	"padproof/compare"
)

// response judges response and flatness: from the sweep of the test signal, from
// whatever else was played, or from a few steady tones.
func (c *check) response() error {
	wanted := c.Limits.ResponsePlusMinusDB != nil || c.Limits.FlatnessPlusMinusDB != nil
	if c.Circuit == nil {
		return nil
	}
	points, why, err := c.responsePoints()
	if err != nil {
		return err
	}
	if len(points) == 0 && !wanted {
		return nil
	}
	straight, through := c.takes.pair()
	for _, kind := range []struct {
		name  string
		half  *float64
		judge func(compare.ResponseCase) (compare.ResponseFinding, error)
	}{{"response", c.Limits.ResponsePlusMinusDB, compare.JudgeResponse}, {"flatness", c.Limits.FlatnessPlusMinusDB, compare.JudgeFlatness}} {
		if kind.half == nil && (kind.name == "flatness" || len(points) == 0) {
			continue
		}
		limit := plusMinus(kind.half)
		one := emptyCheck(kind.name, "dB")
		one.Expected = 0
		if len(points) == 0 {
			decide(&one, compare.Unproven, why, limit, 0)
			c.add(one, nil, straight, through)
			continue
		}
		k := c.responseCase(points)
		if kind.half != nil {
			k.PlusMinusDB = *kind.half
		}
		f, err := kind.judge(k)
		if err != nil {
			return err
		}
		one.Measured, one.Uncertainty = result.Number(f.DeviationDB), result.Number(f.UDB)
		one.AtHz = result.NumberOf(f.AtHz)
		decide(&one, f.Verdict, f.Reason, limit, 0)
		enterCurve(&one, f)
		if kind.name == "response" {
			c.findings.response = f.Points
		}
		c.needTestSignalFor(&one)
		c.add(one, termsOf(kind.name, f.Budget), straight, through)
	}
	return nil
}

func (c *check) needTestSignalFor(one *result.Check) {
	if c.Limits.RequireTestSignal {
		c.needTestSignal(one)
	}
}

func (c *check) responseCase(points []analysis.ResponsePoint) compare.ResponseCase {
	toneHz := analysis.ToneHz
	if _, through := c.takes.pair(); through.judged != nil {
		toneHz = through.judged.FreqHz
	}
	return compare.ResponseCase{
		Points:     points,
		DesignedDB: c.designedDB,
		ServiceDB:  func(f float64) float64 { return c.Circuit.LossDB(c.Service, f) },
		ToneHz:     toneHz, FromHz: c.Limits.ResponseFromHz, ToHz: c.Limits.ResponseToHz,
		Rule: c.Rule, LinearityDB: c.Gains.LinearityDB,
		RigTerms: c.Rig.CurveTerms(c.Circuit),
	}
}

func enterCurve(one *result.Check, f compare.ResponseFinding) {
	for _, p := range f.Points {
		one.Points = append(one.Points, result.ResponsePoint{
			FreqHz: result.Number(p.FreqHz), Measured: result.Number(p.MeasuredDB),
			Expected: result.Number(p.ExpectedDB), Uncertainty: result.Number(p.UDB),
		})
	}
	if !math.IsNaN(f.LowCornerHz) {
		one.LowCornerHz = result.NumberOf(f.LowCornerHz)
	}
	if !math.IsNaN(f.HighCornerHz) {
		one.HighCorner = result.NumberOf(f.HighCornerHz)
	}
}

// responsePoints measures the response in the best way that the takes allow;
// without any, why says what to do.
func (c *check) responsePoints() (points []analysis.ResponsePoint, why string, err error) {
	straight, through := c.takes.pair()
	why = "a single tone shows no response; play the test signal (padproof signal), or a few steady tones from the lowest to the highest of the range"
	switch {
	case c.played != "":
		points, err = c.playedResponse(straight, through)
	case straight.placed != nil && through.placed != nil:
		points, err = analysis.Response(straight.samples, *straight.placed, through.samples, *through.placed)
	case c.judgedPair() && len(c.answer.Tones) > 1:
		points = analysis.ToneResponse(straight.measured.Tones, through.measured.Tones)
	}
	if errors.Is(err, analysis.ErrNoResponse) || errors.Is(err, analysis.ErrNotPlayed) {
		return nil, err.Error() + "; record both takes whole, from the opening marker to the closing one", nil
	}
	return points, why, err
}

// playedResponse reads the response from any WAV that was played.
func (c *check) playedResponse(straight, through *take) ([]analysis.ResponsePoint, error) {
	file, err := capture.Open(c.played)
	if err != nil {
		return nil, err
	}
	defer file.Close()
	if n := file.Facts().Channels; n != 1 {
		return nil, &result.Error{File: c.played, Text: fmt.Sprintf("has %d channels", n), Hint: "export the channel that was played as a mono WAV"}
	}
	played := file.Channel(1)
	if _, err := analysis.FindSignal(played); err == nil {
		return nil, &result.Error{File: c.played, Text: "is the test signal itself", Hint: "leave --signal out: the test signal is recognised by its markers"}
	}
	points, err := analysis.PlayedResponse(played, straight.samples, through.samples)
	return analysis.WithoutMains(points, c.Sheet.MainsHz), err
}
