package compare

import (
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"padproof/analysis"
	"padproof/compare/uncertainty"
)

// lowpassDB is an RC low-pass by its formula: 10 lg(1 + (f/fc)^2).
func lowpassDB(lossDB, cornerHz float64) func(float64) float64 {
	return func(freqHz float64) float64 {
		return lossDB + 10*math.Log10(1+freqHz*freqHz/(cornerHz*cornerHz))
	}
}

// response makes the points of a curve, each band's exact mean being so close to its middle that the
// middle will do, with noise of a standard deviation.
func response(lossDB func(float64) float64, uDB float64, seed uint64) []analysis.ResponsePoint {
	random := rand.New(rand.NewPCG(seed, 3))
	var points []analysis.ResponsePoint
	for _, b := range analysis.ResponseBands(48000) {
		points = append(points, analysis.ResponsePoint{
			FreqHz: b.FreqHz, LowHz: b.LowHz, HighHz: b.HighHz,
			LossDB: lossDB(b.FreqHz) + uDB*random.NormFloat64(), StandardUDB: uDB,
		})
	}
	return points
}

func level(lossDB float64) func(float64) float64 { return func(float64) float64 { return lossDB } }

func responseCase(points []analysis.ResponsePoint, limitDB float64) ResponseCase {
	return ResponseCase{Points: points, DesignedDB: level(20), ToneHz: 997, FromHz: 20, ToHz: 20000, PlusMinusDB: limitDB}
}

func judgedResponse(t *testing.T, k ResponseCase) ResponseFinding {
	t.Helper()
	f, err := JudgeResponse(k)
	if err != nil {
		t.Fatal(err)
	}
	return f
}

func TestJudgeResponse(t *testing.T) {
	for _, c := range []struct {
		name    string
		change  func(k *ResponseCase)
		want    Verdict
		atHz    float64
		devDB   float64
		because string
	}{
		{"flat", func(*ResponseCase) {}, Pass, 0, 0, ""},
		{"gain does not count", func(k *ResponseCase) { k.DesignedDB = level(14) }, Pass, 0, 0, ""},
		{"designed curve", func(k *ResponseCase) {
			k.Points, k.DesignedDB = response(lowpassDB(20, 9000), 0.002, 1), lowpassDB(19, 9000)
		}, Pass, 0, 0, ""},
		{"unit with a capacitor that is not drawn", func(k *ResponseCase) {
			k.Points = response(lowpassDB(20, 40000), 0.002, 1)
		}, Fail, 19952.6, 0.9635, ""}, // 10 lg(1+(19952.6/40000)²) - 10 lg(1+0.025²)
		{"one point far off", func(k *ResponseCase) { k.Points[3].LossDB -= 0.5 }, Fail, k3Hz, -0.5, ""},
		{"one point in doubt", func(k *ResponseCase) { k.Points[3].StandardUDB = 0.2 }, Unproven, 0, 0, "at 23.71 Hz"},
		{"outside the range", func(k *ResponseCase) { k.Points[3].LossDB -= 0.5; k.FromHz = 30 }, Pass, 0, 0, ""},
		{"a gap", func(k *ResponseCase) { k.Points = append(k.Points[:30:30], k.Points[33:]...) }, Unproven, 0, 0, "is not shown"},
		{"an end missing", func(k *ResponseCase) { k.Points = k.Points[:100] }, Unproven, 0, 0, "to 2e+04 Hz is not shown"},
		{"the other end missing", func(k *ResponseCase) { k.Points = k.Points[10:] }, Unproven, 0, 0, "from 20"},
		{"fails though the end is missing", func(k *ResponseCase) { k.Points[3].LossDB -= 0.5; k.Points = k.Points[:100] }, Fail, k3Hz, -0.5, ""},
		{"no point at the tone", func(k *ResponseCase) { k.Points = k.Points[80:] }, Unproven, math.NaN(), math.NaN(), "no point of the response at the tone"},
		{"none at all", func(k *ResponseCase) { k.Points = nil }, Unproven, math.NaN(), math.NaN(), "no point"},
		{"no limit", func(k *ResponseCase) { k.PlusMinusDB = 0; k.Points[3].LossDB -= 0.5 }, None, k3Hz, -0.5, ""},
		{"linearity", func(k *ResponseCase) { k.LinearityDB = 0.3 }, Unproven, 0, 0, "wider than"},
		{"the rig", func(k *ResponseCase) {
			k.RigTerms = func(freqHz, toneHz float64) []uncertainty.Term {
				return []uncertainty.Term{uncertainty.FromRectangle("cable", 0.3*freqHz/20000, 1)}
			}
		}, Unproven, 0, 0, "at 1.995e+04 Hz"},
		{"nothing comes through by the drawing", func(k *ResponseCase) { k.DesignedDB = level(math.Inf(1)) }, Unproven, math.NaN(), math.NaN(), "no finite reading"},
	} {
		k := responseCase(response(level(20), 0.002, 1), 0.2)
		c.change(&k)
		f := judgedResponse(t, k)
		if f.Verdict != c.want || !strings.Contains(f.Reason, c.because) || (f.Reason == "") != (c.want != Unproven) {
			t.Errorf("%s: %s %q, want %s %q", c.name, f.Verdict, f.Reason, c.want, c.because)
		}
		if c.atHz == 0 {
			if math.Abs(f.DeviationDB) > 0.01 {
				t.Errorf("%s: deviation %g at %g Hz, want about 0", c.name, f.DeviationDB, f.AtHz)
			}
			continue
		}
		if !(math.Abs(f.AtHz-c.atHz) < 1 && math.Abs(f.DeviationDB-c.devDB) < 0.01) && !(math.IsNaN(c.atHz) && math.IsNaN(f.AtHz)) {
			t.Errorf("%s: %.4f at %.1f Hz, want %.4f at %.1f Hz", c.name, f.DeviationDB, f.AtHz, c.devDB, c.atHz)
		}
	}
}

const k3Hz = 23.7137 // 1000·10^(-65/40)

// Flat units whose noise puts the largest of 121 points well past one point's U: none may fail, and
// with a limit of several U nearly all pass.
func TestNoiseAloneNeverFailsAResponse(t *testing.T) {
	const units = 300
	failed, passed := 0, 0
	for seed := range uint64(units) {
		k := responseCase(response(level(20), 0.02, seed+1), 0.01) // the limit far inside the noise
		if judgedResponse(t, k).Verdict == Fail {
			failed++
		}
		k.PlusMinusDB = 0.2
		if judgedResponse(t, k).Verdict == Pass {
			passed++
		}
	}
	// The points share the tone's noise, so the risk is a little below what Bonferroni allows for.
	if failed > units*8/100 {
		t.Errorf("%d of %d flat units fail by noise alone, want at most 5 %% and chance", failed, units)
	}
	if passed < units*97/100 {
		t.Errorf("%d of %d flat units pass with a limit of ten standard uncertainties, want 97 %%", passed, units)
	}
}

// A unit with one point exactly on its limit passes in no more than one case in 40.
func TestResponseOnTheLimitHardlyPasses(t *testing.T) {
	const units = 400
	passed := 0
	for seed := range uint64(units) {
		k := responseCase(response(func(freqHz float64) float64 {
			if freqHz < 20 {
				return 20.2
			}
			return 20
		}, 0.01, seed+1), 0.2)
		if judgedResponse(t, k).Verdict == Pass {
			passed++
		}
	}
	if passed > units*4/100 { // 2.5 %, and two standard deviations of chance
		t.Errorf("%d of %d units on the limit pass, want 2.5 %%", passed, units)
	}
}

// The budget's U of a point: √2 times the same noise at point and tone, twice that at 95 % (1.96).
func TestResponsePointU(t *testing.T) {
	f := judgedResponse(t, responseCase(response(level(20), 0.01, 1), 0.2))
	for _, p := range f.Points {
		want := 1.959964 * math.Sqrt2 * 0.01
		if p.FreqHz == 1000 {
			want = 0
		}
		if math.Abs(p.UDB-want) > 1e-7 {
			t.Errorf("U at %.1f Hz = %.6f, want %.6f", p.FreqHz, p.UDB, want)
		}
	}
	if len(f.Points) != 121 {
		t.Errorf("%d points, want 121", len(f.Points))
	}
}

func TestJudgeFlatness(t *testing.T) {
	// On the bench the drawing is flat and the unit falls by 0.1 dB at the top; in service the
	// drawing itself falls by 10 lg(1 + (f/fs)²).
	k := responseCase(response(lowpassDB(20, 130000), 0.001, 1), 0.5)
	k.ServiceDB = lowpassDB(26, 60000)
	f, err := JudgeFlatness(k)
	if err != nil {
		t.Fatal(err)
	}
	top := 19952.623
	want := lowpassDB(0, 60000)(top) + lowpassDB(0, 130000)(top) - lowpassDB(0, 60000)(1000) - lowpassDB(0, 130000)(1000)
	if math.Abs(f.DeviationDB-want) > 0.005 || math.Abs(f.AtHz-top) > 0.01 || f.Verdict != Fail {
		t.Errorf("JudgeFlatness = %.4f at %.1f Hz, %s, want %.4f at %.1f Hz, FAIL", f.DeviationDB, f.AtHz, f.Verdict, want, top)
	}
	k.PlusMinusDB = 0.7
	if f, _ = JudgeFlatness(k); f.Verdict != Pass {
		t.Errorf("with ±0.7 dB: %s %s, want PASS", f.Verdict, f.Reason)
	}
}

// Half the power of an RC low-pass is at its corner by definition; of a high-pass likewise.
func TestCorners(t *testing.T) {
	both := func(freqHz float64) float64 {
		return lowpassDB(20, 12345)(freqHz) + 10*math.Log10(1+(34.5/freqHz)*(34.5/freqHz))
	}
	f := judgedResponse(t, responseCase(response(both, 0, 1), 0))
	if math.Abs(f.LowCornerHz/34.5-1) > 0.01 || math.Abs(f.HighCornerHz/12345-1) > 0.01 { // 1 kHz itself is down by 0.03 dB
		t.Errorf("corners at %.2f and %.1f Hz, want 34.5 and 12345", f.LowCornerHz, f.HighCornerHz)
	}
	f = judgedResponse(t, responseCase(response(level(20), 0, 1), 0))
	if !math.IsNaN(f.LowCornerHz) || !math.IsNaN(f.HighCornerHz) {
		t.Errorf("corners of a flat response at %g and %g Hz, want NaN", f.LowCornerHz, f.HighCornerHz)
	}
}

func TestResponseOfSteadyTones(t *testing.T) {
	tones := func(freqsHz ...float64) (points []analysis.ResponsePoint) {
		for _, f := range freqsHz {
			points = append(points, analysis.ResponsePoint{FreqHz: f, LowHz: f, HighHz: f, LossDB: 20, StandardUDB: 0.002})
		}
		return points
	}
	for _, c := range []struct {
		points       []analysis.ResponsePoint
		fromHz, toHz float64
		want         Verdict
	}{
		{tones(100, 1000, 10000), 100, 10000, Pass},
		{tones(100, 1000, 10000), 20, 20000, Unproven},
		{tones(20, 100, 1000, 10000, 20000), 20, 20000, Pass},
		{tones(20, 1000, 20000), 20, 20000, Unproven},
		{tones(20, 100, 1000, 10000), 20, 20000, Unproven},
	} {
		k := responseCase(c.points, 0.2)
		k.ToneHz, k.FromHz, k.ToHz = 1000, c.fromHz, c.toHz
		if f := judgedResponse(t, k); f.Verdict != c.want {
			t.Errorf("%d tones, %g to %g Hz: %s %s, want %s", len(c.points), c.fromHz, c.toHz, f.Verdict, f.Reason, c.want)
		}
	}
}

// The mean amplitude over a band, against a fine sum.
func TestBandLoss(t *testing.T) {
	curve := lowpassDB(3, 2000)
	p := analysis.ResponsePoint{FreqHz: 5000, LowHz: 3000, HighHz: 8000}
	sum := 0.0
	const n = 100000
	for i := range n {
		sum += math.Pow(10, -curve(3000*math.Pow(8./3, (float64(i)+0.5)/n))/20) / n
	}
	if got, want := bandLossDB(curve, p), -20*math.Log10(sum); math.Abs(got-want) > 0.002 {
		t.Errorf("bandLossDB = %.5f, want %.5f", got, want)
	}
}

func TestResponseUnderShared(t *testing.T) {
	k := responseCase(response(level(20), 0.01, 1), 0.2)
	k.Rule = Shared
	if f := judgedResponse(t, k); f.Verdict != Pass {
		t.Errorf("flat: %s %s, want PASS", f.Verdict, f.Reason)
	}
	k.Points[3].LossDB = 20.25
	if f := judgedResponse(t, k); f.Verdict != Fail {
		t.Errorf("one point past its limit: %s %s, want FAIL", f.Verdict, f.Reason)
	}
}

func TestResponseRefusesABudgetThatIsNone(t *testing.T) {
	k := responseCase(response(level(20), 0.01, 1), 0.2)
	k.Points[5].StandardUDB = math.NaN()
	if _, err := JudgeResponse(k); err == nil {
		t.Error("a standard uncertainty of NaN: no error")
	}
}
