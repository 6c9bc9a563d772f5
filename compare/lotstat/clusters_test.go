package lotstat

import (
	"math"
	"math/rand/v2"
	"testing"
)

// One group of any sound shape is not taken for two: normal, rectangular (one part
// leads), triangular (two parts), lopsided (wide tolerances).
func TestClustersChance(t *testing.T) {
	rng := rand.New(rand.NewPCG(33, 34))
	for what, draw := range map[string]func() float64{
		"normal":            rng.NormFloat64,
		"rectangle":         func() float64 { return 2*rng.Float64() - 1 },
		"blurred rectangle": func() float64 { return 2*rng.Float64() - 1 + 0.1*rng.NormFloat64() },
		"triangle":          func() float64 { return rng.Float64() - rng.Float64() },
		"skewed":            func() float64 { return math.Exp(0.2 * rng.NormFloat64()) },
	} {
		for _, units := range []int{40, 400} {
			found := 0
			const lots = 25
			for range lots {
				db := make([]float64, units)
				for i := range db {
					db[i] = 0.1 * draw()
				}
				if clustersOf(db, 0).Shown {
					found++
				}
			}
			if found > 1 {
				t.Errorf("%d of %d lots of %d units, %s, taken for two groups", found, lots, units, what)
			}
		}
	}
}

// Two rectangles side by side, each the spread of one reel, are found.
func TestClustersFound(t *testing.T) {
	rng := rand.New(rand.NewPCG(35, 36))
	const lots = 20
	for units, least := range map[int]int{40: lots / 2, 300: lots, 5000: lots} {
		found := 0
		for range lots {
			db := make([]float64, units)
			for i := range db {
				db[i] = 0.05 * (2*rng.Float64() - 1)
				if i%3 == 0 {
					db[i] += 0.2
				}
			}
			if c := clustersOf(db, 0); c.Shown && math.Abs(c.HighDB-c.LowDB-0.2) < 0.03 && math.Abs(c.HighFrac-1.0/3) < 0.05 {
				found++
			}
		}
		if found < least {
			t.Errorf("%d of %d lots of %d units found to be of two kinds", found, lots, units)
		}
	}
}

// The likelihoods against closed form: two bare groups far apart, and a rectangle
// without blur.
func TestClusterLikelihoods(t *testing.T) {
	z := []float64{-1.1, -0.9, -1.1, -0.9, 0.9, 1.1, 0.9, 1.1}
	p := bestPair(z, 1e-3)
	near(t, "low", p.low, -1, 1e-6)
	near(t, "width", p.width, 0.1, 1e-6)
	n := float64(len(z))
	near(t, "log-likelihood", p.logLike, n*(math.Log(0.5)-math.Log(0.1*math.Sqrt(2*math.Pi))-0.5), 1e-6)

	var even []float64
	for i := range 200 {
		even = append(even, math.Sqrt(3)*(2*(float64(i)+0.5)/200-1))
	}
	bare := -200 * math.Log(2*math.Sqrt(3))
	near(t, "rectangle", rectangleLogLike(even, 0, math.Sqrt(3), 1e-6), bare, 1e-6)
	if got := blurredLogLike(even); got < bare-1 {
		t.Errorf("best blurred rectangle = %g, want %g or more", got, bare-1)
	}
	wide := make([]float64, 500)
	rng := rand.New(rand.NewPCG(37, 38))
	for i := range wide {
		wide[i] = rng.NormFloat64()
	}
	if got, normal := blurredLogLike(wide), normalLogLike(wide); got < normal-1 {
		t.Errorf("best blurred rectangle for normal values = %g, the normal, its limit, has %g", got, normal)
	}
}
