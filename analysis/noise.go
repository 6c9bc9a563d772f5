package analysis

import "math"

const (
	// The band of all figures of noise (AES17), where the sample rate allows.
	bandLowHz, bandHighHz = 20.0, 20000.0
	// Above this part of the rate a recorder's filters are at work, not the signal.
	usableFrac = 0.45

	lastHarmonic = 10

	// A line is cut out as far as its leakage would stand above this part of the noise beside it,
	// at least over its main lobe and one bin more, and never further than the cap.
	leakPart    = 0.1
	leastCut    = lobeBins + 1
	widestCut   = 400
	floorWithin = 200 // bins on either side that say what noise is usual there
	bridgeBins  = 24  // bins on either side of a cut that say what to put into it
)

// A cut is the range of bins taken up by one line.
type cut struct {
	middle, half int
	meanSquare   float64 // of the line
}

// lines says what a spectrum shows besides noise.
type lines struct {
	sp   *Spectrum
	cuts []cut // DC, the tone, its harmonics
}

// linesOf finds DC, the tone and its harmonics and how much of the spectrum each takes up.
func linesOf(sp *Spectrum, toneHz float64) *lines {
	l := &lines{sp: sp}
	for h := 0; h <= lastHarmonic; h++ {
		if freqHz := float64(h) * toneHz; h < 2 || freqHz <= usableFrac*sp.RateHz {
			l.cuts = append(l.cuts, l.cutAt(int(math.Round(freqHz/sp.BinHz))))
		}
	}
	return l
}

// cutAt measures the line about a bin.
func (l *lines) cutAt(middle int) cut {
	power := l.lobe(middle)
	floor := l.usual(middle)
	c := cut{middle: middle, half: leastCut, meanSquare: math.Max(0, power-floor*(2*lobeBins+1))}
	for c.half < widestCut && c.meanSquare*leakage(float64(c.half)) > leakPart*floor {
		c.half++
	}
	return c
}

// lobe adds up the bins that a line about one of them takes up.
func (l *lines) lobe(middle int) float64 {
	return sum(l.sp.MeanSquare, max(0, middle-lobeBins), min(len(l.sp.MeanSquare)-1, middle+lobeBins))
}

// usual returns the noise that is usual in the bins about one, whatever lines stand there.
func (l *lines) usual(middle int) float64 {
	from, to := max(1, middle-floorWithin), min(len(l.sp.MeanSquare)-1, middle+floorWithin)
	var around []float64
	for k := from; k <= to; k++ {
		if k < middle-leastCut || k > middle+leastCut {
			around = append(around, l.sp.MeanSquare[k])
		}
	}
	return typical(around, l.sp.Segments)
}

// covered says whether a bin belongs to any cut.
func (l *lines) covered(bin int) bool {
	for _, c := range l.cuts {
		if bin >= c.middle-c.half && bin <= c.middle+c.half {
			return true
		}
	}
	return false
}

// bridge returns the noise, per bin, on both sides of a cut: what most likely lies under it. Where
// only one side has bins to tell, that one.
func (l *lines) bridge(c cut) (below, above float64) {
	pick := func(bin, step int) (picked []float64) {
		for ; bin > 0 && bin < len(l.sp.MeanSquare)-1 && len(picked) < bridgeBins; bin += step {
			if !l.covered(bin) {
				picked = append(picked, l.sp.MeanSquare[bin])
			}
		}
		return picked
	}
	low, high := pick(c.middle-c.half-1, -1), pick(c.middle+c.half+1, 1)
	below, above = typical(low, l.sp.Segments), typical(high, l.sp.Segments)
	if len(low) < bridgeBins/4 {
		below = above
	}
	if len(high) < bridgeBins/4 {
		above = below
	}
	return below, above
}

// without returns the mean square from one bin to another with some of the lines taken out and
// their places filled with the noise beside them.
func (l *lines) without(from, to int, out []cut) float64 {
	total, next := 0.0, from
	for _, c := range out {
		low, high := max(next, c.middle-c.half), min(to, c.middle+c.half)
		if low > high {
			continue
		}
		total += sum(l.sp.MeanSquare, next, low-1)
		below, above := l.bridge(c)
		for k := low; k <= high; k++ {
			part := float64(k-(c.middle-c.half)) / float64(2*c.half)
			total += below + (above-below)*part
		}
		next = high + 1
	}
	return total + sum(l.sp.MeanSquare, next, to)
}

// bandHigh returns the upper end of the band at a sample rate.
func bandHigh(rateHz float64) float64 { return math.Min(bandHighHz, usableFrac*rateHz) }

// noiseDBFS returns what lies from 20 Hz to 20 kHz besides the tone and its harmonics.
func (l *lines) noiseDBFS() float64 {
	from, to := l.sp.bin(bandLowHz, math.Ceil), l.sp.bin(bandHigh(l.sp.RateHz), math.Floor)
	return DBFSFromMeanSquare(l.without(from, to, l.cuts))
}

// restDBFS returns everything but the tone and DC, over all frequencies.
func (l *lines) restDBFS() float64 {
	return DBFSFromMeanSquare(l.without(1, len(l.sp.MeanSquare)-1, l.cuts[:2]))
}

// harmonicsDB returns harmonics 2 and up relative to the tone, with the noise in their bins taken
// off; one that does not stand out from it is given as that noise.
func (l *lines) harmonicsDB() []float64 {
	tone := l.cuts[1].meanSquare
	if tone <= 0 {
		return nil
	}
	var out []float64
	for _, c := range l.cuts[2:] {
		below, above := l.bridge(c)
		noise := (below + above) / 2 * (2*lobeBins + 1)
		out = append(out, DBFromRatio(math.Sqrt(math.Max(l.lobe(c.middle)-noise, noise)/tone)))
	}
	return out
}

// densityAtTone returns the mean square of the noise beside the tone in one hertz.
func (l *lines) densityAtTone() float64 {
	below, above := l.bridge(l.cuts[1])
	return (below + above) / 2 / l.sp.BinHz
}
