package analysis

import "math"

const (
	// The mains keeps to its frequency within this part, and wanders less within a take.
	mainsOffFrac    = 0.005
	mainsWanderFrac = 0.001

	humLines = 10

	// A line stands where it is this many times its own standard uncertainty, noise alone counted.
	humStands = 6.0
	// Bins on either side of a line that say what noise lies under it; fewer than the least say
	// nothing.
	humFloorBins  = 16
	humFloorLeast = 3
	// What a median of bins scatters more than their mean.
	medianExcess = 1.57
)

// Hum is what a spectrum shows at the mains frequency and its harmonics to the tenth.
type Hum struct {
	// MainsHz is the mains frequency as found; where no line stands out, the one that was given, or
	// of 50 and 60 the one with more power beside it. Found says that some line stands out.
	MainsHz float64
	Found   bool

	Lines []HumLine

	// MeanSquare is the lines added by power, the noise under them taken off; StdU is its standard
	// uncertainty. Where there is no hum MeanSquare scatters about 0 and may be negative: what is
	// shown then is that hum is no more than MeanSquare and a few StdU.
	MeanSquare, StdU float64
}

// A HumLine is one line. One that a tone lies on cannot be told from it: it is Hidden, holds nothing
// and is not in the sum; the same goes for one beyond half the rate.
type HumLine struct {
	Harmonic   int // 1 is the mains frequency
	FreqHz     float64
	MeanSquare float64 // the noise under it taken off; may be negative where there is nothing
	StdU       float64
	Stands     bool
	Hidden     bool
}

// LevelDBFS returns the level of the line; [FloorDBFS] where nothing is left of it.
func (l HumLine) LevelDBFS() float64 { return DBFSFromMeanSquare(math.Max(0, l.MeanSquare)) }

// LevelDBFS returns the level of all lines together; [FloorDBFS] where nothing is left.
func (h *Hum) LevelDBFS() float64 { return DBFSFromMeanSquare(math.Max(0, h.MeanSquare)) }

// HumIn measures the hum in a spectrum. mainsHz is the mains frequency as stated, within 0.5 %; 0
// looks for 50 and 60 Hz. tonesHz are tones that stand in the spectrum: their lines and harmonics
// hide what lies under them. A line's power is that of the nine bins of its main lobe, less the
// noise that stands beside it (common practice, no source); with the window of these spectra no
// other correction is needed, wherever the line lies between bins.
//
// Nil where the bins are too wide to keep the lines apart, over 3.7 Hz for 50 Hz, as a tone of less
// than a second gives them, and for a mainsHz that is no frequency.
func HumIn(sp *Spectrum, mainsHz float64, tonesHz ...float64) *Hum {
	if sp == nil || mainsHz < 0 || math.IsNaN(mainsHz) || math.IsInf(mainsHz, 0) {
		return nil
	}
	m := &humMeter{sp: sp}
	for _, toneHz := range tonesHz {
		m.hidden = append(m.hidden, linesOf(sp, toneHz).cuts[1:]...)
	}
	nominals := []float64{mainsHz}
	if mainsHz == 0 {
		nominals = []float64{50, 60}
	}
	var best *Hum
	most := math.Inf(-1)
	for _, nominal := range nominals {
		if h, score := m.hum(nominal); h != nil && score > most {
			best, most = h, score
		}
	}
	return best
}

// A humMeter measures lines in a spectrum.
type humMeter struct {
	sp     *Spectrum
	hidden []cut
}

// hum measures the lines of one mains frequency. The score says how much speaks for it: lines that
// stand count for more than power that does not.
func (m *humMeter) hum(nominalHz float64) (*Hum, float64) {
	if nominalHz/m.sp.BinHz < 2*lobeBins+1+4 {
		return nil, 0
	}
	h := &Hum{MainsHz: nominalHz}
	var weight, turns, score float64
	for n := 1; n <= humLines; n++ {
		if l, atHz := m.line(nominalHz, n, mainsOffFrac); l.Stands && math.Abs(atHz/l.FreqHz-1) <= mainsOffFrac+0.15*m.sp.BinHz/l.FreqHz {
			w := float64(n*n) * l.MeanSquare * l.MeanSquare / (l.StdU * l.StdU)
			weight += w
			turns += w * atHz / float64(n)
			score += 1 + math.Min(50, l.MeanSquare/l.StdU)
		}
	}
	if weight > 0 {
		h.MainsHz, h.Found = turns/weight, true
	}
	for n := 1; n <= humLines; n++ {
		l, _ := m.line(h.MainsHz, n, mainsWanderFrac)
		h.Lines = append(h.Lines, l)
		if !l.Hidden {
			h.MeanSquare += l.MeanSquare
			h.StdU = math.Hypot(h.StdU, l.StdU)
		}
	}
	if !h.Found {
		score = math.Min(0.5, h.MeanSquare/m.total())
	}
	return h, score
}

func (m *humMeter) total() float64 {
	return math.Max(math.SmallestNonzeroFloat64, sum(m.sp.MeanSquare, 1, len(m.sp.MeanSquare)-1))
}

// line measures harmonic n within so much of its frequency, and where its power lies.
func (m *humMeter) line(mainsHz float64, n int, offFrac float64) (HumLine, float64) {
	l := HumLine{Harmonic: n, FreqHz: float64(n) * mainsHz}
	middle := int(math.Round(l.FreqHz / m.sp.BinHz))
	off := int(math.Ceil(offFrac * l.FreqHz / m.sp.BinHz))
	half := lobeBins + off
	if middle+half >= len(m.sp.MeanSquare) || m.covered(middle-half, middle+half) {
		l.Hidden = true
		return l, l.FreqHz
	}
	floor, count := m.floor(middle, half, mainsHz)
	moment, top := 0.0, middle
	for k := middle - half; k <= middle+half; k++ {
		v := m.sp.MeanSquare[k] - floor
		l.MeanSquare += v
		moment += v * float64(k)
		if m.sp.MeanSquare[k] > m.sp.MeanSquare[top] {
			top = k
		}
	}
	// Noise on noise, noise on the line, and the floor that was taken off.
	bins, spread := float64(2*half+1), binVariance(m.sp.Segments)
	alone := floor * math.Sqrt(spread*(bins+medianExcess*bins*bins/count))
	l.StdU = math.Sqrt(alone*alone + 2*math.Max(0, l.MeanSquare)*floor*spread)
	inside := top > middle-off-2 && top < middle+off+2
	if l.MeanSquare > humStands*alone && inside {
		l.Stands = true
		return l, moment / l.MeanSquare * m.sp.BinHz
	}
	return l, l.FreqHz
}

// floor returns the noise per bin under a line, from the bins between it and its neighbours, and how
// many these are. Noise that falls as a power of frequency is followed.
func (m *humMeter) floor(middle, half int, mainsHz float64) (perBin, count float64) {
	gap := min(humFloorBins, int(mainsHz/m.sp.BinHz)-2*half-1)
	below, belowCount := m.side(middle-half-1, -1, gap)
	above, aboveCount := m.side(middle+half+1, 1, gap)
	count = float64(belowCount + aboveCount)
	switch {
	case aboveCount < humFloorLeast && belowCount < humFloorLeast:
		return (&lines{sp: m.sp}).usual(middle), 1
	case aboveCount < humFloorLeast:
		return below, count
	case belowCount < humFloorLeast:
		return above, count
	case !(below > 0 && above > 0):
		return (below + above) / 2, count
	}
	low, high := float64(middle-half)-float64(belowCount)/2, float64(middle+half)+float64(aboveCount)/2
	part := math.Log(float64(middle)/low) / math.Log(high/low)
	return below * math.Pow(above/below, part), count
}

// side returns what is usual in so many bins going one way, tones and DC left aside.
func (m *humMeter) side(bin, step, most int) (usual float64, count int) {
	var work [humFloorBins]float64
	for ; count < most && bin > lobeBins && bin < len(m.sp.MeanSquare); bin += step {
		if !m.covered(bin, bin) {
			work[count] = m.sp.MeanSquare[bin]
			count++
		}
	}
	return typical(work[:count], m.sp.Segments), count
}

// covered says whether a tone takes up any of the bins.
func (m *humMeter) covered(from, to int) bool {
	for _, c := range m.hidden {
		if to >= c.middle-c.half && from <= c.middle+c.half {
			return true
		}
	}
	return false
}
