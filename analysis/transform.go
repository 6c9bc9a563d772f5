package analysis

import (
	"math"
	"sync"
)

// A transform is the discrete Fourier transform of one power-of-two length, complex, in place,
// unnormalised, with the result in bit-reversed order: the value of bin k stands at the position
// whose bits are those of k read backwards. Nothing here needs them in order: powers are summed
// where they stand and sorted once at the end. Radix 4, decimation in frequency (Cooley and Tukey,
// Mathematics of Computation 19, 1965), worked depth first so that the inner parts stay in the
// first cache; twice as fast as gonum's transforms on the same length, which the whole speed
// of a measurement hangs on, and checked against them.
type transform struct {
	stages [][]twiddle // one a radix-4 pass, the longest first
}

// A twiddle holds the factors of one butterfly: exp(-2πi j/m) and its square and cube.
type twiddle struct{ one, two, three complex128 }

// deepest is the length below which passes run over the whole part one after another.
const deepest = 1024

var transforms sync.Map // complex length -> *transform; never changed once made

func transformOf(n int) *transform {
	if t, ok := transforms.Load(n); ok {
		return t.(*transform)
	}
	t := new(transform)
	for m := n; m > 4; m /= 4 {
		stage := make([]twiddle, m/4)
		for j := range stage {
			stage[j] = twiddle{unit(-j, m), unit(-2*j, m), unit(-3*j, m)}
		}
		t.stages = append(t.stages, stage)
	}
	kept, _ := transforms.LoadOrStore(n, t)
	return kept.(*transform)
}

// unit returns exp(2πi k/n).
func unit(k, n int) complex128 {
	sin, cos := math.Sincos(2 * math.Pi * float64(k) / float64(n))
	return complex(cos, sin)
}

// run transforms z, whose length must be the transform's.
func (t *transform) run(z []complex128) { t.runFrom(z, 0) }

func (t *transform) runFrom(z []complex128, stage int) {
	if len(z) > deepest {
		butterflies(z, t.stages[stage])
		for q := len(z) / 4; len(z) > 0; z = z[q:] {
			t.runFrom(z[:q], stage+1)
		}
		return
	}
	left := len(z)
	for ; stage < len(t.stages); stage++ {
		for rest := z; len(rest) > 0; rest = rest[left:] {
			butterflies(rest[:left], t.stages[stage])
		}
		left /= 4
	}
	if left == 4 {
		lastFours(z)
	} else {
		lastPairs(z)
	}
}

// butterflies does one radix-4 pass. The two middle results change places, which makes the order
// at the end bit-reversed.
func butterflies(z []complex128, factors []twiddle) {
	m := len(factors)
	z0, z1, z2, z3 := z[:m], z[m:2*m], z[2*m:3*m], z[3*m:4*m]
	z1, z2, z3, factors = z1[:len(z0)], z2[:len(z0)], z3[:len(z0)], factors[:len(z0)]
	for j := range z0 {
		a, b, c, d := z0[j], z1[j], z2[j], z3[j]
		even, odd := a+c, b+d
		a, b = a-c, b-d
		b = complex(imag(b), -real(b))
		f := &factors[j]
		z0[j] = even + odd
		z1[j] = (even - odd) * f.two
		z2[j] = (a + b) * f.one
		z3[j] = (a - b) * f.three
	}
}

func lastFours(z []complex128) {
	for ; len(z) >= 4; z = z[4:] {
		q := (*[4]complex128)(z)
		a, b, c, d := q[0], q[1], q[2], q[3]
		even, odd := a+c, b+d
		a, b = a-c, b-d
		b = complex(imag(b), -real(b))
		q[0], q[1], q[2], q[3] = even+odd, even-odd, a+b, a-b
	}
}

func lastPairs(z []complex128) {
	for ; len(z) >= 2; z = z[2:] {
		q := (*[2]complex128)(z)
		q[0], q[1] = q[0]+q[1], q[0]-q[1]
	}
}
