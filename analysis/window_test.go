package analysis

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"gonum.org/v1/gonum/dsp/fourier"
)

// The figures of a window by which papers compare them, from its samples.
type windowFigures struct{ gain, enbwBins, scallopDB, width3Bins, sideLobeDB float64 }

// figuresOf measures a window in its periodic form.
func figuresOf(w []float64) windowFigures {
	const zoom = 128
	n := float64(len(w))
	plain, squares := 0.0, 0.0
	for _, v := range w {
		plain += v
		squares += v * v
	}
	at := func(bins float64) float64 { // response there, dB below that in the middle
		re, im := 0.0, 0.0
		for i, v := range w {
			sin, cos := math.Sincos(2 * math.Pi * bins * (float64(i) - n/2) / n)
			re += v * cos
			im += v * sin
		}
		return 20 * math.Log10(math.Hypot(re, im)/plain)
	}
	low, high := 0.0, 4.0
	for range 40 {
		if mid := (low + high) / 2; at(mid) > -3 {
			low = mid
		} else {
			high = mid
		}
	}
	padded := make([]float64, len(w)*zoom)
	copy(padded, w)
	levels := fourier.NewFFT(len(padded)).Coefficients(nil, padded)
	k := 1
	for cabs(levels[k]) >= cabs(levels[k+1]) || float64(k)/zoom < 0.9 { // down the main lobe
		k++
	}
	top := 0.0
	for ; k < 60*zoom; k++ {
		top = math.Max(top, cabs(levels[k]))
	}
	return windowFigures{plain / n, n * squares / (plain * plain), -at(0.5), 2 * low, 20 * math.Log10(top/plain)}
}

func cabs(z complex128) float64 { return math.Hypot(real(z), imag(z)) }

// cosineSum is a window of cosines whose signs alternate, periodic.
func cosineSum(n int, terms []float64) []float64 {
	w := make([]float64, n)
	for i := range w {
		sign := 1.0
		for k, a := range terms {
			w[i] += sign * a * math.Cos(2*math.Pi*float64(k)*float64(i)/float64(n))
			sign = -sign
		}
	}
	return w
}

// The ruler against windows whose figures are published (Harris 1978; Heinzel, Rüdiger and Schilling
// 2002), and then the window of this package by it: its terms are those of Nuttall's paper of 1981,
// four with a continuous third derivative, side lobes -82.6 dB (from memory).
func TestWindowFigures(t *testing.T) {
	const n = 1024
	for _, row := range readTable(t, "windows.csv")[1:] {
		var terms []float64
		for _, text := range strings.Fields(row[1]) {
			terms = append(terms, number(t, text))
		}
		f := figuresOf(cosineSum(n, terms))
		near(t, row[0]+": coherent gain", f.gain, number(t, row[2]), 1e-6)
		near(t, row[0]+": noise bandwidth", f.enbwBins, number(t, row[4]), 1e-5)
		near(t, row[0]+": scalloping", f.scallopDB, number(t, row[6]), 0.001)
		near(t, row[0]+": width", f.width3Bins, number(t, row[8]), 0.001)
		near(t, row[0]+": side lobe", f.sideLobeDB, number(t, row[11]), 0.1)
		if row[18] != "" { // Heinzel et al., as printed
			near(t, row[0]+": noise bandwidth, published", f.enbwBins, number(t, row[18]), 5.1e-5)
			near(t, row[0]+": width, published", f.width3Bins, number(t, row[19]), 2e-4)
		}
	}
	got, want := figuresOf(windowOf(n)), figuresOf(cosineSum(n, []float64{0.338946, 0.481973, 0.161054, 0.018027}))
	if fmt.Sprintf("%.9f", got) != fmt.Sprintf("%.9f", want) {
		t.Errorf("the window's figures %.9f, want %.9f", got, want)
	}
	near(t, "coherent gain", got.gain, 0.338946, 1e-9)
	near(t, "noise bandwidth", got.enbwBins, (0.338946*0.338946+(0.481973*0.481973+0.161054*0.161054+0.018027*0.018027)/2)/(0.338946*0.338946), 1e-9)
	near(t, "side lobe", got.sideLobeDB, -82.60, 0.01)
}
