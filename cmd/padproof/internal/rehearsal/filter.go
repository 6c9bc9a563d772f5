package rehearsal

import "gonum.org/v1/gonum/dsp/fourier"

// A filter is an effect: it convolves with a kernel by overlap-save. It gives out as many
// samples as it took in, without delay.
type filter struct {
	fft      *fourier.FFT
	response []complex128
	taps     int
	window   []float64 // the last inputs; the first taps-1 of them are from before
	filled   int
	skip     int // outputs that belong to times before the first input
	owed     int // outputs not yet given for inputs taken
	spectrum []complex128
	wave     []float64
	out      []float64
}

// newFilter makes a filter of a kernel whose time 0 stands in the middle.
func newFilter(kernel []float64) *filter {
	n := len(kernel)
	size := 4 * n
	f := &filter{
		fft: fourier.NewFFT(size), taps: n, window: make([]float64, size), filled: n - 1, skip: n / 2,
		spectrum: make([]complex128, size/2+1), wave: make([]float64, size),
	}
	copy(f.wave, kernel)
	f.response = f.fft.Coefficients(nil, f.wave)
	for i := range f.response {
		f.response[i] /= complex(float64(size), 0)
	}
	return f
}

func (f *filter) run(block []float64) []float64 {
	f.out = f.out[:0]
	f.owed += len(block)
	for len(block) > 0 {
		n := copy(f.window[f.filled:], block)
		block = block[n:]
		if f.filled += n; f.filled == len(f.window) {
			f.convolve()
		}
	}
	return f.out
}

// rest lets silence follow until every input has its output.
func (f *filter) rest() []float64 {
	f.out = f.out[:0]
	for f.owed > 0 {
		clear(f.window[f.filled:])
		f.convolve()
	}
	return f.out
}

// convolve turns a full window into outputs and keeps its end for the next.
func (f *filter) convolve() {
	f.fft.Coefficients(f.spectrum, f.window)
	for i, r := range f.response {
		f.spectrum[i] *= r
	}
	f.fft.Sequence(f.wave, f.spectrum)
	fresh := f.wave[f.taps-1:]
	skipped := min(f.skip, len(fresh))
	f.skip -= skipped
	fresh = fresh[skipped:]
	fresh = fresh[:min(len(fresh), f.owed)]
	f.owed -= len(fresh)
	f.out = append(f.out, fresh...)
	f.filled = copy(f.window, f.window[len(f.window)-(f.taps-1):])
}
