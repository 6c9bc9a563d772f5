package analysis

import "math"

// withoutBackground drops what is more than 20 dB below the strongest stretch, and what can be
// heard at the same level during it: hum and whines, which no generator made.
func (l *lookout) withoutBackground(all []Stretch) ([]Stretch, error) {
	strongest := all[0]
	for _, g := range all {
		if g.LevelDBFS > strongest.LevelDBFS {
			strongest = g
		}
	}
	want := l.wantHz
	defer func() { l.wantHz = want }()
	var out []Stretch
	for _, g := range all {
		if g.LevelDBFS < strongest.LevelDBFS-keepWithinDB {
			continue
		}
		if math.Abs(g.FreqHz-strongest.FreqHz) > nearFrac*strongest.FreqHz {
			l.wantHz = g.FreqHz
			there, err := l.look((strongest.StartSec + strongest.EndSec) / 2)
			if err != nil {
				return nil, err
			}
			if there.found && DBFSFromMeanSquare(there.meanSquare) > g.LevelDBFS-backgroundDB {
				continue
			}
		}
		out = append(out, g)
	}
	return out, nil
}

// refineAll measures frequency and level of each stretch on two seconds of it, and drops those in
// which no phase runs steadily.
func (l *lookout) refineAll(all []Stretch) ([]Stretch, error) {
	var out []Stretch
	for _, g := range all {
		better, ok, err := l.refine(g)
		if err != nil {
			return nil, err
		}
		if ok {
			out = append(out, better)
		}
	}
	return out, nil
}

// refine tries the middle of a stretch, then its beginning and end.
func (l *lookout) refine(g Stretch) (Stretch, bool, error) {
	sec := math.Min(refineSec, g.seconds())
	for _, where := range []float64{0.5, 0.1, 0.9} {
		from := g.StartSec + where*(g.seconds()-sec)
		part := section{l.s, int64(from * l.rateHz), int64(sec * l.rateHz)}
		p, err := newPass(part, []Stretch{{FreqHz: g.FreqHz, LevelDBFS: g.LevelDBFS, EndSec: sec}})
		if err != nil {
			return g, false, err
		}
		p.watches[0].noise = nil
		if err := p.read(part); err != nil {
			return g, false, err
		}
		if run, err := p.steadyRun(0); err == nil {
			var t Tone
			run.level(&t, p.track.HopSec)
			g.FreqHz += run.offHz
			g.LevelDBFS = t.LevelDBFS
			return g, true, nil
		}
	}
	return g, false, nil
}

// A section is a part of a channel.
type section struct {
	s             Samples
	first, frames int64
}

func (c section) RateHz() float64 { return c.s.RateHz() }
func (c section) Frames() int64   { return c.frames }
func (c section) ReadAt(dst []float64, frame int64) (int, error) {
	return c.s.ReadAt(dst, c.first+frame)
}
