package analysis

import (
	"math"
	"math/bits"
	"sort"
	"sync"
)

// A Spectrum is the mean of the power spectra of half-overlapped segments (P. D. Welch, IEEE Trans.
// AU-15, 1967), under Nuttall's four-term window with a continuous third derivative.
//
// MeanSquare[k] belongs to k·BinHz, k from 0 to half the segment. The bins are scaled so that sums
// of them are mean squares: all of them add up to that of the signal, the bins of a band to that of
// the noise in the band, and the nine bins about a line to the line's. The equivalent noise
// bandwidth of one bin is 2.13 bins; sums need no correction for it.
type Spectrum struct {
	RateHz     float64
	BinHz      float64
	Segments   int // how many were averaged
	MeanSquare []float64
}

// BandDBFS returns the level of what lies from fromHz to toHz, both included.
func (sp *Spectrum) BandDBFS(fromHz, toHz float64) float64 {
	return DBFSFromMeanSquare(sum(sp.MeanSquare, sp.bin(fromHz, math.Ceil), sp.bin(toHz, math.Floor)))
}

// bin returns the number of the bin at a frequency, kept within the spectrum.
func (sp *Spectrum) bin(freqHz float64, round func(float64) float64) int {
	return int(math.Max(0, math.Min(round(freqHz/sp.BinHz), float64(len(sp.MeanSquare)-1))))
}

// sum adds bins from to to, both included.
func sum(bins []float64, from, to int) float64 {
	total := 0.0
	for k := from; k <= to; k++ {
		total += bins[k]
	}
	return total
}

// typical returns the median of some bins, scaled to what would be their mean if they held noise
// alone and each were the average of so many segments (the median of a gamma distribution, after
// Wilson and Hilferty). Lines among them hardly move it. The slice is sorted.
func typical(bins []float64, segments int) float64 {
	if len(bins) == 0 {
		return 0
	}
	sort.Float64s(bins)
	mid := bins[len(bins)/2]
	if len(bins)%2 == 0 {
		mid = (mid + bins[len(bins)/2-1]) / 2
	}
	c := 1 - 1/(9*float64(segments))
	return mid / (c * c * c)
}

// An averager sums up the power of segments of n real samples, n a power of two from 8. A segment
// is transformed as n/2 complex numbers, even samples real and odd ones imaginary. What sorts the
// two apart is linear in the sums kept here, so it is done once, at the end.
type averager struct {
	n        int
	window   []float64
	plan     *transform
	z        []complex128
	power    []float64 // |z|², in the transform's order
	cross    []float64 // Im(z z'), z' at the negative frequency: one a pair, in the order of the lower
	dc, top  float64   // bin 0 and bin n/2
	segments int
}

func newAverager(n int) *averager {
	return &averager{
		n: n, window: windowOf(n), plan: transformOf(n / 2),
		z: make([]complex128, n/2), power: make([]float64, n/2), cross: make([]float64, n/4),
	}
}

// add takes one segment of exactly n samples, as its two halves.
func (a *averager) add(first, second []float64) {
	z := a.z
	pack(z[:len(z)/2], first, a.window[:a.n/2])
	pack(z[len(z)/2:], second, a.window[a.n/2:])
	a.plan.run(z)
	sum, difference := real(z[0])+imag(z[0]), real(z[0])-imag(z[0])
	a.dc += sum * sum
	a.top += difference * difference
	a.power[1] += real(z[1])*real(z[1]) + imag(z[1])*imag(z[1])
	// Bits read backwards, minus the number mirrors each octave of positions in itself.
	for start := 2; start < len(z); start *= 2 {
		addPairs(z[start:2*start], a.power[start:2*start], a.cross[start/2:start])
	}
	a.segments++
}

// pack puts sample 2j, under the window, into number j as its real part, sample 2j+1 as the
// imaginary.
func pack(z []complex128, x, window []float64) {
	x, window = x[:2*len(z)], window[:2*len(z)]
	for j := range z {
		z[j] = complex(x[2*j]*window[2*j], x[2*j+1]*window[2*j+1])
	}
}

func addPairs(z []complex128, power, cross []float64) {
	half := len(z) / 2
	lower, upper := z[:half], z[half:]
	lowPower, highPower := power[:half], power[half:]
	lowPower, cross = lowPower[:len(lower)], cross[:len(lower)]
	upper, highPower = upper[:len(lower)], highPower[:len(lower)]
	for i := range lower {
		back := len(lower) - 1 - i
		a, b := lower[i], upper[back]
		lowPower[i] += real(a)*real(a) + imag(a)*imag(a)
		highPower[back] += real(b)*real(b) + imag(b)*imag(b)
		cross[i] += real(a)*imag(b) + imag(a)*real(b)
	}
}

// spectrum returns the mean so far, nil before the first segment.
func (a *averager) spectrum(rateHz float64) *Spectrum {
	if a.segments == 0 {
		return nil
	}
	sp := &Spectrum{
		RateHz: rateHz, BinHz: rateHz / float64(a.n), Segments: a.segments,
		MeanSquare: make([]float64, a.n/2+1),
	}
	a.fill(sp.MeanSquare)
	return sp
}

// fill sorts the two halves of each pair apart and scales to mean squares.
func (a *averager) fill(bins []float64) {
	n := float64(a.n)
	scale := 2 / (float64(a.segments) * n * n * windowPower())
	bins[0], bins[a.n/2] = a.dc*scale/2, a.top*scale/2
	bins[a.n/4] = a.power[1] * scale
	factors := pairFactorsOf(a.n)
	shift := bits.LeadingZeros64(uint64(len(a.z) - 1))
	for start := 2; start < len(a.z); start *= 2 {
		for i := range start / 2 {
			low, high := start+i, 2*start-1-i
			k := int(bits.Reverse64(uint64(low)) >> shift)
			turn := factors[start/2+i]
			mean := (a.power[low] + a.power[high]) / 2
			apart := real(turn)*a.cross[start/2+i] - imag(turn)*(a.power[low]-a.power[high])/2
			bins[k] = math.Max(0, mean+apart) * scale
			bins[a.n/2-k] = math.Max(0, mean-apart) * scale
		}
	}
}

var pairFactors sync.Map // length -> []complex128; never changed once made

// pairFactorsOf returns exp(2πi k/n) for the lower bin of each pair, in the order of cross.
func pairFactorsOf(n int) []complex128 {
	if f, ok := pairFactors.Load(n); ok {
		return f.([]complex128)
	}
	factors := make([]complex128, n/4)
	shift := bits.LeadingZeros64(uint64(n/2 - 1))
	for start := 2; start < n/2; start *= 2 {
		for i := range start / 2 {
			factors[start/2+i] = unit(int(bits.Reverse64(uint64(start+i))>>shift), n)
		}
	}
	kept, _ := pairFactors.LoadOrStore(n, factors)
	return kept.([]complex128)
}

func (a *averager) reset() {
	clear(a.power)
	clear(a.cross)
	a.dc, a.top, a.segments = 0, 0, 0
}
