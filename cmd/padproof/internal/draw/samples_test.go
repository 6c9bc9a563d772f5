package draw

import (
	"math"
	"math/rand/v2"
	"strconv"

	"padproof/cmd/padproof/internal/result"
)

func num(v float64) result.Number { return result.Number(v) }

// sampleAnswer is an answer with every picture, its curves made of plain formulas.
func sampleAnswer() *result.Answer {
	a := &result.Answer{Unit: "0417", Pad: "Saltmarsh 14 line pad", Simulated: true, Drawing: standard("U")}
	a.BenchEnds = &result.Ends{SourceOhms: 100, Drive: "impedance-balanced", LoadOhms: 1e4, Sense: "balanced", CablePF: 300}
	a.Suspects = []result.Suspect{{Fault: "R3 open", Parts: []string{"R3"}}}
	response := result.Check{Name: "response", Verdict: "PASS", Unit: "dB", Measured: 0.073, Uncertainty: 0.015, Low: -0.2, High: 0.2, AtHz: result.NumberOf(19952.6)}
	noise := &result.NoiseCurves{Unit: "dBu"}
	rng := rand.New(rand.NewPCG(1, 2))
	for n := -68.0; n <= 52; n++ {
		hz := 1000 * math.Pow(10, n/40)
		drop := 0.005 * math.Pow(hz/1000, 2)
		response.Points = append(response.Points, result.ResponsePoint{FreqHz: num(hz), Measured: num(drop * 0.96), Expected: num(drop), Uncertainty: 0.015})
		noise.FreqHz = append(noise.FreqHz, num(hz))
		noise.Rig, noise.Pad = append(noise.Rig, num(-169+rng.Float64())), append(noise.Pad, num(-165.5+rng.Float64()))
		net := num(-168 + rng.Float64())
		if n < -50 {
			net = result.Missing
		}
		noise.Net, noise.Thermal = append(noise.Net, net), append(noise.Thermal, -168.4)
	}
	for k := 1.0; k <= 10; k++ {
		noise.Lines = append(noise.Lines, result.LinePair{FreqHz: num(50 * k), Pad: num(-127 - 12*math.Log2(k)), Rig: result.Missing, OfMains: true})
	}
	after := result.LevelCurve{Role: "after"}
	flex := result.LevelCurve{Role: "flex", Events: []result.Event{{AtSec: 3, DB: -0.5, What: "level step"}, {AtSec: 3.3, DB: -34, What: "dropout"}, {AtSec: 8, DB: -0.1, What: "crackle"}}}
	for i := range 200 {
		after.AtSec, after.DB = append(after.AtSec, num(2+float64(i)/50)), append(after.DB, num(0.002*rng.NormFloat64()))
		v := 0.002 * rng.NormFloat64()
		if i > 60 && i < 70 {
			v = -34
		}
		flex.AtSec, flex.DB = append(flex.AtSec, num(float64(i)/20)), append(flex.DB, num(v))
	}
	spectrum := result.SpectrumCurve{Role: "after", ToneHz: 997, BandHz: 3.1}
	for i := range 900 {
		hz := 20 * math.Pow(1000, float64(i)/899)
		spectrum.FreqHz, spectrum.DB = append(spectrum.FreqHz, num(hz)), append(spectrum.DB, num(-112+3*rng.NormFloat64()))
	}
	for h := 2; h <= 10; h++ {
		spectrum.Harmonics = append(spectrum.Harmonics, result.Harmonic{Number: h, FreqHz: num(997 * float64(h)), DB: num(-84 - float64(h)), Stands: h != 4})
	}
	before := spectrum
	before.Role = "before"
	a.Curves = &result.Curves{
		Noise: noise, Level: []result.LevelCurve{after, flex}, Spectrum: []result.SpectrumCurve{spectrum, before},
		Legs: &result.LegLevels{From: "straight", FreqHz: 997, HotDB: -15.78, ColdDB: -15.80, DrawnHot: -15.77, DrawnCold: -15.77},
	}
	flat := response
	flat.Name, flat.Verdict, flat.Measured = "flatness", "FAIL", 1.7
	a.Checks = []result.Check{
		response, flat,
		{Name: "noise", Verdict: "PASS", Unit: "dB", Measured: -0.09, Uncertainty: 0.72, Low: result.Missing, High: 3},
		{Name: "steadiness", Verdict: "FAIL", Unit: "dB", Measured: 34, Uncertainty: 0.01, Low: result.Missing, High: 0.05, From: "flex", AtSec: result.NumberOf(3.3), Events: flex.Events},
		{Name: "distortion", Verdict: "PASS", Unit: "dB", Measured: result.Missing, Uncertainty: result.Missing, Low: result.Missing, High: -80, Bound: result.NumberOf(-81)},
		{Name: "legs", Verdict: "FAIL", Unit: "dB", Measured: 0.017, Uncertainty: 0.064, Low: -1, High: 1, Reason: "hot against cold is 180° away from the drawing"},
	}
	return a
}

func samplePrediction() *result.Prediction {
	p := &result.Prediction{Pad: "Saltmarsh 14 line pad", ToneHz: 997, Limit: &result.Limit{Low: 13.67, High: 14.27}, Drawing: standard("H")}
	p.Bench, p.Service = sampleCondition(13.57), sampleCondition(13.97)
	p.Bench.Ends, p.Service.Ends = result.Ends{SourceOhms: 100, LoadOhms: 1e4}, result.Ends{SourceOhms: 120, LoadOhms: 2700}
	return p
}

func sampleCondition(lossDB float64) result.Condition {
	c := result.Condition{LossDB: num(lossDB)}
	spread := func(db float64) result.Spread {
		return result.Spread{WorstLow: num(db - 0.13), WorstHigh: num(db + 0.13), Low95: num(db - 0.08), High95: num(db + 0.08)}
	}
	c.Spread = spread(lossDB)
	for n := -17.0; n <= 13; n++ {
		c.Curve = append(c.Curve, result.SpreadPoint{FreqHz: num(1000 * math.Pow(10, n/10)), LossDB: num(lossDB), Spread: spread(lossDB)})
	}
	return c
}

// samplePictures are one of each.
func samplePictures() []*Picture {
	pictures := append(OfAnswer(sampleAnswer()), OfPrediction(samplePrediction())...)
	pictures = append(pictures, sampleLotPictures()...)
	for _, name := range []string{"L", "T", "pi", "O", "bridged-T"} {
		d := standard(name)
		pictures = append(pictures, Schematic(d, SchematicOptions{Title: name, Marked: []string{"R1", "R3"}}))
	}
	for seed := range uint64(8) {
		pictures = append(pictures, Schematic(randomDrawing(seed), SchematicOptions{Title: "custom", Marked: []string{"R2"}, Bench: &result.Ends{SourceOhms: 150, Drive: "balanced", LoadOhms: num(math.Inf(1)), Sense: "floating"}}))
	}
	return pictures
}

func ofOhms(ref string, ohms float64, a, b string) result.DrawnPart {
	return result.DrawnPart{Ref: ref, Kind: "resistor", Value: num(ohms), Code: strconv.FormatFloat(ohms, 'g', -1, 64), A: a, B: b}
}

// standard is a named network as the sheets' page in the README has it.
func standard(name string) *result.Drawing {
	d := &result.Drawing{Network: name, Unbalanced: name == "L" || name == "T" || name == "pi" || name == "bridged-T"}
	seats := map[string][][2]string{
		"L":         {{inHot, outHot}, {outHot, screenPin}},
		"U":         {{inHot, outHot}, {inCold, outCold}, {outHot, outCold}},
		"T":         {{inHot, "mid"}, {"mid", outHot}, {"mid", screenPin}},
		"H":         {{inHot, "mid.hot"}, {inCold, "mid.cold"}, {"mid.hot", outHot}, {"mid.cold", outCold}, {"mid.hot", "mid.cold"}},
		"pi":        {{inHot, screenPin}, {inHot, outHot}, {outHot, screenPin}},
		"O":         {{inHot, inCold}, {inHot, outHot}, {inCold, outCold}, {outHot, outCold}},
		"bridged-T": {{inHot, "mid"}, {"mid", outHot}, {inHot, outHot}, {"mid", screenPin}},
	}[name]
	for i, s := range seats {
		d.Parts = append(d.Parts, ofOhms("R"+strconv.Itoa(i+1), 330, s[0], s[1]))
	}
	return d
}

// randomDrawing is a circuit that nobody would draw: any parts between any nodes.
func randomDrawing(seed uint64) *result.Drawing {
	rng := rand.New(rand.NewPCG(seed, 7))
	nodes := []string{inHot, inCold, outHot, outCold, screenPin, "a", "b", "c"}
	d := &result.Drawing{Network: "custom", Unbalanced: seed%3 == 0}
	for i := range 3 + rng.IntN(9) {
		a, b := rng.IntN(len(nodes)), rng.IntN(len(nodes))
		if a == b {
			continue
		}
		p := ofOhms("R"+strconv.Itoa(i+1), 560, nodes[a], nodes[b])
		switch rng.IntN(5) {
		case 0:
			p.Ref, p.Kind, p.Code = "C"+strconv.Itoa(i+1), "capacitor", "220n"
		case 1:
			p.Ref, p.Kind, p.Code = "L"+strconv.Itoa(i+1), "inductor", "10m"
		case 2:
			p.Value, p.Code = 0, "0"
		}
		d.Parts = append(d.Parts, p)
	}
	return d
}
