package lotstat

import (
	"cmp"
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"padproof/compare"
	"padproof/compare/network"
)

const toneHz = 997

// saltmarsh is the line pad of the demo, 560, 560 and 330 Ω of 1 %, on a bench of
// 100 Ω ± 2 % into 10 kΩ ± 2 %.
func saltmarsh(t *testing.T) (*network.Circuit, compare.Rig) {
	t.Helper()
	part := func(ref string, ohms float64) network.Part {
		return network.Part{Ref: ref, Kind: network.Resistor, Value: ohms, TolFrac: 0.01}
	}
	c := must[*network.Circuit](t)(network.New("U", []network.Part{part("R1", 560), part("R2", 560), part("R3", 330)}))
	return c, compare.Rig{
		Ends:          network.Ends{SourceOhms: 100, LoadOhms: 10000},
		SourceTolFrac: 0.02, LoadTolFrac: 0.02,
	}
}

// A batch is how units are made: values and bench are put through the circuit
// itself, not through its sensitivities.
type batch struct {
	units    int
	reelFrac map[string]float64 // how far a part's reel lies off, all units
	scatter  float64            // of each part about its reel, rectangle
	ends     func(e *network.Ends)
	noiseDB  float64
}

func (b batch) lot(t *testing.T, seed uint64) Lot {
	t.Helper()
	c, rig := saltmarsh(t)
	rng := rand.New(rand.NewPCG(seed, 30))
	true := rig.Ends
	if b.ends != nil {
		b.ends(&true)
	}
	drawn := c.LossDB(rig.Ends, toneHz)
	l := Lot{Model: ModelOf(c, rig, toneHz), CommonStdUDB: 0.01}
	for range b.units {
		unit := c
		for _, p := range c.Parts() {
			off := b.reelFrac[p.Ref] + b.scatter*(2*rng.Float64()-1)
			unit = unit.With(p.Ref, p.Value*(1+off))
		}
		l.DeviationsDB = append(l.DeviationsDB, unit.LossDB(true, toneHz)-drawn+b.noiseDB*rng.NormFloat64())
		l.StdUDB = append(l.StdUDB, b.noiseDB)
	}
	return l
}

func says(t *testing.T, d Diagnosis, words ...string) {
	t.Helper()
	text := strings.Join(d.Sentences, "\n")
	for _, w := range words {
		if !strings.Contains(text, w) {
			t.Errorf("sentences %q do not say %q", text, w)
		}
	}
}

// A reel 3.5 % high: the lot says so, by the figure put in.
func TestDiagnoseReel(t *testing.T) {
	for _, c := range []struct {
		refs []string
		frac float64
		said string
	}{
		{[]string{"R3"}, 0.035, "the reel of R3, 3.5 % high (1.0 % allowed)"},
		{[]string{"R3"}, -0.035, "the reel of R3, 3.5 % low (1.0 % allowed)"},
		{[]string{"R1", "R2"}, 0.05, "the reel of R1 and R2, 5"},
	} {
		reel := make(map[string]float64)
		for _, ref := range c.refs {
			reel[ref] = c.frac
		}
		d := must[Diagnosis](t)(Diagnose(batch{units: 60, reelFrac: reel, scatter: 0.002, noiseDB: 0.005}.lot(t, 1)))
		if !d.Shift.BeyondBench {
			t.Fatalf("%v %+g: shift %+v", c.refs, c.frac, d.Shift)
		}
		says(t, d, c.said, "on all units: suspect ")
		if !slices.IsSortedFunc(d.Explanations, func(a, b Explanation) int { return cmp.Compare(a.OfTolerance, b.OfTolerance) }) {
			t.Errorf("not by the share of their tolerance: %+v", d.Explanations)
		}
		found := false
		for _, e := range d.Explanations {
			if strings.Join(e.Refs, " ") == strings.Join(c.refs, " ") {
				found = true
				near(t, "change of "+e.String(), e.ChangeFrac, c.frac, 0.03*math.Abs(c.frac))
				if e.Within || !(e.Interval.Low < c.frac && c.frac < e.Interval.High) {
					t.Errorf("%+v: the true change of %g lies outside the interval, or it is within", e, c.frac)
				}
			}
		}
		if !found {
			t.Errorf("%v is not among %v", c.refs, d.Explanations)
		}
		if d.Trend.Shown || d.Step.Shown || d.Clusters.Shown || d.Width.Shown || len(d.Outliers) > 0 {
			t.Errorf("%v: more is found than was put in: %q", c.refs, d.Sentences)
		}
	}
}

// A source far off what the rig says: named, with its figure.
func TestDiagnoseSource(t *testing.T) {
	d := must[Diagnosis](t)(Diagnose(batch{units: 40, scatter: 0.002, noiseDB: 0.002,
		ends: func(e *network.Ends) { e.SourceOhms *= 1.3 }}.lot(t, 2)))
	if !d.Shift.BeyondBench {
		t.Fatalf("shift %+v", d.Shift)
	}
	for _, e := range d.Explanations {
		if e.End == "source" {
			near(t, "change of the source", e.ChangeFrac, 0.3, 0.06)
			says(t, d, "high on all units") // more source, more loss across the pad's own load than across the bench's
			return
		}
	}
	t.Errorf("no source among %v", d.Explanations)
}

// A shift that reels within their tolerance make: said so, and nothing is called
// suspect. Not all units lie on one side: it is so on average.
func TestDiagnoseWithin(t *testing.T) {
	b := batch{units: 200, scatter: 0.008, noiseDB: 0.002, reelFrac: map[string]float64{"R3": -0.007},
		ends: func(e *network.Ends) {}}
	l := b.lot(t, 6)
	l.Model.Ends = []LotEnd{{"source", 0.001, l.Model.Ends[0].BenchDB}} // as before-loaded may find it
	l.CommonStdUDB = 0.002
	d := must[Diagnosis](t)(Diagnose(l))
	if !d.Shift.BeyondBench || !d.Explanations[0].Within || !d.Explanations[1].Within {
		t.Errorf("%+v, %+v", d.Shift, d.Explanations)
	}
	says(t, d, "high on average: this would explain it: the reel of R3, 0.", "low (within its 1.0 %), or the reel of R1 and R2, 0.")
	for _, s := range d.Sentences {
		if strings.Contains(s, "suspect") {
			t.Errorf("%q", s)
		}
	}
}

// Parts of one kind, value and tolerance share a reel; their sensitivities add up.
func TestLevers(t *testing.T) {
	m := Model{Parts: []LotPart{
		{"R1", network.Resistor, 560, 0.01, 1}, {"R3", network.Resistor, 330, 0.01, -3}, {"R2", network.Resistor, 560, 0.01, 2},
		{"R4", network.Resistor, 560, 0.05, 4}, {"C1", network.Capacitor, 560, 0.01, 5},
	}, Ends: []LotEnd{{"source", 0, 1}, {"load", 0.05, 1}}}
	var got []string
	for _, l := range m.levers() {
		got = append(got, strings.Join(l.refs, "+")+l.end)
		if len(l.refs) == 2 && l.benchDB != 3 {
			t.Errorf("R1 and R2 together = %g dB, want 3", l.benchDB)
		}
	}
	if text := strings.Join(got, " "); text != "R1+R2 R3 R4 C1 load" {
		t.Errorf("levers = %q", text)
	}
}

// Nothing is suspected of a sound lot, nor of one that lies no further off than
// the bench may be.
func TestDiagnoseSound(t *testing.T) {
	sound := batch{units: 50, scatter: 0.01, noiseDB: 0.005}
	shown, other := 0, 0
	const lots = 300
	for seed := range uint64(lots) {
		d := must[Diagnosis](t)(Diagnose(sound.lot(t, 100+seed)))
		if d.Shift.Shown {
			shown++
		}
		if len(d.Explanations) > 0 || d.Trend.Shown || d.Step.Shown || d.Clusters.Shown || d.Width.Shown || len(d.Outliers) > 0 {
			other++
		}
	}
	near(t, "share of sound lots with a shift", float64(shown)/lots, 0.05, 0.04)
	near(t, "share of sound lots with anything else", float64(other)/lots, 0, 0.04)

	lot := batch{units: 50, scatter: 0.001, noiseDB: 0.001,
		ends: func(e *network.Ends) { e.SourceOhms *= 1.015 }}.lot(t, 3)
	lot.CommonStdUDB = 0.0005
	inBench := must[Diagnosis](t)(Diagnose(lot))
	if !inBench.Shift.Shown || inBench.Shift.BeyondBench || len(inBench.Explanations) > 0 {
		t.Errorf("a source within its tolerance: %+v", inBench.Shift)
	}
	says(t, inBench, "no more than the bench itself may add", "foremost its source")
}

func TestDiagnoseOneThing(t *testing.T) {
	steady := func() Lot { return batch{units: 80, scatter: 0.003, noiseDB: 0.004}.lot(t, 4) }

	trend := steady()
	for i := range trend.DeviationsDB {
		trend.DeviationsDB[i] += 0.002 * float64(i)
	}
	d := must[Diagnosis](t)(Diagnose(trend))
	if !d.Trend.Shown || d.Step.Shown || d.Clusters.Shown || !(d.Trend.Interval.Low < 0.002 && 0.002 < d.Trend.Interval.High) {
		t.Errorf("a trend of 0.002 dB a unit: %+v, %+v, %+v", d.Trend, d.Step, d.Clusters)
	}
	says(t, d, "loss rises by 0.16 dB over the lot", "drifts")

	step := steady()
	step.Names = make([]string, 80)
	for i := range step.DeviationsDB {
		step.Names[i] = "unit" + string(rune('A'+i%26))
		if i >= 50 {
			step.DeviationsDB[i] -= 0.15
		}
	}
	step.Names[50] = "0467"
	d = must[Diagnosis](t)(Diagnose(step))
	if !d.Step.Shown || d.Step.At != 50 || d.Trend.Shown || d.Clusters.Shown {
		t.Errorf("a step at 50: %+v, %+v, %+v", d.Step, d.Trend, d.Clusters)
	}
	near(t, "step", d.Step.ChangeDB, -0.15, 0.02)
	says(t, d, "from unit 0467 on loss lies 0.15 dB lower")

	mixed := steady()
	rng := rand.New(rand.NewPCG(31, 32))
	for i := range mixed.DeviationsDB {
		if rng.Float64() < 0.4 {
			mixed.DeviationsDB[i] += 0.15
		}
	}
	d = must[Diagnosis](t)(Diagnose(mixed))
	if !d.Clusters.Shown || d.Step.Shown || d.Trend.Shown {
		t.Errorf("two reels mixed: %+v, %+v, %+v", d.Clusters, d.Step, d.Trend)
	}
	near(t, "distance", d.Clusters.HighDB-d.Clusters.LowDB, 0.15, 0.02)
	near(t, "share of the higher", d.Clusters.HighFrac, 0.4, 0.15)
	says(t, d, "two reels mixed")

	odd := steady()
	odd.DeviationsDB[7] += 0.4
	d = must[Diagnosis](t)(Diagnose(odd))
	if len(d.Outliers) != 1 || d.Outliers[0] != 7 || d.Width.Shown {
		t.Errorf("one odd unit: %v, %+v", d.Outliers, d.Width)
	}
	near(t, "mean without it", d.Shift.MeanDB, meanOf(steady().without([]int{7}).db), 1e-12)
	says(t, d, "unit 8 (+0.4", "does not belong")

	wide := batch{units: 80, scatter: 0.015, noiseDB: 0.004}.lot(t, 5)
	d = must[Diagnosis](t)(Diagnose(wide))
	if !d.Width.Shown || d.Clusters.Shown {
		t.Errorf("parts of 1.5 %%: %+v, %+v", d.Width, d.Clusters)
	}
	says(t, d, "parts of a wider tolerance")
}

func TestDiagnoseOdd(t *testing.T) {
	c, rig := saltmarsh(t)
	m := ModelOf(c, rig, toneHz)
	for what, l := range map[string]Lot{
		"no units": {Model: m}, "one unit": {DeviationsDB: []float64{0.2}, Model: m},
		"two alike": {DeviationsDB: []float64{0.2, 0.2}, Model: m}, "many alike": {DeviationsDB: constant(0.1, 50), Model: m},
		"many at nothing": {DeviationsDB: constant(0, 50), Model: m}, "no model": {DeviationsDB: []float64{1, 2, 3}},
		"two values": {DeviationsDB: append(constant(0, 30), constant(1, 30)...), Model: m},
	} {
		d := must[Diagnosis](t)(Diagnose(l))
		if len(d.Sentences) == 0 {
			t.Errorf("%s: no sentence", what)
		}
		for _, s := range d.Sentences {
			if strings.Contains(s, "NaN") || strings.Contains(s, "Inf") {
				t.Errorf("%s: %q", what, s)
			}
		}
	}
	for what, l := range map[string]Lot{
		"a NaN":              {DeviationsDB: []float64{1, math.NaN()}},
		"an infinite one":    {DeviationsDB: []float64{1, math.Inf(1)}},
		"a broken unit":      {DeviationsDB: []float64{1, 1e9}},
		"lengths":            {DeviationsDB: []float64{1, 2}, StdUDB: []float64{1}},
		"names":              {DeviationsDB: []float64{1, 2}, Names: []string{"0417"}},
		"a negative doubt":   {DeviationsDB: []float64{1, 2}, CommonStdUDB: -1},
		"a tolerance of 500": {DeviationsDB: []float64{1, 2}, Model: Model{Parts: []LotPart{{Ref: "R1", TolFrac: 500}}}},
		"a NaN end":          {DeviationsDB: []float64{1, 2}, Model: Model{Ends: []LotEnd{{"load", math.NaN(), 1}}}},
	} {
		_, err := Diagnose(l)
		refused(t, what, err)
	}
}
