package rehearsal

import (
	"errors"
	"io"
	"math"
	"math/cmplx"
	"path/filepath"
	"strings"
	"testing"

	"padproof/analysis"
	"padproof/capture"
	"padproof/compare/network"
)

// bench is the Saltmarsh workbench, unbalanced and without a cable.
var bench = Bench{Ends: network.Ends{
	SourceOhms: 100, Drive: network.DriveUnbalanced, LoadOhms: 10000, Sense: network.SenseUnbalanced,
}}

// pad makes an L pad of 680 and 150 Ω with more parts.
func pad(t *testing.T, more ...network.Part) *network.Circuit {
	t.Helper()
	c, err := network.New("L", append([]network.Part{
		{Ref: "R1", Value: 680, TolFrac: 0.01}, {Ref: "R2", Value: 150, TolFrac: 0.01},
	}, more...))
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// lPadLossDB is the closed form for an L pad between resistances: the source and R1 over R2
// beside the load, against the source over the load.
func lPadLossDB(sourceOhms, r1, r2, loadOhms float64) float64 {
	beside := r2 * loadOhms / (r2 + loadOhms)
	return 20 * math.Log10(loadOhms/(sourceOhms+loadOhms)*(sourceOhms+r1+beside)/beside)
}

// plan is a steady tone without noise in floats.
func plan(c *network.Circuit) Plan {
	return Plan{
		Pad: c, Bench: bench, Signal: Signal{ToneHz: 997, Sec: 2}, LevelDBFS: -6,
		NoiseDBFS: math.Inf(-1), HumDBFS: math.Inf(-1), Seed: 1, RateHz: 48000, Bits: 32, Float: true,
		Takes: []string{"before", "after"}, NoiseSec: 1,
	}
}

// staged sets up one take.
func staged(t *testing.T, p Plan, role string) scene {
	t.Helper()
	r, err := p.recipe(p.madeAs(role))
	if err != nil {
		t.Fatal(err)
	}
	s, err := p.scene(r)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// recorded plays one take of a plan without a file; two channels are interleaved.
func recorded(t *testing.T, p Plan, role string) (all []float64) {
	t.Helper()
	if err := staged(t, p, role).play(func(b []float64) error { all = append(all, b...); return nil }); err != nil {
		t.Fatal(err)
	}
	return all
}

// written records a plan into a fresh folder and reads one take back.
func written(t *testing.T, p Plan, name string) ([]float64, capture.Facts) {
	t.Helper()
	folder := filepath.Join(t.TempDir(), "0417")
	if _, err := p.Record(t.Context(), folder, sheets(t)); err != nil {
		t.Fatal(err)
	}
	take, err := capture.Open(filepath.Join(folder, name))
	if err != nil {
		t.Fatal(err)
	}
	defer take.Close()
	samples := make([]float64, take.Facts().Frames)
	if n, err := take.Channel(1).ReadAt(samples, 0); n != len(samples) && err != io.EOF {
		t.Fatalf("read %d of %d samples: %v", n, len(samples), err)
	}
	return samples, take.Facts()
}

// levelDBFS is the level of a tone over the second that begins one second into the take:
// whole turns of any whole frequency, so that the transform gives it exactly.
func levelDBFS(samples []float64, freqHz float64, rateHz int) float64 {
	part := samples[rateHz : 2*rateHz]
	return 20 * math.Log10(cmplx.Abs(dft(part, freqHz, float64(rateHz)))*2/float64(len(part)))
}

func TestSteadyToneHasTheLossOfTheClosedForm(t *testing.T) {
	raised := bench
	raised.AfterGainDB, raised.OffsetDB = 10, -0.03
	for name, tc := range map[string]struct {
		change func(*Plan)
		lossDB float64
		tol    float64
	}{
		"float":      {func(p *Plan) {}, lPadLossDB(100, 680, 150, 10000), 1e-6},
		"24 bits":    {func(p *Plan) { p.Float, p.Bits = false, 24 }, lPadLossDB(100, 680, 150, 10000), 2e-5},
		"16 bits":    {func(p *Plan) { p.Float, p.Bits = false, 16 }, lPadLossDB(100, 680, 150, 10000), 0.005},
		"44.1 kHz":   {func(p *Plan) { p.RateHz = 44100 }, lPadLossDB(100, 680, 150, 10000), 1e-6},
		"60 Hz":      {func(p *Plan) { p.Signal.ToneHz = 60 }, lPadLossDB(100, 680, 150, 10000), 1e-6},
		"20 kHz":     {func(p *Plan) { p.Signal.ToneHz = 20000 }, lPadLossDB(100, 680, 150, 10000), 1e-6},
		"gain":       {func(p *Plan) { p.Bench = raised }, lPadLossDB(100, 680, 150, 10000) - 10 + 0.03, 1e-6},
		"R2 is 1500": {func(p *Plan) { p.Pad = p.Pad.With("R2", 1500) }, lPadLossDB(100, 680, 1500, 10000), 1e-6},
		"another bench": {func(p *Plan) { p.Bench.Ends.SourceOhms, p.Bench.Ends.LoadOhms = 600, 600 },
			lPadLossDB(600, 680, 150, 600), 1e-6},
	} {
		p := plan(pad(t))
		tc.change(&p)
		before, _ := written(t, p, "before.wav")
		after, _ := written(t, p, "after.wav")
		b, a := levelDBFS(before, p.Signal.ToneHz, p.RateHz), levelDBFS(after, p.Signal.ToneHz, p.RateHz)
		if math.Abs(b-p.LevelDBFS) > tc.tol {
			t.Errorf("%s: before = %.7f dBFS, want %.7f ± %g", name, b, p.LevelDBFS, tc.tol)
		}
		if math.Abs(b-a-tc.lossDB) > tc.tol {
			t.Errorf("%s: loss = %.7f dB, want %.7f ± %g", name, b-a, tc.lossDB, tc.tol)
		}
		if want := 3 * p.RateHz; len(before) != want || len(after) != want {
			t.Errorf("%s: %d and %d samples, want %d", name, len(before), len(after), want)
		}
		if got := p.RecordedLossDB(); math.Abs(got-p.Bench.AfterGainDB-tc.lossDB) > 1e-9 {
			t.Errorf("%s: RecordedLossDB() = %.9f, want %.9f", name, got, tc.lossDB+p.Bench.AfterGainDB)
		}
	}
}

// The whole take has the transform of the pad's transfer times that of the other, at any
// frequency, since both begin and end in silence.
func TestTestSignalHasTheResponseOfTheModel(t *testing.T) {
	cable := bench
	cable.Ends.CableFarads = 2e-9
	crossed, err := network.New("custom", []network.Part{
		{Ref: "R1", Value: 560, A: "in.hot", B: "out.cold"},
		{Ref: "R2", Value: 560, A: "in.cold", B: "out.hot"},
		{Ref: "R3", Value: 330, A: "out.hot", B: "out.cold"},
	})
	if err != nil {
		t.Fatal(err)
	}
	balanced := bench
	balanced.Ends.Drive, balanced.Ends.Sense = network.DriveBalanced, network.SenseBalanced
	if real(crossed.Transfer(balanced.Ends, 997)) >= 0 {
		t.Fatal("the crossed pad does not turn the polarity over")
	}
	for name, tc := range map[string]struct {
		pad    *network.Circuit
		bench  Bench
		rateHz int
	}{
		"cable":     {pad(t), cable, 48000},
		"low-pass":  {pad(t, network.Part{Ref: "C1", Kind: network.Capacitor, Value: 220e-9, A: "out.hot", B: "screen"}), bench, 44100},
		"high-pass": {highPass(t), bench, 48000},
		"crossed":   {crossed, balanced, 48000},
	} {
		p := plan(tc.pad)
		p.Bench, p.Signal, p.RateHz = tc.bench, Signal{Test: true}, tc.rateHz
		before, after := recorded(t, p, "before"), recorded(t, p, "after")
		for _, freqHz := range []float64{20, 997, 6310, math.Min(20000, keptToFrac*float64(tc.rateHz))} {
			got := dft(after, freqHz, float64(tc.rateHz)) / dft(before, freqHz, float64(tc.rateHz))
			want := p.Pad.LossDB(p.Bench.Ends, freqHz)
			const tol = 1e-4 // dB, ten times closer than asked
			if lossDB := -20 * math.Log10(cmplx.Abs(got)); math.Abs(lossDB-want) > tol {
				t.Errorf("%s: loss at %g Hz = %.6f dB, want %.6f ± %g", name, freqHz, lossDB, want, tol)
			}
			turn := cmplx.Phase(got / p.Pad.Transfer(p.Bench.Ends, freqHz))
			if math.Abs(turn) > 1e-5 {
				t.Errorf("%s: phase at %g Hz off by %.7f rad, want 0 ± 1e-5", name, freqHz, turn)
			}
		}
	}
}

// highPass is a pad with 2.2 µF in series, its corner near 78 Hz.
func highPass(t *testing.T) *network.Circuit {
	c, err := network.New("custom", []network.Part{
		{Ref: "C1", Kind: network.Capacitor, Value: 2.2e-6, A: "in.hot", B: "mid"},
		{Ref: "R1", Value: 680, A: "mid", B: "out.hot"},
		{Ref: "R2", Value: 150, A: "out.hot", B: "screen"},
	})
	if err != nil {
		t.Fatal(err)
	}
	return c
}

func TestTestSignalLevel(t *testing.T) {
	p := plan(pad(t))
	p.Signal, p.LevelDBFS = Signal{Test: true}, -20
	before := recorded(t, p, "before")
	// From 3 to 4 s the tone stands at its first level, see the schedule.
	if got := levelDBFS(before[2*p.RateHz:], analysis.ToneHz, p.RateHz); math.Abs(got+20) > 1e-6 {
		t.Errorf("first tone of before = %.7f dBFS, want -20 ± 1e-6", got)
	}
}

func TestNoiseLevel(t *testing.T) {
	for _, rateHz := range []int{8000, 48000, 192000} {
		p := plan(pad(t).With("R1", math.Inf(1)))
		p.NoiseDBFS, p.RateHz = -40, rateHz
		after := recorded(t, p, "after")
		sum := 0.0
		for _, x := range after {
			sum += x * x
		}
		// White: the part from 20 Hz to 20 kHz, or to half the rate, of all.
		half := float64(rateHz) / 2
		inBand := sum / float64(len(after)) * (math.Min(20000, half) - 20) / half
		got := 10 * math.Log10(2*inBand)
		// The level of N samples scatters by 8.686/√(2N) dB: 0.06 dB for the shortest take.
		if math.Abs(got+40) > 0.2 {
			t.Errorf("noise at %d Hz = %.3f dBFS, want -40 ± 0.2", rateHz, got)
		}
		if got := p.RecordedLossDB(); !math.IsInf(got, 1) {
			t.Errorf("RecordedLossDB() of an open pad = %v, want +Inf", got)
		}
	}
}

// Two of the same plan are alike to the last bit; seeds and roles differ.
func TestTakesRepeat(t *testing.T) {
	p := plan(pad(t))
	p.NoiseDBFS, p.Float, p.Bits = -90, false, 24
	once, _ := written(t, p, "after.wav")
	again, _ := written(t, p, "after.wav")
	p.Seed = 2
	other, _ := written(t, p, "after.wav")
	before := recorded(t, p, "before")[:1000]
	after := recorded(t, p, "after")[:1000]
	differ := func(a, b []float64) (n int) {
		for i := range a {
			if a[i] != b[i] {
				n++
			}
		}
		return n
	}
	if n := differ(once, again); n != 0 {
		t.Errorf("%d samples differ between two of the same plan", n)
	}
	if n := differ(once, other); n < len(once)/2 {
		t.Errorf("only %d of %d samples differ between two seeds", n, len(once))
	}
	if n := differ(before, after); n < 900 {
		t.Errorf("only %d of 1000 samples of noise differ between before and after", n)
	}
}

// Silence is rounding alone in floats, dithered in integers: -1, 0 and 1 with an eighth, three quarters
// and an eighth of chance (triangular dither of two steps, rounded).
func TestSilence(t *testing.T) {
	p := plan(pad(t))
	for _, x := range recorded(t, p, "before")[:20000] {
		if math.Abs(x) > 1e-15 {
			t.Fatalf("silence in floats holds %v", x)
		}
	}
	p.Float, p.Bits = false, 16
	samples, _ := written(t, p, "before.wav")
	counts := map[float64]int{}
	for _, x := range samples[:20000] {
		counts[x*(1<<15)]++
	}
	for code, want := range map[float64]float64{-1: 0.125, 0: 0.75, 1: 0.125} {
		if got := float64(counts[code]) / 20000; math.Abs(got-want) > 0.015 {
			t.Errorf("code %g in dithered silence: %.4f of all, want %.3f ± 0.015", code, got, want)
		}
	}
}

func TestFormatsAndMark(t *testing.T) {
	for _, tc := range []struct {
		bits     int
		float    bool
		encoding string
	}{{16, false, "integer"}, {24, false, "integer"}, {32, false, "integer"}, {32, true, "float"}} {
		p := plan(pad(t))
		p.Bits, p.Float, p.Note = tc.bits, tc.float, "seed 1, R2 open"
		for _, role := range []string{"before", "after"} {
			_, facts := written(t, p, role+".wav")
			if facts.Bits != tc.bits || facts.Encoding != tc.encoding || facts.Channels != 1 || facts.RateHz != 48000 {
				t.Errorf("%s of %d bits: %+v", role, tc.bits, facts)
			}
			want := "SIMULATED by padproof rehearse: " + role + ", seed 1, R2 open"
			if len(facts.Comments) != 1 || facts.Comments[0] != want {
				t.Errorf("%s: comments %q, want %q", role, facts.Comments, want)
			}
		}
	}
}

func TestCheckRefuses(t *testing.T) {
	for word, change := range map[string]func(*Plan){
		"no pad":      func(p *Plan) { p.Pad = nil },
		"sample rate": func(p *Plan) { p.RateHz = 4000 },
		"24 or 32":    func(p *Plan) { p.Bits = 20 },
		"float":       func(p *Plan) { p.Bits = 16 },
		"level":       func(p *Plan) { p.LevelDBFS = 1 },
		"at most 0":   func(p *Plan) { p.NoiseDBFS = math.NaN() },
		"0.45":        func(p *Plan) { p.Signal.ToneHz = 22000 },
		"lasts up to": func(p *Plan) { p.Signal.Sec = 0 },
		"load of":     func(p *Plan) { p.Bench.Ends.LoadOhms = 0 },
		"the hum":     func(p *Plan) { p.HumDBFS = 1 },
		"ppm":         func(p *Plan) { p.DriftPPM = math.NaN() },
	} {
		p := plan(pad(t))
		change(&p)
		if err := p.Check(); err == nil || !strings.Contains(err.Error(), word) {
			t.Errorf("Check() = %v, want an error with %q", err, word)
		}
	}
}

func TestPlayStopsAtAnError(t *testing.T) {
	p := plan(pad(t))
	s := staged(t, p, "before")
	full := errors.New("disk full")
	if err := s.play(func([]float64) error { return full }); !errors.Is(err, full) {
		t.Errorf("play() = %v, want %v", err, full)
	}
}

func TestDraw(t *testing.T) {
	stated := bench
	stated.Ends.CableFarads = 300e-12
	d := Doubts{SourceFrac: 0.1, LoadFrac: 0.05, CableFarads: 15e-12, DriftDB: 0.05, LinearityDB: 0.04, AfterGainDB: 0.03}
	c := pad(t)
	const units = 2000
	var sources, offsets, values float64
	for seed := range uint64(units) {
		u, b := Draw(c, stated, d, seed)
		p, _ := u.Part("R1")
		for what, off := range map[string]float64{
			"R1":     (p.Value/680 - 1) / 0.01,
			"source": (b.Ends.SourceOhms/100 - 1) / 0.1,
			"load":   (b.Ends.LoadOhms/10000 - 1) / 0.05,
			"cable":  (b.Ends.CableFarads - 300e-12) / 15e-12,
			"gain":   b.OffsetDB / 0.12,
		} {
			if !(math.Abs(off) <= 1+1e-12) {
				t.Fatalf("seed %d: %s lies %v half-widths off", seed, what, off)
			}
		}
		sources += math.Pow(b.Ends.SourceOhms/100-1, 2)
		offsets += b.OffsetDB * b.OffsetDB
		values += math.Pow(p.Value/680-1, 2)
	}
	// A rectangle's variance is a third of its half-width squared (JCGM 100, 4.3.7).
	for _, v := range []struct {
		name      string
		sum, want float64
	}{
		{"source", sources, 0.01 / 3},
		{"R1", values, 0.0001 / 3},
		{"gain", offsets, (0.05*0.05 + 0.04*0.04 + 0.03*0.03) / 3},
	} {
		if got := v.sum / units; math.Abs(got/v.want-1) > 0.1 {
			t.Errorf("variance of %s = %g, want %g ± 10 %%", v.name, got, v.want)
		}
	}
	a, x := Draw(c, stated, d, 7)
	b, y := Draw(c, stated, d, 7)
	if x != y || a.Parts()[0] != b.Parts()[0] {
		t.Error("the same seed drew two units")
	}
}
