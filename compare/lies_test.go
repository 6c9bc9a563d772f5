package compare

import (
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"padproof/analysis"
)

// problemsOf are those that one take shows by itself.
func problemsOf(t *testing.T, r *recording, moved bool) []Problem {
	t.Helper()
	m, tone, s := measured(t, r)
	var all []Problem
	if p, ok := ClippedProblem(m.CutPeaks(tone), m.PeakDBFS); ok {
		all = append(all, p)
	}
	all = append(all, DropoutProblems(s, moved)...)
	if !moved {
		all = append(all, SteppedProblems(s)...)
	}
	return all
}

// limited cuts at a level, in parts of full scale.
func limited(to float64) func(_, x float64) float64 {
	return func(_, x float64) float64 { return math.Max(-to, math.Min(to, x)) }
}

func TestTakeProblems(t *testing.T) {
	loud := func(levelDBFS float64) *recording { return record(toneHz, levelDBFS, 0.3, 4).noise(-95, 3) }
	sound := func() *recording { return loud(-10) }
	const at = 2.0
	tests := []struct {
		name  string
		take  *recording
		moved bool
		want  string // name of the one problem; "" for none
		text  string
	}{
		{"sound", sound(), false, "", ""},
		{"clipped at full scale", loud(2).each(limited(1)), false, Clipped, "1000 peaks"},
		{"flat tops below", loud(-10).each(limited(0.29)), false, Clipped, "cut off"},
		{"flat tops under noise", loud(-10).each(limited(0.29)).noise(-78, 2), false, Clipped, "flat"},
		{"clicks beside the tone", sound().each(func(sec, x float64) float64 {
			if sec > 0.1 && sec < 0.1003 || sec > 4.3 && sec < 4.3004 {
				return 1
			}
			return x
		}), false, "", ""},
		{"buffer lost", sound().lose(256, at), false, Dropout, "samples were lost"},
		{"buffer lost while moved", sound().lose(256, at), true, Dropout, "samples were lost"},
		{"millisecond lost", sound().lose(48, at), false, Dropout, "samples were lost"},
		{"buffer silent", sound().each(scaledFrom(-300, at, at+0.0107)), false, Dropout, "lost buffer or a loose contact"},
		{"contact lost while moved", sound().each(scaledFrom(-300, at, at+0.3)), true, "", ""},
		{"gain moved within", sound().each(scaledFrom(0.3, at, 9)), false, GainMoved, "+0.30 dB at 2.0"},
		{"hardly moved", sound().each(scaledFrom(0.08, at, 9)), false, "", ""},
	}
	for _, tt := range tests {
		got := problemsOf(t, tt.take, tt.moved)
		switch {
		case tt.want == "" && len(got) > 0:
			t.Errorf("%s: %+v, want no problem", tt.name, got)
		case tt.want != "" && (len(got) != 1 || got[0].Name != tt.want || !strings.Contains(got[0].Text, tt.text)):
			t.Errorf("%s: %+v, want %s (%s)", tt.name, got, tt.want, tt.text)
		}
	}
}

// Two hundred sound but ordinary takes: hum 40 dB under the tone, an oscillator that drifts by
// 0.1 dB and 50 ppm a minute, noise as of a telephone, 16 bit, 44.1 kHz. None shows a problem, by
// itself or against its repeat.
func TestOrdinaryTakesShowNoProblem(t *testing.T) {
	random := rand.New(rand.NewPCG(41, 7))
	for pair := range 100 {
		rateHz := []float64{44100, 48000}[pair%2]
		levelDBFS := -3 - 25*random.Float64()
		var sides []Side
		for take := range 2 {
			r := ordinaryTake(rateHz, 997+3*float64(pair%2), levelDBFS, random, pair%3 == 0, pair%4 == 0)
			m, tone, s := measured(t, r)
			sides = append(sides, Side{SHA256: string(rune('a' + take)), Frames: r.Frames(), Tone: tone})
			problems := append(DropoutProblems(s, false), SteppedProblems(s)...)
			if p, ok := ClippedProblem(m.CutPeaks(tone), m.PeakDBFS); ok {
				problems = append(problems, p)
			}
			if len(problems) > 0 {
				t.Errorf("pair %d: %+v", pair, problems)
			}
			f, err := JudgeSteadiness(SteadyCase{After: &s, Limit: AtMost(0.05)})
			if err != nil || f.Verdict != Pass {
				t.Errorf("pair %d: steadiness %s, %.4f ± %.4f dB (%s), %v", pair, f.Verdict, f.Measured, f.UDB, f.Reason, err)
			}
		}
		if p := AgainProblems(sides[0], sides[1]); len(p) > 0 {
			t.Errorf("pair %d: %+v", pair, p)
		}
		if p := LegsProblems(2, sides[0].Tone, sides[1].Tone, false, false); len(p) > 0 {
			t.Errorf("pair %d: %+v", pair, p)
		}
	}
}

func ordinaryTake(rateHz, freqHz, levelDBFS float64, random *rand.Rand, hum, coarse bool) *recording {
	const sec = 2.0
	r := &recording{rateHz, make([]float64, int(rateHz*sec))}
	peak, phase := math.Pow(10, levelDBFS/20), 2*math.Pi*random.Float64()
	driftDB, driftParts := 0.1*(2*random.Float64()-1), 50e-6*(2*random.Float64()-1)
	noise := peak * 0.01 / math.Sqrt2 * math.Pow(10, -random.Float64()) // 40 to 60 dB under the tone
	from, to := int(0.15*rateHz), len(r.x)-int((0.1+0.1*random.Float64())*rateHz)
	for n := range r.x {
		minutes := float64(n) / rateHz / 60
		x := noise * random.NormFloat64()
		if n >= from && n < to {
			x += peak * (1 + driftDB*minutes*math.Ln10/20) * math.Cos(phase)
		}
		phase += 2 * math.Pi * freqHz * (1 + driftParts*minutes) / rateHz
		if hum {
			x += 0.01 * peak * math.Sin(2*math.Pi*50*float64(n)/rateHz)
		}
		if coarse {
			x = math.Round(x*32767) / 32768
		}
		r.x[n] = x
	}
	return r
}

// Automatic gain that takes a twentieth of the step and more is named, 0.04 dB is not.
func TestGainRiding(t *testing.T) {
	for _, tt := range []struct {
		stepDB float64
		want   bool
	}{{10, false}, {10.04, false}, {9.96, false}, {9.5, true}, {10.2, true}, {2, true}, {0, true}} {
		r := record(toneHz, -10, 0, 6).each(scaledFrom(-tt.stepDB, 4.2, 9)).noise(-75, 4)
		m, _, _ := measured(t, r)
		tone := m.Tones[0]
		loud, loudErr, _ := analysis.LevelBetween(&m.Track, tone, 3.7, 4.2)
		low, lowErr, _ := analysis.LevelBetween(&m.Track, tone, 5.7, 6.2)
		s, err := ReadStep(loud, loudErr, low, lowErr, 0.01)
		if err != nil {
			t.Fatal(err)
		}
		within(t, "step", s.DB, tt.stepDB, s.UDB)
		p, ok := GainRidingProblem(s)
		if ok != tt.want || ok && p.Name != GainRiding {
			t.Errorf("step of %g dB: %+v, %v, want gain-riding %v", tt.stepDB, p, ok, tt.want)
		}
	}
}

func TestAgainProblems(t *testing.T) {
	before := Side{SHA256: "a", Frames: 100, Tone: steady(-6, 0.001)}
	other := func(change func(*Side)) Side {
		s := Side{SHA256: "b", Frames: 101, Tone: steady(-6.01, 0.0011)}
		change(&s)
		return s
	}
	tests := []struct {
		name  string
		again Side
		want  string
	}{
		{"sound", other(func(*Side) {}), ""},
		{"0.09 dB", other(func(s *Side) { s.Tone.LevelDBFS = -6.09 }), ""},
		{"0.12 dB", other(func(s *Side) { s.Tone.LevelDBFS = -6.12 }), GainMoved},
		{"0.12 dB up", other(func(s *Side) { s.Tone.LevelDBFS = -5.88 }), GainMoved},
		{"0.12 dB, and U 0.1", other(func(s *Side) { s.Tone.LevelDBFS, s.Tone.StdErrDB = -6.12, 0.05 }), ""},
		{"another tone", other(func(s *Side) { s.Tone.FreqHz = 1020 }), FrequencyDiffers},
		{"the same file", other(func(s *Side) { s.SHA256 = "a" }), SameRecording},
		{"a copy of it", other(func(s *Side) { s.Frames, s.Tone = 100, before.Tone }), SameRecording},
	}
	for _, tt := range tests {
		got := AgainProblems(before, tt.again)
		if tt.want == "" && len(got) > 0 || tt.want != "" && (len(got) != 1 || got[0].Name != tt.want) {
			t.Errorf("%s: %+v, want %q", tt.name, got, tt.want)
		}
	}
}

func TestLegsProblems(t *testing.T) {
	hot, cold := steady(-20, 0.001), steady(-20.003, 0.0012)
	turned := hot
	turned.PhaseRad += math.Pi
	for name, tt := range map[string]struct {
		channels         int
		hot, cold        analysis.Tone
		quietHot, quietC bool
		want             bool
	}{
		"two legs":             {2, hot, cold, false, false, false},
		"cold dead, noise":     {2, hot, analysis.Tone{}, false, false, false},
		"both without a tone":  {2, analysis.Tone{}, analysis.Tone{}, false, false, false},
		"one channel":          {1, hot, hot, false, false, true},
		"mono in two channels": {2, hot, hot, false, false, true},
		"mono, turned over":    {2, hot, turned, false, false, true},
		"cold silent":          {2, hot, analysis.Tone{}, false, true, true},
		"all silent":           {2, analysis.Tone{}, analysis.Tone{}, true, true, true},
	} {
		got := LegsProblems(tt.channels, tt.hot, tt.cold, tt.quietHot, tt.quietC)
		if (len(got) == 1) != tt.want || tt.want && got[0].Name != OneChannel {
			t.Errorf("%s: %+v, want one-channel %v", name, got, tt.want)
		}
	}
	if !Voids(OneChannel, "legs") || Voids(OneChannel, "loss") {
		t.Error("one-channel must void legs and nothing else")
	}
}
