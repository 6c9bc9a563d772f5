package network

import (
	"math"
	"math/rand/v2"
	"slices"
)

// Spread is the loss of many units built with parts drawn from their tolerances.
type Spread struct {
	Units           int
	MeanDB, SDDB    float64 // SDDB has Units−1 below the root
	LowDB, HighDB   float64 // quantiles at 2.5 and 97.5 %
	LeastDB, MostDB float64
}

// Spread draws units at random, each part rectangular within its tolerance and
// independent of the others (the propagation of distributions of JCGM 101), and returns
// how their losses spread. The same seed gives the same units. Fewer than 2 units count
// as 2. Where some units let nothing through, MeanDB, SDDB and MostDB are +Inf, and a
// quantile may be; where all do, SDDB is 0.
func (c *Circuit) Spread(e Ends, freqHz float64, units int, seed uint64) Spread {
	e = e.bounded()
	omega := angular(freqHz)
	straight := c.loadVolts(nil, e, omega)
	rng := rand.New(rand.NewPCG(seed, 0x5a17))
	values := make([]float64, len(c.parts))
	lossesDB := make([]float64, max(units, 2))
	for u := range lossesDB {
		c.draw(values, rng)
		lossesDB[u] = lossOf(c.loadVolts(values, e, omega) / straight)
	}
	return spreadOf(lossesDB)
}

// Sample returns one unit built with parts drawn as in [Circuit.Spread].
func (c *Circuit) Sample(rng *rand.Rand) *Circuit {
	return c.edited(func(parts []Part) {
		values := make([]float64, len(parts))
		c.draw(values, rng)
		for i := range parts {
			parts[i].Value = values[i]
		}
	})
}

// draw fills values with parts drawn from their tolerances.
func (c *Circuit) draw(values []float64, rng *rand.Rand) {
	for i, p := range c.parts {
		values[i] = p.Value
		if low, high := p.limits(); low < high {
			values[i] = low + (high-low)*rng.Float64()
		}
	}
}

// spreadOf sums up losses, at least two of them, and sorts them.
func spreadOf(lossesDB []float64) Spread {
	slices.Sort(lossesDB)
	n := len(lossesDB)
	s := Spread{
		Units:   n,
		LowDB:   quantile(lossesDB, 0.025),
		HighDB:  quantile(lossesDB, 0.975),
		LeastDB: lossesDB[0],
		MostDB:  lossesDB[n-1],
	}
	if math.IsInf(s.MostDB, 1) {
		s.MeanDB, s.SDDB = s.MostDB, s.MostDB
		if math.IsInf(s.LeastDB, 1) {
			s.SDDB = 0
		}
		return s
	}
	for _, l := range lossesDB {
		s.MeanDB += l / float64(n)
	}
	var sum float64
	for _, l := range lossesDB {
		sum += (l - s.MeanDB) * (l - s.MeanDB)
	}
	s.SDDB = math.Sqrt(sum / float64(n-1))
	return s
}

// quantile interpolates between the two nearest of sorted values.
func quantile(sorted []float64, p float64) float64 {
	at := p * float64(len(sorted)-1)
	i := int(at)
	if i+1 >= len(sorted) || sorted[i] == sorted[i+1] {
		return sorted[i]
	}
	f := at - float64(i)
	if f == 0 {
		return sorted[i]
	}
	return sorted[i] + f*(sorted[i+1]-sorted[i])
}
