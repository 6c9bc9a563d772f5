package analysis

import (
	"math"
	"math/cmplx"
	"testing"
)

// Against the sum as its definition has it, term by term, at a few bins.
func TestClockSpectrumIsItsSum(t *testing.T) {
	g := gate{2, 3.1, 0.2, 0.1}
	p := Placement{StartSec: 0.37, Ratio: 1.00013}
	c := newClip(8000, 4.5).noise(-10, 4)
	for _, count := range []int{40, 700, 3000} {
		bins, err := newClockSpectrum(c, p, g, count).sum(count)
		if err != nil {
			t.Fatal(err)
		}
		for _, k := range []int{0, 1, 17, 39, count / 2, count - 1} {
			want := 0i
			for n, v := range c.x {
				sec := (float64(n)/8000 - 0.37) / 1.00013
				if sec > 2 && sec < 3.1 {
					want += cmplx.Rect(v*g.gain(sec)/8000/1.00013, -2*math.Pi*float64(k)/1.1*(sec-2))
				}
			}
			near(t, "bin", cmplx.Abs(bins[k]-want), 0, 1e-12)
		}
	}
}

// The integral of the gate's square, by summing it up.
func TestGateEnergy(t *testing.T) {
	g := gate{7.8, 14.7, 0.4, 0.3}
	sum := 0.0
	for i := range 100000 {
		v := g.gain(7.8 + 6.9*(float64(i)+0.5)/100000)
		sum += v * v * 6.9 / 100000
	}
	near(t, "energySec", g.energySec(), sum, 1e-6)
}
