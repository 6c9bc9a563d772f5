package lotstat

import (
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"padproof/compare"
)

func aiagReadings(t *testing.T) []StudyReading {
	var readings []StudyReading
	for _, row := range table(t, "gauge_rr_aiag_data.csv") {
		readings = append(readings, StudyReading{row["appraiser"], row["part"], number(t, row["value"])})
	}
	return readings
}

// AIAG, Measurement Systems Analysis, 4th ed. 2010: ten parts, three appraisers,
// three trials.
func TestStudyPublished(t *testing.T) {
	const pooled, anova = "AIAG MSA 4 ANOVA pooled", "AIAG MSA 4 ANOVA"
	s := must[Study](t)(StudyOf(aiagReadings(t), compare.PlusMinus(0, 4), 0.95))
	if s.Operators != 3 || s.Units != 10 || s.Repeats != 3 || !s.Pooled {
		t.Errorf("study of %d × %d × %d, pooled %v", s.Operators, s.Units, s.Repeats, s.Pooled)
	}
	published(t, pooled, "sigma repeatability EV", s.Repeatability.StdDev)
	published(t, pooled, "sigma appraiser AV", s.Reproducibility.StdDev)
	published(t, pooled, "sigma gauge GRR", s.Gauge.StdDev)
	published(t, pooled, "sigma part PV", s.Unit.StdDev)
	published(t, pooled, "sigma total TV", s.Total.StdDev)
	all := []Component{s.Repeatability, s.Reproducibility, s.Gauge, s.Unit}
	var ofVariance, ofStudy []float64
	for _, c := range all {
		ofVariance = append(ofVariance, 100*c.OfVariance)
		ofStudy = append(ofStudy, 100*c.OfStudy)
		near(t, "share of a tolerance of 8", c.OfTolerance, 6*c.StdDev/8, 1e-12)
	}
	published(t, pooled, "percent contribution EV AV GRR PV", ofVariance...)
	published(t, pooled, "percent study variation EV AV GRR PV", ofStudy...)
	published(t, pooled, "ndc before truncation (1.41 factor)", s.Categories)
	rows := make(map[string]AnovaRow)
	var squares []float64
	for _, r := range s.Table {
		rows[r.Source] = r
		squares = append(squares, r.SumSquares)
	}
	published(t, anova, "interaction F", rows["interaction"].F)
	published(t, anova, "interaction p", rows["interaction"].P)
	published(t, anova, "SS part appraiser interaction equipment total", squares...)
	if s.Grade != Usable || !strings.Contains(s.Text, "23 % of the tolerance") {
		t.Errorf("grade %q: %q", s.Grade, s.Text)
	}
}

// The same with the interaction kept.
func TestStudyInteractionKept(t *testing.T) {
	a := analysed(must[cells](t)(crossed(aiagReadings(t))))
	a.pooled = false
	var s Study
	s.components(a, measure{toleranceWidth: math.Inf(1), coverage: 0.95})
	published(t, "AIAG MSA 4 ANOVA interaction kept", "sigma repeatability", s.Repeatability.StdDev)
	if s.Interaction.Variance != 0 {
		t.Errorf("a negative interaction = %g, want 0", s.Interaction.Variance)
	}
	if !math.IsNaN(s.Gauge.OfTolerance) {
		t.Errorf("share of no tolerance = %g", s.Gauge.OfTolerance)
	}
}

// Order of readings and a common offset make no difference.
func TestStudyOrder(t *testing.T) {
	readings := aiagReadings(t)
	want := must[Study](t)(StudyOf(readings, compare.NoLimit(), 0.95))
	rand.New(rand.NewPCG(17, 18)).Shuffle(len(readings), func(i, j int) { readings[i], readings[j] = readings[j], readings[i] })
	for i := range readings {
		readings[i].Value += 1000
	}
	got := must[Study](t)(StudyOf(readings, compare.NoLimit(), 0.95))
	near(t, "gauge", got.Gauge.StdDev, want.Gauge.StdDev, 1e-9)
	near(t, "its upper end", got.Gauge.StdDevInterval.High, want.Gauge.StdDevInterval.High, 1e-8)
}

// Thermal impedance of ten power modules, three inspectors, three readings (Houf
// and Berman 1988, in Burdick, Borror and Montgomery, J. Quality Technology 35,
// 2003, 342-354): mean squares, and 95 % intervals of the variances of the
// modules and of the gauge. All from memory.
func TestStudyIntervalsPublished(t *testing.T) {
	a := anova{units: 10, operators: 3, repeats: 3,
		unit: source{3935.9556, 9}, operator: source{39.2667, 2}, interaction: source{48.5111, 18}, within: source{30.6667, 60},
	}
	var s Study
	s.components(a, measure{toleranceWidth: math.Inf(1), coverage: 0.95})
	near(t, "variance of the units", s.Unit.Variance, 48.29, 0.005)
	near(t, "low", square(s.Unit.StdDevInterval.Low), 22.69, 0.005)
	near(t, "high", square(s.Unit.StdDevInterval.High), 161.64, 0.05)
	near(t, "variance of the gauge", s.Gauge.Variance, 1.80, 0.005)
	near(t, "low", square(s.Gauge.StdDevInterval.Low), 1.20, 0.01)
	near(t, "high", square(s.Gauge.StdDevInterval.High), 27.02, 0.05)
}

// The intervals of one mean square are exact; the others hold the true figure in
// 95 % of studies or a little more (Burdick and Graybill, Confidence Intervals on
// Variance Components, 1992, from memory).
func TestStudyCoverage(t *testing.T) {
	rng := rand.New(rand.NewPCG(19, 20))
	const studies, repeatability, operator, crossing, unit = 3000, 0.3, 0.2, 0.3, 1.0
	held := make(map[string]float64)
	for range studies {
		s := must[Study](t)(StudyOf(drawnStudy(rng, 8, 4, 3, [4]float64{unit, operator, crossing, repeatability}), compare.NoLimit(), 0.95))
		for what, c := range map[string]struct {
			got  Component
			true float64
		}{
			"repeatability":   {s.Repeatability, repeatability},
			"operator":        {s.Operator, operator},
			"reproducibility": {s.Reproducibility, math.Hypot(operator, crossing)},
			"gauge":           {s.Gauge, math.Sqrt(square(operator) + square(crossing) + square(repeatability))},
			"unit":            {s.Unit, unit},
			"total":           {s.Total, math.Sqrt(square(operator) + square(crossing) + square(repeatability) + square(unit))},
		} {
			if c.got.StdDevInterval.Low <= c.true && c.true <= c.got.StdDevInterval.High {
				held[what] += 1.0 / studies
			}
		}
	}
	near(t, "coverage of repeatability", held["repeatability"], 0.95, 0.015)
	for _, what := range []string{"operator", "reproducibility", "gauge", "unit", "total"} {
		near(t, "coverage of "+what, held[what], 0.96, 0.025)
	}
}

// drawnStudy draws a study with the deviations of unit, operator, interaction, reading.
func drawnStudy(rng *rand.Rand, units, operators, repeats int, dev [4]float64) []StudyReading {
	var readings []StudyReading
	byUnit := make([]float64, units)
	for j := range byUnit {
		byUnit[j] = dev[0] * rng.NormFloat64()
	}
	for i := range operators {
		byOperator := dev[1] * rng.NormFloat64()
		for j := range units {
			crossing := dev[2] * rng.NormFloat64()
			for range repeats {
				v := 14 + byUnit[j] + byOperator + crossing + dev[3]*rng.NormFloat64()
				readings = append(readings, StudyReading{fmt.Sprint("operator ", i), fmt.Sprintf("%04d", 417+j), v})
			}
		}
	}
	return readings
}

func TestStudyRefuses(t *testing.T) {
	whole := drawnStudy(rand.New(rand.NewPCG(21, 22)), 3, 2, 2, [4]float64{1, 1, 1, 1})
	edit := func(f func([]StudyReading) []StudyReading) error {
		_, err := StudyOf(f(slices.Clone(whole)), compare.NoLimit(), 0.95)
		return err
	}
	refused(t, "one missing", edit(func(r []StudyReading) []StudyReading { return slices.Delete(r, 3, 4) }),
		"operator operator 0 has 1 reading of unit 0418", "2 are usual")
	refused(t, "one too many", edit(func(r []StudyReading) []StudyReading { return append(r, r[11]) }),
		"operator operator 1 has 3 readings of unit 0419")
	refused(t, "a unit that one operator left out", edit(func(r []StudyReading) []StudyReading { return r[:10] }),
		"operator operator 1 has no reading of unit 0419")
	refused(t, "one operator", edit(func(r []StudyReading) []StudyReading { return r[:6] }), "two operators", "have 1 and 3")
	refused(t, "no readings", edit(func(r []StudyReading) []StudyReading { return nil }), "two operators")
	refused(t, "no repeats", edit(func(r []StudyReading) []StudyReading {
		var once []StudyReading
		for i := 0; i < len(r); i += 2 {
			once = append(once, r[i])
		}
		return once
	}), "two readings")
	refused(t, "a NaN", edit(func(r []StudyReading) []StudyReading { r[4].Value = math.NaN(); return r }),
		"reading 5", "unit 0419", "NaN")
}

func TestStudyOdd(t *testing.T) {
	rng := rand.New(rand.NewPCG(23, 24))
	alike := must[Study](t)(StudyOf(drawnStudy(rng, 5, 2, 2, [4]float64{1, 0, 0, 0}), compare.NoLimit(), 0.95))
	if alike.Grade != "" || !math.IsNaN(alike.Categories) || !strings.Contains(alike.Text, "too coarse") {
		t.Errorf("repeats all alike: %+v", alike)
	}
	small := must[Study](t)(StudyOf(drawnStudy(rng, 2, 2, 2, [4]float64{1, 1, 1, 1}), compare.NoLimit(), 0.95))
	if math.IsNaN(small.Total.StdDevInterval.High) || math.IsNaN(small.Gauge.StdDevInterval.Low) {
		t.Errorf("the least study: %+v", small)
	}
	fine := must[Study](t)(StudyOf(drawnStudy(rng, 10, 3, 3, [4]float64{1, .01, 0, .01}), compare.NoLimit(), 0.95))
	if fine.Grade != Good || fine.Categories < 5 {
		t.Errorf("a fine bench: %q, %.1f", fine.Grade, fine.Categories)
	}
	coarse := must[Study](t)(StudyOf(drawnStudy(rng, 10, 3, 3, [4]float64{.1, 1, 0, .1}), compare.PlusMinus(14, 3), 0.95))
	if coarse.Grade != Poor || !strings.Contains(coarse.Text, "between operators") {
		t.Errorf("a coarse bench: %q, %q", coarse.Grade, coarse.Text)
	}
}
