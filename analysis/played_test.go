package analysis

import (
	"bytes"
	"encoding/binary"
	"errors"
	"fmt"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"

	"gonum.org/v1/gonum/dsp/fourier"
)

// A loop is a signal that repeats after sec, known by its bins: it can be sampled at any rate that
// puts a whole number of samples into sec, exactly.
type loop struct {
	sec  float64
	bins []complex128
}

// pinkLoop is noise that falls by 3 dB an octave, up to topHz.
func pinkLoop(sec, topHz float64, seed uint64) loop {
	random := rand.New(rand.NewPCG(seed, 21))
	l := loop{sec, make([]complex128, int(topHz*sec))}
	for k := int(5 * sec); k < len(l.bins); k++ {
		l.bins[k] = cmplx.Rect(0.02/math.Sqrt(float64(k)), 2*math.Pi*random.Float64())
	}
	return l
}

// clip samples it with a recorder of a clock of its own, the start in the take's middle of silence,
// through a network.
func (l loop) clip(rateHz float64, ppm int, leadSec float64, n rc) (c *clip, ratio float64) {
	count := int(rateHz*l.sec) + int(math.Round(rateHz*l.sec*1e-6*float64(ppm)))
	for largestFactor(count) > 100 { // a length that transforms fast, near enough
		count++
	}
	ratio = float64(count) / (rateHz * l.sec)
	bins := make([]complex128, count/2+1)
	for k := range min(len(bins)-1, len(l.bins)) {
		bins[k] = l.bins[k] * n.at(float64(k)/l.sec)
	}
	one := fourier.NewFFT(count).Sequence(nil, bins)
	lead := int(leadSec * rateHz)
	c = newClip(rateHz, (float64(2*lead+count)+0.5)/rateHz)
	copy(c.x[lead:], one)
	return c, ratio
}

func largestFactor(n int) int {
	f := 2
	for ; f*f <= n; f++ {
		for n%f == 0 && n > f {
			n /= f
		}
	}
	return max(n, 1)
}

var straight = rc{highHz: math.Inf(1)}

func TestPlayedResponse(t *testing.T) {
	for _, c := range []struct {
		name                string
		playedHz, beforeHz  float64
		afterHz             float64
		beforePPM, afterPPM int
		noiseDBFS           float64
		network             rc
	}{
		{"one clock", 8000, 8000, 8000, 0, 0, -90, rc{20, 100, 3000}},
		{"three clocks and rates", 32000, 16000, 11025, 150, -150, -90, rc{20, 30, 8000}},
		{"weak", 8000, 8000, 8000, 100, 50, -85, rc{50, 0, 20000}},
	} {
		t.Run(c.name, func(t *testing.T) {
			l := pinkLoop(12, 3900, 5)
			played, _ := l.clip(c.playedHz, 0, 0, straight)
			before, rb := l.clip(c.beforeHz, c.beforePPM, 1.5, straight)
			after, ra := l.clip(c.afterHz, c.afterPPM, 2.25, c.network)
			before.noise(c.noiseDBFS, 1)
			after.noise(c.noiseDBFS, 2)
			for _, take := range []struct {
				s            *clip
				start, ratio float64
			}{{before, 1.5, rb}, {after, 2.25, ra}} {
				p, err := FindPlayed(played, take.s)
				if err != nil {
					t.Fatal(err)
				}
				t.Logf("start off %.2f us, ratio off %.3f ppm, u %.3f ppm", 1e6*(p.StartSec-take.start), 1e6*(p.Ratio-take.ratio), 1e6*p.RatioU)
				near(t, "ratio", p.Ratio, take.ratio, 1e-6)
				near(t, "start", p.StartSec, take.start, 2e-4) // the network's delay with it
			}
			points, err := PlayedResponse(played, before, after)
			if err != nil {
				t.Fatal(err)
			}
			sum, worst := 0.0, 0.0
			for _, p := range points {
				want := -DBFromRatio(cmplx.Abs(c.network.at(p.FreqHz)))
				off := p.LossDB - want
				worst = math.Max(worst, math.Abs(off))
				sum += off * off / (p.StandardUDB * p.StandardUDB)
				if p.FreqHz < 3700 && math.Abs(off) > 0.02+4*p.StandardUDB {
					t.Errorf("%.1f Hz: loss %.4f, want %.4f, u %.4f", p.FreqHz, p.LossDB, want, p.StandardUDB)
				}
			}
			t.Logf("%d points, worst %.4f dB, rms off/u %.2f", len(points), worst, math.Sqrt(sum/float64(len(points))))
			if len(points) < 88 {
				t.Errorf("%d points, want 88 and more", len(points))
			}
		})
	}
}

// Notes that swell and fade, and a sweep alone, sampled by formula.
func TestPlayedResponseOfMusicAndSweep(t *testing.T) {
	notes := func(sec float64) float64 {
		if sec <= 0 || sec >= 20 {
			return 0
		}
		n := math.Floor(sec / 0.2)
		at := sec - 0.2*n
		pitch := 40 * math.Pow(2, math.Mod(7.3*n+n*n*0.37, 60)/12)
		v, gain := 0.0, math.Sin(math.Pi*at/0.2)
		for h := 1.0; h < 20 && h*pitch < 7500; h++ {
			v += math.Sin(2*math.Pi*h*pitch*at) / h
		}
		return 0.1 * gain * gain * v
	}
	sweep := func(sec float64) float64 {
		if sec < 8 || sec > 14.5 {
			return 0
		}
		return player{16000}.at(sec)
	}
	n := rc{20, 20, 9000}
	for what, at := range map[string]func(float64) float64{"notes": notes, "sweep": sweep} {
		make := func(ratio, startSec float64) *clip {
			c := newClip(16000, 28)
			for i := range c.x {
				c.x[i] = at((float64(i)/16000 - startSec) / ratio)
			}
			return c
		}
		played := make(1, 0)
		played.x = played.x[:24*16000]
		before := make(1.0001, 1.5).noise(-90, 1)
		after := make(0.9999, 2.25).through(n, 0.9999).noise(-95, 2)
		points, err := PlayedResponse(played, before, after)
		if err != nil {
			t.Errorf("%s: %v", what, err)
			continue
		}
		sum, worst := 0.0, 0.0
		for _, p := range points {
			off := p.LossDB + DBFromRatio(cmplx.Abs(n.at(p.FreqHz)))
			worst = math.Max(worst, math.Abs(off))
			sum += off * off / (p.StandardUDB * p.StandardUDB)
			if math.Abs(off) > 0.05+4*p.StandardUDB {
				t.Errorf("%s: %.1f Hz: loss off by %.4f, u %.4f", what, p.FreqHz, off, p.StandardUDB)
			}
		}
		t.Logf("%s: %d points, worst %.4f dB, rms off/u %.2f", what, len(points), worst, math.Sqrt(sum/float64(len(points))))
		if len(points) < 80 {
			t.Errorf("%s: %d points, want 80 and more", what, len(points))
		}
	}
}

func TestFindPlayedNone(t *testing.T) {
	played, _ := pinkLoop(12, 7900, 5).clip(16000, 0, 0, straight)
	other, _ := pinkLoop(12, 7900, 6).clip(16000, 0, 3, straight)
	for what, take := range map[string]*clip{"other noise": other, "silence": newClip(16000, 20), "hum": newClip(16000, 20).hum(50, -40)} {
		if p, err := FindPlayed(played, take); !errors.Is(err, ErrNotPlayed) {
			t.Errorf("%s: %+v, %v, want %v", what, p, err, ErrNotPlayed)
		}
	}
	for what, nothing := range map[string]*clip{"silence": newClip(16000, 20), "too short": newClip(16000, 0.3), "empty": newClip(16000, 0)} {
		if _, err := FindPlayed(nothing, played); !errors.Is(err, ErrNotPlayed) {
			t.Errorf("played %s: %v, want %v", what, err, ErrNotPlayed)
		}
	}
}

// The same samples through scipy.signal's csd and welch.
func TestTransferAgainstScipy(t *testing.T) {
	const python, rateHz = "/usr/bin/python3", 16000
	if err := exec.Command(python, "-c", "import scipy.signal").Run(); err != nil {
		t.Skip("no scipy: package python3-scipy")
	}
	l := pinkLoop(16, 7900, 8)
	x, _ := l.clip(rateHz, 0, 0, straight)
	y, _ := l.clip(rateHz, 0, 0, rc{20, 300, 3000})
	y.noise(-60, 4)
	x.x, y.x = x.x[:16*rateHz], y.x[:16*rateHz]
	bands := ResponseBands(rateHz)
	dir := t.TempDir()
	var list strings.Builder
	for _, b := range bands {
		fmt.Fprintln(&list, b.LowHz, b.HighHz)
	}
	write := func(name string, data []byte) string {
		path := filepath.Join(dir, name)
		if err := os.WriteFile(path, data, 0o600); err != nil {
			t.Fatal(err)
		}
		return path
	}
	raw := func(c *clip) []byte {
		var b bytes.Buffer
		if err := binary.Write(&b, binary.NativeEndian, c.x); err != nil {
			t.Fatal(err)
		}
		return b.Bytes()
	}
	out, err := exec.Command(python, "testdata/transfer_scipy.py", write("x", raw(x)), write("y", raw(y)), "16000", "4", write("bands", []byte(list.String()))).CombinedOutput()
	if err != nil {
		t.Fatalf("%v: %s", err, out)
	}
	c := newCrossed(int(bands[len(bands)-1].HighHz*playedSegmentSec) + 1)
	for _, fromSec := range segmentStarts(16) {
		if err := c.add(fromSec, [3]Samples{x, x, y}, [3]Placement{{Ratio: 1}, {Ratio: 1}, {Ratio: 1}}); err != nil {
			t.Fatal(err)
		}
	}
	points := c.points(bands)
	lines := strings.Split(strings.TrimSpace(string(out)), "\n")
	if len(points) != len(lines) {
		t.Fatalf("%d points, scipy has %d", len(points), len(lines))
	}
	for i, p := range points {
		var db, phaseRad, coherence float64
		if _, err := fmt.Sscan(lines[i], &db, &phaseRad, &coherence); err != nil {
			t.Fatal(err)
		}
		what := fmt.Sprintf("%.1f Hz: ", p.FreqHz)
		near(t, what+"level", -p.LossDB, db, 1e-9)
		near(t, what+"phase", cmplx.Phase(p.Transfer), phaseRad, 1e-9)
		averages := float64(int(math.Floor(4*p.HighHz))-int(math.Ceil(4*p.LowHz))+1) * 7 / 2
		near(t, what+"u", p.StandardUDB, math.Hypot(leastUDB, 8.685889638*math.Sqrt((1-coherence)/(2*averages*coherence))), 1e-9)
	}
}

func TestToneResponse(t *testing.T) {
	before := []Tone{{FreqHz: 100, LevelDBFS: -6, StdErrDB: 0.003}, {FreqHz: 1000, LevelDBFS: -6.5}, {FreqHz: 1000, LevelDBFS: -16}, {FreqHz: 9000, LevelDBFS: -7}}
	after := []Tone{{FreqHz: 100.1, LevelDBFS: -26, HalvesDB: -0.004}, {FreqHz: 999, LevelDBFS: -27}, {FreqHz: 12000, LevelDBFS: -29}}
	got := ToneResponse(before, after)
	if len(got) != 2 {
		t.Fatalf("%d points, want 2: %+v", len(got), got)
	}
	near(t, "loss at 100 Hz", got[0].LossDB, 20, 1e-12)
	near(t, "its u", got[0].StandardUDB, 0.005, 1e-12)
	near(t, "loss at 1 kHz", got[1].LossDB, 20.5, 1e-12)
	near(t, "transfer", real(got[1].Transfer), math.Pow(10, -20.5/20), 1e-12)
	if ToneResponse(nil, after) != nil {
		t.Error("no tones before: points")
	}
}

// ISO 266 and IEC 61260-1: the exact mid-band frequencies of third octaves, base ten, 1000·10^(x/10),
// of which the labels are roundings; edges of a twelfth lie at 10^(±1/80).
func TestResponseBands(t *testing.T) {
	labels := []float64{20, 25, 31.5, 40, 50, 63, 80, 100, 125, 160, 200, 250, 315, 400, 500, 630, 800,
		1000, 1250, 1600, 2000, 2500, 3150, 4000, 5000, 6300, 8000, 10000, 12500, 16000, 20000}
	bands := ResponseBands(48000)
	if len(bands) != 121 {
		t.Fatalf("%d bands, want 121", len(bands))
	}
	for i, label := range labels {
		got := bands[4*i].FreqHz
		near(t, "third octave", got, 1000*math.Pow(10, float64(i-17)/10), 1e-9*label)
		near(t, "its label", got, label, 0.0125*label) // the coarsest rounding of ISO 266 is 1.2 %
	}
	for i, b := range bands {
		near(t, "lower edge", b.LowHz, b.FreqHz*math.Pow(10, -1./80), 1e-9*b.FreqHz)
		if i > 0 {
			near(t, "edges meet", b.LowHz, bands[i-1].HighHz, 1e-9*b.FreqHz)
		}
	}
	for rateHz, want := range map[float64]int{44100: 121, 32000: 115, 8000: 91} {
		if got := len(ResponseBands(rateHz)); got != want {
			t.Errorf("ResponseBands(%g): %d bands, want %d", rateHz, got, want)
		}
	}
}
