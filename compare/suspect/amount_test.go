package suspect

import (
	"math"
	"testing"

	"padproof/compare"
	"padproof/compare/network"
)

// A peak that lies midway between two amounts that were tried gives both one score. It must be found
// wherever it lies: the mass of a narrow normal peak is known.
func TestPeakFoundWhereverItLies(t *testing.T) {
	const stdU = 2e-3
	for i := range 400 {
		centre := 0.2 + 0.7*float64(i)/400
		s := &side{toT: func(v float64) float64 { return v }}
		s.explore(0, 1, func(t float64) float64 { z := (t - centre) / stdU; return -z * z / 2 })
		mass, mean, _ := s.moments(0)
		if want := stdU * math.Sqrt(2*math.Pi); math.Abs(mass/want-1) > 0.05 || math.Abs(mean-centre) > stdU/4 {
			t.Errorf("peak at %v: mass %v and mean %v, want %v and the peak", centre, mass, mean, want)
		}
	}
}

// A reading whose drift lay midway between two amounts that were tried.
func TestExactReadingKeepsADrift(t *testing.T) {
	c := piPad(t)
	e := Evidence{
		Circuit: c, Rig: compare.Rig{Ends: network.Ends{SourceOhms: 100, Drive: network.DriveUnbalanced, LoadOhms: 10000, Sense: network.SenseUnbalanced},
			SourceTolFrac: 0.05, LoadTolFrac: 0.05},
		Loss: []Point{{FreqHz: 997, LossDB: 9.87167419, StdUDB: 0.0248}},
	}
	weight := func(ohms float64) float64 {
		e.Ohms = []Ohms{{PinA: "out.hot", PinB: "screen", Ohms: ohms}}
		for _, s := range Rank(e).Suspects {
			for _, f := range s.Faults {
				if f.End == NoEnd && f.Form == network.PartDrifted && f.Ref == "R3" {
					return s.Weight
				}
			}
		}
		return 0
	}
	for _, ohms := range []float64{1366, 1366.4914, 1367} {
		if w := weight(ohms); w < 0.5 {
			t.Errorf("R3 drifted at a reading of %v has weight %.2f, want over 0.5", ohms, w)
		}
	}
}

func piPad(t *testing.T) *network.Circuit {
	t.Helper()
	c, err := network.New("pi", []network.Part{
		{Ref: "R1", Value: 750, TolFrac: 0.01}, {Ref: "R2", Value: 3000, TolFrac: 0.01}, {Ref: "R3", Value: 750, TolFrac: 0.01},
	})
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// A reading that was taken is not asked for again, by whatever names its pins go.
func TestNoReadingAskedTwice(t *testing.T) {
	c := piPad(t)
	e := Evidence{
		Circuit: c, Rig: compare.Rig{Ends: network.Ends{SourceOhms: 100, Drive: network.DriveUnbalanced, LoadOhms: 10000, Sense: network.SenseUnbalanced}},
		Loss: []Point{{FreqHz: 997, LossDB: c.With("R2", 2000).LossDB(network.Ends{SourceOhms: 100, Drive: network.DriveUnbalanced, LoadOhms: 10000, Sense: network.SenseUnbalanced}, 997), StdUDB: 0.02}},
	}
	asked := map[compare.OhmReading]bool{}
	for range len(compare.Readings(c)) {
		r := Rank(e).Suspects[0].Confirm.Reading
		if r.PinA == "" {
			return
		}
		ohms := r.On(c.With("R2", 2000))
		r.GoodOhms, r.WrongOhms = 0, 0
		if asked[r] {
			t.Fatalf("%v is asked for twice", r)
		}
		asked[r] = true
		e.Ohms = append(e.Ohms, Ohms{PinA: r.PinB, PinB: r.PinA, Joined: [2]string{r.Joined[1], r.Joined[0]}, Ohms: ohms})
	}
}
