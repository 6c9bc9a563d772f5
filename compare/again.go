package compare

import (
	"math"

	"padproof/analysis"
	"padproof/compare/uncertainty"
)

// A Twice is the tone of a take and, where it was recorded once more, of the second one.
type Twice struct {
	First analysis.Tone
	Again *analysis.Tone // nil where there is none
}

// LevelDBFS is the level used: the mean of the two.
func (t Twice) LevelDBFS() float64 {
	if t.Again == nil {
		return t.First.LevelDBFS
	}
	return (t.First.LevelDBFS + t.Again.LevelDBFS) / 2
}

// apartDB is half the difference of the two, without sign.
func (t Twice) apartDB() float64 {
	if t.Again == nil {
		return 0
	}
	return math.Abs(t.First.LevelDBFS-t.Again.LevelDBFS) / 2
}

// repeats are the terms of the level's repeatability.
func (t Twice) repeats(role string) []uncertainty.Term {
	first := repeatability("repeatability of "+role, t.First)
	if t.Again == nil {
		return []uncertainty.Term{first}
	}
	again := repeatability("repeatability of "+role+"-again", *t.Again)
	first.Sensitivity, again.Sensitivity = 0.5, 0.5
	return []uncertainty.Term{first, again}
}

// ReadLossTwice is [ReadLoss] where before, after, or both were recorded a second time. The level
// of a take that was is the mean of the two.
//
// With before-again, half the difference of before and before-again takes the place of the gain
// drift, as a standard uncertainty: a gain that moved one way was within that of the mean while
// after was recorded. With after-again, half their difference is the standard error of the mean of
// two pluggings (JCGM 100, 4.2), and has one degree of freedom. With neither, the result is that
// of ReadLoss.
func ReadLossTwice(before, after Twice, g Gains) LossReading {
	r := LossReading{
		LossDB: before.LevelDBFS() - after.LevelDBFS() + g.AfterDB,
		FreqHz: before.First.FreqHz,
		Terms:  append(before.repeats("before"), after.repeats("after")...),
	}
	if before.Again != nil {
		g.DriftDB = 0
		r.Terms = append(r.Terms, uncertainty.FromNormal(beforeTwice, before.apartDB(), 1))
	}
	if after.Again != nil {
		r.Terms = append(r.Terms, uncertainty.FromSample(afterTwice, after.apartDB(), 1, 1))
	}
	r.Terms = append(r.Terms, g.Terms()...)
	return r
}

// ReadLossBoth is the bench loss from one take of two channels (both.wav): straight is the tone of
// channel 1, through that of channel 2, from two outputs into two inputs at once. Nothing drifts
// between them, but the channels may differ, out and in: channelMatchDB, a half-width, counts
// twice.
func ReadLossBoth(straight, through analysis.Tone, channelMatchDB float64, g Gains) LossReading {
	g.DriftDB = 0
	r := ReadLoss(straight, through, g)
	r.Terms[0].Source, r.Terms[1].Source = "repeatability of channel 1", "repeatability of channel 2"
	if channelMatchDB > 0 {
		r.Terms = append(r.Terms,
			uncertainty.FromRectangle(channelsOutSrc, channelMatchDB, 1),
			uncertainty.FromRectangle(channelsInSrc, channelMatchDB, 1))
	}
	return r
}
