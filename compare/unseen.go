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
	ServiceLoadOhms             float64 // a bench with this load sees what service sees
}

// FindUnseen lists the parts that the bench cannot have proven: moved alone
// from 0 to infinity, or swapped with another, they fit the bench loss within U
// plus the 95 % spread of the other parts and yet, carried over from there in
// the same way, break the limit in service. A loss is PASS only where the list
// is empty or something else taken rules each entry out. benchDB is the bench
// loss as recorded; the modelled one tells what a bench could see at all.
func FindUnseen(k LossCase, benchDB, benchUDB float64, limit Limit) []Unseen {
	if math.IsNaN(benchDB) || math.IsInf(benchDB, 0) {
		return nil
	}
	var all []Unseen
	parts := k.Circuit.Parts()
	for i, p := range parts {
		width := benchUDB + othersDB(k.Circuit, k.Rig.Ends, k.Reading.FreqHz, i)
		m, ok := movePart(k, i, benchDB, width, k.serviceWith)
		if !ok || limit.Holds(m.serviceLowDB) && limit.Holds(m.serviceHighDB) {
			continue
		}
		u := Unseen{
			Refs: []string{p.Ref}, Kind: p.Kind, LowValue: m.lowValue, HighValue: m.highValue,
			ServiceLowDB: m.serviceLowDB, ServiceHighDB: m.serviceHighDB,
			WithinDB: width, ServiceLoadOhms: k.Service.LoadOhms,
		}
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

func (k LossCase) unseenSwaps(benchDB, benchUDB float64, limit Limit) []Unseen {
	var all []Unseen
	parts := k.Circuit.Parts()
	for i, a := range parts {
		for j, b := range parts[:i] {
			if a.Kind != b.Kind || a.Value == b.Value {
				continue
			}
			c := k.Circuit.Swapped(b.Ref, a.Ref)
			width := benchUDB + othersDB(c, k.Rig.Ends, k.Reading.FreqHz)
			bench, service := c.LossDB(k.Rig.Ends, k.Reading.FreqHz), c.LossDB(k.Service, k.Reading.FreqHz)
			if math.IsNaN(bench) || math.Abs(bench-benchDB) > width {
				continue
			}
			over := carryOver(c, k.Rig.Ends, k.Service, k.Reading.FreqHz, doubtsOf(c))
			service += over.beta * (benchDB - bench)
			if limit.Holds(service) {
				continue
			}
			all = append(all, Unseen{
				Refs: []string{parts[j].Ref, a.Ref}, Kind: a.Kind,
				ServiceLowDB: service, ServiceHighDB: service, WithinDB: width,
				Reading: bestReading(k.Circuit, c), ServiceLoadOhms: k.Service.LoadOhms,
			})
		}
	}
	return all
}

// Holds reports whether a figure keeps to the limit.
func (l Limit) Holds(v float64) bool { return l.Low <= v && v <= l.High }
