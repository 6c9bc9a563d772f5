package suspect

import "math"

// What something else may do to the figures, about what the drawing gives: standard deviations. The
// level of all losses and the legs move freely, a response falls off towards its ends, and an
// ohmmeter may read anything.
const (
	noneLevelDB = 12
	noneTiltDB  = 2 // at 20 Hz, and at 20 kHz
	noneLegsDB  = 10
	nonePhase   = 70
	noneOhms    = 1.5 // natural logarithm
	noneBound   = 0.3 // chance of a bound
	noneTurned  = 0.2 // chance that the polarity is turned over
	noneHum     = 0.3 // chance that hum stands out
)

// scoreNone is the logarithm of the likelihood of all that was taken where none of the faults, nor a
// sound unit, explains it.
func (w *scorer) scoreNone(drawn *prediction) float64 {
	w.fill(drawn)
	w.covariance()
	n := w.known
	for a, ra := range w.rows[:n] {
		for b := range a + 1 {
			w.cov[a*n+b] += w.noneShare(ra, w.rows[b], a == b)
		}
	}
	logDet := w.factor()
	sum := -(w.chi() + logDet + float64(n)*math.Log(2*math.Pi)) / 2
	sum += float64(len(w.rows)-n) * math.Log(noneBound)
	if w.e.Polarity != 0 && w.toneAt >= 0 {
		turned := real(drawn.at[w.toneAt])*float64(w.e.Polarity) < 0
		sum += math.Log(chanceOf(turned, noneTurned))
	}
	if seen, ok := w.e.Hum.humSeen(); ok {
		sum += math.Log(chanceOf(seen, noneHum))
	}
	if w.noise != nil {
		sum += math.Log(0.5)
	}
	if math.IsNaN(sum) {
		return math.Inf(-1)
	}
	return sum
}

func chanceOf(happened bool, p float64) float64 {
	if happened {
		return p
	}
	return 1 - p
}

// noneShare is what two rows have in common, as variance.
func (w *scorer) noneShare(a, b row, same bool) float64 {
	losses := func(r row) bool { return r.kind == lossRow || r.kind == responseRow }
	switch {
	case losses(a) && losses(b):
		la, ha := w.tilts(a)
		lb, hb := w.tilts(b)
		v := noneTiltDB * noneTiltDB * (la*lb + ha*hb)
		if a.kind == lossRow && b.kind == lossRow {
			v += noneLevelDB * noneLevelDB
		}
		return v
	case !same:
		return 0
	case a.kind == legsRow:
		return noneLegsDB * noneLegsDB
	case a.kind == phaseRow:
		return nonePhase * nonePhase
	}
	return noneOhms * noneOhms
}

// tilts are how far a point lies towards either end of the band, of a response less so at the tone.
func (w *scorer) tilts(r row) (low, high float64) {
	at := func(i int) (float64, float64) {
		hz := w.freqs[i]
		return 1 / (1 + hz/60), math.Min(hz/20e3, 3) * math.Min(hz/20e3, 3)
	}
	low, high = at(r.at)
	if r.kind == responseRow {
		l, h := at(r.ref)
		low, high = low-l, high-h
	}
	return low, high
}
