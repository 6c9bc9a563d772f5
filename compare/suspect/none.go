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

// Of what is none of the faults, this share is something of another kind than a fault with a part off
// beside it; and of that, half tilts the response.
const otherShare = 0.3

// scoreNone is the logarithm of the likelihood of all that was taken where none of the faults, nor a
// sound unit, explains it: two things are wrong, or something else.
func (w *scorer) scoreNone(all []*hypothesis, drawn *prediction) float64 {
	scores := []float64{
		math.Log(otherShare/2) + w.scoreOther(drawn, false),
		math.Log(otherShare/2) + w.scoreOther(drawn, true),
	}
	for _, h := range all {
		scores = append(scores, math.Log((1-otherShare)*h.prior/faultPrior)+h.second)
	}
	return logSum(scores)
}

// logSum is the logarithm of the sum of what the scores are logarithms of.
func logSum(scores []float64) float64 {
	best, sum := math.Inf(-1), 0.0
	for _, s := range scores {
		best = math.Max(best, s)
	}
	if math.IsInf(best, 0) || math.IsNaN(best) {
		return math.Inf(-1)
	}
	for _, s := range scores {
		if !math.IsNaN(s) {
			sum += math.Exp(s - best)
		}
	}
	return best + math.Log(sum)
}

// scoreOther is for something that the model does not hold.
func (w *scorer) scoreOther(drawn *prediction, tilted bool) float64 {
	w.fill(drawn)
	w.covariance()
	n := w.known
	for a, ra := range w.rows[:n] {
		for b := range a + 1 {
			w.cov[a*n+b] += w.noneShare(ra, w.rows[b], a == b, tilted)
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
		sum += w.noise.anything()
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
func (w *scorer) noneShare(a, b row, same, tilted bool) float64 {
	losses := func(r row) bool { return r.kind == lossRow || r.kind == responseRow }
	switch {
	case losses(a) && losses(b):
		v := 0.0
		if tilted {
			la, ha := w.tilts(a)
			lb, hb := w.tilts(b)
			v = noneTiltDB * noneTiltDB * (la*lb + ha*hb)
		}
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
