package lotstat

import (
	"math"
	"math/rand/v2"
	"testing"

	"padproof/compare"
)

// SAS/QC guide, procedure CAPABILITY, example 5.3: 75 amplifier gains in dB, 90 %
// interval of Cpk; exact values worked out by others from the same data.
func TestCapabilityPublishedAmplifier(t *testing.T) {
	const example = "SAS/QC amplifier gain"
	gains := column(t, "spc_capability_amplifier_gain.csv", "gain_db")
	c := must[Capability](t)(CapabilityOf(gains, compare.Limit{Low: 4, High: 6}, 0.90))
	published(t, "SAS/QC amplifier gain LSL 4 USL 6 n 75", "Cpk", c.Overall.Cpk)
	published(t, example, "Cpk 90 % lower", c.Overall.CpkInterval.Low)
	published(t, example, "Cpk 90 % upper", c.Overall.CpkInterval.High)
	published(t, example, "mean", c.Mean)
	published(t, example, "s", c.Overall.StdDev)
	if c.Differ || c.Reason != "" {
		t.Errorf("a steady line: Differ %v (p %.3g), reason %q", c.Differ, c.DifferP, c.Reason)
	}
}

// NIST/SEMATECH e-Handbook 6.1.6: limits 8 to 20, mean 16, standard deviation 2.
func TestCapabilityPublishedHandbook(t *testing.T) {
	const example = "NIST 6.1.6 capability"
	x := indicesOf(16, 2, 49, 50, compare.Limit{Low: 8, High: 20}, 0.95)
	published(t, "NIST 6.1.6 capability USL 20 LSL 8 mean 16 s 2", "Cp", x.Cp)
	published(t, example, "Cpk", x.Cpk)
	published(t, example, "Cpu", x.Cpu)
	published(t, example, "Cpl", x.Cpl)
}

func TestCapabilityOneSided(t *testing.T) {
	high := indicesOf(16, 2, 49, 50, compare.AtMost(20), 0.95)
	near(t, "Cpk of an upper limit", high.Cpk, 4.0/6, 1e-12)
	low := indicesOf(16, 2, 49, 50, compare.AtLeast(8), 0.95)
	near(t, "Cpk of a lower limit", low.Cpk, 8.0/6, 1e-12)
	for what, x := range map[string]Indices{"upper": high, "lower": low} {
		if !math.IsNaN(x.Cp) || !math.IsNaN(x.CpInterval.Low) || math.IsNaN(x.CpkInterval.Low) {
			t.Errorf("%s limit alone = %+v", what, x)
		}
	}
	if !math.IsNaN(high.Cpl) || !math.IsNaN(low.Cpu) {
		t.Errorf("an index of no limit: %g, %g", high.Cpl, low.Cpu)
	}
	outside := indicesOf(21, 2, 49, 50, compare.AtMost(20), 0.95)
	near(t, "Cpk of a mean outside", outside.Cpk, -1.0/6, 1e-12)
}

func TestCapabilityOdd(t *testing.T) {
	limit := compare.PlusMinus(14, 0.3)
	for what, c := range map[string]struct {
		values []float64
		limit  compare.Limit
		reason string
	}{
		"one reading": {[]float64{14}, limit, "capability needs two readings or more, have 1"},
		"all alike":   {[]float64{14, 14, 14}, limit, "all readings are alike: there is no spread to hold against the limits"},
		"no limit":    {[]float64{14, 14.1, 14}, compare.NoLimit(), "no limit is set"},
	} {
		got := must[Capability](t)(CapabilityOf(c.values, c.limit, 0.95))
		if got.Reason != c.reason || !math.IsNaN(got.Overall.Cpk) || !math.IsNaN(got.Within.Cpk) || !math.IsNaN(got.Overall.CpkInterval.High) {
			t.Errorf("%s = %+v", what, got)
		}
	}
	_, err := CapabilityOf([]float64{1, 2}, compare.Limit{Low: 2, High: 1}, 0.95)
	refused(t, "limits the wrong way round", err, "limits of 2 to 1")
	_, err = CapabilityOf([]float64{1, math.Inf(1)}, limit, 0.95)
	refused(t, "an infinite reading", err, "reading 2")
}

// A line whose level wanders: Within is better than Overall, and that is said. A
// steady line is called wandering in about 1 % of lots.
func TestCapabilityWandering(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	limit := compare.PlusMinus(0, 3)
	false1, wandering := 0, 0
	const lots = 2000
	for range lots {
		steady, walking, level := make([]float64, 30), make([]float64, 30), 0.0
		for i := range steady {
			steady[i] = rng.NormFloat64()
			level += rng.NormFloat64()
			walking[i] = level + 0.5*rng.NormFloat64()
		}
		if must[Capability](t)(CapabilityOf(steady, limit, 0.95)).Differ {
			false1++
		}
		if c := must[Capability](t)(CapabilityOf(walking, limit, 0.95)); c.Differ && c.Within.Cp > c.Overall.Cp {
			wandering++
		}
	}
	near(t, "share of steady lots called wandering", float64(false1)/lots, differsAt, 0.006)
	near(t, "share of wandering lots found", float64(wandering)/lots, 1, 0.1)
}

// The degrees of freedom behind a mean moving range, by simulation: those of a
// variate with the relative variance 1/(2ν).
func TestRangeDof(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 6))
	for _, n := range []int{8, 30} {
		const draws = 40000
		means := make([]float64, draws)
		values := make([]float64, n)
		for i := range means {
			for j := range values {
				values[j] = rng.NormFloat64()
			}
			means[i] = meanOf(movingRanges(values)) / rangeD2
		}
		mean, sd := meanStdDev(means)
		near(t, "mean of the moving-range estimate", mean, 1, 0.006)
		ours := rangeDof(n)
		near(t, "degrees of freedom", ours, mean*mean/(2*sd*sd), 0.03*ours)
	}
}

// The intervals hold the true index in about the share of lots they are said to.
func TestCapabilityCoverage(t *testing.T) {
	rng := rand.New(rand.NewPCG(7, 8))
	limit := compare.Limit{Low: -4, High: 5} // of a line with mean 0 and deviation 1: Cp 1.5, Cpk 4/3
	const lots = 4000
	held := make(map[string]float64)
	for range lots {
		values := make([]float64, 40)
		for i := range values {
			values[i] = rng.NormFloat64()
		}
		c := must[Capability](t)(CapabilityOf(values, limit, 0.95))
		for what, x := range map[string]Indices{"overall": c.Overall, "within": c.Within} {
			if x.CpInterval.Low <= 1.5 && 1.5 <= x.CpInterval.High {
				held[what+" Cp"] += 1.0 / lots
			}
			if x.CpkInterval.Low <= 4.0/3 && 4.0/3 <= x.CpkInterval.High {
				held[what+" Cpk"] += 1.0 / lots
			}
		}
	}
	for what, share := range held {
		near(t, "coverage of "+what, share, 0.95, 0.015)
	}
}
