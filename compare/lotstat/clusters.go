package lotstat

import (
	"math"
	"slices"
)

// Clusters are two groups of units mixed in a lot.
type Clusters struct {
	Shown         bool
	LowDB, HighDB float64 // mean of either group; NaN where not sought
	HighFrac      float64 // share of units in the higher
	WithinDB      float64 // standard deviation within either
	Better        float64 // by how much the BIC of two groups is under that of one
}

// What it takes: units enough to see a shape, a smaller group that is one, a size
// to which a larger lot is thinned, evenly over its order, and means so many widths
// apart that there is a gap: 2 by Ashman, Bird and Zepf (Astronomical J. 108, 1994,
// 2348-2361, from memory), 3 so that one lopsided group does not pass for two.
const (
	leastForClusters = 30
	leastInCluster   = 5
	leastClusterFrac = 0.1
	mostForClusters  = 600
	leastApart       = 3
)

// clustersOf fits two normal groups of one width to the deviations, by maximum
// likelihood (EM; Dempster, Laird and Rubin, J. R. Statist. Soc. B 39, 1977, 1-38)
// and holds them by BIC against one group: a normal one, and a rectangle blurred
// by a normal, the shape of a lot in which the tolerance of one part outweighs the
// rest, which would pass for two groups otherwise. Choosing the number of groups
// by BIC follows Fraley and Raftery (Computer J. 41, 1998, 578-588); the blurred
// rectangle as the rival is our own. leastStdDevDB is the least that a group may
// have.
func clustersOf(db []float64, leastStdDevDB float64) Clusters {
	c := Clusters{LowDB: math.NaN(), HighDB: math.NaN(), HighFrac: math.NaN(), WithinDB: math.NaN(), Better: math.NaN()}
	some := thinned(db, mostForClusters)
	mean, sd := meanStdDev(some)
	if len(some) < leastForClusters || !(sd > 1e-9*(1+math.Abs(mean))) {
		return c
	}
	z := lessThan(some, func(int) float64 { return mean })
	for i := range z {
		z[i] /= sd
	}
	slices.Sort(z)
	// A width of a thousandth of the lot's keeps two bare values from an endless likelihood.
	best := bestPair(z, math.Max(1e-3, leastStdDevDB/sd))

	n := float64(len(z))
	bic := func(logLike, k float64) float64 { return k*math.Log(n) - 2*logLike }
	c.LowDB, c.HighDB = mean+sd*best.low, mean+sd*best.high
	c.HighFrac, c.WithinDB = best.share, sd*best.width
	c.Better = bic(normalLogLike(z), 2) - bic(best.logLike, 4)
	if c.Better > veryStrong && best.apart(n) {
		c.Better = math.Min(c.Better, bic(blurredLogLike(z), 3)-bic(best.logLike, 4))
		c.Shown = c.Better > veryStrong
	}
	return c
}

// apart reports whether both of a pair are groups of n units, with a gap between.
func (p pair) apart(n float64) bool {
	smaller := math.Min(p.share, 1-p.share)
	return p.high-p.low > leastApart*p.width && smaller >= leastClusterFrac && smaller*n >= leastInCluster
}

// thinned keeps at most so many values, evenly spread over the order.
func thinned(values []float64, most int) []float64 {
	if len(values) <= most {
		return slices.Clone(values)
	}
	some := make([]float64, most)
	for i := range some {
		some[i] = values[i*len(values)/most]
	}
	return some
}

// A pair is two normal groups of one width.
type pair struct{ low, high, share, width, logLike float64 }

// bestPair is the likeliest pair, sought from splits at each quarter.
func bestPair(sorted []float64, leastWidth float64) pair {
	best := pair{logLike: math.Inf(-1)}
	for _, quarter := range []int{1, 2, 3} {
		cut := quarter * len(sorted) / 4
		p := pair{low: meanOf(sorted[:cut]), high: meanOf(sorted[cut:]), share: 1 - float64(cut)/float64(len(sorted)), width: 0.5}
		if p = p.settled(sorted, leastWidth); p.logLike > best.logLike {
			best = p
		}
	}
	return best
}

// settled repeats the two steps of EM until the likelihood stands still.
func (p pair) settled(z []float64, leastWidth float64) pair {
	const mostSteps, still = 100, 1e-4
	p.logLike = math.Inf(-1)
	for range mostSteps {
		next := p.step(z, leastWidth)
		if next.logLike-p.logLike < still && !math.IsInf(p.logLike, -1) {
			return next
		}
		p = next
	}
	return p
}

// step improves a pair once. The likelihood it carries is that of the pair before.
func (p pair) step(z []float64, leastWidth float64) pair {
	var inHigh, sumHigh, sumLow, logLike float64
	weights := make([]float64, len(z))
	logHigh, logLow := math.Log(p.share), math.Log(1-p.share)
	for i, v := range z {
		// The logarithm of either group's density, but for a constant.
		h := logHigh - square((v-p.high)/p.width)/2
		l := logLow - square((v-p.low)/p.width)/2
		top := math.Max(h, l)
		both := top + math.Log1p(math.Exp(math.Min(h, l)-top))
		w := math.Exp(h - both)
		weights[i] = w
		inHigh += w
		sumHigh += w * v
		sumLow += (1 - w) * v
		logLike += both
	}
	n := float64(len(z))
	logLike -= n * (math.Log(p.width) + math.Log(2*math.Pi)/2)
	const empty = 1e-9
	if inHigh < empty || n-inHigh < empty {
		p.logLike = logLike
		return p
	}
	next := pair{share: inHigh / n, high: sumHigh / inHigh, low: sumLow / (n - inHigh), logLike: logLike}
	squares := 0.0
	for i, v := range z {
		squares += weights[i]*square(v-next.high) + (1-weights[i])*square(v-next.low)
	}
	next.width = math.Max(leastWidth, math.Sqrt(squares/n))
	return next
}
