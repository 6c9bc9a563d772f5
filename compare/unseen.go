package compare

import (
	"math"

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
	Reading                     OhmReading
	SourceOhms, LoadOhms        float64 // a bench with these sees what service sees; NaN where the bench's own serves
}

// FindUnseen lists the parts that the bench cannot have proven: moved alone
// from 0 to infinity, or swapped with another, they fit the bench loss within U
// plus the spread of the other parts and yet, carried over from there in the
// same way, break the limit in service. A loss is PASS only where the list
// is empty or something else taken rules each entry out. benchDB is the bench
// loss as recorded; the modelled one tells what a bench could see at all.
func FindUnseen(k LossCase, benchDB, benchUDB float64, limit Limit) []Unseen {
	if math.IsNaN(benchDB) || math.IsInf(benchDB, 0) {
		return nil
	}
	var all []Unseen
	parts := k.Circuit.Parts()
	for i, p := range parts {
		width := benchUDB + k.othersOf(i)
		m, ok := movePart(k, i, benchDB, width, k.serviceWith)
		if !ok || limit.Holds(m.serviceLowDB) && limit.Holds(m.serviceHighDB) {
			continue
		}
		u := Unseen{
			Refs: []string{p.Ref}, Kind: p.Kind, LowValue: m.lowValue, HighValue: m.highValue,
			ServiceLowDB: m.serviceLowDB, ServiceHighDB: m.serviceHighDB,
			WithinDB: width,
		}
		u.SourceOhms, u.LoadOhms = k.betterEnds(i)
		u.Reading = bestReading(k.Circuit, k.Circuit.With(p.Ref, k.breakingValue(i, m, benchDB, limit)))
		all = append(all, u)
	}
	return append(all, k.unseenSwaps(benchDB, benchUDB, limit)...)
}

// breakingValue is the value nearest the drawing's at which the limit breaks.
func (k LossCase) breakingValue(index int, m moved, benchDB float64, limit Limit) float64 {
	nominal := k.Circuit.Parts()[index].Value
	best, least := m.highValue, math.Inf(1)
	for _, v := range valuesWithin(m.lowValue, m.highValue, nominal) {
		serviceDB, _ := k.serviceWith(index, v, benchDB)
		far := math.Abs(math.Log(v / nominal)) // 0, Inf and a nominal link are all "far"
		if !limit.Holds(serviceDB) && (far < least || math.IsInf(least, 1)) {
			best, least = v, far
		}
	}
	return best
}

// betterEnds are the service's source, load or both: the least change of the
// bench that shows a part at least half as well as service does. NaN: leave it.
func (k LossCase) betterEnds(index int) (sourceOhms, loadOhms float64) {
	sees := func(e network.Ends) float64 { return math.Abs(k.Circuit.Sensitivities(e, k.Reading.FreqHz)[index]) }
	wanted := sees(k.Service) / 2
	withLoad, withSource := k.Rig.Ends, k.Rig.Ends
	withLoad.LoadOhms, withSource.SourceOhms = k.Service.LoadOhms, k.Service.SourceOhms
	switch {
	case sees(withLoad) >= wanted:
		return math.NaN(), k.Service.LoadOhms
	case sees(withSource) >= wanted:
		return k.Service.SourceOhms, math.NaN()
	}
	return k.Service.SourceOhms, k.Service.LoadOhms
}

func (k LossCase) unseenSwaps(benchDB, benchUDB float64, limit Limit) []Unseen {
	var all []Unseen
	for _, w := range k.swapsThatFit(benchDB, benchUDB) {
		over := carryOver(w.circuit, k.Rig.Ends, k.Service, k.Reading.FreqHz, doubtsOf(w.circuit))
		service := w.serviceDB + over.beta*(benchDB-w.benchDB)
		if limit.Holds(service) {
			continue
		}
		all = append(all, Unseen{
			Refs: w.refs, Kind: w.kind, ServiceLowDB: service, ServiceHighDB: service, WithinDB: w.withinDB,
			Reading: bestReading(k.Circuit, w.circuit), SourceOhms: k.Service.SourceOhms, LoadOhms: k.Service.LoadOhms,
		})
	}
	return all
}

// Holds reports whether a figure keeps to the limit.
func (l Limit) Holds(v float64) bool { return l.Low <= v && v <= l.High }
