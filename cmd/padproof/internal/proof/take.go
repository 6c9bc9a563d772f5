package proof

import (
	"errors"
	"fmt"
	"io/fs"
	"math"
	"os"

	"padproof/analysis"
	"padproof/capture"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/unit"
	"padproof/compare"
)

// A take is one recording of the unit, opened and then measured.
type take struct {
	role      string
	path      string
	inherited bool // it serves other units too
	stamp     stamp
	file      *capture.Take
	facts     capture.Facts
	channel   int
	samples   *capture.Channel
	reading   *reading // nil: nobody asks how far it is
	found     []analysis.Stretch
	measured  *analysis.Measurement
	judged    *analysis.Tone      // the stretch that the loss is judged at
	placed    *analysis.Placement // where the test signal lies; nil without it
	noise     *analysis.Noise     // of a take that holds no tone
	steady    analysis.Steadiness
	stepped   bool // the test signal's step was read: automatic gain would have shown
	sha256    string
	problems  []compare.Problem
}

// A stamp tells a file from one recorded anew in its place; it is zero where the
// file was not seen.
type stamp struct{ bytes, atNanos int64 }

// openTake opens a take. Its stamp is taken first: a file that is replaced
// meanwhile gets the stamp of the old one, which no later unit sees.
func openTake(role, path string) (*take, error) {
	var at stamp
	if info, err := os.Stat(path); err == nil {
		at = stamp{info.Size(), info.ModTime().UnixNano()}
	}
	file, err := capture.Open(path)
	if errors.Is(err, fs.ErrNotExist) {
		return nil, &result.Error{File: path, Text: "no such file", Hint: "look at the spelling of the path"}
	}
	if err != nil {
		return nil, err
	}
	t := &take{role: role, path: path, stamp: at, file: file, facts: file.Facts()}
	for _, p := range t.facts.Problems {
		t.problems = append(t.problems, compare.Problem{Name: p.Problem, AtSec: p.AtSec, Text: p.Text})
	}
	return t, nil
}

func (t *take) problem(name string, atSec float64, format string, args ...any) {
	t.problems = append(t.problems, compare.Problem{Name: name, AtSec: atSec, Text: fmt.Sprintf(format, args...)})
}

// use settles the channel that is read.
func (t *take) use(channel int) {
	t.channel = channel
	t.samples = t.file.Channel(channel)
}

// find looks for the steady tones: any, or those at the given frequencies. What
// keeps a take from being measured is a problem of the take; only a file that
// cannot be read is an error.
func (t *take) find(atHz []float64) error {
	var err error
	if atHz == nil {
		t.found, err = analysis.FindTones(t.samples)
	} else {
		t.found, err = analysis.FindTonesAt(t.samples, atHz)
	}
	return t.explain(err)
}

// explain turns what analysis says of a take into a problem.
func (t *take) explain(err error) error {
	var other *analysis.OtherToneError
	leg := t.role == unit.Legs || t.role == unit.LegsBefore
	switch {
	case err == nil:
	case leg && errors.Is(err, analysis.ErrNoTone): // a dead leg is the unit's, not the take's
	case errors.Is(err, analysis.ErrSilent):
		t.problem(compare.ChannelSilent, math.NaN(), "channel %d holds digital silence; look at the cable, the routing and the channel, and record again", t.channel)
	case errors.As(err, &other) && compare.IsMainsLine(other.FreqHz):
		t.problem(compare.NoTone, math.NaN(), "no tone at %s, only hum at %.4g Hz, %.1f dBFS; look at the pad's connections, and record again with the tone playing", hertzList(other.WantHz), other.FreqHz, other.LevelDBFS)
	case errors.As(err, &other):
		t.problem(compare.FrequencyDiffers, math.NaN(), "no tone at %s, but one at %.6g Hz, %.1f dBFS; record both takes with one setting of the generator", hertzList(other.WantHz), other.FreqHz, other.LevelDBFS)
	case errors.Is(err, analysis.ErrTooShort):
		t.problem(compare.TooShort, math.NaN(), "%v; play the tone for at least 4 s", err)
	case errors.Is(err, analysis.ErrNoTone):
		t.problem(compare.NoTone, math.NaN(), "no steady tone was found; look at the pad's connections and the channel, and record again with the tone playing")
	default:
		return fmt.Errorf("%s: %w", t.path, err)
	}
	return nil
}

func hertzList(freqs []float64) string {
	text := ""
	for i, f := range freqs {
		if i > 0 && compare.SameFrequency(f, freqs[i-1]) {
			continue
		}
		if i > 0 {
			text += ", "
		}
		text += fmt.Sprintf("%.6g", f)
	}
	return text + " Hz"
}

// measure reads the whole take once: its tones, its facts, its hash; then, of the
// test signal, its step and its sweep.
func (t *take) measure(linearityDB float64) error {
	if len(t.found) > 0 {
		if err := t.place(); err != nil {
			return err
		}
	}
	m, err := analysis.MeasureTones(t.watched(), t.found)
	if err != nil {
		t.found = nil
		if err := t.explain(err); err != nil {
			return err
		}
		if m, err = analysis.MeasureTones(t.watched(), nil); err != nil {
			return fmt.Errorf("%s: %w", t.path, err)
		}
	}
	t.measured = m
	t.noteSamples()
	if t.sha256, err = t.file.SHA256(); err != nil {
		return err
	}
	return errors.Join(t.noteStep(linearityDB), t.noteGaps())
}

// noteSamples names what the samples themselves show.
func (t *take) noteSamples() {
	m := t.measured
	if m.Bad.Count > 0 {
		t.problem(compare.BadSamples, m.Bad.FirstSec, "%d samples are no numbers (NaN or infinite); export the take again, or record it again", m.Bad.Count)
	}
	for _, tone := range m.Tones {
		if p, cut := compare.ClippedProblem(m.CutPeaks(tone), m.PeakDBFS); cut {
			t.problems = append(t.problems, p)
			break
		}
	}
	if len(m.Tones) == 0 && m.Clipped.Runs > 0 { // no tone to look within: music, say
		t.problem(compare.Clipped, m.Clipped.FirstSec, "%d peaks are cut off at %.1f dBFS; lower the level or the gain and record again", m.Clipped.Runs, m.Clipped.LevelDBFS)
	}
	if tone, ok := t.mainTone(); ok {
		t.noteSteadiness(tone)
	}
}

// noteSteadiness judges the level track of the take's main tone: a stage of the
// test signal, or all of a plain tone.
func (t *take) noteSteadiness(tone analysis.Tone) {
	from, to := analysis.ToneSpan(&t.measured.Track, tone)
	if t.placed != nil {
		for _, stage := range analysis.Schedule(t.samples.RateHz()) {
			if stage.Kind == analysis.SteadyTone && stage.LevelDBFS == analysis.SignalPeakDBFS {
				from, to = t.placed.TakeSec(stage.StartSec), t.placed.TakeSec(stage.StartSec+stage.LengthSec)
			}
		}
	} else if len(t.measured.Tones) > 1 && t.role != unit.Flex {
		from, to = tone.StartSec, tone.EndSec // several levels or tones: each is steady by itself
	}
	t.steady = analysis.Steady(&t.measured.Track, tone, from, to)
	moved := t.role == unit.Flex
	t.problems = append(t.problems, compare.DropoutProblems(t.steady, moved)...)
	if !moved {
		t.problems = append(t.problems, compare.SteppedProblems(t.steady)...)
	}
}

// place looks for the test signal. Samples lost between its markers are a
// problem of the take.
func (t *take) place() error {
	p, err := analysis.FindSignal(t.samples, t.found...)
	var apart *analysis.MarkersApartError
	switch {
	case errors.As(err, &apart):
		t.problem(compare.Dropout, math.NaN(), "%v; use a larger buffer, close other programs, and record again", apart)
	case errors.Is(err, analysis.ErrNoSignal):
	case err != nil:
		return fmt.Errorf("%s: %w", t.path, err)
	default:
		t.placed = &p
	}
	return nil
}

// noteStep holds the test signal's 10 dB step against what was recorded.
func (t *take) noteStep(linearityDB float64) error {
	if t.placed == nil {
		return nil
	}
	stepDB, standardU, err := analysis.StepDB(t.samples, *t.placed)
	if err != nil {
		return nil // the step is cut off: nothing is shown by it
	}
	step, err := compare.ReadStep(stepDB, standardU, 0, 0, linearityDB)
	if err != nil {
		return err
	}
	t.stepped = true
	if p, riding := compare.GainRidingProblem(step); riding {
		t.problems = append(without(t.problems, compare.GainMoved), p) // it moved the gain, and nobody's hand
	}
	return nil
}

// noteGaps looks for lost buffers in the sweep.
func (t *take) noteGaps() error {
	if t.placed == nil {
		return nil
	}
	gaps, err := analysis.SweepGaps(t.samples, *t.placed)
	if err != nil {
		return fmt.Errorf("%s: %w", t.path, err)
	}
	for _, at := range gaps {
		t.problem(compare.Dropout, at, "the sweep breaks off for a moment: a lost buffer or a loose contact; use a larger buffer, look at the plugs, and record again")
	}
	return nil
}

// capture is the take in the form of the result.
func (t *take) capture(folder string) result.Capture {
	c := result.Capture{
		Role: t.role, File: fileIn(folder, t.path), SHA256: t.sha256, RateHz: t.facts.RateHz,
		Channels: t.facts.Channels, Channel: t.channel, Bits: t.facts.Bits, Encoding: t.facts.Encoding,
		Seconds: result.Number(t.facts.Seconds), ToneHz: result.Missing, LevelDBFS: result.Missing,
		ScatterDB: result.Missing, NoiseDBFS: result.Missing, SNRDB: result.Missing, RMSDBFS: result.Missing,
		PeakDBFS: result.Missing, FromSec: result.Missing, ToSec: result.Missing,
		Harmonics: []result.Number{}, Problems: []result.Problem{},
	}
	if t.placed != nil {
		c.ClockPPM = result.NumberOf(1e6 * (t.placed.Ratio - 1))
	}
	if t.noise != nil {
		c.NoiseDBFS, c.PeakDBFS = result.Number(t.noise.LevelDBFS), result.Number(t.noise.PeakDBFS)
	}
	if t.measured != nil {
		c.PeakDBFS = result.Number(t.measured.PeakDBFS)
		if tone, ok := t.mainTone(); ok {
			c.ToneHz, c.LevelDBFS, c.ScatterDB = result.Number(tone.FreqHz), result.Number(tone.LevelDBFS), result.Number(tone.ScatterDB)
			c.NoiseDBFS, c.SNRDB, c.RMSDBFS = result.Number(tone.NoiseDBFS), result.Number(tone.SNRDB), result.Number(tone.RMSDBFS)
			c.FromSec, c.ToSec = result.Number(tone.StartSec), result.Number(tone.EndSec)
			for _, h := range tone.HarmonicsDB {
				c.Harmonics = append(c.Harmonics, result.Number(h))
			}
		}
	}
	for _, p := range t.problems {
		c.Problems = append(c.Problems, result.Problem{Problem: p.Name, AtSec: result.Number(p.AtSec), Text: p.Text})
	}
	return c
}

// mainTone is the tone that the take is judged at, or would be.
func (t *take) mainTone() (analysis.Tone, bool) {
	switch {
	case t.judged != nil:
		return *t.judged, true
	case len(t.measured.Tones) > 0:
		return compare.NearestTo1k(t.measured.Tones), true
	}
	return analysis.Tone{}, false
}
