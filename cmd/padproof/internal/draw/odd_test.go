package draw

import (
	"io"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"padproof/cmd/padproof/internal/result"
)

var oddNumbers = []result.Number{0, -1, 1, result.Missing, num(math.Inf(1)), num(math.Inf(-1)), 1e300, -1e300, 1e-300, 997, 20, -40000}

func anyNumber(rng *rand.Rand) result.Number { return oddNumbers[rng.IntN(len(oddNumbers))] }

func anyNumbers(rng *rand.Rand) []result.Number {
	var list []result.Number
	for range rng.IntN(5) {
		list = append(list, anyNumber(rng))
	}
	return list
}

var oddNames = []string{"", "<b>\"0417\" & 'co'</b>", strings.Repeat("long ", 60), strings.Repeat("w", 300), "\u202egnirts", "pad \U0001F50C", "\x00\x07\n\t", "\xff\xfe", "ligne à 20 dB"}

// oddAnswer is an answer of which no figure can be trusted.
func oddAnswer(rng *rand.Rand) *result.Answer {
	name := func() string { return oddNames[rng.IntN(len(oddNames))] }
	a := &result.Answer{Unit: name(), Pad: name(), Simulated: rng.IntN(2) == 0}
	a.Curves = &result.Curves{
		Noise: &result.NoiseCurves{Unit: "dBu", FreqHz: anyNumbers(rng), Rig: anyNumbers(rng), Pad: anyNumbers(rng), Net: anyNumbers(rng), Thermal: anyNumbers(rng),
			Lines: []result.LinePair{{FreqHz: anyNumber(rng), Pad: anyNumber(rng), Rig: anyNumber(rng), OfMains: rng.IntN(2) == 0}}},
		Level: []result.LevelCurve{{Role: name(), AtSec: anyNumbers(rng), DB: anyNumbers(rng), Events: []result.Event{{AtSec: anyNumber(rng), DB: anyNumber(rng), What: name()}}}},
		Spectrum: []result.SpectrumCurve{{ToneHz: anyNumber(rng), BandHz: anyNumber(rng), FreqHz: anyNumbers(rng), DB: anyNumbers(rng),
			Harmonics: []result.Harmonic{{Number: 2, FreqHz: anyNumber(rng), DB: anyNumber(rng), Stands: true}}}},
		Legs: &result.LegLevels{FreqHz: anyNumber(rng), HotDB: anyNumber(rng), ColdDB: anyNumber(rng), DrawnHot: anyNumber(rng), DrawnCold: anyNumber(rng)},
	}
	for _, check := range []string{"response", "flatness", "noise", "noise-level", "distortion", "hum", "legs", "steadiness"} {
		c := result.Check{Name: check, Measured: anyNumber(rng), Uncertainty: anyNumber(rng), Low: anyNumber(rng), High: anyNumber(rng), Reason: name()}
		at, bound := anyNumber(rng), anyNumber(rng)
		c.AtHz, c.Bound, c.AtSec, c.MainsHz, c.From = &at, &bound, &at, &at, "after"
		for range rng.IntN(4) {
			c.Points = append(c.Points, result.ResponsePoint{FreqHz: anyNumber(rng), Measured: anyNumber(rng), Expected: anyNumber(rng), Uncertainty: anyNumber(rng)})
		}
		a.Checks = append(a.Checks, c)
	}
	d := randomDrawing(rng.Uint64())
	for i := range d.Parts {
		d.Parts[i].Ref, d.Parts[i].Value, d.Parts[i].Code = name(), anyNumber(rng), name()
	}
	if rng.IntN(4) == 0 {
		d.Parts = nil
	}
	a.Drawing, a.BenchEnds = d, &result.Ends{SourceOhms: anyNumber(rng), LoadOhms: anyNumber(rng), CablePF: anyNumber(rng), Drive: name(), Sense: name()}
	return a
}

// No figure and no name, however odd, makes a picture panic, or an SVG that is none.
func TestOddInput(t *testing.T) {
	rng := rand.New(rand.NewPCG(11, 12))
	for i := range 80 {
		a := oddAnswer(rng)
		o := SchematicOf(a)
		for _, p := range append(OfAnswer(a), Response(a), Noise(a), Level(a), Spectrum(a), Legs(a), Schematic(a.Drawing, o)) {
			var svg strings.Builder
			if err := p.WriteSVG(&svg); err != nil {
				t.Fatal(err)
			}
			readSVG(t, p, svg.String())
			if i < 2 {
				for _, form := range []string{"png", "pdf"} {
					if err := p.Write(io.Discard, form); err != nil {
						t.Fatal(err)
					}
				}
			}
		}
		c := result.Condition{LossDB: anyNumber(rng)}
		for range rng.IntN(3) {
			c.Curve = append(c.Curve, result.SpreadPoint{FreqHz: anyNumber(rng), LossDB: anyNumber(rng), Spread: result.Spread{Low95: anyNumber(rng), High95: anyNumber(rng)}})
		}
		p := &result.Prediction{Pad: "x", ToneHz: anyNumber(rng), Bench: c, Limit: &result.Limit{Low: anyNumber(rng), High: anyNumber(rng)}}
		if err := Predicted(p).WriteSVG(io.Discard); err != nil {
			t.Fatal(err)
		}
	}
}

// Where there is nothing to show the picture says so.
func TestNothingToShow(t *testing.T) {
	for _, a := range []*result.Answer{nil, {}, {Curves: &result.Curves{}}, {Curves: &result.Curves{Noise: &result.NoiseCurves{}, Level: []result.LevelCurve{{}}, Spectrum: []result.SpectrumCurve{{}}}}} {
		for _, p := range []*Picture{Response(a), Flatness(a), Noise(a), Level(a), Spectrum(a), Legs(a), Schematic(nil, SchematicOf(a)), Predicted(nil), Predicted(&result.Prediction{})} {
			said := ""
			for _, text := range watch(p, false).texts {
				said += text.text + " "
			}
			if !p.Nothing() || !strings.Contains(said, "Nothing to show") {
				t.Errorf("%s: Nothing() = %v and it says %q", p.Name, p.Nothing(), said)
			}
		}
	}
	if got := OfAnswer(&result.Answer{}); len(got) != 0 {
		t.Errorf("OfAnswer of nothing gives %d pictures", len(got))
	}
}

// One point alone is drawn, and limits and a decibel either way are always in sight.
func TestOnePoint(t *testing.T) {
	a := &result.Answer{Checks: []result.Check{{Name: "response", Unit: "dB", Measured: 0, Uncertainty: 0.01, Low: -3, High: 3,
		Points: []result.ResponsePoint{{FreqHz: 1000, Measured: 0, Expected: 0, Uncertainty: 0.01}}}}}
	p := Response(a)
	if p.Nothing() {
		t.Fatal("one point is nothing")
	}
	f := responseOf(&a.Checks[0]).frame("drawing")
	if f.y.min > -3 || f.y.max < 3 {
		t.Errorf("axis from %v to %v, want the limits of ±3 within", f.y.min, f.y.max)
	}
	a.Checks[0].Low, a.Checks[0].High = -0.1, 0.1
	f = responseOf(&a.Checks[0]).frame("drawing")
	if f.y.min > -1 || f.y.max < 1 {
		t.Errorf("axis from %v to %v, want ±1 within", f.y.min, f.y.max)
	}
}
