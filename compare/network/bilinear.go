package network

import (
	"math"
	"math/cmplx"
)

// Bilinear is how a transfer depends on the value x of one part, all else as it is:
//
//	T(x) = (AtZero·Knee + AtInf·x) / (Knee + x)
//
// This is exact for every linear circuit (common practice, no source). Knee is the size
// of x about which the part matters: for a resistor, the impedance that it sees. A knee of 0 means that every x above 0 gives AtInf; one of +Inf that
// every finite x gives AtZero.
type Bilinear struct {
	AtZero, AtInf complex128
	Knee          complex128 // in the unit of x
}

// At returns the transfer for a value from 0 to +Inf.
func (b Bilinear) At(x float64) complex128 {
	switch k := cmplx.Abs(b.Knee); {
	case x <= 0 || b.AtZero == b.AtInf:
		return b.AtZero
	case math.IsInf(x, 1) || k == 0:
		return b.AtInf
	case math.IsInf(k, 1):
		return b.AtZero
	case x > k:
		r := b.Knee / complex(x, 0)
		return (b.AtZero*r + b.AtInf) / notNil(r+1)
	}
	r := complex(x, 0) / b.Knee
	return (b.AtZero + b.AtInf*r) / notNil(1+r)
}

// notNil keeps a lossless resonance finite.
func notNil(z complex128) complex128 {
	if z == 0 {
		return 1e-16
	}
	return z
}

// Dependence returns how [Circuit.Transfer] depends on the value of one part. A ref that
// is not in the drawing gives a transfer that does not change.
func (c *Circuit) Dependence(e Ends, freqHz float64, ref string) Bilinear {
	e = e.bounded()
	omega := angular(freqHz)
	i := c.index(ref)
	if i < 0 {
		t := c.transfer(c.values, e, omega)
		return Bilinear{AtZero: t, AtInf: t}
	}
	return c.dependence(append([]float64(nil), c.values...), i, e, omega)
}

// dependence finds the bilinear form from its ends and one point between, moved until it
// lies near the knee, where the three are told apart best. It leaves values[i] as it was.
func (c *Circuit) dependence(values []float64, i int, e Ends, omega float64) Bilinear {
	was := values[i]
	defer func() { values[i] = was }()
	straight := c.loadVolts(nil, e, omega)
	at := func(x float64) complex128 {
		values[i] = x
		return c.loadVolts(values, e, omega) / straight
	}
	b := Bilinear{AtZero: at(0), AtInf: at(math.Inf(1))}
	span := cmplx.Abs(b.AtZero - b.AtInf)
	if span <= 1e-13*max(cmplx.Abs(b.AtZero), cmplx.Abs(b.AtInf)) {
		b.AtInf = b.AtZero
		return b
	}
	if omega == 0 && c.parts[i].Kind != Resistor {
		b.Knee = cmplx.Inf() // any capacitor is open there and any coil a link, short of one of +Inf
		return b
	}
	low, high := finiteRange(c.parts[i].Kind, omega)
	x := was
	if !(x > low && x < high) {
		x = math.Sqrt(low * high)
	}
	for range 12 {
		t := at(x)
		fromZero, fromInf := cmplx.Abs(t-b.AtZero)/span, cmplx.Abs(t-b.AtInf)/span
		switch {
		case fromZero < 1e-6 && x < high:
			x = min(x*1e4, high)
			continue
		case fromInf < 1e-6 && x > low:
			x = max(x*1e-4, low)
			continue
		case fromZero < 1e-12:
			b.Knee = cmplx.Inf()
			return b
		case fromInf < 1e-12:
			b.Knee = 0
			return b
		}
		ratio := (t - b.AtInf) / (b.AtZero - t)
		b.Knee = complex(x, 0) * ratio
		if r := cmplx.Abs(ratio); r > 0.05 && r < 20 {
			return b
		}
		x = cmplx.Abs(b.Knee)
	}
	return b
}
