package analysis

import (
	"fmt"
	"math"
	"testing"

	"gonum.org/v1/gonum/stat"
	"gonum.org/v1/gonum/stat/distuv"
)

// Many takes of one tone in noise: the level is not biased, and its standard error is honest. The
// interval is Student's at 95 %, from the larger of StdErrDB and HalvesDB; the larger of two makes
// it somewhat more than 95 %.
func TestLevelInNoise(t *testing.T) {
	const rateHz, trials = 8000.0, 300
	for _, c := range []struct{ freqHz, sec, snrDB float64 }{
		{997, 1.2, 15}, {997, 4, 15}, {997, 4, 0}, {997, 5, -6}, {60, 4, 15}, {60, 1.5, 15},
	} {
		var errors, scatters, predicted []float64
		inside := 0
		for trial := range trials {
			take := newClip(rateHz, c.sec+0.2).tone(c.freqHz+0.37, -70, float64(trial), 0.1, c.sec+0.1)
			take.noise(-70-c.snrDB, uint64(trial)+1000)
			m, err := MeasureTones(take, []Stretch{{FreqHz: c.freqHz + 0.37, LevelDBFS: -70, StartSec: 0.15, EndSec: c.sec + 0.05}})
			if err != nil {
				t.Fatalf("%+v, trial %d: %v", c, trial, err)
			}
			tone := m.Tones[0]
			err1 := tone.LevelDBFS + 70
			errors = append(errors, err1)
			scatters = append(scatters, tone.StdErrDB*tone.StdErrDB)
			predicted = append(predicted, tone.NoiseStdErrDB)
			student := distuv.StudentsT{Sigma: 1, Nu: float64(tone.Blocks - 1)}
			if math.Abs(err1) <= student.Quantile(0.975)*math.Max(tone.StdErrDB, tone.HalvesDB) {
				inside++
			}
		}
		name := fmt.Sprintf("%+v", c)
		sd := stat.StdDev(errors, nil)
		near(t, name+": mean error over its standard error", stat.Mean(errors, nil)/sd*math.Sqrt(trials), 0, 3.5)
		near(t, name+": StdErrDB over true scatter", math.Sqrt(stat.Mean(scatters, nil))/sd, 1, 0.12)
		near(t, name+": NoiseStdErrDB over true scatter", stat.Mean(predicted, nil)/sd, 1, 0.15)
		near(t, name+": coverage, %", 100*float64(inside)/trials, 95.5, 2.5)
	}
}
