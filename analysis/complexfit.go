package analysis

import (
	"math"
	"math/cmplx"
)

// turnOfPart returns exp(2πi turns).
func turnOfPart(turns float64) complex128 { return cmplx.Rect(1, 2*math.Pi*(turns-math.Floor(turns))) }

// A complexFit gathers the normal equations of a linear least-squares fit with complex columns.
type complexFit struct {
	gram [fitColumns][fitColumns]complex128
	rhs  [fitColumns]complex128
}

func (f *complexFit) add(row [fitColumns]complex128, y complex128) {
	for i, a := range row {
		f.rhs[i] += cmplx.Conj(a) * y
		for j, b := range row {
			f.gram[i][j] += cmplx.Conj(a) * b
		}
	}
}

// solve returns the coefficients. A column that is nil, or hardly anything that the others are not,
// gets 0. ok is false where nothing can be solved.
func (f *complexFit) solve() (p [fitColumns]complex128, ok bool) {
	const alike = 1e-12
	m, y := f.gram, f.rhs
	var size [fitColumns]float64
	for i := range size {
		size[i] = real(m[i][i])
	}
	var out [fitColumns]bool
	for c := range m { // positive definite: the diagonal serves as pivot
		if !(real(m[c][c]) > alike*size[c]) {
			out[c] = true
			continue
		}
		ok = true
		for r := c + 1; r < fitColumns; r++ {
			part := m[r][c] / m[c][c]
			for j := c; j < fitColumns; j++ {
				m[r][j] -= part * m[c][j]
			}
			y[r] -= part * y[c]
		}
	}
	for c := fitColumns - 1; c >= 0; c-- {
		if out[c] {
			continue
		}
		v := y[c]
		for j := c + 1; j < fitColumns; j++ {
			v -= m[c][j] * p[j]
		}
		p[c] = v / m[c][c]
		if cmplx.IsNaN(p[c]) || cmplx.IsInf(p[c]) {
			return p, false
		}
	}
	return p, ok
}
