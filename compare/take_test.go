package compare

import (
	"io"
	"math"
	"math/rand/v2"
	"testing"

	"padproof/analysis"
)

// A take made for the tests: one channel of samples.
type recording struct {
	rateHz float64
	x      []float64
}

func (r *recording) RateHz() float64 { return r.rateHz }
func (r *recording) Frames() int64   { return int64(len(r.x)) }
func (r *recording) ReadAt(dst []float64, frame int64) (int, error) {
	if frame >= int64(len(r.x)) {
		return 0, io.EOF
	}
	return copy(dst, r.x[frame:]), nil
}

// record makes a tone between two silences of 0.2 s.
func record(freqHz, levelDBFS, phaseRad, sec float64) *recording {
	r := &recording{48000, make([]float64, int(48000*(sec+0.4)))}
	peak := math.Pow(10, levelDBFS/20)
	for n := 9600; n < len(r.x)-9600; n++ {
		r.x[n] = peak * math.Cos(phaseRad+2*math.Pi*math.Mod(freqHz*float64(n), 48000)/48000)
	}
	return r
}

func (r *recording) each(change func(atSec, x float64) float64) *recording {
	for n, x := range r.x {
		r.x[n] = change(float64(n)/r.rateHz, x)
	}
	return r
}

func (r *recording) harmonic(number int, db float64) *recording {
	peak := 0.0
	for _, x := range r.x {
		peak = math.Max(peak, math.Abs(x))
	}
	for n := 9600; n < len(r.x)-9600; n++ {
		r.x[n] += peak * math.Pow(10, db/20) * math.Cos(2*math.Pi*math.Mod(toneHz*float64(number*n), 48000)/48000)
	}
	return r
}

func (r *recording) noise(inBandDBFS float64, seed uint64) *recording {
	random := rand.New(rand.NewPCG(seed, 11))
	sigma := math.Pow(10, inBandDBFS/20) / math.Sqrt(2*20000/24000.0)
	for n := range r.x {
		r.x[n] += sigma * random.NormFloat64()
	}
	return r
}

// lose takes samples out.
func (r *recording) lose(samples int, atSec float64) *recording {
	at := int(atSec * r.rateHz)
	r.x = append(r.x[:at:at], r.x[at+samples:]...)
	return r
}

// measured is what the analysis says of it: its longest tone, and how steady it stands.
func measured(t *testing.T, r *recording) (*analysis.Measurement, analysis.Tone, analysis.Steadiness) {
	t.Helper()
	found, err := analysis.FindTones(r)
	if err != nil {
		t.Fatal(err)
	}
	m, err := analysis.MeasureTones(r, found)
	if err != nil {
		t.Fatal(err)
	}
	tone := m.Tones[0]
	for _, other := range m.Tones {
		if other.EndSec-other.StartSec > tone.EndSec-tone.StartSec {
			tone = other
		}
	}
	from, to := analysis.ToneSpan(&m.Track, tone)
	return m, tone, analysis.Steady(&m.Track, tone, from, to)
}

func toneOf(t *testing.T, r *recording) analysis.Tone {
	t.Helper()
	_, tone, _ := measured(t, r)
	return tone
}

func within(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s = %.6g, want %.6g ± %.2g", what, got, want, tol)
	}
}
