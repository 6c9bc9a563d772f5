package compare

import (
	"fmt"
	"math"
	"math/cmplx"

	"padproof/analysis"
	"padproof/compare/network"
	"padproof/compare/uncertainty"
)

// A Leg is one channel of a take of legs.
type Leg struct {
	Tone analysis.Tone
	// NoTone says that the channel holds no tone at the frequency. MostDBFS is then the highest
	// level that a tone there may have: the peak of the channel is always safe.
	NoTone   bool
	MostDBFS float64
}

// A LegsCase is what the legs are judged by.
type LegsCase struct {
	Circuit      *network.Circuit
	Rig          Rig
	LegsLoadOhms float64 // each leg to screen, in both takes

	Hot, Cold                 Leg            // legs
	StraightHot, StraightCold *analysis.Tone // legs-before; nil without it

	ChannelMatchDB float64 // half-width, counts without legs-before
	LinearityDB    float64 // half-width
	Limit          Limit   // PlusMinus(0, leg_match_db)
	Rule           Rule
}

// A LegsFinding is the legs judged.
type LegsFinding struct {
	Finding           // Measured: dB hot over cold beyond what the drawing gives
	DrawnDB   float64 // hot over cold as the drawing gives it
	PhaseDeg  float64 // hot against cold beyond what the drawing gives, -180 to 180; NaN where unknown
	PhaseUDeg float64 // expanded

	ReadingStdUDB float64 // standard uncertainty of Measured without the rig's source and loads
}

const (
	mostLegsApartDB = 20.0 // of the model's two legs
	mostPhaseDeg    = 30.0
)

// JudgeLegs holds hot over cold against the model of the drawing with each leg loaded to screen.
// legs-before takes the channels' own difference off, where the drive gives both legs a level
// straight through; without it the channel match counts. A phase more than 30° from the model's is
// a FAIL in words, whatever the levels. Legs of which the model's weaker one lies more than 20 dB
// under the other are not judged: UNPROVEN.
//
// Each leg has a load of its own, so the tolerance of the loads counts for each by itself, put into
// the model. The two halves of the source count as alike, and the cable lies leg to leg: it tells on
// both.
func JudgeLegs(c LegsCase) (LegsFinding, error) {
	f := LegsFinding{Finding: nothingFound(c.Limit, 0), PhaseDeg: math.NaN(), PhaseUDeg: math.NaN()}
	freqHz := c.Hot.Tone.FreqHz
	if c.Hot.NoTone {
		freqHz = c.Cold.Tone.FreqHz
	}
	m := modelLegs{c, freqHz, c.calibrated(freqHz)}
	straight, with := c.Circuit.LegVolts(c.Rig.Ends, c.LegsLoadOhms, freqHz)
	f.DrawnDB = overDB(with)
	switch {
	case c.Hot.NoTone && c.Cold.NoTone:
		f.leaveOpen("neither leg holds the tone; look at the cables, and record legs again")
		return f, nil
	case !(math.Abs(f.DrawnDB) <= mostLegsApartDB):
		f.leaveOpen("the drawing on this bench gives one leg more than 20 dB less than the other: the legs cannot be judged; drive both legs ([output] drive = \"balanced\"), or take leg_match_db out of [limits]")
		return f, nil
	case c.Hot.NoTone || c.Cold.NoTone:
		return f, f.deadLeg(m)
	}
	f.Measured = c.Hot.Tone.LevelDBFS - c.Cold.Tone.LevelDBFS - f.DrawnDB
	turn := phaseBetween(c.Hot.Tone, c.Cold.Tone) - cmplx.Phase(with.Hot/with.Cold)
	if m.calibrated {
		f.Measured -= c.StraightHot.LevelDBFS - c.StraightCold.LevelDBFS - overDB(straight)
		turn -= phaseBetween(*c.StraightHot, *c.StraightCold) - cmplx.Phase(straight.Hot/straight.Cold)
	}
	f.PhaseDeg = math.Remainder(turn, 2*math.Pi) * 180 / math.Pi
	f.PhaseUDeg = c.phaseUDeg(m.calibrated)
	f.Budget.Terms = m.terms()
	f.ReadingStdUDB = readingStdU(f.Budget.Terms)
	if err := f.Finding.decide(c.Rule); err != nil {
		return f, err
	}
	f.judgePhase()
	return f, nil
}

// readingStdU is the standard uncertainty of a reading by itself, without what the
// rig's impedances bring.
func readingStdU(terms []uncertainty.Term) float64 {
	var own uncertainty.Budget
	for _, t := range terms {
		if t.Source != sourceSrc && t.Source != legLoadsSrc {
			own.Terms = append(own.Terms, t)
		}
	}
	return own.CombinedU()
}

func overDB(l network.Legs) float64 {
	hot, cold := cmplx.Abs(l.Hot), cmplx.Abs(l.Cold)
	if !(hot > 0 && cold > 0) {
		return math.Inf(1)
	}
	return 20 * math.Log10(hot/cold)
}

// calibrated tells whether legs-before says anything of both channels.
func (c LegsCase) calibrated(freqHz float64) bool {
	if c.StraightHot == nil || c.StraightCold == nil {
		return false
	}
	straight, _ := c.Circuit.LegVolts(c.Rig.Ends, c.LegsLoadOhms, freqHz)
	return math.Abs(overDB(straight)) <= mostLegsApartDB
}

// phaseBetween is the phase of one tone over another's, in radians, while both stand.
func phaseBetween(hot, cold analysis.Tone) float64 {
	at := math.Max(hot.StartSec, cold.StartSec)
	phase := func(t analysis.Tone) float64 { return t.PhaseRad + 2*math.Pi*t.FreqHz*(at-t.StartSec) }
	return math.Remainder(phase(hot)-phase(cold), 2*math.Pi)
}

// phaseUDeg is what the noise beside the tones makes of the phase: as much, in radians, as of the
// level in parts.
func (c LegsCase) phaseUDeg(calibrated bool) float64 {
	sum := math.Hypot(c.Hot.Tone.NoiseStdErrDB, c.Cold.Tone.NoiseStdErrDB)
	if calibrated {
		sum = math.Hypot(sum, math.Hypot(c.StraightHot.NoiseStdErrDB, c.StraightCold.NoiseStdErrDB))
	}
	return 2 * sum * math.Ln10 / 20 * 180 / math.Pi
}

func (f *LegsFinding) judgePhase() {
	if !f.Limit.IsSet() {
		return
	}
	over := math.Abs(f.PhaseDeg) - mostPhaseDeg
	switch {
	case over > f.PhaseUDeg:
		f.Verdict = Fail
		f.Reason = fmt.Sprintf("hot against cold is %.0f° away from the drawing: a leg is wired to the wrong pin or hangs loose", f.PhaseDeg)
	case over > -f.PhaseUDeg && f.Verdict == Pass:
		f.leaveOpen("the phase of hot against cold, %.0f° ± %.0f° from the drawing, may be past 30°; record legs again with more level", f.PhaseDeg, f.PhaseUDeg)
	}
}

// deadLeg judges legs of which one holds no tone: they are at least so far apart.
func (f *LegsFinding) deadLeg(m modelLegs) error {
	c, sign, name := m.c, 1.0, "cold"
	if c.Hot.NoTone {
		sign, name = -1, "hot"
	}
	live, dead := c.Hot, c.Cold
	if c.Hot.NoTone {
		live, dead = dead, live
	}
	f.Measured = sign*(live.Tone.LevelDBFS-dead.MostDBFS) - f.DrawnDB
	m.calibrated = false
	f.Budget.Terms = m.terms()
	f.ReadingStdUDB = readingStdU(f.Budget.Terms)
	if err := f.Finding.decide(c.Rule); err != nil {
		return err
	}
	beyond := f.Measured * sign
	if f.Limit.IsSet() && (f.Verdict != Fail || beyond < 0) {
		f.leaveOpen("the %s leg holds no tone, but so much else that up to %.1f dBFS may hide there; take the hum or noise away and record legs again", name, dead.MostDBFS)
		return nil
	}
	if f.Verdict == Fail {
		f.Reason = fmt.Sprintf("the %s leg holds no tone at all", name)
	}
	return nil
}

// modelLegs gives the budget its sensitivities.
type modelLegs struct {
	c          LegsCase
	freqHz     float64
	calibrated bool
}

// shuntedDB is by how much a resistor from one output pin to screen moves hot over cold, less what
// it moves straight through where that was recorded.
func (m modelLegs) shuntedDB(pin string, ohms float64) float64 {
	shunt := network.Part{Ref: "leg load", Value: ohms, A: pin, B: "screen"}
	moved := func(parts []network.Part) float64 {
		return m.ratioDB(m.c.Rig.Ends, append([]network.Part{shunt}, parts...)) - m.ratioDB(m.c.Rig.Ends, parts)
	}
	return m.beyondStraight(moved)
}

// sourceDB is by how much a source of other ohms moves it, in the same way.
func (m modelLegs) sourceDB(byFrac float64) float64 {
	other := m.c.Rig.Ends
	other.SourceOhms *= 1 + byFrac
	return m.beyondStraight(func(parts []network.Part) float64 {
		return m.ratioDB(other, parts) - m.ratioDB(m.c.Rig.Ends, parts)
	})
}

func (m modelLegs) beyondStraight(moved func(parts []network.Part) float64) float64 {
	db := moved(m.c.Circuit.Parts())
	if m.calibrated {
		db -= moved([]network.Part{{Ref: "hot", A: "in.hot", B: "out.hot"}, {Ref: "cold", A: "in.cold", B: "out.cold"}})
	}
	if math.IsNaN(db) || math.IsInf(db, 0) {
		return 0
	}
	return db
}

// ratioDB is hot over cold with the parts in circuit.
func (m modelLegs) ratioDB(e network.Ends, parts []network.Part) float64 {
	c, err := network.New(network.Custom, parts)
	if err != nil {
		return math.NaN()
	}
	_, with := c.LegVolts(e, m.c.LegsLoadOhms, m.freqHz)
	return overDB(with)
}

func (m modelLegs) terms() []uncertainty.Term {
	c := m.c
	var terms []uncertainty.Term
	repeats := func(source string, t *analysis.Tone) {
		if t != nil && t.Blocks > 1 {
			terms = append(terms, repeatability(source, *t))
		}
	}
	repeats(hotRepeats, &c.Hot.Tone)
	repeats(coldRepeats, &c.Cold.Tone)
	if m.calibrated {
		repeats(hotRepeats+" straight", c.StraightHot)
		repeats(coldRepeats+" straight", c.StraightCold)
	}
	half := func(source string, halfDB float64) {
		if halfDB = math.Abs(halfDB); halfDB > 0 {
			terms = append(terms, uncertainty.FromRectangle(source, halfDB, 1))
		}
	}
	if !m.calibrated {
		half(channelsSrc, c.ChannelMatchDB)
	}
	half(linearitySrc, c.LinearityDB)
	half(sourceSrc, m.sourceDB(c.Rig.SourceTolFrac))
	load, tol := c.LegsLoadOhms, c.Rig.LoadTolFrac
	if tol > 0 && tol < 1 && !math.IsInf(load, 0) { // so large a resistor beside it lowers a load by its tolerance
		half(legLoadsSrc, m.shuntedDB("out.hot", load*(1-tol)/tol))
		half(legLoadsSrc, m.shuntedDB("out.cold", load*(1-tol)/tol))
	}
	return terms
}
