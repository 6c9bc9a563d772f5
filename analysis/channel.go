package analysis

import "math"

// ToneLevels returns, for each channel, the level in dBFS of the strongest steady tone, by the
// looks that [FindTones] begins with: enough to choose the channel that carries the tone and to see
// whether another carries it within 20 dB. With freqsHz given, only tones within 1 % of these
// count, so that hum does not; use before's for the takes that follow it. A tone counts where two
// neighbouring looks show it alike; a channel with none gives the strongest line of any single
// look, and one with no line at all [FloorDBFS].
func ToneLevels(channels []Samples, freqsHz []float64) ([]float64, error) {
	if len(freqsHz) == 0 {
		freqsHz = []float64{0}
	}
	levels := make([]float64, len(channels))
	for i, s := range channels {
		levels[i] = FloorDBFS
		if err := checkLength(s); err != nil {
			return nil, err
		}
		l := newLookout(s)
		for _, freqHz := range freqsHz {
			l.wantHz = freqHz
			looks, err := l.survey()
			if err != nil {
				return nil, err
			}
			levels[i] = math.Max(levels[i], strongestDBFS(looks))
		}
	}
	return levels, nil
}

func strongestDBFS(looks []line) float64 {
	steady, single := FloorDBFS, FloorDBFS
	for _, r := range runsOf(looks) {
		if r.last > r.first {
			steady = math.Max(steady, r.levelDBFS())
		}
		single = math.Max(single, r.levelDBFS())
	}
	if steady > FloorDBFS {
		return steady
	}
	return single
}
