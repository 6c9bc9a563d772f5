package draw

import (
	"math"
	"slices"
	"strconv"

	"padproof/cmd/padproof/internal/result"
)

// lowestSpectrumDB is as far down as a spectrum is drawn: below lies rounding.
const lowestSpectrumDB = -180.0

// Spectrum draws what after holds while the tone stands, and before behind it,
// with the tone's harmonics numbered.
func Spectrum(a *result.Answer) *Picture {
	title := titleOf(a, "Spectrum of the tone")
	if a == nil || a.Curves == nil || len(a.Curves.Spectrum) == 0 {
		return nothing("spectrum", title, "no tone stands in after")
	}
	after := a.Curves.Spectrum[0]
	if !anyDrawable(numbers(after.FreqHz), numbers(after.DB)) {
		return nothing("spectrum", title, "no tone stands in after")
	}
	p := &Picture{Name: "spectrum", Title: title, Says: spectrumSays(a, after), Simulated: a.Simulated, Width: usualWidth, Height: usualHeight + 20}
	p.paint = func(s *sheet) { spectrumFrame(a).paint(s) }
	return p
}

func spectrumFrame(a *result.Answer) *frame {
	after := a.Curves.Spectrum[0]
	low := 0.0
	for _, c := range a.Curves.Spectrum {
		low = math.Min(low, quietest(numbers(c.DB)))
	}
	low = math.Max(low, lowestSpectrumDB)
	caption := "dB, 0 is the tone; noise as in a band of " + strconv.FormatFloat(float64(after.BandHz), 'g', 2, 64) + " Hz"
	f := &frame{x: frequencies(numbers(after.FreqHz)), y: between(10*math.Floor(low/10)-10, 20, caption)}
	if c := checkOf(a, "distortion"); c != nil && c.High.OK() {
		f.flat(float64(c.High), asLimit, "limit of all harmonics, "+give(c.High))
	}
	for i := len(a.Curves.Spectrum) - 1; i >= 0; i-- {
		c, l := a.Curves.Spectrum[i], asMeasured
		l.width = 1
		if i > 0 {
			l = asOther
		}
		f.curves = append(f.curves, curve{numbers(c.FreqHz), numbers(c.DB), l, c.Role})
	}
	f.notes = append(f.notes, note{x: float64(after.ToneHz), text: "tone " + hertz(after.ToneHz)})
	if n, ok := mainsNote(a, after); ok {
		f.notes = append(f.notes, n)
	}
	for _, h := range after.Harmonics {
		n := note{x: float64(h.FreqHz), y: float64(h.DB), mark: true}
		if h.Stands {
			n.text = strconv.Itoa(h.Number)
			f.notes = append(f.notes, n)
		}
	}
	return f
}

// quietest is the level that a twentieth of the points lie under.
func quietest(db []float64) float64 {
	var there []float64
	for _, v := range db {
		if !math.IsNaN(v) && !math.IsInf(v, 0) {
			there = append(there, v)
		}
	}
	if len(there) == 0 {
		return -100
	}
	slices.Sort(there)
	return there[len(there)/20]
}

func spectrumSays(a *result.Answer, after result.SpectrumCurve) string {
	says := "The tone of " + hertz(after.ToneHz) + " in after and what stands beside it"
	var standing []string
	for _, h := range after.Harmonics {
		if h.Stands {
			standing = append(standing, strconv.Itoa(h.Number)+" ("+fixed(h.DB, 0)+" dB)")
		}
	}
	if len(standing) > 0 {
		says += "; its harmonics " + join(standing) + " stand out of the noise"
	} else if len(after.Harmonics) > 0 {
		says += "; none of its harmonics stands out of the noise"
	}
	c := checkOf(a, "distortion")
	switch {
	case c == nil:
		return says + "."
	case c.Measured.OK():
		says += "; together " + figure(c.Measured, c.Uncertainty) + " dB"
	case c.Bound != nil && c.Bound.OK():
		says += "; together below " + fixed(*c.Bound, 1) + " dB"
	}
	return says + "; " + verdictWords(c)
}

// mainsStandsDB is how far above the quietest a mains line stands that is named.
const mainsStandsDB = 12.0

// mainsNote names the mains line where it stands out, lest it be taken for a
// harmonic of the tone.
func mainsNote(a *result.Answer, s result.SpectrumCurve) (note, bool) {
	mains, quiet := 50.0, quietest(numbers(s.DB))
	if c := checkOf(a, "hum"); c != nil && c.MainsHz != nil && c.MainsHz.OK() {
		mains = float64(*c.MainsHz)
	}
	best := note{y: quiet + mainsStandsDB}
	for i := range min(len(s.FreqHz), len(s.DB)) {
		if hz, db := float64(s.FreqHz[i]), float64(s.DB[i]); math.Abs(hz/mains-1) < 0.06 && db > best.y {
			best = note{x: hz, y: db, text: "mains hum"}
		}
	}
	return best, best.text != ""
}
