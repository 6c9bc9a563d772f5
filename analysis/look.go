package analysis

import (
	"math"
)

const (
	// A look at a recording takes the power of two samples that lasts 60 to 120 ms; eight times as
	// much where the line is a low one, so that hum 10 Hz beside it is another line.
	shortLookSec = 0.06
	longLooks    = 8
	longBelowHz  = 400.0

	// A line stands out when its bin holds this many times what is usual beside it.
	standsOut = 20.0
	// What a look must hold to be more than digital silence: -150 dBFS.
	leastMeanSquare = 0.5e-15

	// How far a tone may lie from the frequency it is looked for at: two machines' clocks, and tape.
	nearFrac = 0.01
)

// A line is what one look found: the strongest steady-looking line, if any.
type line struct {
	at      float64 // where the look was wanted: its middle, seconds
	fromSec float64 // where its window begins and how long it is
	longSec float64
	silent  bool

	found      bool
	freqHz     float64
	binHz      float64
	meanSquare float64
	sigmaDB    float64 // what noise makes of the level
}

// same says whether two looks show the same tone at the same level.
func (a line) same(b line) bool {
	if !a.found || !b.found {
		return false
	}
	apartHz := math.Abs(a.freqHz - b.freqHz)
	apartDB := math.Abs(DBFSFromMeanSquare(a.meanSquare) - DBFSFromMeanSquare(b.meanSquare))
	return apartHz <= math.Max(0.3*math.Max(a.binHz, b.binHz), 0.001*a.freqHz) &&
		apartDB <= steadyWithinDB+3*math.Hypot(a.sigmaDB, b.sigmaDB)
}

// A lookout takes looks at one channel.
type lookout struct {
	s       Samples
	rateHz  float64
	lastSec float64 // length of the channel
	wantHz  float64 // look at this frequency alone; 0 looks everywhere
	means   map[int]*averager
	samples []float64
	bins    []float64
	work    []float64
}

func newLookout(s Samples) *lookout {
	return &lookout{s: s, rateHz: s.RateHz(), lastSec: float64(s.Frames()) / s.RateHz(), means: map[int]*averager{}}
}

func (l *lookout) shortLook() int {
	n := leastSegment
	for float64(n) < shortLookSec*l.rateHz {
		n *= 2
	}
	return n
}

// look looks at the channel about a time; near its ends the window is moved inside.
func (l *lookout) look(atSec float64) (line, error) {
	n := l.shortLook()
	if l.wantHz > 0 {
		if l.wantHz < longBelowHz {
			n *= longLooks
		}
		return l.lookAt(atSec, n)
	}
	found, err := l.lookAt(atSec, n)
	if err == nil && found.found && found.freqHz < longBelowHz {
		return l.lookAt(atSec, n*longLooks)
	}
	return found, err
}

func (l *lookout) lookAt(atSec float64, n int) (line, error) {
	frame := int64(math.Round(atSec*l.rateHz)) - int64(n/2)
	frame = max(0, min(frame, l.s.Frames()-int64(n)))
	result := line{at: atSec, fromSec: float64(frame) / l.rateHz, longSec: float64(n) / l.rateHz, binHz: l.rateHz / float64(n)}
	if len(l.samples) < n {
		l.samples = make([]float64, n)
	}
	x := l.samples[:n]
	got, err := readFull(l.s, x, frame)
	if err != nil {
		return result, err
	}
	clear(x[got:])
	l.powers(x)
	total := sum(l.bins, 0, len(l.bins)-1)
	result.silent = total < leastMeanSquare
	if !result.silent {
		l.strongest(&result)
	}
	return result, nil
}

// powers makes the spectrum of one window, bad samples and the mean taken out.
func (l *lookout) powers(x []float64) {
	for i, v := range x {
		if !(math.Abs(v) <= largestSample) {
			x[i] = 0
		}
	}
	w := windowOf(len(x))
	offset := 0.0
	for i, v := range x {
		offset += v * w[i]
	}
	offset /= windowTerms[0] * float64(len(x))
	for i := range x {
		x[i] -= offset
	}
	mean := l.means[len(x)]
	if mean == nil {
		mean = newAverager(len(x))
		l.means[len(x)] = mean
	}
	mean.reset()
	mean.add(x[:len(x)/2], x[len(x)/2:])
	if cap(l.bins) < len(x)/2+1 {
		l.bins = make([]float64, len(x)/2+1)
	}
	l.bins = l.bins[:len(x)/2+1]
	mean.fill(l.bins)
}

// strongest finds the line, if the largest bin is one.
func (l *lookout) strongest(to *line) {
	low, high := l.searched(to.binHz)
	top := low
	for k := low; k <= high; k++ {
		if l.bins[k] > l.bins[top] {
			top = k
		}
	}
	if top < 1 || top+1 >= len(l.bins) || l.bins[top] < l.bins[top-1] || l.bins[top] < l.bins[top+1] {
		return
	}
	floor := l.usual(top)
	if l.bins[top] < standsOut*floor {
		return
	}
	to.freqHz = (float64(top) + peakOffset(l.bins[top-1], l.bins[top], l.bins[top+1])) * to.binHz
	if l.wantHz > 0 && math.Abs(to.freqHz-l.wantHz) > math.Max(nearFrac*l.wantHz, to.binHz/2) {
		return
	}
	from, end := max(0, top-lobeBins), min(len(l.bins)-1, top+lobeBins)
	to.meanSquare = sum(l.bins, from, end) - floor*float64(end-from+1)
	to.sigmaDB = dbPerPart * math.Sqrt(floor/to.meanSquare)
	to.found = to.meanSquare > 0
}

// searched returns the bins in which the line may have its largest.
func (l *lookout) searched(binHz float64) (low, high int) {
	if l.wantHz > 0 {
		off := math.Max(nearFrac*l.wantHz, 1.5*binHz)
		low, high = int(math.Round((l.wantHz-off)/binHz)), int(math.Round((l.wantHz+off)/binHz))
	} else {
		low, high = int(lowestToneHz/binHz), int(highestToneHz(l.rateHz)/binHz)
	}
	return max(1, low), min(high, len(l.bins)-2)
}

// usual returns the noise per bin about a line, lines beside it left aside.
func (l *lookout) usual(top int) float64 {
	const within = 24
	l.work = l.work[:0]
	for k := max(1, top-within); k <= min(len(l.bins)-1, top+within); k++ {
		if k < top-leastCut || k > top+leastCut {
			l.work = append(l.work, l.bins[k])
		}
	}
	return typical(l.work, 1)
}

// peakOffset returns how far off the middle bin a line lies, from three powers: the top of a
// parabola through their logarithms.
func peakOffset(left, middle, right float64) float64 {
	if left <= 0 || right <= 0 || middle <= 0 {
		return 0
	}
	a, b, c := math.Log(left), math.Log(middle), math.Log(right)
	if curve := a - 2*b + c; curve < 0 {
		return 0.5 * (a - c) / curve
	}
	return 0
}
