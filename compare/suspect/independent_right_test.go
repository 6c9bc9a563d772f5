package suspect_test

import (
	"math"
	"math/cmplx"
	"strings"

	"padproof/compare/network"
	"padproof/compare/suspect"
)

// What counts as naming the true fault.
//
// Faults without an amount are the same where the units' own model finds no impedance between any two
// pins that differs, at 0, 997 or 20000 Hz: R1 open and hot leg open at in, say.
//
// Faults that give a part another value (x10, /10, another preferred value, a drift) are of one part or
// they are different faults. A stated value names a drift where the true one lies within the part's
// tolerance of it. A drift names a drift where its sign is right and its size within twice its standard
// uncertainty or a quarter of it; it names a part of a stated value where the two differ by no more
// than tolerance and twice its standard uncertainty. Ends of the bench have no amount in words: the end, and
// whether it is above or below what is stated, must be right.
//
// Of the amounts in a group only the first has its uncertainty stated; the others count without.

// names tells whether the first or any fault of a suspect is the true one.
func (u *made) names(s suspect.Suspect) bool {
	for i, f := range s.Faults {
		stdU := 0.0
		if i == 0 && !math.IsNaN(s.DriftStdU) {
			stdU = s.DriftStdU
		}
		if u.is(f, stdU) {
			return true
		}
	}
	return false
}

// is tells whether a fault is the unit's.
func (u *made) is(f suspect.Fault, stdU float64) bool {
	if f.End != suspect.NoEnd {
		return f.String() == u.Fault && (f.Ratio > 1) == (u.Ratio > 1)
	}
	if class, ok := u.of.Classes[u.Fault]; ok {
		if mine, ok := u.of.Classes[f.String()]; ok && mine == class {
			return true
		}
	}
	claim, ok := u.of.ratio(f)
	if !ok || f.Ref != u.Ref {
		return false
	}
	true_, tol := float64(u.Ratio), u.of.tol(f.Ref)
	switch {
	case u.Form == "drift" && f.Form == network.PartDrifted:
		return sameChange(claim-1, true_-1, stdU)
	case u.Form == "drift" && f.Form == network.PartIs:
		return math.Abs(true_/claim-1) <= tol
	case u.Form == "is" && f.Form == network.PartDrifted:
		return math.Abs(claim/true_-1) <= tol+2*stdU
	}
	return false
}

// sameChange holds a stated relative change against the true one.
func sameChange(stated, true_, stdU float64) bool {
	return stated*true_ > 0 && math.Abs(stated-true_) <= math.Max(2*stdU, math.Abs(true_)/4)
}

// ratio is the value that a fault gives a part over the stated one.
func (d *drawing) ratio(f suspect.Fault) (float64, bool) {
	for _, p := range d.Parts {
		if p.Ref != f.Ref {
			continue
		}
		switch f.Form {
		case network.PartDrifted:
			return 1 + f.Value, true
		case network.PartIs:
			return f.Value / p.Value, true
		}
	}
	return 0, false
}

func (d *drawing) tol(ref string) float64 {
	for _, p := range d.Parts {
		if p.Ref == ref {
			return p.Tol
		}
	}
	return 0
}

// distinct is how many faults of a suspect there are, those counted once that are the same at every
// pin, and a part's drift once with a stated value within its tolerance and uncertainty.
func (d *drawing) distinct(s suspect.Suspect) int { return len(d.keepDistinct(s)) }

// keepDistinct leaves out what is the same as one before.
func (d *drawing) keepDistinct(s suspect.Suspect) []suspect.Fault {
	var kept []suspect.Fault
	for i, f := range s.Faults {
		stdU := 0.0
		if i == 0 && !math.IsNaN(s.DriftStdU) {
			stdU = s.DriftStdU
		}
		same := false
		for j, g := range kept {
			if j == 0 && !math.IsNaN(s.DriftStdU) {
				stdU = s.DriftStdU
			}
			same = same || d.same(f, g, stdU)
		}
		if !same {
			kept = append(kept, f)
		}
	}
	return kept
}

// firstOnly is a suspect with those of its faults left that are the same at every pin as the first.
func (d *drawing) firstOnly(s suspect.Suspect) suspect.Suspect {
	var kept []suspect.Fault
	for _, f := range s.Faults {
		if len(kept) == 0 || d.same(s.Faults[0], f, 0) {
			kept = append(kept, f)
		}
	}
	s.Faults = kept
	return s
}

// foremost tells whether the first fault of the first suspect is the true one, or one that no ohmmeter
// could part from a true one in the same group: parts behind a capacitor, or the ends of the bench.
func (u *made) foremost(r suspect.Ranking) bool {
	if u.place(r) != 1 {
		return false
	}
	first := u.of.firstOnly(r.Suspects[0])
	if u.names(first) {
		return true
	}
	claim, true_ := first.Faults[0].String(), u.Fault
	return u.of.Direct[claim] == u.of.Direct[true_] && u.of.fixed(claim) && u.of.fixed(true_)
}

// fixed tells whether a fault has no amount that an ohmmeter reads: those listed, and ends of the bench,
// which to an ohmmeter are a sound unit, of number 0.
func (d *drawing) fixed(words string) bool {
	_, ok := d.Direct[words]
	return ok || strings.HasSuffix(words, " not as stated")
}

// partsOf are the parts that a fault blames; of a leg that is at every pin the same as a part, that part.
func (d *drawing) partsOf(f suspect.Fault) []string {
	if parts := f.Parts(); len(parts) > 0 {
		return parts
	}
	class, ok := d.Classes[f.String()]
	for words, other := range d.Classes {
		if ref, _, _ := strings.Cut(words, " "); ok && other == class && d.tol(ref) > 0 && !strings.Contains(words, " and ") {
			return []string{ref}
		}
	}
	return nil
}

func (d *drawing) same(f, g suspect.Fault, stdU float64) bool {
	if f.End != suspect.NoEnd || g.End != suspect.NoEnd {
		return f.End == g.End && (f.Ratio > 1) == (g.Ratio > 1)
	}
	a, okA := d.Classes[f.String()]
	b, okB := d.Classes[g.String()]
	if okA && okB {
		return a == b
	}
	x, okX := d.ratio(f)
	y, okY := d.ratio(g)
	const written = 0.005 // amounts are written to the per cent
	return okX && okY && f.Ref == g.Ref && math.Abs(x/y-1) <= d.tol(f.Ref)+2*stdU+written
}

func absOf(z complex128) float64   { return cmplx.Abs(z) }
func degrees(z complex128) float64 { return cmplx.Phase(z) * 180 / math.Pi }
