package rehearsal

import (
	"encoding/binary"
	"math"
	"os"
	"path/filepath"
	"slices"
	"testing"

	"padproof/capture"
)

// liar is a plan of everything with one lie.
func liar(t *testing.T, word string) Plan {
	p := everything(t)
	p.Bench.AfterGainDB, p.Bench.OffsetDB, p.Bench.AgainDB, p.Bench.ChannelDB = 0, 0, 0, 0
	p.Lies = []string{word}
	if err := p.Check(); err != nil {
		t.Fatal(err)
	}
	return p
}

// honest is the same plan without it.
func honest(p Plan) Plan {
	p.Lies = nil
	return p
}

// changed returns the first and the last sample in which two takes differ; false if in none.
func changed(a, b []float64) (first, last int, ok bool) {
	first = -1
	for i := range min(len(a), len(b)) {
		if a[i] != b[i] {
			if first < 0 {
				first = i
			}
			last = i
		}
	}
	return first, last, first >= 0
}

// Each lie leaves every take alone but those that it is told in.
func TestLiesKeepToTheirTakes(t *testing.T) {
	signals := []string{"before-loaded", "before", "after", "after-again", "before-again", "bypass", "flex", "legs-before", "legs"}
	in := map[string][]string{
		"clipped": signals, "gain-riding": signals,
		"gain-moved": {"after", "after-again", "before-again", "bypass", "flex", "legs"},
		"swapped":    {"before", "after"}, "one-channel": {"legs"}, "tone-in-noise": {padNoise},
		"below-thermal": {rigNoise, padNoise}, "not-closed": nil, "cut-short": nil,
	}
	words, abouts := Lies()
	sound := map[string][]float64{}
	for i, word := range words {
		where, ok := in[word]
		if !ok {
			where = []string{"after"}
		}
		p := liar(t, word)
		p.RateHz, p.Signal.Sec, p.NoiseSec = 8000, 1, 0.2
		for _, role := range p.Takes {
			if sound[role] == nil {
				sound[role] = recorded(t, honest(p), role)
			}
			lying := recorded(t, p, role)
			_, _, differs := changed(lying, sound[role])
			differs = differs || len(lying) != len(sound[role])
			if want := slices.Contains(where, role); differs != want {
				t.Errorf("%s: %s differs: %v, want %v", word, role, differs, want)
			}
		}
		if abouts[i] == "" {
			t.Errorf("%s has no words for people", word)
		}
	}
}

// What each lie does, where a figure tells it.
func TestLies(t *testing.T) {
	level := func(p Plan, role string) float64 { return levelDBFS(recorded(t, p, role), 997, p.RateHz) }
	near := func(what string, got, want, tol float64) {
		t.Helper()
		if !(math.Abs(got-want) <= tol) {
			t.Errorf("%s = %.4f, want %.4f ± %g", what, got, want, tol)
		}
	}
	p := liar(t, "clipped")
	near("clipped: before", level(p, "before"), 3, 1e-5)
	near("clipped: loss", level(p, "before")-level(p, "after"), level(honest(p), "before")-level(honest(p), "after"), 1e-5)

	p = liar(t, "gain-moved")
	near("gain-moved: after", level(p, "after"), level(honest(p), "after")+1, 1e-5)
	near("gain-moved: before-again", level(p, "before-again"), -5, 1e-5)

	p = liar(t, "gain-riding")
	near("gain-riding: before", level(p, "before"), -6, 0.02)
	near("gain-riding: after", level(p, "after"), (level(honest(p), "after")-6)/2, 0.02)
	p.Signal = Signal{Test: true} // the step of 10 dB, each level in its last half second
	samples := recorded(t, p, "after")
	near("gain-riding: the step", meanDB(samples, 5.25, 5.75)-meanDB(samples, 7.2, 7.7), 5, 0.05)

	p = liar(t, "frequency-differs")
	p.Signal.ToneHz = 1000
	near("frequency-differs: at 1050 Hz", levelDBFS(recorded(t, p, "after"), 1050, 48000), levelDBFS(recorded(t, honest(p), "after"), 1000, 48000), 0.01)

	p = liar(t, "swapped")
	near("swapped: after", level(p, "after"), -6, 1e-5)
	near("swapped: before", level(p, "before"), level(honest(p), "after"), 1e-9)

	p = liar(t, "tone-in-noise")
	near("tone-in-noise", levelDBFS(recorded(t, withNoiseSec(p, 2), padNoise), 1000, 48000), -40, 0.01)

	p = withNoiseSec(liar(t, "below-thermal"), 2)
	for _, role := range []string{rigNoise, padNoise} {
		near("below-thermal: "+role, rmsDBu(recorded(t, p, role), 0), rmsDBu(recorded(t, honest(p), role), 0)-10, 1e-6)
	}

	p = liar(t, "too-weak") // half a dB either way, in a sine over the tone
	samples = recorded(t, p, "after")
	near("too-weak: up", meanDB(samples, 0.99, 1.01), meanDB(recorded(t, honest(p), "after"), 0.99, 1.01)+0.5, 0.01)
	near("too-weak: down", meanDB(samples, 1.99, 2.01), meanDB(recorded(t, honest(p), "after"), 1.99, 2.01)-0.5, 0.01)
}

func withNoiseSec(p Plan, sec float64) Plan {
	p.NoiseSec = sec
	return p
}

// meanDB is the mean square of a stretch at 48 kHz, in dB.
func meanDB(samples []float64, fromSec, toSec float64) float64 {
	sum := 0.0
	for _, x := range samples[int(fromSec*48000):int(toSec*48000)] {
		sum += x * x / (toSec - fromSec)
	}
	return 10 * math.Log10(sum)
}

// Lies of single samples, in a tone of 2 s from half a second on.
func TestLiesOfSamples(t *testing.T) {
	p := liar(t, "channel-silent")
	p.NoiseDBFS, p.Float, p.Bits = -60, false, 16
	for i, x := range recorded(t, p, "after") {
		if x != 0 {
			t.Fatalf("channel-silent: sample %d = %v, want 0", i, x)
		}
	}
	p = liar(t, "dropout")
	lying := recorded(t, p, "after")
	first, last, _ := changed(lying, recorded(t, honest(p), "after"))
	if first < 71999 || first > 72001 || last < 72957 || last > 72960 || lying[72500] != 0 {
		t.Errorf("dropout: samples %d to %d changed, want 72000 to 72959 to be 0", first, last)
	}
	p = liar(t, "too-short")
	if got, want := len(recorded(t, p, "after")), 24000+28800; got != want {
		t.Errorf("too-short: %d samples, want %d", got, want)
	}
	p = liar(t, "no-tone")
	for i, x := range recorded(t, p, "after") {
		if math.Abs(x) > 1e-15 {
			t.Fatalf("no-tone: sample %d = %v, want 0", i, x)
		}
	}
	if got, want := len(recorded(t, p, "after")), 3*48000; got != want {
		t.Errorf("no-tone: %d samples, want %d", got, want)
	}
	p = liar(t, "bad-samples")
	bad := 0
	for _, x := range recorded(t, p, "after") {
		if math.IsNaN(x) || math.IsInf(x, 0) {
			bad++
		}
	}
	if bad != 3 {
		t.Errorf("bad-samples: %d samples are no numbers, want 3", bad)
	}
	p = liar(t, "one-channel")
	if got, want := len(recorded(t, p, "legs")), 3*48000; got != want {
		t.Errorf("one-channel: %d samples, want %d", got, want)
	}
}

// Lies of files, read back.
func TestLiesOfFiles(t *testing.T) {
	record := func(word string) (folder string) {
		p := liar(t, word)
		p.Takes = []string{"before", "after"}
		folder = filepath.Join(t.TempDir(), "0417")
		if _, err := p.Record(t.Context(), folder, sheets(t)); err != nil {
			t.Fatal(err)
		}
		return folder
	}
	for _, word := range []string{"not-closed", "cut-short"} {
		folder := record(word)
		for role, want := range map[string]string{"before": "", "after": word} {
			take, err := capture.Open(filepath.Join(folder, role+".wav"))
			if err != nil {
				t.Fatal(err)
			}
			got := ""
			for _, problem := range take.Facts().Problems {
				got += problem.Problem
			}
			if got != want {
				t.Errorf("%s: problems of %s %q, want %q", word, role, got, want)
			}
			take.Close()
		}
	}
	bytes, err := os.ReadFile(filepath.Join(record("not-closed"), "after.wav"))
	if err != nil || binary.LittleEndian.Uint32(bytes[4:]) != 0 {
		t.Errorf("not-closed: the size of the file is %d (%v), want 0", binary.LittleEndian.Uint32(bytes[4:]), err)
	}
	folder := record("same-recording")
	before, errB := os.ReadFile(filepath.Join(folder, "before.wav"))
	after, errA := os.ReadFile(filepath.Join(folder, "after.wav"))
	if errA != nil || errB != nil || !slices.Equal(before, after) {
		t.Errorf("same-recording: the files differ (%v, %v)", errA, errB)
	}
}

// A file that has no samples cannot be unclosed; nothing is written then.
func TestUncloseOfWhatIsNoTake(t *testing.T) {
	path := filepath.Join(t.TempDir(), "after.wav")
	write(t, path, "RIFF\x04\x00\x00\x00WAVE")
	if err := unclose(path); err == nil {
		t.Error("unclose() of a file without samples: no error")
	}
}
