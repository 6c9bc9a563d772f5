package compare

import (
	"math"
	"slices"

	"padproof/compare/network"
)

// An Unseen is a part (or two, swapped) that could be wrong enough to break the
// service limit while the bench reads what it read.
type Unseen struct {
	Refs                        []string // one part, or the two that may be swapped
	Kind                        network.Kind
	LowValue, HighValue         float64 // of one part: what it could be, 0 to +Inf
	ServiceLowDB, ServiceHighDB float64 // the loss in service that goes with it
	WithinDB                    float64 // how closely the bench reading would be the same
	Read                        int     // how many ohmmeter readings it fits as well
	Reading                     OhmReading
	BelowOhms, AboveOhms        float64 // what Reading gives nearest to a sound unit's, either side, where the limit may break; NaN for none
	Broken                      bool    // every value that fits breaks the limit
	SourceOhms, LoadOhms        float64 // a bench with these sees what service sees; NaN where the bench's own serves
}

// FindUnseen lists the parts that the bench cannot have proven: moved alone
// from 0 to infinity, or swapped with another, they fit the bench loss within U
// plus what the other parts may bring, fit the ohmmeter readings too, and yet, carried over from there with its
// own doubt, may break the limit in service. A loss is PASS only where the list
// is empty or something else taken rules each entry out. benchDB is the bench
// loss as recorded, benchUDB its expanded uncertainty on the drawing.
func FindUnseen(k LossCase, benchDB, benchUDB float64, limit Limit) []Unseen {
	if math.IsNaN(benchDB) || math.IsInf(benchDB, 0) || k.Rig.Ends == k.Service {
		return nil // where bench and service are alike, what was read is the answer
	}
	believedDB := math.Abs(benchDB - k.Circuit.LossDB(k.Rig.Ends, k.Reading.FreqHz))
	var all []Unseen
	for i, p := range k.Circuit.Parts() {
		fits := k.valuesThatFit(i, benchDB, benchUDB, believedDB)
		breaking, broken := nearestBreaking(fits, p, limit)
		if !broken {
			continue
		}
		u := Unseen{
			Refs: []string{p.Ref}, Kind: p.Kind, LowValue: fits[0].value, HighValue: fits[len(fits)-1].value,
			ServiceLowDB: math.Inf(1), ServiceHighDB: math.Inf(-1), WithinDB: breaking.withinDB,
			Read: len(k.Ohms), Reading: bestReading(k.Circuit, k.Circuit.With(p.Ref, breaking.value), k.Ohms),
		}
		breaks := func(value float64) bool {
			f, ok := k.fit(i, value, benchDB, k.widthOf(benchUDB, believedDB))
			return ok && f.mayBreak(p, limit)
		}
		u.BelowOhms, u.AboveOhms = u.Reading.eitherSide(breakingCircuits(k.Circuit, fits, p, limit, breaks))
		u.Broken = !slices.ContainsFunc(fits, func(f fitting) bool { return f.mayKeep(limit) })
		for _, f := range fits {
			u.ServiceLowDB, u.ServiceHighDB = math.Min(u.ServiceLowDB, f.carriedDB), math.Max(u.ServiceHighDB, f.carriedDB)
		}
		u.SourceOhms, u.LoadOhms = k.betterEnds(i)
		all = append(all, u)
	}
	return append(all, k.unseenSwaps(benchDB, benchUDB, believedDB, limit)...)
}

// nearestBreaking is the value nearest the drawing's, outside its tolerance, at
// which the limit may break. Within tolerance the answer's own U speaks.
func nearestBreaking(fits []fitting, p network.Part, limit Limit) (best fitting, found bool) {
	least := math.Inf(1)
	for _, f := range fits {
		if !f.mayBreak(p, limit) {
			continue
		}
		far := math.Abs(math.Log(f.value / p.Value)) // 0, open and a nominal link are all far
		if !found || far < least {
			best, least, found = f, far, true
		}
	}
	return best, found
}

// mayBreak reports whether the limit may break at a value outside a part's tolerance.
func (f fitting) mayBreak(p network.Part, limit Limit) bool {
	within := math.Abs(f.value-p.Value) <= p.TolFrac*p.Value*(1+1e-9)
	return !within && !(limit.Holds(f.carriedDB-f.carriedUDB) && limit.Holds(f.carriedDB+f.carriedUDB))
}

// mayKeep reports whether the limit may hold at a value.
func (f fitting) mayKeep(limit Limit) bool {
	return f.carriedDB+f.carriedUDB >= limit.Low && f.carriedDB-f.carriedUDB <= limit.High
}

// breakingCircuits are the drawing with a part at the values nearest the drawn one, either side, at
// which the limit may break. The values tried lie some way apart, so that the last step towards the
// drawn one is halved again and again.
func breakingCircuits(c *network.Circuit, fits []fitting, p network.Part, limit Limit, breaks func(value float64) bool) []*network.Circuit {
	var all []*network.Circuit
	for _, side := range []float64{-1, 1} {
		nearest, found := 0.0, false
		for _, f := range fits {
			nearer := !found || side*(nearest-f.value) > 0
			if side*(f.value-p.Value) > 0 && nearer && f.mayBreak(p, limit) {
				nearest, found = f.value, true
			}
		}
		if !found {
			continue
		}
		kept := p.Value * (1 + side*p.TolFrac)
		if kept > 0 && nearest > 0 && !math.IsInf(nearest, 1) {
			nearest = edge(kept, nearest, breaks)
		}
		all = append(all, c.With(p.Ref, nearest))
	}
	return all
}

// edge closes in on the first of the values from kept to broken at which the limit breaks.
func edge(kept, broken float64, breaks func(value float64) bool) float64 {
	for range 12 {
		middle := math.Sqrt(kept * broken)
		if breaks(middle) {
			broken = middle
		} else {
			kept = middle
		}
	}
	return broken
}

// betterEnds are the service's source, load or both: the least change of the
// bench that shows a part at least half as well as service does. NaN: leave it.
func (k LossCase) betterEnds(index int) (sourceOhms, loadOhms float64) {
	sees := func(e network.Ends) float64 { return math.Abs(k.Circuit.Sensitivities(e, k.Reading.FreqHz)[index]) }
	wanted := sees(k.Service) / 2
	withLoad, withSource := k.Rig.Ends, k.Rig.Ends
	withLoad.LoadOhms, withSource.SourceOhms = k.Service.LoadOhms, k.Service.SourceOhms
	newLoad, newSource := withLoad != k.Rig.Ends, withSource != k.Rig.Ends
	switch {
	case newLoad && sees(withLoad) >= wanted:
		return math.NaN(), k.Service.LoadOhms
	case newSource && sees(withSource) >= wanted:
		return k.Service.SourceOhms, math.NaN()
	case newLoad && newSource:
		return k.Service.SourceOhms, k.Service.LoadOhms
	}
	return math.NaN(), math.NaN()
}

func (k LossCase) unseenSwaps(benchDB, benchUDB, believedDB float64, limit Limit) []Unseen {
	var all []Unseen
	for _, w := range k.swapsThatFit(benchDB, benchUDB, believedDB) {
		over := carryOver(w.circuit, k.Rig.Ends, k.Service, k.Reading.FreqHz, doubtsOf(w.circuit))
		reading := bestReading(k.Circuit, w.circuit, k.Ohms)
		below, above := reading.eitherSide([]*network.Circuit{w.circuit})
		service := w.serviceDB + over.beta*(benchDB-w.benchDB)
		doubt := math.Hypot(1.96*over.leftDB, over.beta*benchUDB)
		if limit.Holds(service-doubt) && limit.Holds(service+doubt) {
			continue
		}
		all = append(all, Unseen{
			Refs: w.refs, Kind: w.kind, ServiceLowDB: service, ServiceHighDB: service, WithinDB: w.withinDB,
			Read: len(k.Ohms), Reading: reading, BelowOhms: below, AboveOhms: above, SourceOhms: k.Service.SourceOhms, LoadOhms: k.Service.LoadOhms,
		})
	}
	return all
}

// Holds reports whether a figure keeps to the limit.
func (l Limit) Holds(v float64) bool { return l.Low <= v && v <= l.High }
