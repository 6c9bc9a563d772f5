package lotstat

import (
	"math"

	"gonum.org/v1/gonum/optimize"
)

// normalLogLike is the log-likelihood of the best normal for values of mean 0.
func normalLogLike(z []float64) float64 {
	n := float64(len(z))
	return -n / 2 * (math.Log(2*math.Pi*sumSquares(z)/n) + 1)
}

// blurredLogLike is that of the best rectangle blurred by a normal: for a centre c,
// a half-width h and a blur s the density
//
//	[Φ((x-c+h)/s) - Φ((x-c-h)/s)] / (2h)
//
// Where the search fails it is that of its start.
func blurredLogLike(z []float64) float64 {
	cost := func(x []float64) float64 { return -rectangleLogLike(z, x[0], math.Exp(x[1]), math.Exp(x[2])) }
	start := []float64{0, math.Log(1.5), math.Log(0.4)}
	result, err := optimize.Minimize(optimize.Problem{Func: cost}, start,
		&optimize.Settings{FuncEvaluations: 400}, &optimize.NelderMead{})
	if err != nil && result == nil {
		return -cost(start)
	}
	return -math.Min(result.F, cost(start))
}

func rectangleLogLike(z []float64, centre, half, blur float64) float64 {
	sum := 0.0
	for _, v := range z {
		d := math.Abs(v - centre)
		// Both ends as upper tails, so that far ones keep their digits.
		inside := upperTail((d-half)/blur) - upperTail((d+half)/blur)
		sum += math.Log(math.Max(inside, 1e-300))
	}
	return sum - float64(len(z))*math.Log(2*half)
}

// upperTail is 1 - Φ.
func upperTail(x float64) float64 { return math.Erfc(x/math.Sqrt2) / 2 }
