package lotstat

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"
)

// Rosner's data of NIST/SEMATECH e-Handbook 1.3.5.17.3 (data and figures from
// memory): 54 readings of which the last three are outliers, though the tests for
// one and for two do not find any.
var rosner = []float64{
	-0.25, 0.68, 0.94, 1.15, 1.20, 1.26, 1.26, 1.34, 1.38, 1.43, 1.49, 1.49, 1.55, 1.56, 1.58, 1.65, 1.69, 1.70,
	1.76, 1.77, 1.81, 1.91, 1.94, 1.96, 1.99, 2.06, 2.09, 2.10, 2.14, 2.15, 2.23, 2.24, 2.26, 2.35, 2.37, 2.40,
	2.47, 2.54, 2.62, 2.64, 2.90, 2.92, 2.92, 2.93, 3.21, 3.26, 3.30, 3.59, 3.68, 4.30, 4.64, 5.34, 5.42, 6.01,
}

func TestOutliersPublished(t *testing.T) {
	got := must[[]int](t)(FindOutliers(rosner, 10, 0.05))
	if !slices.Equal(got, []int{51, 52, 53}) {
		t.Errorf("outliers = %v, want 51, 52, 53", got)
	}
	if got := must[[]int](t)(FindOutliers(rosner, 2, 0.05)); len(got) > 0 {
		t.Errorf("up to two outliers = %v, want none", got)
	}
	rest := slices.Clone(rosner)
	for i, want := range []struct{ r, limit float64 }{{3.118906, 3.158794}, {2.942973, 3.151430}, {3.179424, 3.143890}, {2.810181, 3.136165}} {
		far, r := furthest(rest)
		near(t, "R", r, want.r, 1e-6)
		near(t, "limit", grubbsLimit(54-i, 0.05), want.limit, 1e-6)
		rest = slices.Delete(rest, far, far+1)
	}
}

// Grubbs' test as in NIST/SEMATECH e-Handbook 1.3.5.17.1 (from memory): G 2.4688,
// limit 2.032 for one side at 5 %, which is that of both sides at 10 %.
func TestGrubbsPublished(t *testing.T) {
	values := []float64{199.31, 199.53, 200.19, 200.82, 201.92, 201.95, 202.18, 245.57}
	_, g := furthest(values)
	near(t, "G", g, 2.4687, 1e-3)
	near(t, "limit", grubbsLimit(8, 0.10), 2.032, 5e-4)
	if got := must[[]int](t)(FindOutliers(values, 1, 0.05)); !slices.Equal(got, []int{7}) {
		t.Errorf("outliers = %v, want 7", got)
	}
}

// A sound lot has an outlier in the share of lots that is asked for.
func TestOutliersChance(t *testing.T) {
	rng := rand.New(rand.NewPCG(25, 26))
	const lots = 4000
	found := 0
	for range lots {
		values := make([]float64, 40)
		for i := range values {
			values[i] = rng.NormFloat64()
		}
		if len(must[[]int](t)(FindOutliers(values, 4, 0.05))) > 0 {
			found++
		}
	}
	near(t, "share of sound lots with an outlier", float64(found)/lots, 0.05, 0.012)
}

func TestOutliersOdd(t *testing.T) {
	for what, values := range map[string][]float64{
		"none": nil, "few": {0, 0, 0, 0, 0, 9}, "alike": constant(3, 20),
	} {
		if got := must[[]int](t)(FindOutliers(values, 3, 0.05)); len(got) > 0 {
			t.Errorf("%s: outliers %v", what, got)
		}
	}
	_, err := FindOutliers([]float64{1, math.NaN()}, 1, 0.05)
	refused(t, "a NaN", err, "reading 2")
	_, err = FindOutliers([]float64{1, 2}, 1, 0)
	refused(t, "a chance of 0", err, "chance")
}
