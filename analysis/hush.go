package analysis

import (
	"math"
	"sort"

	"gonum.org/v1/gonum/dsp/fourier"
)

const (
	// The silence of the test signal, clear of what the sweep leaves and of the closing marker.
	hushFromSec, hushToSec = 14.9, 22.6

	// A line stands out when its bin holds this many times what is usual about it; white noise gives
	// one such in 10^8 bins.
	hushStandsOut = 25.0
	hushBlock     = 64
	mostHushLines = 200

	// What is usual is told from no less than this to either side.
	leastAroundHz = 4.0
)

// A hushLine is a steady line, hum or other, in the silence.
type hushLine struct {
	freqHz, peak float64
}

// A hush is what the silence of the test signal shows: noise, and lines in it.
type hush struct {
	g     gate
	power []float64  // squares of the Fourier integral's bins
	lines []hushLine // the strongest first
}

// hushOf looks at the silence of a take up to a frequency, by the signal's clock, under a Hann
// window (the gate's edges meet).
func hushOf(s Samples, p Placement, highHz float64) (*hush, error) {
	half := (hushToSec - hushFromSec) / 2
	h := &hush{g: gate{hushFromSec, hushToSec, half, half}}
	count := int(highHz / h.g.binHz())
	bins, err := newClockSpectrum(s, p, h.g, count).sum(count)
	if err != nil {
		return nil, err
	}
	h.power = make([]float64, count)
	for k, z := range bins {
		h.power[k] = square(z)
	}
	h.findLines()
	return h, nil
}

// usual returns what bins from low to high usually hold, lines among them or not.
func (h *hush) usual(low, high int, work []float64) float64 {
	low, high = max(1, low), min(len(h.power)-1, high)
	if low > high {
		return 0
	}
	return typical(append(work[:0], h.power[low:high+1]...), 1)
}

// density returns the noise about a band, in squares of full scale for each hertz of positive and
// of negative frequencies.
func (h *hush) density(b Band) float64 {
	aroundHz := math.Max(leastAroundHz, (b.HighHz-b.LowHz)/2)
	low, high := int((b.FreqHz-aroundHz)/h.g.binHz()), int((b.FreqHz+aroundHz)/h.g.binHz())
	return h.usual(low, high, nil) / h.g.energySec()
}

// findLines finds what stands out, the skirts of stronger lines left aside.
func (h *hush) findLines() {
	var tops []int
	work := make([]float64, 0, 2*hushBlock)
	for from := 1; from < len(h.power)-1; from += hushBlock {
		usual := h.usual(from-hushBlock/2, from+hushBlock+hushBlock/2, work)
		for k := from; k < min(from+hushBlock, len(h.power)-1); k++ {
			if p := h.power[k]; p > hushStandsOut*usual && p >= h.power[k-1] && p > h.power[k+1] {
				tops = append(tops, k)
			}
		}
	}
	sort.Slice(tops, func(i, j int) bool { return h.power[tops[i]] > h.power[tops[j]] })
	var kept []int
next:
	for _, k := range tops {
		for _, other := range kept {
			if d := math.Abs(float64(k - other)); d < 3 || h.power[k] < 4*h.power[other]*hannSkirt(d) {
				continue next
			}
		}
		if kept = append(kept, k); len(kept) > mostHushLines {
			break
		}
		off := peakOffset(h.power[k-1], h.power[k], h.power[k+1])
		fall := hannFall(off, 1)
		h.lines = append(h.lines, hushLine{
			freqHz: (float64(k) + off) * h.g.binHz(),
			peak:   2 * math.Sqrt(h.power[k]) / (fall * (h.g.toSec - h.g.fromSec) / 2),
		})
	}
}

// hannSkirt returns the most that a line shows, as a part of its top, under a Hann window, so many
// bins away (2 or more).
func hannSkirt(bins float64) float64 {
	v := 1 / (math.Pi * bins * (bins*bins - 1))
	return v * v
}

const (
	// A line is fitted with a course in time of so many terms: constant, slope and bend of its
	// amplitude and phase, so that the mains may drift.
	lineTerms = 3
	// It is fitted over so much to either side, where the sweep tells itself from it, and taken off
	// as far as its skirts are worth it.
	lineFitHz  = 2.5
	lineBins   = 1024
	skirtBins  = 200
	fitColumns = lineTerms + 2
)

// A lineRemover takes steady lines out of the bins of a gate.
type lineRemover struct {
	g    gate
	fft  *fourier.CmplxFFT
	term [lineTerms][]complex128 // transform of the line's course; bin 0 is the bin next to the line
}

func newLineRemover(g gate) *lineRemover {
	r := &lineRemover{g: g, fft: fourier.NewCmplxFFT(lineBins)}
	for i := range r.term {
		r.term[i] = make([]complex128, lineBins)
	}
	return r
}

// prepare makes the terms of a line that lies partBins above a bin.
func (r *lineRemover) prepare(partBins float64) {
	long := r.g.toSec - r.g.fromSec
	for i := range lineBins {
		part := float64(i) / lineBins
		z := complex(r.g.gain(r.g.fromSec+part*long)*long/lineBins, 0) * turnOfPart(partBins*part)
		u := 2*part - 1
		r.term[0][i] = z
		r.term[1][i] = z * complex(u, 0)
		r.term[2][i] = z * complex(1.5*u*u-0.5, 0) // Legendre's: nearly independent of one another
	}
	for i := range r.term {
		r.fft.Coefficients(r.term[i], r.term[i])
	}
}

func (r *lineRemover) at(term, offBins int) complex128 {
	return r.term[term][(offBins+lineBins)%lineBins]
}

// remove fits a line together with the sweep, which near it is what the other take holds times a
// number and a slope, and takes the line off.
func (r *lineRemover) remove(after, before []complex128, freqHz float64) {
	middle := int(math.Round(freqHz / r.g.binHz()))
	half := int(lineFitHz / r.g.binHz())
	r.prepare(freqHz/r.g.binHz() - float64(middle))
	var fit complexFit
	var row [fitColumns]complex128
	for k := max(1, middle-half); k <= min(middle+half, len(after)-1); k++ {
		for i := range lineTerms {
			row[i] = r.at(i, k-middle)
		}
		row[lineTerms] = before[k]
		row[lineTerms+1] = before[k] * complex(float64(k-middle)/float64(half), 0)
		fit.add(row, after[k])
	}
	course, ok := fit.solve()
	if !ok {
		return
	}
	for k := max(0, middle-skirtBins); k <= min(middle+skirtBins, len(after)-1); k++ {
		for i := range lineTerms {
			after[k] -= course[i] * r.at(i, k-middle)
		}
	}
}
