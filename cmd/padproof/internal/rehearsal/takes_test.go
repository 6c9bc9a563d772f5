package rehearsal

import (
	"math"
	"math/cmplx"
	"slices"
	"strings"
	"testing"

	"padproof/compare/network"
)

// everything is a plan of which each role can be made.
func everything(t *testing.T) Plan {
	p := plan(balancedPad(t))
	p.Bench = Bench{
		Ends:        network.Ends{SourceOhms: 100, LoadOhms: 10000},
		AfterGainDB: 3, OffsetDB: 0.25, AgainDB: -0.125, ChannelDB: 0.5, OutputsDB: 0.25,
		LegsLoadOhms: 5000, LoadedOhms: 600, BypassOhms: 2, CalibrationVolts: 0.775, FullScaleDBu: 18,
		Noise: NoiseBench{FullScaleDBu: -32, InputDBu: math.Inf(-1), TempC: 16.85, PlugOhms: 150, PadPlugOhms: 100},
	}
	p.Takes, _ = p.AllTakes()
	return p
}

// balancedPad is a U whose legs differ.
func balancedPad(t *testing.T) *network.Circuit {
	t.Helper()
	c, err := network.New("U", []network.Part{{Ref: "R1", Value: 560}, {Ref: "R2", Value: 470}, {Ref: "R3", Value: 330}})
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// uLegs solves a U between a balanced drive of 1 V and a load on each leg, by Kirchhoff's current law
// at both output legs: (±1/2 - V)/(Rs/2 + R) = V/Rl + (V - other)/R3.
func uLegs(sourceOhms, r1, r2, r3, legOhms float64) (hot, cold float64) {
	gh, gc, g3, gl := 1/(sourceOhms/2+r1), 1/(sourceOhms/2+r2), 1/r3, 1/legOhms
	a, d := gh+g3+gl, gc+g3+gl
	det := a*d - g3*g3
	return (gh/2*d - gc/2*g3) / det, (-gc/2*a + gh/2*g3) / det
}

// The level of each role, from closed forms.
func TestLevelsOfRoles(t *testing.T) {
	db := func(ratio float64) float64 { return 20 * math.Log10(math.Abs(ratio)) }
	full := 10000.0 / 10100 // the load's part of the EMF, straight through: it reads -6 dBFS
	beside := 1 / (1/10000.0 + 1/600.0)
	hot, cold := uLegs(100, 560, 470, 330, 5000)
	loss := db(full / (hot - cold)) // the legs loaded by half the load each are the balanced load
	p := everything(t)
	p.RateHz = 8000
	for _, tc := range []struct {
		role   string
		freqHz float64
		want   []float64
	}{
		{"before", 997, []float64{-6}},
		{"before-again", 997, []float64{-6 - 0.125}},
		{"after", 997, []float64{-6 - loss + 3.25}},
		{"after-again", 997, []float64{-6 - loss + 3.25}},
		{"flex", 997, []float64{-6 - loss + 3.25}},
		{"before-loaded", 997, []float64{-6 + db(beside/(100+beside)/full)}},
		{"bypass", 997, []float64{-6 + db(10000.0/10104/full) + 3.25}},
		{"calibration", 200, []float64{db(0.775/math.Sqrt(0.6)) - 18}},
		{"legs-before", 997, []float64{-6 + db(0.5), -6 + db(0.5) + 0.5}},
		{"legs", 997, []float64{-6 + db(hot/full) + 3.25, -6 + db(cold/full) + 3.25 + 0.5}},
		{"both", 997, []float64{-6, -6 - loss + 3.25 + 0.75}},
	} {
		frames := recorded(t, p, tc.role)
		for c, want := range tc.want {
			got := levelDBFS(everyNth(frames, c, len(tc.want)), tc.freqHz, p.RateHz)
			const tol = 1e-5
			if math.Abs(got-want) > tol {
				t.Errorf("%s, channel %d = %.6f dBFS, want %.6f ± %g", tc.role, c+1, got, want, tol)
			}
		}
	}
}

// Straight through, a known resistor across an unbalanced input is a plain divider too.
func TestBeforeLoadedUnbalanced(t *testing.T) {
	p := plan(pad(t))
	p.Bench.LoadedOhms, p.Takes = 600, []string{"before-loaded"}
	beside := 1 / (1/10000.0 + 1/600.0)
	want := -6 + 20*math.Log10(beside/(100+beside)*10100/10000)
	if got := levelDBFS(recorded(t, p, "before-loaded"), 997, p.RateHz); math.Abs(got-want) > 1e-5 {
		t.Errorf("before-loaded = %.6f dBFS, want %.6f ± 1e-5", got, want)
	}
}

// everyNth takes one channel out of frames.
func everyNth(frames []float64, channel, channels int) (samples []float64) {
	for i := channel; i < len(frames); i += channels {
		samples = append(samples, frames[i])
	}
	return samples
}

// Cold is the reverse of hot, and their difference what a balanced load reads.
func TestLegsKeepTheirPhases(t *testing.T) {
	p := everything(t)
	p.Bench.ChannelDB = 0
	legs, after := recorded(t, p, "legs"), recorded(t, p, "after")
	hot, cold := everyNth(legs, 0, 2), everyNth(legs, 1, 2)
	for i, x := range after {
		if math.Abs(hot[i]-cold[i]-x) > 1e-9 {
			t.Fatalf("frame %d: hot - cold = %v, want %v as after", i, hot[i]-cold[i], x)
		}
	}
	between := cmplx.Phase(dft(hot[p.RateHz:2*p.RateHz], 997, 48000) / dft(cold[p.RateHz:2*p.RateHz], 997, 48000))
	if math.Abs(math.Abs(between)-math.Pi) > 1e-6 {
		t.Errorf("hot against cold = %v rad, want ± π", between)
	}
}

// Two channels of one take have noise of their own, and so have two takes.
func TestNoiseOfChannelsDiffers(t *testing.T) {
	p := everything(t)
	p.NoiseDBFS, p.Signal.Sec = -60, 0.1
	legs := recorded(t, p, "legs-before")
	again := recorded(t, p, "legs-before")
	alike := 0
	for i := 0; i+1 < 20000; i += 2 {
		if legs[i] == legs[i+1] {
			alike++
		}
	}
	if alike > 10 || !slices.Equal(legs, again) {
		t.Errorf("%d of 10000 samples of silence are alike in both channels, the same plan twice alike: %v", alike, slices.Equal(legs, again))
	}
}

func TestHum(t *testing.T) {
	for mainsHz, wantHz := range map[float64]float64{0: 50, 60: 60} {
		p := everything(t)
		p.HumDBFS, p.Bench.MainsHz, p.RateHz = -80, mainsHz, 8000
		for _, role := range []string{"before", "after"} {
			samples := recorded(t, p, role)
			for n := 1.0; n <= 10; n++ {
				want := -80 - 20*math.Log10(n*n)
				if got := levelDBFS(samples, n*wantHz, p.RateHz); math.Abs(got-want) > 0.01 {
					t.Errorf("%s, mains %v Hz: line %v = %.3f dBFS, want %.3f ± 0.01", role, mainsHz, n, got, want)
				}
			}
		}
	}
}

// A recorder that runs fast counts more samples in each turn.
func TestDriftOfTheClocks(t *testing.T) {
	for _, ppm := range []float64{150, -150} {
		p := everything(t)
		p.DriftPPM, p.Signal.Sec, p.RateHz, p.HumDBFS = ppm, 20, 8000, -20
		samples := recorded(t, p, "before")
		if want := 21 * 8000 * (1 + ppm*1e-6); math.Abs(float64(len(samples))-want) > 2 {
			t.Errorf("%v ppm: %d samples, want %.0f ± 2", ppm, len(samples), want)
		}
		// The phases of tone and hum from second 1 to second 19 of the recorder's clock, by their
		// frequencies there.
		for _, freqHz := range []float64{997, 50} {
			phase := func(at int) float64 { return cmplx.Phase(dft(samples[at:at+8000], freqHz, 8000)) }
			turned := phase(19*8000) - phase(8000)
			want := 2 * math.Pi * freqHz * 18 * (1/(1+ppm*1e-6) - 1)
			if off := math.Remainder(turned-want, 2*math.Pi); math.Abs(off) > 5e-3 { // each leaks into the other a little
				t.Errorf("%v ppm: %v Hz turned by %.4f rad too much, want 0 ± 0.005", ppm, freqHz, off)
			}
		}
		p.Signal = Signal{Test: true}
		if got, want := len(recorded(t, p, "before")), 23.5*8000*(1+ppm*1e-6); math.Abs(float64(got)-want) > 2 {
			t.Errorf("%v ppm: %d samples of the test signal, want %.0f ± 2", ppm, got, want)
		}
	}
}

func TestFlexEvents(t *testing.T) {
	p := everything(t)
	p.Signal.Sec, p.Flex = 4, []string{"dropout", "step", "crackle"}
	samples, at := recorded(t, p, "flex"), p.FlexSec()
	if want := []float64{1.5, 2.5, 3.5}; !slices.Equal(at, want) {
		t.Fatalf("FlexSec() = %v, want %v", at, want)
	}
	rms := func(fromSec, toSec float64) float64 {
		sum := 0.0
		part := samples[int(fromSec*48000):int(toSec*48000)]
		for _, x := range part {
			sum += x * x
		}
		return math.Sqrt(sum / float64(len(part)))
	}
	usual := rms(1, 1.4)
	for _, tc := range []struct{ from, to, least, most float64 }{
		{1.501, 1.549, 0, 1e-12},     // dropout of 50 ms
		{1.551, 2.49, 0.99, 1.01},    // and over
		{2.51, 2.99, 0.9435, 0.9447}, // step: 10^(-0.5/20) = 0.9441
		{3.01, 3.49, 0.99, 1.01},     // back
		{3.501, 3.699, 0.98, 0.997},  // crackle: a fiftieth at less
		{3.701, 4.4, 0.99, 1.01},     //
	} {
		if got := rms(tc.from, tc.to) / usual; !(got >= tc.least && got <= tc.most) {
			t.Errorf("level from %v s to %v s = %.4f of the usual, want %v to %v", tc.from, tc.to, got, tc.least, tc.most)
		}
	}
}

func TestAllTakes(t *testing.T) {
	p := everything(t)
	takes, left := p.AllTakes()
	if len(takes) != len(Takes())-1 || slices.Contains(takes, "both") || left != nil {
		t.Errorf("AllTakes() = %q, left out %q", takes, left)
	}
	p = plan(pad(t))
	p.Bench.FullScaleDBu, p.Bench.Noise.FullScaleDBu = math.NaN(), math.NaN()
	takes, left = p.AllTakes()
	if want := []string{"before", "after", "after-again", "before-again", "bypass", "flex"}; !slices.Equal(takes, want) {
		t.Errorf("AllTakes() of a rig of which little is known = %q, want %q", takes, want)
	}
	text := strings.Join(left, "; ")
	for _, word := range []string{"loaded_ohms", "calibration_volts", "noise_full_scale_dbu", "balanced network"} {
		if !strings.Contains(text, word) {
			t.Errorf("left out: %q, want a word of %s", text, word)
		}
	}
}

func TestCheckOfTakes(t *testing.T) {
	for word, change := range map[string]func(*Plan){
		"no take to make":                                   func(p *Plan) { p.Takes = nil },
		"\"befour\" is no take; known are":                  func(p *Plan) { p.Takes = []string{"befour"} },
		"named twice":                                       func(p *Plan) { p.Takes = []string{"before", "after", "before"} },
		"loaded_ohms":                                       func(p *Plan) { p.Bench.LoadedOhms = 0 },
		"calibration_volts":                                 func(p *Plan) { p.Bench.FullScaleDBu = math.NaN() },
		"noise_full_scale_dbu":                              func(p *Plan) { p.Bench.Noise.FullScaleDBu = math.NaN() },
		"in place of before and after":                      func(p *Plan) { p.Takes = []string{"both", "after"} },
		"noise take lasts":                                  func(p *Plan) { p.NoiseSec = 0 },
		"input's noise":                                     func(p *Plan) { p.Bench.Noise.InputDBu = math.NaN() },
		"above its thermal noise":                           func(p *Plan) { p.Bench.Noise.OverThermalDB = -1 },
		"contacts of a bypass":                              func(p *Plan) { p.Bench.BypassOhms = math.Inf(1) },
		"not among the takes":                               func(p *Plan) { p.Takes, p.Flex = []string{"before", "after"}, []string{"step"} },
		"\"jolt\" is no event of flex":                      func(p *Plan) { p.Flex = []string{"jolt"} },
		"\"fib\" is no lie; known are clipped, gain-riding": func(p *Plan) { p.Lies = []string{"fib"} },
		"one-channel shows in legs":                         func(p *Plan) { p.Takes, p.Lies = []string{"before", "after"}, []string{"one-channel"} },
		"swapped shows in after":                            func(p *Plan) { p.Takes, p.Lies = []string{"after"}, []string{"swapped"} },
		"bad-samples":                                       func(p *Plan) { p.Float, p.Bits, p.Lies = false, 24, []string{"bad-samples"} },
		"too-weak":                                          func(p *Plan) { p.Signal.Test, p.Lies = true, []string{"too-weak"} },
	} {
		p := everything(t)
		change(&p)
		if err := p.Check(); err == nil || !strings.Contains(err.Error(), word) {
			t.Errorf("Check() = %v, want an error with %q", err, word)
		}
	}
	if err := everything(t).Check(); err != nil {
		t.Errorf("Check() of all takes: %v", err)
	}
}
