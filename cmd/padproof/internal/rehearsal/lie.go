package rehearsal

import (
	"encoding/binary"
	"errors"
	"fmt"
	"io"
	"math"
	"os"
	"slices"

	"padproof/analysis"
)

// A lie is something that makes a recording tell what is not so.
type lie struct {
	word  string // as the answer names it
	about string // what is done, for people
	needs string // the take that it shows in
	bend  func(p Plan, r *recipe)
	swap  map[string]string // role to the role whose take it gets
}

// Sizes of lies, each well past the point at which it must be named.
const (
	hotDB      = 3.0   // over full scale
	movedDB    = 1.0   // a knob
	lostSec    = 0.02  // a buffer
	fasterFrac = 0.05  // another frequency
	shortSec   = 0.6   // of tone
	fadeDB     = 0.5   // either way
	toneDBFS   = -40.0 // in a noise take
	toneHz     = 1000.0
	quietDB    = 10.0 // less noise than physics allows
	keptFrac   = 0.75 // of a file cut short
)

var lies = []lie{
	{word: "clipped", needs: "before", about: "the gain is so high that before lies 3 dB beyond full scale",
		bend: forSignals(func(p Plan, r *recipe) { r.gainDB += hotDB - p.LevelDBFS })},
	{word: "gain-riding", needs: "after", about: "automatic gain halves level differences in dB",
		bend: forSignals(func(p Plan, r *recipe) {
			target := square(analysis.PeakFromDBFS(p.LevelDBFS)) / 2
			r.inRecorder = append(r.inRecorder, func() effect { return newRiding(target, float64(p.RateHz)) })
		})},
	{word: "gain-moved", needs: "after", about: "a knob moves by 1 dB between before and all that follows; before-again shows it",
		bend: func(_ Plan, r *recipe) {
			if slices.Contains([]string{"after", "before-again", "after-again", "bypass", "flex", "legs"}, r.role) {
				r.gainDB += movedDB
			}
		}},
	{word: "channel-silent", needs: "after", about: "after holds nothing at all",
		bend: of("after", func(_ Plan, r *recipe) { r.onSamples(0, math.MaxInt64, 0) })},
	{word: "dropout", needs: "after", about: "20 ms of the tone in after are lost",
		bend: of("after", func(p Plan, r *recipe) {
			from, to := p.tone(r.role)
			middle := (from + to) / 2
			r.onSamples(middle, middle+int64(lostSec*float64(p.RateHz)), 0)
		})},
	{word: "swapped", needs: "after", about: "before and after have one another's names", swap: map[string]string{"before": "after", "after": "before"}},
	{word: "same-recording", needs: "after", about: "after is a copy of before", swap: map[string]string{"after": "before"}},
	{word: "frequency-differs", needs: "after", about: "after is played 5 % faster",
		bend: of("after", func(p Plan, r *recipe) {
			p.DriftPPM = 1e6 * ((1+p.DriftPPM*1e-6)/(1+fasterFrac) - 1)
			r.source = p.signal()
		})},
	{word: "no-tone", needs: "after", about: "nothing is played while after is recorded",
		bend: of("after", func(p Plan, r *recipe) { r.source = silence(float64(p.RateHz), p.sec(r.role)) })},
	{word: "too-short", needs: "after", about: "after ends 0.6 s into its tone",
		bend: of("after", func(p Plan, r *recipe) {
			from, _ := p.tone(r.role)
			left := from + int64(shortSec*float64(p.RateHz))
			r.toSamples = append(r.toSamples, func() effect { return &stop{left} })
		})},
	{word: "too-weak", needs: "after", about: "the tone in after swells and fades by 0.5 dB, so that no level can be told within 0.5 dB; with a steady tone",
		bend: of("after", func(p Plan, r *recipe) {
			from, to := p.tone(r.role)
			r.onTheWay = append(r.onTheWay, func() effect { return newSwell(fadeDB, float64(to-from), from) })
		})},
	{word: "not-closed", needs: "after", about: "the recorder died: the sizes in after.wav are 0",
		bend: of("after", func(_ Plan, r *recipe) { r.afterwards = unclose })},
	{word: "cut-short", needs: "after", about: "the last quarter of after.wav is missing",
		bend: of("after", func(_ Plan, r *recipe) { r.afterwards = cutShort })},
	{word: "one-channel", needs: "legs", about: "legs holds the hot leg alone",
		bend: of("legs", func(_ Plan, r *recipe) { r.paths = r.paths[:1] })},
	{word: "tone-in-noise", needs: padNoise, about: "a tone is left on in pad-noise",
		bend: of(padNoise, func(p Plan, r *recipe) {
			peak := complex(analysis.PeakFromDBFS(toneDBFS), 0)
			r.inRecorder = append(r.inRecorder, func() effect { return newLines([]complex128{peak}, toneHz, p.heardHz()) })
		})},
	{word: "bad-samples", needs: "after", about: "after holds samples that are no numbers; with --float",
		bend: of("after", func(p Plan, r *recipe) {
			from, to := p.tone(r.role)
			r.onSamples((from+to)/2, (from+to)/2+2, math.NaN())
			r.onSamples((from+to)/2+100, (from+to)/2+101, math.Inf(1))
		})},
	{word: "below-thermal", needs: padNoise, about: "the noise takes have 10 dB less gain than rig.toml says",
		bend: func(_ Plan, r *recipe) {
			if r.role == rigNoise || r.role == padNoise {
				r.gainDB -= quietDB
			}
		}},
}

// Lies returns the words for lies and what each does.
func Lies() (words, abouts []string) {
	for _, l := range lies {
		words, abouts = append(words, l.word), append(abouts, l.about)
	}
	return words, abouts
}

func lieOf(word string) (lie, bool) {
	i := slices.IndexFunc(lies, func(l lie) bool { return l.word == word })
	if i < 0 {
		return lie{}, false
	}
	return lies[i], true
}

// forSignals bends the takes in which the plan's signal is played.
func forSignals(bend func(Plan, *recipe)) func(Plan, *recipe) {
	return func(p Plan, r *recipe) {
		if r.role != rigNoise && r.role != padNoise && r.role != "calibration" {
			bend(p, r)
		}
	}
}

// of bends one take.
func of(role string, bend func(Plan, *recipe)) func(Plan, *recipe) {
	return func(p Plan, r *recipe) {
		if r.role == role {
			bend(p, r)
		}
	}
}

// madeAs is the role whose take a role gets.
func (p Plan) madeAs(role string) string {
	for _, word := range p.Lies {
		if l, ok := lieOf(word); ok && l.swap[role] != "" {
			return l.swap[role]
		}
	}
	return role
}

// onSamples puts a value in place of the samples from one to another.
func (r *recipe) onSamples(from, to int64, value float64) {
	r.toSamples = append(r.toSamples, func() effect {
		return &spell{from: from, to: to, change: func(float64) float64 { return value }}
	})
}

// cutShort takes the end of a file away.
func cutShort(file string) error {
	info, err := os.Stat(file)
	if err != nil {
		return err
	}
	return os.Truncate(file, int64(keptFrac*float64(info.Size())))
}

// unclose puts 0 in place of the sizes that a recorder writes last.
func unclose(file string) (err error) {
	f, err := os.OpenFile(file, os.O_RDWR, 0)
	if err != nil {
		return err
	}
	defer func() { err = errors.Join(err, f.Close()) }()
	var nothing [4]byte
	head := make([]byte, 8)
	for at := int64(12); ; { // past RIFF, its size and WAVE
		if _, err := f.ReadAt(head, at); err != nil {
			if err == io.EOF {
				err = fmt.Errorf("%s has no samples", file)
			}
			return err
		}
		if string(head[:4]) == "data" {
			_, errData := f.WriteAt(nothing[:], at+4)
			_, errFile := f.WriteAt(nothing[:], 4)
			return errors.Join(errData, errFile)
		}
		size := int64(binary.LittleEndian.Uint32(head[4:]))
		at += 8 + size + size%2
	}
}
