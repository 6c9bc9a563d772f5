package draw

import (
	"math"

	"padproof/cmd/padproof/internal/result"
)

// Predicted draws the loss that the drawing gives against frequency, on the bench
// and in service, with the spread that the tolerances of the parts leave.
func Predicted(p *result.Prediction) *Picture {
	title := "Loss that the drawing gives"
	if p == nil {
		return nothing("predicted", title, "there is no drawing")
	}
	if p.Pad != "" {
		title += ": " + p.Pad
	}
	bench, service := lossCurveOf(p.Bench), lossCurveOf(p.Service)
	if !anyDrawable(bench.hz, bench.loss) && !anyDrawable(service.hz, service.loss) {
		return nothing("predicted", title, "nothing comes through this drawing")
	}
	picture := &Picture{Name: "predicted", Title: title, Says: predictedSays(p), Width: usualWidth, Height: usualHeight + 20}
	picture.paint = func(s *sheet) { predictedFrame(p, bench, service).paint(s) }
	return picture
}

// A lossCurve is a loss against frequency, turned over so that louder is higher.
type lossCurve struct{ hz, loss, low95, high95, worstLow, worstHigh []float64 }

func lossCurveOf(c result.Condition) lossCurve {
	var l lossCurve
	for _, p := range c.Curve {
		if !(p.FreqHz >= lowestDrawn && p.FreqHz <= highestDrawn) {
			continue
		}
		l.hz = append(l.hz, float64(p.FreqHz))
		l.loss = append(l.loss, -float64(p.LossDB))
		l.low95, l.high95 = append(l.low95, -float64(p.Spread.High95)), append(l.high95, -float64(p.Spread.Low95))
		l.worstLow, l.worstHigh = append(l.worstLow, -float64(p.Spread.WorstHigh)), append(l.worstHigh, -float64(p.Spread.WorstLow))
	}
	return l
}

func predictedFrame(p *result.Prediction, bench, service lossCurve) *frame {
	reach := nowhere()
	for _, l := range []lossCurve{bench, service} {
		for _, ys := range [][]float64{l.loss, l.worstLow, l.worstHigh} {
			reach.take(ys...)
		}
	}
	if p.Limit != nil {
		reach.take(-float64(p.Limit.Low), -float64(p.Limit.High))
	}
	middle := (reach.low + reach.high) / 2
	reach.take(middle-1, middle+1)
	f := &frame{x: frequencies(bench.hz, service.hz), y: evenly(reach.low, reach.high, "loss in dB; up is louder").negated()}
	same := equalEnds(p.Bench.Ends, p.Service.Ends)
	if !same {
		f.bands = append(f.bands, band{service.hz, service.low95, service.high95, inkWash, ""})
	}
	f.bands = append(f.bands, band{bench.hz, bench.low95, bench.high95, blueWash, "95 % of sound units"})
	thin := asOther
	f.curves = append(f.curves, curve{bench.hz, bench.worstLow, thin, "parts at their worst"}, curve{bench.hz, bench.worstHigh, thin, ""})
	if !same {
		f.curves = append(f.curves, curve{service.hz, service.loss, asDrawn, "in service"})
	}
	f.curves = append(f.curves, curve{bench.hz, bench.loss, asMeasured, "on the bench"})
	if p.Limit != nil {
		for _, limit := range []result.Number{p.Limit.Low, p.Limit.High} {
			if limit.OK() {
				f.curves = append(f.curves, curve{[]float64{float64(p.ToneHz) / 1.4, float64(p.ToneHz) * 1.4}, []float64{-float64(limit), -float64(limit)}, asLimit, ""})
			}
		}
		f.notes = append(f.notes, note{x: float64(p.ToneHz), y: -float64(p.Limit.High), text: "limits in service, at the tone", below: true})
	}
	return f
}

func equalEnds(a, b result.Ends) bool { return a == b }

func predictedSays(p *result.Prediction) string {
	b, s := p.Bench, p.Service
	says := "The drawing gives " + fixed(b.LossDB, 2) + " dB of loss on the bench at " + hertz(p.ToneHz) +
		" (95 % of sound units " + fixed(b.Spread.Low95, 2) + " to " + fixed(b.Spread.High95, 2) + " dB)"
	if !equalEnds(b.Ends, s.Ends) {
		says += " and " + fixed(s.LossDB, 2) + " dB in service (" + fixed(s.Spread.Low95, 2) + " to " + fixed(s.Spread.High95, 2) + " dB)"
	}
	if drop, at := furthest(b); drop > 0.05 && !math.IsInf(drop, 0) {
		says += "; on the bench the curve departs by " + fixed(result.Number(drop), 1) + " dB from that at the tone, at " + hertz(at)
	}
	return says + "."
}

// furthest is where a curve departs most from the loss at the tone.
func furthest(c result.Condition) (db float64, at result.Number) {
	for _, p := range c.Curve {
		if off := math.Abs(float64(p.LossDB - c.LossDB)); off > db {
			db, at = off, p.FreqHz
		}
	}
	return db, at
}
