package draw

import (
	"io"
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"gonum.org/v1/plot/vg"

	"padproof/cmd/padproof/internal/result"
)

func seriesFor(t *testing.T, l *result.Lot) lotSeries {
	t.Helper()
	s, ok := seriesOf(l, 0, "loss")
	if !ok {
		t.Fatal("the lot has no loss")
	}
	return s
}

// Each unit is in one bar or beyond an edge; no bar stands on both sides of a
// limit, and both limits are in sight.
func TestBarsHoldEveryUnit(t *testing.T) {
	for name, l := range sampleLots() {
		s := seriesFor(t, l)
		w := s.window()
		piles, tallest, beyond := s.pile(w)
		n, most := len(beyond), 0
		for _, b := range piles {
			n, most = n+b.count, max(most, b.count)
			top := 0
			for _, l := range b.layers() {
				if l.from != top || l.to-l.from != b.verdicts[l.verdict] {
					t.Errorf("%s: %v does not stand on the layer below it, at %d", name, l, top)
				}
				top = l.to
			}
			if top != b.count {
				t.Errorf("%s: a bar of %d units is %d high", name, b.count, top)
			}
			for _, limit := range []float64{float64(s.Low), float64(s.High)} {
				if b.from < limit-1e-6 && b.to > limit+1e-6 {
					t.Errorf("%s: a bar from %v to %v stands on both sides of the limit %v", name, b.from, b.to, limit)
				}
			}
		}
		if n != len(s.values) || most != tallest {
			t.Errorf("%s: %d units in bars and beyond, want %d; the tallest is %d, want %d", name, n, len(s.values), most, tallest)
		}
		for _, limit := range []float64{float64(s.Low), float64(s.High)} {
			if limit < w.low || limit > w.high {
				t.Errorf("%s: the limit %v is not between %v and %v", name, limit, w.low, w.high)
			}
		}
	}
}

// Those that pass stand at the foot of a bar, those that fail on top.
func TestBarsAreStacked(t *testing.T) {
	b := pile{verdicts: map[string]int{"FAIL": 1, "PASS": 3, "UNPROVEN": 2}, count: 6}
	if got, want := b.layers(), []layer{{"PASS", 0, 3}, {"UNPROVEN", 3, 5}, {"FAIL", 5, 6}}; !slices.Equal(got, want) {
		t.Errorf("layers %v, want %v", got, want)
	}
}

// The width of the bars is that of Freedman and Diaconis: of a normal sample of n
// with a standard deviation of s about 2 × 1.349 s / n^(1/3), narrowed until it
// divides the limits.
func TestBarWidth(t *testing.T) {
	s := seriesFor(t, sampleLot(1000, 4, nil))
	got, want := s.window().step, 2*1.349*0.06/10
	if math.Abs(got-want) > 0.1*want {
		t.Errorf("bars of %.4f dB, want %.4f ± 10 %%", got, want)
	}
	if k := 0.6 / got; math.Abs(k-math.Round(k)) > 1e-6 {
		t.Errorf("%v bars between the limits, want a whole number", k)
	}
}

// textsOf are all words in a picture.
func textsOf(p *Picture) string {
	var b strings.Builder
	for _, text := range watch(p, false).texts {
		b.WriteString(text.text + "\n")
	}
	return b.String()
}

// Who fails and who lies beyond the edge is named; how many there are of each is
// said in the picture and in its sentence.
func TestLotPicturesName(t *testing.T) {
	lots := sampleLots()
	for name, want := range map[string]struct{ spread, chart, spreadSays, chartSays []string }{
		"few": {[]string{"0405", "1 FAIL", "1 UNPROVEN", "12 PASS", "limit", "13.7", "14.3", "drawing", "13.970", "mean", "±0.036 dB"}, []string{"0401", "0405", "mean 14.070"},
			[]string{"14 units read from 13.959 to 14.410 dB", "limits 13.7 to 14.3: 1 FAIL, 1 UNPROVEN, 12 PASS", "3.7 standard deviations"}, []string{"provisional"}},
		"far":     {[]string{"← 0412 at 0.900", "29 PASS"}, []string{"0412 at 0.900", "0413"}, []string{"from 0.900"}, []string{"not steady; 3 breaks", "0412", "without 0412"}},
		"two far": {[]string{"2 units, 47.000 to 70.000 →"}, []string{"0408", "0431"}, []string{"2 FAIL, 58 PASS"}, []string{"and 3 more"}},
		"many":    {[]string{"1000 PASS"}, []string{"1400"}, []string{"1000 units read"}, []string{"as steady as can be told; 17 breaks", "about 15.4 by chance"}},
		"drift":   {[]string{"188 PASS"}, []string{"0404 to 0440"}, nil, []string{"not steady; 6 breaks"}},
		"free":    {[]string{"no limit"}, nil, []string{"no limit is set."}, nil},
		"top":     {[]string{"limit", "-110"}, nil, []string{"limit up to -110: 4 PASS"}, []string{"steady, no Western Electric rule is broken"}},
	} {
		if name == "free" {
			for i := range lots[name].Rows {
				lots[name].Rows[i].Checks[0].Verdict = ""
			}
		}
		spread, chart := LotSpread(lots[name], 0, "loss"), LotChart(lots[name], 0, "loss")
		for where, tt := range map[string]struct {
			text string
			want []string
		}{
			"spread": {textsOf(spread), want.spread}, "chart": {textsOf(chart), want.chart},
			"spread's sentence": {spread.Says, want.spreadSays}, "chart's sentence": {chart.Says, want.chartSays},
		} {
			for _, words := range tt.want {
				if !strings.Contains(tt.text, words) {
					t.Errorf("%s, %s lacks %q: %q", name, where, words, tt.text)
				}
			}
		}
	}
}

// Units that break a rule are drawn full, and stand out in grey: each is a disc of
// ink, and there are as many as the breaks name.
func TestBrokenPointsAreMarked(t *testing.T) {
	l := sampleLots()["drift"]
	s := seriesFor(t, l)
	points, ranges := s.broken()
	marked := map[int]bool{}
	for _, m := range points {
		for _, i := range m.points {
			marked[i] = true
		}
	}
	want := map[string]bool{}
	for _, b := range s.Chart.Breaks {
		for _, u := range b.Units {
			if !isRangeBreak(b) {
				want[u] = true
			}
		}
	}
	if len(marked) != len(want) || len(want) < 70 {
		t.Errorf("%d points are marked, want %d", len(marked), len(want))
	}
	for i := range marked {
		if !want[s.units[i]] {
			t.Errorf("%s is marked and breaks nothing", s.units[i])
		}
	}
	if len(ranges) != 1 || s.units[ranges[0].points[0]+1] != ranges[0].name {
		t.Errorf("moving ranges %v, want the one that ends at %s", ranges, s.units[ranges[0].points[0]+1])
	}
}

// A point far from the others stands at the edge and does not squeeze them.
func TestChartKeepsItsScale(t *testing.T) {
	s := seriesFor(t, sampleLots()["far"])
	got := near(s.values, 14.02, 0.18)
	if got.low < 13.4 || got.high > 14.6 || got.low > 13.84 || got.high < 14.2 {
		t.Errorf("the chart runs from %v to %v, want the limits and their neighbourhood", got.low, got.high)
	}
}

// Names side by side keep their order, do not overlap and stay in the room.
func TestSideBySide(t *testing.T) {
	rng := rand.New(rand.NewPCG(9, 10))
	for range 500 {
		var middles, widths []vg.Length
		for range 1 + rng.IntN(4) {
			middles, widths = append(middles, vg.Length(320*rng.Float64()-10)), append(widths, vg.Length(20+40*rng.Float64()))
		}
		slices.Sort(middles)
		sideBySide(middles, widths, 0, 300)
		for i := range middles {
			if middles[i]-widths[i]/2 < -1e-9 || middles[i]+widths[i]/2 > 300+1e-9 {
				t.Fatalf("name %d at %v ± %v is out of 0 to 300", i, middles[i], widths[i]/2)
			}
			if i > 0 && middles[i-1]+widths[i-1]/2 > middles[i]-widths[i]/2+1e-9 {
				t.Fatalf("names %d and %d overlap", i-1, i)
			}
		}
	}
}

func TestLotPicturesSaySimulated(t *testing.T) {
	for _, simulated := range []bool{true, false} {
		l := sampleLot(14, 1, nil)
		l.Simulated = simulated
		for _, p := range OfLot(l, 0) {
			if got := strings.Contains(textsOf(p), "SIMULATED"); got != simulated {
				t.Errorf("%s: SIMULATED is there: %v, want %v", p.Name, got, simulated)
			}
		}
	}
}

// No figure and no name, however odd, makes a lot's picture panic, or an SVG that
// is none.
func TestOddLot(t *testing.T) {
	rng := rand.New(rand.NewPCG(21, 22))
	name := func() string { return oddNames[rng.IntN(len(oddNames))] }
	for i := range 150 {
		f := result.LotFigure{Check: "loss", Unit: name(), Expected: anyNumber(rng), Low: anyNumber(rng), High: anyNumber(rng), Least: anyNumber(rng), Greatest: anyNumber(rng)}
		f.Mean = result.Ranged{Value: anyNumber(rng)}
		f.Overall = &result.Capability{Cpk: result.Ranged{Value: anyNumber(rng)}}
		f.Chart = &result.Chart{Centre: anyNumber(rng), Low: anyNumber(rng), High: anyNumber(rng), MeanRange: anyNumber(rng), RangeHigh: anyNumber(rng), Rules: name(),
			LeftOut: []string{name()}, Breaks: []result.Break{{Rule: "moving range 1", Units: []string{name(), name()}}, {Rule: name(), Units: nil}, {Rule: "x", Units: []string{name()}}}}
		l := &result.Lot{Lot: name(), Drawings: []result.LotDrawing{{Pad: name(), Figures: []result.LotFigure{f}}}}
		for range rng.IntN(60) {
			l.Rows = append(l.Rows, result.LotRow{Unit: name(), Drawing: rng.IntN(2) - 1,
				Checks: []result.LotCheck{{Name: "loss", Verdict: []string{"PASS", "FAIL", "UNPROVEN", "", "?"}[rng.IntN(5)], Measured: anyNumber(rng), Uncertainty: anyNumber(rng)}}})
		}
		for _, p := range append(OfLot(l, 0), LotSpread(l, 0, "loss"), LotChart(l, 0, "loss")) {
			var svg strings.Builder
			if err := p.WriteSVG(&svg); err != nil {
				t.Fatal(err)
			}
			readSVG(t, p, svg.String())
			if i < 2 {
				if err := p.WritePNG(io.Discard); err != nil {
					t.Fatal(err)
				}
			}
		}
	}
	for _, p := range []*Picture{LotSpread(nil, 0, "loss"), LotChart(nil, 0, "loss"), LotSpread(&result.Lot{}, 3, "loss"), LotChart(sampleLot(3, 1, nil), 0, "noise"), LotSpread(sampleLot(3, 1, nil), -1, "loss")} {
		if !p.Nothing() {
			t.Errorf("%s of nothing is a picture", p.Name)
		}
	}
	if OfLot(nil, 0) != nil || OfLot(&result.Lot{}, 1) != nil {
		t.Error("OfLot of nothing gives pictures")
	}
}
