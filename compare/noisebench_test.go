package compare

import (
	"math/rand/v2"
	"testing"
)

func BenchmarkJudgeNoise(b *testing.B) {
	random := rand.New(rand.NewPCG(5, 1))
	bench := sceneBench(10000)
	bench.HighAmps, bench.CalibrationUDB, bench.TempHalfC = 2e-12, 0.5, 5
	bench.Ends.CableFarads, bench.CableTolFarads = 2.5e-10, 2.5e-10
	bench.LoadTolFrac, bench.PadPlugTolFrac = 0.1, 0.1
	pad := circuit(new(testing.T), "U", 0.01, 560, 560, 330)
	padTake, rigTake := noiseScene{pad: pad, drawn: pad, bench: bench, rigOver: 20, seconds: 30, tempC: 21, unitFactor: 1}.takes(random)
	for b.Loop() {
		n, err := JudgeNoise(NoiseCase{pad, bench, padTake, rigTake})
		if err != nil {
			b.Fatal(err)
		}
		n.JudgeOver(Guarded, AtMost(3))
	}
}
