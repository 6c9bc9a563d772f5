package lotstat

// A Diagnosis is what the deviations of a lot from its drawing say.
type Diagnosis struct {
	Units        int
	Outliers     []int // places of units that do not belong with the rest; all else is without them
	Shift        Shift
	Explanations []Explanation // the likeliest first; none unless Shift.BeyondBench
	Trend        Trend
	Step         Step
	Clusters     Clusters
	Width        Width
	Sentences    []string // what it means, the shift first; at least one
}

// Diagnose reads the deviations of a lot, in order of testing, as one who knows
// the drawing and the bench would.
//
//   - Outliers by [FindOutliers] at 1 %, up to a tenth of the lot, ten at most.
//   - A shift of the mean by Student's t at 95 %; where it is also larger than U of
//     what the bench may add to all units alike, each reel and each end of the bench
//     gets the change that alone would explain it, ranked by its size in parts of
//     its tolerance (no published procedure was found).
//   - A trend, or one step, in the order of testing; ten units or more.
//   - Two groups mixed; thirty units or more, the step or the trend taken off.
//   - A spread wider than the tolerances allow, by chi-square at 1 %; not where two
//     groups say why.
//
// The sensitivities hold near the drawn values: the change of a reel that is off by
// more than some ten per cent is about right, no more. A shift has one cause here;
// two reels that are off together are not told apart from one, and no set of losses
// at one frequency can.
//
// An error names the figure at fault: one that is no number, lists of different
// lengths, a tolerance that is none. An empty lot is none.
func Diagnose(l Lot) (Diagnosis, error) {
	if err := l.check(); err != nil {
		return Diagnosis{}, err
	}
	d := Diagnosis{Units: len(l.DeviationsDB)}
	var err error
	if d.Outliers, err = FindOutliers(l.DeviationsDB, mostOutliers(d.Units), caseAlpha); err != nil {
		return Diagnosis{}, err
	}
	v := l.without(d.Outliers)
	if d.Shift, err = shiftOf(l, v); err != nil {
		return Diagnosis{}, err
	}
	if d.Shift.BeyondBench {
		d.Explanations = explanationsOf(l.Model, d.Shift)
	}
	o := orderOf(v)
	d.Trend, d.Step = o.trend, o.step
	d.Clusters = clustersOf(o.rest, l.stdUDB())
	d.Width = widthOf(l, o)
	if d.Clusters.Shown {
		d.Clusters.LowDB += d.Shift.MeanDB
		d.Clusters.HighDB += d.Shift.MeanDB
		d.Width.Shown = false
	}
	d.Sentences = sentences(l, v, d)
	return d, nil
}

// mostOutliers is a tenth of the lot, of a small one a single unit (the test of
// several holds from about 25 units on: Rosner 1983), ten at most.
func mostOutliers(units int) int {
	const several, most = 25, 10
	if units < several {
		return 1
	}
	return min(units/10, most)
}
