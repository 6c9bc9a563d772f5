package analysis

import (
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/dsp/fourier"
)

// The powers of one segment against gonum's real transform of the same windowed samples.
func TestAveragerAgainstGonum(t *testing.T) {
	random := rand.New(rand.NewPCG(1, 1))
	for n := 8; n <= 65536; n *= 2 {
		x := make([]float64, n)
		for i := range x {
			x[i] = random.NormFloat64()
		}
		a := newAverager(n)
		a.add(x[:len(x)/2], x[len(x)/2:])
		got := a.spectrum(48000).MeanSquare

		windowed, w := make([]float64, n), windowOf(n)
		for i := range x {
			windowed[i] = x[i] * w[i]
		}
		for k, c := range fourier.NewFFT(n).Coefficients(nil, windowed) {
			want := (real(c)*real(c) + imag(c)*imag(c)) * 2 / (float64(n) * float64(n) * windowPower())
			if k == 0 || k == n/2 {
				want /= 2
			}
			if diff := math.Abs(got[k] - want); diff > 1e-12 {
				t.Fatalf("n %d: bin %d = %g, want %g", n, k, got[k], want)
			}
		}
	}
}

func BenchmarkAverager(b *testing.B) {
	x := make([]float64, 32768)
	for i := range x {
		x[i] = math.Sin(float64(i))
	}
	a := newAverager(len(x))
	for b.Loop() {
		a.add(x[:len(x)/2], x[len(x)/2:])
	}
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/16384, "ns/sample")
}

// All bins add up to the mean square of what the window saw (Parseval), for every length.
func TestSpectrumParseval(t *testing.T) {
	random := rand.New(rand.NewPCG(2, 1))
	for n := 8; n <= 16384; n *= 2 {
		a := newAverager(n)
		want := 0.0
		for range 3 {
			x := make([]float64, n)
			for i := range x {
				x[i] = random.NormFloat64()
				want += math.Pow(x[i]*windowOf(n)[i], 2)
			}
			a.add(x[:len(x)/2], x[len(x)/2:])
		}
		bins := a.spectrum(48000).MeanSquare
		want /= 3 * float64(n) * windowPower()
		near(t, "sum of bins", sum(bins, 0, n/2), want, 1e-12*want)
	}
	if sp := newAverager(8).spectrum(48000); sp != nil {
		t.Errorf("spectrum of nothing = %+v, want nil", sp)
	}
}

// A line reads its mean square in nine bins, wherever it lies between bins; a band of white noise
// reads its share.
func TestSpectrumLevels(t *testing.T) {
	const n = 8192
	for _, offBins := range []float64{0, 0.25, 0.5} {
		a := newAverager(n)
		c := newClip(48000, 1).tone((300+offBins)*48000/n, -20, 0, 0, 1)
		a.add(c.x[:n/2], c.x[n/2:n])
		sp := a.spectrum(48000)
		near(t, "line", sp.BandDBFS(295.6*sp.BinHz, 304.9*sp.BinHz), -20, 1e-4)
	}
	a, c := newAverager(n), newClip(48000, 20).noise(-50, 3)
	for x := c.x; len(x) >= n; x = x[n/2:] {
		a.add(x[:n/2], x[n/2:n])
	}
	sp := a.spectrum(48000)
	near(t, "noise to 20 kHz", sp.BandDBFS(0, 20000), -50, 0.05)
	near(t, "noise of a tenth of that", sp.BandDBFS(1000, 3000), -60, 0.15)
	near(t, "one bin a hertz", 10*math.Log10(sum(sp.MeanSquare, 1, n/2)/sum(sp.MeanSquare, n/4, n/2)), 3.01, 0.1)
}

// The window's published figures: side lobes under -82.6 dB, falling 30 dB an octave. Its bandwidth
// by the sum over its coefficients.
func TestWindow(t *testing.T) {
	const n, zoom = 256, 32
	w, squares, plain := windowOf(n), 0.0, 0.0
	padded := make([]float64, n*zoom)
	for i, v := range w {
		padded[i] = v
		squares += v * v
		plain += v
	}
	near(t, "bandwidth in bins", n*squares/(plain*plain), windowPower()/(windowTerms[0]*windowTerms[0]), 1e-12)
	most, out := 0.0, 0.0
	for k, c := range fourier.NewFFT(n*zoom).Coefficients(nil, padded) {
		power := (real(c)*real(c) + imag(c)*imag(c)) / (plain * plain)
		bins := float64(k) / zoom
		if bins > lobeBins {
			most = math.Max(most, power)
		}
		if bins > 4.5 && bins < 60 { // leakage is the envelope: never below, and close
			line := power * plain * plain / (n * squares)
			if line > leakage(bins)*1.03 {
				t.Errorf("leakage(%g) = %g, want %g at least", bins, leakage(bins), line)
			}
		}
		if bins > 30 && bins < 32 {
			out = math.Max(out, power)
		}
	}
	near(t, "highest side lobe, dB", 10*math.Log10(most), -82.6, 0.05)
	near(t, "an octave further, dB", 10*math.Log10(leakage(64.5)/leakage(32.25)), -30.1, 0.2)
	near(t, "side lobes at 31 bins, dB", 10*math.Log10(out)-10*math.Log10(leakage(30.5)*n*squares/(plain*plain)), 0, 0.5)
}
