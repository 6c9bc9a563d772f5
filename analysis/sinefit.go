package analysis

import (
	"errors"
	"fmt"
	"math"

	"gonum.org/v1/gonum/mat"
)

// A SineFit is the sine that fits a block of samples best, sample n taken at n/rate:
//
//	Offset + Cosine·cos(2π FreqHz n/rate) + Sine·sin(2π FreqHz n/rate)
type SineFit struct {
	FreqHz      float64
	Cosine      float64
	Sine        float64
	Offset      float64
	ResidualRMS float64 // root of the residual's sum of squares over its degrees of freedom
}

// Peak returns the amplitude of the sine.
func (f SineFit) Peak() float64 { return math.Hypot(f.Cosine, f.Sine) }

// PhaseRad returns the phase of the sine at the first sample, as that of a cosine.
func (f SineFit) PhaseRad() float64 { return math.Atan2(-f.Sine, f.Cosine) }

const (
	sineFitRounds = 60
	// The search has stopped when the frequency moves the last sample's phase by less than this.
	sineFitStillRad = 1e-11
)

// FitSine3 fits amplitude, phase and offset at a known frequency: linear least squares, the
// three-parameter fit of IEEE Std 1057. At least four samples, all finite, and a frequency between
// 0 and half the rate are needed.
func FitSine3(x []float64, rateHz, freqHz float64) (SineFit, error) {
	if err := checkFit(x, rateHz, freqHz, 3); err != nil {
		return SineFit{}, err
	}
	return fitSine(x, 2*math.Pi*freqHz/rateHz, 0, rateHz)
}

// FitSine4 fits frequency as well: the four-parameter fit of IEEE Std 1057, which repeats a linear
// fit with a fourth column for the frequency's correction until it stops moving. It finds the
// optimum next to startHz, which must not be off by more than about half a turn over the block;
// take it from the largest line of a spectrum. An error if it runs out of (0, rate/2) or does
// not come to rest.
func FitSine4(x []float64, rateHz, startHz float64) (SineFit, error) {
	if err := checkFit(x, rateHz, startHz, 4); err != nil {
		return SineFit{}, err
	}
	omega := 2 * math.Pi * startHz / rateHz
	fit, err := fitSine(x, omega, 0, rateHz)
	for range sineFitRounds {
		if err != nil {
			return SineFit{}, err
		}
		step := frequencyStep(x, omega, fit)
		if limit := math.Pi / float64(len(x)); math.Abs(step) > limit {
			step = math.Copysign(limit, step)
		}
		omega += step
		if !(omega > 0 && omega < math.Pi) {
			return SineFit{}, errors.New("sine fit: the frequency ran out of range")
		}
		fit, err = fitSine(x, omega, 1, rateHz)
		if math.Abs(step)*float64(len(x)) < sineFitStillRad {
			return fit, err
		}
	}
	return SineFit{}, fmt.Errorf("sine fit: the frequency did not come to rest near %g Hz", startHz)
}

func checkFit(x []float64, rateHz, freqHz float64, unknowns int) error {
	if len(x) <= unknowns {
		return fmt.Errorf("sine fit: %d samples are too few", len(x))
	}
	if !(rateHz > 0 && freqHz > 0 && freqHz < rateHz/2) {
		return fmt.Errorf("sine fit: %g Hz is not between 0 and half the rate of %g Hz", freqHz, rateHz)
	}
	for i, v := range x {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return fmt.Errorf("sine fit: sample %d is not a number", i)
		}
	}
	return nil
}

// fitSine solves for 1, cos, sin at omega radians a sample. more is how many unknowns besides
// these three the residual's degrees of freedom pay for.
func fitSine(x []float64, omega float64, more int, rateHz float64) (SineFit, error) {
	var normal normalSums
	for n, v := range x {
		sin, cos := math.Sincos(omega * float64(n))
		normal.add(v, 1, cos, sin)
	}
	p, err := normal.solve(3)
	if err != nil {
		return SineFit{}, err
	}
	fit := SineFit{FreqHz: omega * rateHz / (2 * math.Pi), Offset: p[0], Cosine: p[1], Sine: p[2]}
	squares := 0.0
	for n, v := range x {
		sin, cos := math.Sincos(omega * float64(n))
		r := v - p[0] - p[1]*cos - p[2]*sin
		squares += r * r
	}
	fit.ResidualRMS = math.Sqrt(squares / float64(len(x)-3-more))
	return fit, nil
}

// frequencyStep returns what the fourth unknown says omega is off by. Time counts from the middle
// of the block, which keeps the column of the frequency clear of the others.
func frequencyStep(x []float64, omega float64, fit SineFit) float64 {
	var normal normalSums
	middle := float64(len(x)-1) / 2
	for n, v := range x {
		sin, cos := math.Sincos(omega * float64(n))
		normal.add(v, 1, cos, sin, (float64(n)-middle)*(fit.Sine*cos-fit.Cosine*sin))
	}
	p, err := normal.solve(4)
	if err != nil {
		return 0
	}
	return p[3]
}

// normalSums gathers the normal equations of a linear least-squares fit of up to four columns.
type normalSums struct {
	gram [4][4]float64
	rhs  [4]float64
}

func (s *normalSums) add(y float64, columns ...float64) {
	for r, a := range columns {
		s.rhs[r] += a * y
		for c := range r + 1 {
			s.gram[r][c] += a * columns[c]
		}
	}
}

func (s *normalSums) solve(unknowns int) ([]float64, error) {
	gram := mat.NewSymDense(unknowns, nil)
	for r := range unknowns {
		for c := range r + 1 {
			gram.SetSym(r, c, s.gram[r][c])
		}
	}
	var factors mat.Cholesky
	if !factors.Factorize(gram) {
		return nil, errors.New("sine fit: the samples do not determine a sine")
	}
	var p mat.VecDense
	if err := factors.SolveVecTo(&p, mat.NewVecDense(unknowns, s.rhs[:unknowns])); err != nil {
		return nil, fmt.Errorf("sine fit: the samples hardly determine a sine: %w", err)
	}
	return p.RawVector().Data, nil
}
