package compare

import (
	"math"
	"testing"

	"padproof/analysis"
)

func TestPairProblems(t *testing.T) {
	tone := func(freqHz, levelDBFS, phaseRad, stdErrDB float64) analysis.Tone {
		return analysis.Tone{FreqHz: freqHz, LevelDBFS: levelDBFS, PhaseRad: phaseRad, StdErrDB: stdErrDB, Blocks: 8, StartSec: 0.5}
	}
	flat := func(float64) float64 { return 20 }
	steep := func(freqHz float64) float64 { return 20 * math.Log10(freqHz) } // 6 dB an octave
	tests := []struct {
		name          string
		before, after Side
		designedDB    func(float64) float64
		want          string
	}{
		{"sound", Side{"a", 10, tone(997, -6, 0, 0.001)}, Side{"b", 10, tone(997, -26, 1, 0.001)}, flat, ""},
		{"same bytes", Side{"a", 10, tone(997, -6, 0, 0.001)}, Side{"a", 10, tone(997, -6, 0, 0.001)}, flat, SameRecording},
		{"saved again", Side{"a", 10, tone(997, -6, 3.1415, 0.001)}, Side{"b", 10, tone(997, -6.0001, -3.1415, 0.002)}, flat, SameRecording},
		{"gain", Side{"a", 10, tone(997, -26, 0, 0.001)}, Side{"b", 10, tone(997, -6, 1, 0.001)}, flat, SwappedTakes},
		{"no loss at all, another recording", Side{"a", 10, tone(997, -6, 0, 0.001)}, Side{"b", 10, tone(997, -6.01, 1, 0.001)}, flat, ""},
		{"another setting", Side{"a", 10, tone(997, -6, 0, 0.001)}, Side{"b", 10, tone(1010, -26, 1, 0.001)}, flat, FrequencyDiffers},
		{"little off", Side{"a", 10, tone(997, -6, 0, 0.001)}, Side{"b", 10, tone(999, -26, 1, 0.001)}, flat, ""},
		{"little off on a slope", Side{"a", 10, tone(997, -6, 0, 0.001)}, Side{"b", 10, tone(999, -26, 1, 0.001)}, steep, FrequencyDiffers},
		{"weak", Side{"a", 10, tone(997, -6, 0, 0.001)}, Side{"b", 10, tone(997, -66, 1, 0.3)}, flat, TooWeak},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			var got string
			for _, p := range PairProblems(tt.before, tt.after, ReadLoss(tt.before.Tone, tt.after.Tone, Gains{}), tt.designedDB) {
				got += p.Name
			}
			if got != tt.want {
				t.Errorf("PairProblems = %q, want %q", got, tt.want)
			}
		})
	}
}

// Whatever is wrong with a take leaves its loss without ground: no name may be
// missing from the table.
func TestEveryProblemVoidsTheLoss(t *testing.T) {
	for _, name := range []string{Clipped, GainRiding, GainMoved, ChannelSilent, Dropout, SwappedTakes, SameRecording,
		FrequencyDiffers, NoTone, TooShort, TooWeak, NotClosed, CutShort, BadSamples} {
		if !Voids(name, "loss") {
			t.Errorf("Voids(%q, loss) = false, want true", name)
		}
	}
}
