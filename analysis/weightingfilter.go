package analysis

import (
	"math"
	"math/cmplx"
	"sort"

	"gonum.org/v1/gonum/mat"
)

// A secondOrder is a filter section of second order: b0, b1 over 1, a1, a2 (direct form, transposed).
type secondOrder struct{ b0, b1, a1, a2, s1, s2 float64 }

func (s *secondOrder) step(x float64) float64 {
	y := s.b0*x + s.s1
	s.s1 = s.b1*x - s.a1*y + s.s2
	s.s2 = -s.a2 * y
	return y
}

// weightingSections returns the network as three sections side by side, whose impulse response is
// that of the network itself at every sample. The network falls by 30 dB an octave above the band,
// so that what this folds back into the band is under 0.02 dB of it at 88 kHz.
func weightingSections(rateHz float64) [3]secondOrder {
	poles := weightingPoles()
	var sections [3]secondOrder
	for i := range sections {
		var a, c [2]complex128
		for j := range 2 {
			p := poles[2*i+j]
			a[j] = cmplx.Exp(2 * math.Pi * p / complex(rateHz, 0))
			c[j] = 2 * math.Pi * complex(noise468Gain/rateHz, 0) * p / slopeAt(noise468Denominator[:], p)
		}
		sections[i] = secondOrder{
			b0: real(c[0] + c[1]), b1: -real(c[0]*a[1] + c[1]*a[0]),
			a1: -real(a[0] + a[1]), a2: real(a[0] * a[1]),
		}
	}
	return sections
}

// slopeAt returns the derivative of a polynomial, coefficients in rising order.
func slopeAt(poly []float64, p complex128) complex128 {
	sum := 0i
	for k := len(poly) - 1; k > 0; k-- {
		sum = sum*p + complex(float64(k)*poly[k], 0)
	}
	return sum
}

// weightingPoles returns the roots of noise468Denominator, in hertz: the pairs, each next to its
// mirror image, and then the two that are real.
func weightingPoles() []complex128 {
	const scale = 6300.0 // the roots lie about there
	degree := len(noise468Denominator) - 1
	companion := mat.NewDense(degree, degree, nil)
	lead := noise468Denominator[degree] * math.Pow(scale, float64(degree))
	for k := range degree {
		if k > 0 {
			companion.Set(k, k-1, 1)
		}
		companion.Set(k, degree-1, -noise468Denominator[k]*math.Pow(scale, float64(k))/lead)
	}
	var eigen mat.Eigen
	if !eigen.Factorize(companion, mat.EigenNone) {
		panic("analysis: the roots of a fixed polynomial were not found")
	}
	poles := eigen.Values(nil)
	sort.Slice(poles, func(i, j int) bool {
		a, b := poles[i], poles[j]
		switch {
		case (imag(a) == 0) != (imag(b) == 0):
			return imag(a) != 0
		case real(a) != real(b) && imag(a) != -imag(b):
			return real(a) < real(b)
		}
		return imag(a) > imag(b)
	})
	for i, p := range poles {
		// One step of Newton's takes off what the scaling left.
		p *= scale
		sum := 0i
		for k := degree; k >= 0; k-- {
			sum = sum*p + complex(noise468Denominator[k], 0)
		}
		poles[i] = p - sum/slopeAt(noise468Denominator[:], p)
	}
	for i := 0; i+1 < len(poles); i += 2 {
		if imag(poles[i]) != 0 {
			poles[i+1] = cmplx.Conj(poles[i])
		}
	}
	return poles
}
