package analysis

import (
	"io"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"testing"
)

// A slice of samples as a channel.
type clip struct {
	rateHz float64
	x      []float64
}

func (c *clip) RateHz() float64 { return c.rateHz }
func (c *clip) Frames() int64   { return int64(len(c.x)) }
func (c *clip) ReadAt(dst []float64, frame int64) (int, error) {
	if frame >= int64(len(c.x)) {
		return 0, io.EOF
	}
	return copy(dst, c.x[frame:]), nil
}

func newClip(rateHz, sec float64) *clip {
	return &clip{rateHz, make([]float64, int(math.Round(rateHz*sec)))}
}

// tone adds a cosine of the given phase at its first sample, for part of the clip.
func (c *clip) tone(freqHz, levelDBFS, phaseRad, fromSec, toSec float64) *clip {
	peak := math.Pow(10, levelDBFS/20)
	first := int(math.Round(fromSec * c.rateHz))
	turn := cmplx.Rect(1, 2*math.Pi*freqHz/c.rateHz)
	z := 0i
	for n := first; n < int(math.Round(toSec*c.rateHz)); n++ {
		if (n-first)%256 == 0 { // anew, so that no error adds up
			z = cmplx.Rect(peak, phaseRad+2*math.Pi*math.Mod(freqHz*float64(n-first), c.rateHz)/c.rateHz)
		}
		c.x[n] += real(z)
		z *= turn
	}
	return c
}

// noise adds white noise whose part below 20 kHz (or half the rate) has the given level.
func (c *clip) noise(inBandDBFS float64, seed uint64) *clip {
	random := rand.New(rand.NewPCG(seed, 7))
	inBand := math.Min(1, 20000/(c.rateHz/2))
	sigma := math.Pow(10, inBandDBFS/20) / math.Sqrt(2*inBand)
	for n := range c.x {
		c.x[n] += sigma * random.NormFloat64()
	}
	return c
}

func (c *clip) offset(value float64) *clip {
	for n := range c.x {
		c.x[n] += value
	}
	return c
}

// hum adds a mains line and weaker harmonics.
func (c *clip) hum(mainsHz, levelDBFS float64) *clip {
	sec := float64(len(c.x)) / c.rateHz
	for h := 1; h <= 5; h++ {
		c.tone(float64(h)*mainsHz, levelDBFS-10*float64(h-1), float64(h), 0, sec)
	}
	return c
}

// talk adds bursts of harmonics that swell, glide and stop, for part of the clip.
func (c *clip) talk(levelDBFS float64, seed uint64, fromSec, toSec float64) *clip {
	random := rand.New(rand.NewPCG(seed, 9))
	peak := math.Pow(10, levelDBFS/20)
	for at := fromSec; at < toSec; {
		sec, pitch := 0.08+0.25*random.Float64(), 90+120*random.Float64()
		glide := 1 + 0.3*(random.Float64()-0.5)
		first, count := int(at*c.rateHz), int(math.Min(sec, toSec-at)*c.rateHz)
		for n := range count {
			part := float64(n) / float64(count)
			phase := 2 * math.Pi * pitch * float64(n) / c.rateHz * (1 + (glide-1)*part/2)
			v := 0.0
			for h := 1; h < 7; h++ {
				v += math.Sin(float64(h)*phase) / float64(h)
			}
			c.x[first+n] += peak * v * math.Sin(math.Pi*part)
		}
		at += sec + 0.15*random.Float64()
	}
	return c
}

// round stores the samples in steps of 2^(1-bits), clipped at full scale.
func (c *clip) round(bits int) *clip {
	scale := math.Ldexp(1, bits-1)
	for n, v := range c.x {
		c.x[n] = math.Max(-scale, math.Min(scale-1, math.Round(v*scale))) / scale
	}
	return c
}

func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s = %.9g, want %.9g ± %.3g", what, got, want, tol)
	}
}

func measureAll(t *testing.T, c *clip) *Measurement {
	t.Helper()
	stretches, err := FindTones(c)
	if err != nil {
		t.Fatalf("FindTones: %v", err)
	}
	m, err := MeasureTones(c, stretches)
	if err != nil {
		t.Fatalf("MeasureTones(%+v): %v", stretches, err)
	}
	return m
}
