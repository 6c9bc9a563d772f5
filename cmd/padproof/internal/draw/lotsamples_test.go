package draw

import (
	"fmt"
	"math"
	"math/rand/v2"
	"slices"

	"padproof/cmd/padproof/internal/result"
)

// sampleLot is a lot of so many units about 14 dB, with limits of ±0.3 dB; its
// figures are worked out here.
func sampleLot(units int, seed uint64, change func(i int, dB float64) float64) *result.Lot {
	rng := rand.New(rand.NewPCG(seed, 1))
	var values []float64
	for i := range units {
		v := 14.02 + 0.06*rng.NormFloat64()
		if change != nil {
			v = change(i, v)
		}
		values = append(values, v)
	}
	return lotOf(values, 13.7, 14.3)
}

func lotOf(values []float64, low, high float64) *result.Lot {
	l := &result.Lot{Lot: "Saltmarsh lot 12", Units: len(values), Simulated: true}
	f := result.LotFigure{Check: "loss", Unit: "dB", N: len(values), Expected: 13.97, Low: num(low), High: num(high)}
	sum, jumps := 0.0, 0.0
	for i, v := range values {
		verdict := "PASS"
		switch {
		case v < low-0.04 || v > high+0.04:
			verdict = "FAIL"
		case v < low+0.04 || v > high-0.04:
			verdict = "UNPROVEN"
		}
		l.Rows = append(l.Rows, result.LotRow{Unit: fmt.Sprintf("%04d", 401+i), Verdict: verdict,
			Checks: []result.LotCheck{{Name: "loss", Verdict: verdict, Measured: num(v), Uncertainty: 0.036}}})
		sum += v
		if i > 0 {
			jumps += math.Abs(v - values[i-1])
		}
	}
	n := float64(len(values))
	mean, jump := sum/n, jumps/math.Max(1, n-1)
	f.Mean, f.Least, f.Greatest = result.Ranged{Value: num(mean)}, num(slices.Min(values)), num(slices.Max(values))
	f.Overall = &result.Capability{Cpk: result.Ranged{Value: 1.234}}
	f.Chart = &result.Chart{Centre: num(mean), Low: num(mean - 3*jump/1.128), High: num(mean + 3*jump/1.128), MeanRange: num(jump), RangeHigh: num(3.267 * jump),
		Rules: "Western Electric", FalseBreaks: num(n / 65), Provisional: n < 20}
	if n > 500 {
		f.Chart.Steady = true
	}
	for i, v := range values {
		if num(v) > f.Chart.High || num(v) < f.Chart.Low {
			f.Chart.Breaks = append(f.Chart.Breaks, result.Break{Rule: "Western Electric 1", Units: []string{l.Rows[i].Unit}})
		}
		if i > 0 && num(math.Abs(v-values[i-1])) > f.Chart.RangeHigh {
			f.Chart.Breaks = append(f.Chart.Breaks, result.Break{Rule: "moving range 1", Units: []string{l.Rows[i-1].Unit, l.Rows[i].Unit}})
		}
	}
	l.Drawings = []result.LotDrawing{{Pad: "Saltmarsh 14 line pad", Units: len(values), Figures: []result.LotFigure{f}}}
	return l
}

// sampleLots are lots of each kind.
func sampleLots() map[string]*result.Lot {
	far := sampleLot(30, 2, func(i int, v float64) float64 {
		if i == 11 {
			return 0.9
		}
		return v
	})
	tight := far.Drawings[0].Figures[0].Chart
	tight.Centre, tight.Low, tight.High, tight.MeanRange, tight.RangeHigh, tight.LeftOut = 14.02, 13.84, 14.2, 0.0677, 0.221, []string{"0412"}
	drift := sampleLot(200, 3, func(i int, v float64) float64 { return v + 0.001*float64(i) })
	c := drift.Drawings[0].Figures[0].Chart
	c.Breaks = append(c.Breaks, result.Break{Rule: "Western Electric 4", Units: unitsFrom(drift, 3, 40)}, result.Break{Rule: "Western Electric 4", Units: unitsFrom(drift, 150, 185)})
	none := math.NaN()
	return map[string]*result.Lot{
		"few": sampleLot(14, 1, func(i int, v float64) float64 {
			switch i {
			case 4:
				return 14.41
			case 8:
				return 14.29
			}
			return v
		}),
		"far":   far,
		"drift": drift, "many": sampleLot(1000, 4, nil), "alike": lotOf([]float64{14, 14, 14}, 13.7, 14.3),
		"two far": sampleLot(60, 5, func(i int, v float64) float64 {
			if i == 7 || i == 30 {
				return 40 + float64(i)
			}
			return v
		}),
		"top": lotOf([]float64{-120.1, -119.7, -121, -120.4}, none, -110), "free": lotOf([]float64{14.1, 13.9, 14.05}, none, none),
		"pair": lotOf([]float64{13.33, 14.0}, 13.7, 14.3), "wide": lotOf([]float64{-40, 3, 260, 12, 7}, 13.7, 14.3),
	}
}

func unitsFrom(l *result.Lot, from, to int) []string {
	var units []string
	for _, r := range l.Rows[from:to] {
		units = append(units, r.Unit)
	}
	return units
}

func sampleLotPictures() []*Picture {
	var all []*Picture
	lots := sampleLots()
	for _, name := range []string{"few", "far", "drift", "many", "alike", "two far", "top", "free", "pair", "wide"} {
		for _, p := range OfLot(lots[name], 0) {
			p.Title = name + ", " + p.Title
			all = append(all, p)
		}
	}
	return all
}
