package compare

import (
	"math"

	"padproof/compare/network"
)

// A swapped circuit has two parts of one kind in each other's place.
type swapped struct {
	refs               []string
	kind               network.Kind
	circuit            *network.Circuit
	benchDB, serviceDB float64
	withinDB           float64 // how closely it had to fit the bench loss
}

// swapsThatFit are the swaps of two parts that explain a bench loss within uDB
// and what the tolerances of the parts may bring, and that no ohmmeter reading
// contradicts.
func (k LossCase) swapsThatFit(benchDB, uDB, believedDB float64) []swapped {
	var all []swapped
	parts := k.Circuit.Parts()
	for i, b := range parts {
		for _, a := range parts[:i] {
			if a.Kind != b.Kind || a.Value == b.Value {
				continue
			}
			c := k.Circuit.Swapped(a.Ref, b.Ref)
			s := swapped{
				refs: []string{a.Ref, b.Ref}, kind: a.Kind, circuit: c,
				benchDB: c.LossDB(k.Rig.Ends, k.Reading.FreqHz), serviceDB: c.LossDB(k.Service, k.Reading.FreqHz),
				withinDB: uDB + math.Max(believedDB, othersDB(c, k.Rig.Ends, k.Reading.FreqHz, -1)),
			}
			if math.Abs(s.benchDB-benchDB) <= s.withinDB && allFit(c, k.Ohms) {
				all = append(all, s)
			}
		}
	}
	return all
}
