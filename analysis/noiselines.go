package analysis

import (
	"math"
	"sort"
)

// humCutLast is the highest harmonic of the mains that is cut out of noise where it stands: above it
// the lines of a rectifier are weak, and close to one another for their width.
const humCutLast = 60

// cuts returns the ranges that the hum takes up in the spectrum: its lines to the tenth, and further
// harmonics as far as they stand. None where no line stands.
func (m *humMeter) cuts(h *Hum) []FreqRange {
	if h == nil || !h.Found {
		return nil
	}
	var out []FreqRange
	for n := 1; n <= humCutLast; n++ {
		l, _ := m.line(h.MainsHz, n, mainsWanderFrac)
		if !l.Hidden && (l.Stands || n <= humLines) {
			out = append(out, m.cut(l.FreqHz, l.MeanSquare))
		}
	}
	return out
}

// cut returns the bins that a line stands in, as far as its leakage shows beside the noise there, in
// hertz.
func (m *humMeter) cut(freqHz, meanSquare float64) FreqRange {
	middle := int(math.Round(freqHz / m.sp.BinHz))
	half := leastCut + int(math.Ceil(mainsWanderFrac*freqHz/m.sp.BinHz))
	for ; half < widestCut; half++ {
		low, high := max(0, middle-half-3), min(len(m.sp.MeanSquare)-1, middle+half+3)
		beside := math.Min(m.sp.MeanSquare[low], m.sp.MeanSquare[high])
		if meanSquare*leakage(float64(half)) <= leakPart*beside {
			break
		}
	}
	return FreqRange{(float64(middle-half) - 0.5) * m.sp.BinHz, (float64(middle+half) + 0.5) * m.sp.BinHz}
}

// A NoiseLine is a line in noise that is none of the mains.
type NoiseLine struct {
	FreqHz     float64
	MeanSquare float64   // the noise under it taken off
	Span       FreqRange // the bins that it takes up
}

// LevelDBFS returns the level of the line.
func (l NoiseLine) LevelDBFS() float64 { return DBFSFromMeanSquare(l.MeanSquare) }

const mostNoiseLines = 16

// lines returns the strongest lines of a band outside the ranges given, strongest first.
func (m *humMeter) lines(band FreqRange, outside []FreqRange) []NoiseLine {
	bins := m.sp.MeanSquare
	stands := 6 + 40/float64(m.sp.Segments) // times the noise beside it: no bin of noise is that high
	var found []NoiseLine
	for _, r := range band.Without(outside...) {
		for k := m.sp.bin(r.LowHz, math.Ceil); k <= m.sp.bin(r.HighHz, math.Floor); k++ {
			if k <= 2*lobeBins || k+2*lobeBins >= len(bins) || bins[k] < bins[k-1] || bins[k] < bins[k+1] ||
				bins[k] < stands*math.Min(bins[k-leastCut], bins[k+leastCut]) {
				continue
			}
			below, _ := m.side(k-leastCut, -1, humFloorBins)
			above, _ := m.side(k+leastCut, 1, humFloorBins)
			floor := math.Max(below, above)
			if bins[k] < stands*floor || bins[k] < maxOf(bins[k-lobeBins:k+lobeBins+1]) {
				continue
			}
			power := sum(bins, k-lobeBins, k+lobeBins) - floor*(2*lobeBins+1)
			freqHz := (float64(k) + peakOffset(bins[k-1], bins[k], bins[k+1])) * m.sp.BinHz
			found = append(found, NoiseLine{FreqHz: freqHz, MeanSquare: power, Span: m.cut(freqHz, power)})
		}
	}
	sort.Slice(found, func(i, j int) bool { return found[i].MeanSquare > found[j].MeanSquare })
	return found[:min(len(found), mostNoiseLines)]
}

func maxOf(x []float64) float64 {
	most := x[0]
	for _, v := range x {
		most = math.Max(most, v)
	}
	return most
}
