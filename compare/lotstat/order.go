package lotstat

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"

	"padproof/compare/uncertainty"
)

// A Trend is a steady change of loss in the order of testing.
type Trend struct {
	Shown    bool
	SlopeDB  float64              // a unit
	Interval uncertainty.Interval // of SlopeDB, 95 %
	P        float64              // chance of such a slope without a trend
	TotalDB  float64              // from the first unit to the last
}

// A Step is a change of level in the order of testing.
type Step struct {
	Shown    bool
	At       int     // the first unit of the new level, from 0
	ChangeDB float64 // new level less old
	Better   float64 // by how much the step's BIC is under that of no change and of a trend
}

// What it takes to call a lot unsteady. Several tests are made of each lot, so
// each alone asks for 1 %. A BIC better by 10 is "very strong" in the words of
// Kass and Raftery (J. Am. Statist. Assoc. 90, 1995, 773-795).
const (
	caseAlpha     = 0.01
	veryStrong    = 10
	leastForOrder = 10
	leastInLevel  = 3
)

// An ordered is what deviations show in the order of testing.
type ordered struct {
	trend Trend
	step  Step
	rest  []float64 // deviations with the trend or the step taken off
	spent int       // figures fitted to get there
}

// orderOf fits no change, a straight line and one step to the deviations, by least
// squares, the line tested by Student's t. Models are held against each other by
// BIC = n ln(RSS/n) + k ln n with k of 2, 3 and 4 (Schwarz, Ann. Statist. 6, 1978,
// 461-464; for steps Yao, Statist. Probab. Lett. 6, 1988, 181-189).
func orderOf(v view) ordered {
	mean, sd := meanStdDev(v.db)
	o := ordered{
		trend: Trend{SlopeDB: math.NaN(), Interval: unknown, P: math.NaN(), TotalDB: math.NaN()},
		step:  Step{At: -1, ChangeDB: math.NaN(), Better: math.NaN()},
		rest:  lessThan(v.db, func(int) float64 { return mean }), spent: 1,
	}
	if len(v.db) < leastForOrder || !(sd > 0) {
		return o
	}
	line := lineThrough(v)
	step := bestStep(v.db)
	n := float64(len(v.db))
	// Squares below what the figures' own digits allow are nil.
	least := n * square(1e-9*(1+math.Abs(mean)))
	bic := func(squares, k float64) float64 { return n*math.Log(math.Max(squares, least)/n) + k*math.Log(n) }
	level := bic(sumSquares(o.rest), 2)
	sloped, stepped := bic(line.squares, 3), bic(step.squares, 4)

	o.trend = line.trend(v)
	o.step = Step{At: v.at[step.first], ChangeDB: step.after - step.before, Better: math.Min(level, sloped) - stepped}
	switch {
	case o.step.Better > veryStrong:
		o.step.Shown = true
		o.rest, o.spent = lessThan(v.db, step.level), 3
	case o.trend.P < caseAlpha && sloped < level:
		o.trend.Shown = true
		o.rest, o.spent = lessThan(v.db, func(i int) float64 { return line.at(float64(v.at[i])) }), 2
	}
	return o
}

// A line is a straight one through deviations, by place in the lot.
type line struct {
	x0, mean, slope  float64
	across, squares  float64 // Σ (x - x0)², and what the line leaves
	degreesOfFreedom float64
}

func lineThrough(v view) line {
	l := line{mean: meanOf(v.db), degreesOfFreedom: float64(len(v.db) - 2)}
	for _, at := range v.at {
		l.x0 += float64(at) / float64(len(v.at))
	}
	for i, at := range v.at {
		x := float64(at) - l.x0
		l.across += x * x
		l.slope += x * (v.db[i] - l.mean)
	}
	l.slope /= l.across
	for i, at := range v.at {
		l.squares += square(v.db[i] - l.at(float64(at)))
	}
	return l
}

func (l line) at(x float64) float64 { return l.mean + l.slope*(x-l.x0) }

// trend tests the slope: t = slope / √(squares / (dof across)).
func (l line) trend(v view) Trend {
	stdU := math.Sqrt(l.squares / l.degreesOfFreedom / l.across)
	t := distuv.StudentsT{Mu: 0, Sigma: 1, Nu: l.degreesOfFreedom}
	half := t.Quantile(0.975) * stdU
	p := 0.0
	if stdU > 0 {
		p = 2 * t.CDF(-math.Abs(l.slope/stdU))
	}
	return Trend{
		SlopeDB:  l.slope,
		Interval: uncertainty.Interval{Low: l.slope - half, High: l.slope + half},
		P:        p,
		TotalDB:  l.slope * float64(v.at[len(v.at)-1]-v.at[0]),
	}
}

// Two levels, one after the other.
type levels struct {
	first         int // the first entry of the second level
	before, after float64
	squares       float64 // what they leave
}

func (l levels) level(i int) float64 {
	if i < l.first {
		return l.before
	}
	return l.after
}

// bestStep is the step that leaves least.
func bestStep(db []float64) levels {
	mean := meanOf(db)
	total, all := 0.0, 0.0
	for _, d := range db {
		total += d - mean
		all += square(d - mean)
	}
	best := levels{squares: math.Inf(1)}
	n, sum := float64(len(db)), 0.0
	for i := 0; i < len(db)-leastInLevel; i++ {
		sum += db[i] - mean
		if i+1 < leastInLevel {
			continue
		}
		k := float64(i + 1)
		squares := all - sum*sum/k - square(total-sum)/(n-k)
		if squares < best.squares {
			best = levels{i + 1, mean + sum/k, mean + (total-sum)/(n-k), squares}
		}
	}
	return best
}

func lessThan(db []float64, level func(i int) float64) []float64 {
	rest := make([]float64, len(db))
	for i, d := range db {
		rest[i] = d - level(i)
	}
	return rest
}

func sumSquares(values []float64) float64 {
	sum := 0.0
	for _, v := range values {
		sum += v * v
	}
	return sum
}
